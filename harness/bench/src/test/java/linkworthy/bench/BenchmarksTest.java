package linkworthy.bench;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.file.Path;
import linkworthy.codec.Decoding;
import linkworthy.study.StudyReader;
import linkworthy.trial.Plan;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

/** The benchmarks do the work that their names say. */
class BenchmarksTest {
  @Test
  void theTimedStudyIsReadAndHasAllItsTrials() {
    Plan plan = Plan.of(StudyReader.read(Path.of("study.yaml")));
    // 12 pictures, clean and 3 noises x 2 severities x 2 replicates, 14 codecs: 12 x 13 x 14.
    assertThat(plan.trials()).isEqualTo(2184);
  }

  @Test
  void noiseDoesTheDamageThatItsSeverityAsksFor() {
    NoiseBenchmark noise = new NoiseBenchmark();
    assertThat(noise.gaussian().samples()).isNotEqualTo(Scenes.photographer().samples());
    assertThat(noise.saltAndPepper().samples()).isNotEqualTo(Scenes.photographer().samples());
    // 20 dB is 1 % of 10 000 packets. The number lost has a standard deviation of 26.3 (the chain's
    // own variance of losses, mean burst 4), so the limits are 3.8 of them from the mean: for a
    // stream drawn anew one false alarm in several thousand; this one is fixed.
    assertThat(noise.packetLosses()).isBetween(1, 200);
  }

  @ParameterizedTest
  @ValueSource(ints = {8, 64})
  void directionsAreFound(int order) {
    EigenBenchmark eigen = new EigenBenchmark();
    eigen.order = order;
    eigen.prepare();
    assertThat(eigen.directions()).isNotNull();
  }

  @ParameterizedTest
  @ValueSource(
      strings = {
        "{transform: pca, over: blocks, keep: 16}",
        "{transform: dct, over: blocks, keep: 16}",
        "{transform: mean, over: rows, step: 16}"
      })
  void whatIsEncodedIsDecodedWhole(String entry) {
    CodecBenchmark codec = new CodecBenchmark();
    codec.entry = entry;
    codec.prepare();
    assertThat(codec.encode().packets()).isNotEmpty();
    assertThat(codec.decode().completeness()).isEqualTo(Decoding.Completeness.COMPLETE);
  }

  @Test
  void picturesAreCompared() {
    QualityBenchmark quality = new QualityBenchmark();
    quality.prepare();
    // An SNR of 20 dB is a PSNR of 20 dB + 10 log10(255^2 / S), S the picture's variance.
    double signalPower = Scenes.photographer().variance();
    double expected = 20 + 10 * StrictMath.log10(255 * 255 / signalPower);
    // Clipping near black and white spares some damage: up to 0.5 dB, as measured here.
    assertThat(quality.compare()).isBetween(expected - 0.05, expected + 0.5);
    quality.measure = "ssim";
    quality.prepare();
    assertThat(quality.compare()).isBetween(0.1, 0.9);
  }

  @Test
  void limitsAreMeasuredOnWorkThatIsDone() {
    MachineLimits.MultiplyAdds multiplyAdds = new MachineLimits.MultiplyAdds(10);
    assertThat(multiplyAdds.run()).isEqualTo(10 * 1024 * 16);
    // v -> v/2 + 1 has its fixed point at 2; 160 steps from 0 reach it to the last bit.
    assertThat(multiplyAdds.values()).containsOnly(2.0);

    MachineLimits.Triad triad = new MachineLimits.Triad(1000);
    assertThat(triad.run()).isEqualTo(24_000);
    assertThat(triad.sums()[7]).isEqualTo(7 + 3);

    assertThat(MachineLimits.best(2, 2, () -> new MachineLimits.Triad(1000))).isPositive();
  }

  @Test
  void theMedianIsTheMiddleOne() {
    assertThat(StudyThroughput.median(new double[] {3, 1, 2})).isEqualTo(2);
    assertThat(StudyThroughput.median(new double[] {4, 1, 3, 2})).isEqualTo(2.5);
  }
}
