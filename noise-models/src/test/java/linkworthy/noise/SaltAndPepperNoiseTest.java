package linkworthy.noise;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.Arrays;
import java.util.List;
import java.util.Map;
import linkworthy.corpus.Picture;
import linkworthy.corpus.TestPattern;
import linkworthy.input.BadInput;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/**
 * Expected errors are recomputed independently in Python from the formula d/2 (E[x^2] +
 * E[(255-x)^2]). Measured ones lie within 5 standard errors of them, estimated from the sample:
 * false-alarm rate 5.7e-7 each, at most five times that where hits are few.
 */
class SaltAndPepperNoiseTest extends NoiseProcessContractTest {
  @Override
  protected String id() {
    return "salt-and-pepper";
  }

  @Override
  protected List<Severity> refused() {
    return List.of(
        new Severity("density", Math.nextUp(1.0)),
        new Severity("density", -Double.MIN_VALUE),
        new Severity("loss-rate", 0.1));
  }

  private static Impairment.OnSamples at(String axis, double value, Picture clean) {
    return (Impairment.OnSamples)
        new SaltAndPepperNoise()
            .at(new Severity(axis, value), Map.of(), Site.SAMPLES, SignalStatistics.of(clean));
  }

  private static void assertError(
      Picture clean, double density, double expected, double relative, long seed) {
    Impairment.OnSamples impairment = at("density", density, clean);
    assertThat(impairment.equivalentNoiseVariance())
        .isCloseTo(expected, within(expected * relative));
    Picture noisy = impairment.apply(clean, Measured.stream(seed));
    Measured error = Measured.of(Measured.squaredErrors(clean, noisy));
    assertThat(error.errorsFrom(expected)).isBetween(-5.0, 5.0);
  }

  @ParameterizedTest
  @CsvSource({"0.01, 217.175", "0.02, 434.35", "0.05, 1085.875", "0.1, 2171.75", "0.2, 4343.5"})
  void errorOnARampOfAllLevels(double density, double expected) {
    int[] samples = new int[512 * 512];
    Arrays.setAll(samples, i -> i & 255);
    assertError(new Picture(512, 512, 8, samples), density, expected, 1e-12, 21);
  }

  @Test
  void errorOnMidGrey() {
    assertError(Measured.flat(512, 512, 8, 128), 0.05, 812.825, 1e-12, 22);
  }

  /** On black only salt shows: the PSNR is -10 log10(d/2). */
  @ParameterizedTest
  @CsvSource({"0.01, 23.0103", "0.05, 16.0206", "0.1, 13.0103"})
  void errorOnBlackIsTheLowestPsnr(double density, double psnr) {
    Picture black = Measured.flat(512, 512, 8, 0);
    double expected = density / 2 * 255 * 255;
    assertThat(10 * StrictMath.log10(255 * 255 / expected)).isCloseTo(psnr, within(5e-5));
    assertError(black, density, expected, 1e-12, 23);
  }

  @ParameterizedTest
  @CsvSource({"0.01, 173.2445908", "0.05, 866.2229538", "0.1, 1732.445908"})
  void errorOnTheTestPattern(double density, double expected) {
    assertError(TestPattern.cvp(256), density, expected, 1e-9, 24);
  }

  /** Hits and halves are binomial: 5 standard deviations, false-alarm rate 5.7e-7 each. */
  @Test
  void halfTheHitsAreBlackAndHalfWhite() {
    Picture clean = Measured.flat(512, 512, 8, 100);
    int[] noisy = at("density", 0.1, clean).apply(clean, Measured.stream(25)).samples();
    double n = noisy.length;
    double limit = 5 * Math.sqrt(n * 0.05 * 0.95);
    assertThat((double) Arrays.stream(noisy).filter(x -> x == 0).count())
        .isCloseTo(0.05 * n, within(limit));
    assertThat((double) Arrays.stream(noisy).filter(x -> x == 255).count())
        .isCloseTo(0.05 * n, within(limit));
    assertThat(noisy).containsOnly(0, 100, 255);
  }

  @Test
  void densityOneLeavesNothing() {
    Picture clean = Measured.flat(64, 64, 8, 100);
    assertThat(at("density", 1, clean).apply(clean, Measured.stream(26)).samples())
        .containsOnly(0, 255);
  }

  @Test
  void varianceThatNeedsADensityAboveOneIsRefused() {
    Picture clean = Measured.flat(8, 8, 8, 0);
    double most = 255 * 255 / 2.0;
    assertThat(at(Severity.VARIANCE, most, clean).equivalentNoiseVariance()).isEqualTo(most);
    assertThatThrownBy(() -> at(Severity.VARIANCE, 2 * most, clean))
        .isInstanceOf(BadInput.class)
        .hasMessage(
            "salt-and-pepper at variance 65025.0 needs a density of 2.0 on this picture;"
                + " accepted: a noise variance of 0.0 to 32512.5 grey levels squared (density 1)");
    assertThatThrownBy(() -> at(Severity.SNR_DB, -40, TestPattern.cvp(64)))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("snr-db -40.0 needs a density of ");
  }
}
