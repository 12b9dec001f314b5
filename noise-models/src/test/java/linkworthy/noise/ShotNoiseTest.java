package linkworthy.noise;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import java.util.Map;
import linkworthy.corpus.Picture;
import linkworthy.input.BadInput;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/**
 * Expected figures follow from the closed formulas in the class comments. Measured ones lie within
 * 5 standard errors, estimated from the sample: false-alarm rate 5.7e-7 each.
 */
class ShotNoiseTest extends NoiseProcessContractTest {
  @Override
  protected String id() {
    return "shot-noise";
  }

  @Override
  protected List<Severity> refused() {
    return List.of(
        new Severity("gain", -Double.MIN_VALUE),
        new Severity("gain", 65_536),
        new Severity("density", 0.1));
  }

  /** Rounding adds 1/12 (Sheppard). */
  @Override
  protected double expectedError(double equivalentNoiseVariance) {
    return equivalentNoiseVariance + 1.0 / 12;
  }

  private static Impairment.OnSamples at(String axis, double value, double read, Picture clean) {
    return (Impairment.OnSamples)
        new ShotNoise()
            .at(
                new Severity(axis, value),
                Map.of("read-noise", read),
                Site.SAMPLES,
                SignalStatistics.of(clean));
  }

  /** Mean x, variance g x + r^2 + 1/12, at levels far from both ends of 16 bits. */
  @ParameterizedTest
  @CsvSource({
    "1000, 0.9, 0",
    "1000, 0.9, 20",
    "20000, 7, 5",
    "20000, 0.1, 3",
    "300, 6, 0",
    "20000, 1e-7, 5"
  })
  void momentsGrowWithTheLight(int level, double gain, double read) {
    Picture flat = Measured.flat(512, 512, 16, level);
    Impairment.OnSamples impairment = at("gain", gain, read, flat);
    double expected = gain * level + read * read;
    assertThat(impairment.equivalentNoiseVariance()).isCloseTo(expected, within(expected * 1e-12));
    Picture noisy = impairment.apply(flat, Measured.stream(81));
    double[] values = new double[flat.size()];
    for (int i = 0; i < values.length; i++) {
      values[i] = noisy.samples()[i] - level;
    }
    double rounding = gain == 6 ? 0 : 1.0 / 12;
    assertThat(Measured.of(values).errorsFrom(0)).isBetween(-5.0, 5.0);
    assertThat(Measured.of(Measured.squaredErrors(flat, noisy)).errorsFrom(expected + rounding))
        .isBetween(-5.0, 5.0);
  }

  @Test
  void blackStaysBlackWithoutReadNoise() {
    Picture clean = new Picture(2, 2, 8, new int[] {0, 200, 0, 100});
    int[] noisy = at("gain", 3, 0, clean).apply(clean, Measured.stream(82)).samples();
    assertThat(noisy[0]).isZero();
    assertThat(noisy[2]).isZero();
    assertThat(at("gain", 0, 0, clean).apply(clean, Measured.stream(82)).samples())
        .isEqualTo(clean.samples());
    assertThat(at("gain", Double.MIN_VALUE, 0, clean).apply(clean, Measured.stream(82)).samples())
        .isEqualTo(clean.samples());
  }

  @Test
  void varianceIsSharedBetweenReadAndShotNoise() {
    Picture clean = new Picture(2, 1, 8, new int[] {50, 150});
    int[] byVariance = at("variance", 29, 3, clean).apply(clean, Measured.stream(83)).samples();
    assertThat(at("gain", 0.2, 3, clean).apply(clean, Measured.stream(83)).samples())
        .isEqualTo(byVariance);
    assertThatThrownBy(() -> at("variance", 8, 3, clean))
        .isInstanceOf(BadInput.class)
        .hasMessageStartingWith("shot-noise at variance 8.0 is a variance of 8.0; accepted with")
        .hasMessageContaining("read-noise 3.0 on this picture: 9.0 to ");
    assertThat(at("variance", 9, 3, clean).equivalentNoiseVariance()).isEqualTo(9);
    Picture black = Measured.flat(2, 2, 8, 0);
    assertThatThrownBy(() -> at("variance", 1, 0, black))
        .isInstanceOf(BadInput.class)
        .hasMessageEndingWith(": 0.0 to 0.0 grey levels squared");
  }
}
