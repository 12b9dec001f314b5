package linkworthy.noise;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.Arrays;
import java.util.List;
import java.util.Map;
import linkworthy.corpus.Picture;
import linkworthy.corpus.TestPattern;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/**
 * Measured errors lie within 5 standard errors, estimated from the sample, of what is expected:
 * false-alarm rate 5.7e-7 each.
 */
class GaussianNoiseTest extends NoiseProcessContractTest {
  @Override
  protected String id() {
    return "gaussian";
  }

  @Override
  protected List<Severity> refused() {
    return List.of(new Severity("density", 0.1), new Severity("loss-rate", 0.1));
  }

  /** Rounding to integers adds 1/12 (Sheppard's correction). */
  @Override
  protected double expectedError(double equivalentNoiseVariance) {
    return equivalentNoiseVariance + 1 / 12.0;
  }

  private static Picture noisy(Picture clean, double deviation, long seed) {
    Severity severity = new Severity(Severity.VARIANCE, deviation * deviation);
    Impairment impairment =
        new GaussianNoise().at(severity, Map.of(), Site.SAMPLES, SignalStatistics.of(clean));
    return ((Impairment.OnSamples) impairment).apply(clean, Measured.stream(seed));
  }

  private static Measured error(Picture clean, double deviation, long seed) {
    return Measured.of(Measured.squaredErrors(clean, noisy(clean, deviation, seed)));
  }

  /** Exact sums over the integers, recomputed independently in Python with SciPy. */
  @ParameterizedTest
  @CsvSource({"0.5, 0.3254127626", "1, 1.083333322", "2, 4.083333333", "5, 25.08333333"})
  void roundingAddsATwelfth(double deviation, double expected) {
    Measured error = error(Measured.flat(512, 512, 8, 128), deviation, 11);
    assertThat(error.errorsFrom(expected)).isBetween(-5.0, 5.0);
  }

  /** Deviation 25; exact sums over the 256 codes, recomputed independently in Python with SciPy. */
  @ParameterizedTest
  @CsvSource({
    "0, 312.5416667",
    "16, 398.7131655",
    "32, 524.4245468",
    "64, 619.1565773",
    "128, 625.0829211",
    "235, 432.5717535",
    "255, 312.5416667"
  })
  void clippingTakesFromTheErrorNearBlackAndWhite(int level, double expected) {
    Measured error = error(Measured.flat(512, 512, 8, level), 25, 12);
    assertThat(error.errorsFrom(expected)).isBetween(-5.0, 5.0);
  }

  /** The same sums weighted by the test pattern's histogram, recomputed in Python with SciPy. */
  @ParameterizedTest
  @CsvSource({"10, 100.083323", "25, 624.0898874", "50, 2364.364965"})
  void errorOnTheTestPatternIsThatOfItsHistogram(double deviation, double expected) {
    Measured error = error(TestPattern.cvp(256), deviation, 13);
    assertThat(error.errorsFrom(expected)).isBetween(-5.0, 5.0);
  }

  /** The ramp over all 256 levels, equally many of each; recomputed in Python with SciPy. */
  @ParameterizedTest
  @CsvSource({"10, 95.73220477", "25, 558.9304538", "50, 1975.744319"})
  void errorOnARampIsThatOfAllLevels(double deviation, double expected) {
    int[] samples = new int[512 * 256];
    Arrays.setAll(samples, i -> i & 255);
    Measured error = error(new Picture(512, 256, 8, samples), deviation, 14);
    assertThat(error.errorsFrom(expected)).isBetween(-5.0, 5.0);
  }

  /** Recomputed independently in Python: stream, ziggurat, rounding. */
  @Test
  void firstSamplesAtAnAddressNeverChange() {
    Picture clean = Measured.flat(12, 1, 8, 128);
    Impairment impairment =
        new GaussianNoise()
            .at(
                new Severity(Severity.VARIANCE, 25),
                Map.of(),
                Site.SAMPLES,
                SignalStatistics.of(clean));
    Picture noisy =
        ((Impairment.OnSamples) impairment)
            .apply(
                clean,
                NoiseStreams.open(
                    7,
                    "field/a\u00f1il-01",
                    "0123456789abcdef",
                    Site.SAMPLES,
                    new Severity(Severity.SNR_DB, 20),
                    3,
                    "noise"));
    assertThat(noisy.samples())
        .containsExactly(138, 131, 129, 128, 127, 131, 132, 131, 135, 130, 132, 131);
  }

  /** Half of all draws below zero end at black: binomial, 5 standard deviations, 5.7e-7. */
  @Test
  void noiseOfAnyStrengthIsClipped() {
    Picture noisy = noisy(Measured.flat(100, 100, 16, 30_000), Math.sqrt(Double.MAX_VALUE) / 2, 15);
    assertThat(noisy.samples()).containsOnly(0, 65_535);
    assertThat(Arrays.stream(noisy.samples()).filter(sample -> sample == 0).count())
        .isBetween(4750L, 5250L);
  }
}
