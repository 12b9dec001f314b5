package linkworthy.noise;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import java.util.Map;
import java.util.stream.IntStream;
import linkworthy.corpus.Picture;
import linkworthy.input.BadInput;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class StuckPixelsTest extends NoiseProcessContractTest {
  @Override
  protected String id() {
    return "stuck-pixels";
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
        new StuckPixels()
            .at(new Severity(axis, value), Map.of(), Site.SAMPLES, SignalStatistics.of(clean));
  }

  /**
   * The mean of (u - x)^2 over u = 0..255 is a sum written out: recomputed independently in Python.
   * The measured error lies within 5 standard errors, false-alarm rate 5.7e-7 each.
   */
  @ParameterizedTest
  @CsvSource({"0, 21717.5", "128, 5461.5", "255, 21717.5", "200, 10717.5"})
  void errorOnOneLevel(int level, double perHit) {
    Picture flat = Measured.flat(256, 256, 8, level);
    Impairment.OnSamples impairment = at("density", 0.1, flat);
    assertThat(impairment.equivalentNoiseVariance())
        .isCloseTo(0.1 * perHit, within(1e-12 * perHit));
    Picture noisy = impairment.apply(flat, Measured.stream(61));
    assertThat(
            Measured.of(Measured.squaredErrors(flat, noisy))
                .errorsFrom(impairment.equivalentNoiseVariance()))
        .isBetween(-5.0, 5.0);
  }

  /** Each of 256 levels is hit 256 times on average; a count beyond 5 sigma has odds of 2e-4. */
  @Test
  void everyLevelOccursAboutEquallyOften() {
    Picture flat = Measured.flat(256, 256, 8, 7);
    int[] counts = new int[256];
    for (int sample : at("density", 1, flat).apply(flat, Measured.stream(62)).samples()) {
      counts[sample]++;
    }
    assertThat(IntStream.of(counts)).allMatch(count -> Math.abs(count - 256) < 5 * 16);
  }

  @Test
  void varianceOutOfReachIsRefused() {
    Picture flat = Measured.flat(8, 8, 8, 128);
    assertThatThrownBy(() -> at("variance", 5462, flat))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("needs a density of 1.0000")
        .hasMessageContaining("accepted: a noise variance of 0.0 to 5461.5 grey levels squared");
  }
}
