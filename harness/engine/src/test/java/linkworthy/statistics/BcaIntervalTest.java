package linkworthy.statistics;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;
import static org.assertj.core.api.Assertions.within;

import java.util.Arrays;
import java.util.function.ToDoubleFunction;
import org.junit.jupiter.api.Test;

class BcaIntervalTest {
  private static final double[] TEN = {28.1, 28.4, 27.9, 28.8, 28.2, 30.5, 28.0, 28.3, 28.6, 27.7};
  private static final double[] TWENTY_FIVE = {
    31.2, 28.4, 33.9, 29.7, 30.5, 27.1, 32.2, 30.0, 25.3, 31.7, 29.1, 30.9, 34.6, 28.8, 32.9, 26.2,
    30.2, 31.0, 29.5, 33.1, 27.8, 30.7, 22.4, 31.4, 29.9
  };
  private static final double NORMAL_975 = 1.959963984540054;
  private static final long SEED = 20_261_201;

  private static double[] values(double[] all, int[] cases) {
    return Arrays.stream(cases).mapToDouble(i -> all[i]).toArray();
  }

  private static ToDoubleFunction<int[]> mean(double[] all) {
    return cases -> Moments.of(values(all, cases)).mean();
  }

  private static ToDoubleFunction<int[]> median(double[] all) {
    return cases -> Percentile.of(values(all, cases), 0.5);
  }

  /**
   * The acceleration of a mean is its skewness over 6 sqrt(n) (Efron 1987, from memory); recomputed
   * independently in Python with SciPy 1.10.1 from the definition by leaving out.
   */
  @Test
  void accelerationAndAdjustedPoints() {
    double a = BcaInterval.acceleration(10, mean(TEN));
    assertThat(a).isCloseTo(0.09894415434, within(1e-11));
    assertThat(BcaInterval.adjusted(-NORMAL_975, 0, a)).isCloseTo(0.05033529526, within(1e-11));
    assertThat(BcaInterval.adjusted(NORMAL_975, 0, a)).isCloseTo(0.9924817098, within(1e-10));
    assertThat(BcaInterval.adjusted(-NORMAL_975, 0, 0)).isCloseTo(0.025, within(1e-12));
    assertThat(BcaInterval.adjusted(11, 0, 0.1)).isNaN();
  }

  /**
   * {@code scipy.stats.bootstrap((x,), f, method='BCa', n_resamples=400000, confidence_level=0.95)}
   * of SciPy 1.10.1, which takes normal quantiles: medians 29.1 to 31.2 for random_state 1 and 2,
   * means 28.756 to 30.880 and 28.756 to 30.884. An end of 100 000 resamples has a standard error
   * of sqrt(0.015 * 0.985 / 100000) / 0.038 = 0.01 of the mean's 0.54 dB; the limit is five of
   * them, passed in fewer than 1 of 100 000 runs.
   */
  @Test
  void intervalsAsBySciPy() {
    BcaInterval ofMean = BcaInterval.of(25, mean(TWENTY_FIVE), NORMAL_975, SEED, 100_000);
    assertThat(ofMean.lower()).isCloseTo(28.756, within(0.027));
    assertThat(ofMean.upper()).isCloseTo(30.882, within(0.027));
    BcaInterval ofMedian = BcaInterval.of(25, median(TWENTY_FIVE), NORMAL_975, SEED, 20_000);
    assertThat(ofMedian).isEqualTo(new BcaInterval(29.1, 31.2));
  }

  /** Wider than SciPy's by t and by sqrt(25/24): 2.0639 * 1.0206 in place of 1.96. */
  @Test
  void intervalsAreWidenedForFewCases() {
    BcaInterval plain = BcaInterval.of(25, mean(TWENTY_FIVE), NORMAL_975, SEED, 100_000);
    BcaInterval wide = BcaInterval.of(25, mean(TWENTY_FIVE), 0.95, SEED);
    double ratio = (wide.upper() - wide.lower()) / (plain.upper() - plain.lower());
    assertThat(ratio).isBetween(1.02, 1.15);
    assertThat(BcaInterval.of(25, mean(TWENTY_FIVE), 0.95, SEED)).isEqualTo(wide);
    assertThat(BcaInterval.of(25, mean(TWENTY_FIVE), 0.95, SEED + 1)).isNotEqualTo(wide);
  }

  @Test
  void equalFiguresHaveNoWidth() {
    assertThat(BcaInterval.of(30, cases -> 7, 0.95, SEED)).isEqualTo(new BcaInterval(7, 7));
  }

  @Test
  void thinEvidenceHasNoInterval() {
    assertThat(BcaInterval.of(1, cases -> 7, 0.95, SEED)).isEqualTo(BcaInterval.NONE);
    assertThat(BcaInterval.of(19, mean(TWENTY_FIVE), 0.95, SEED)).isEqualTo(BcaInterval.NONE);
    assertThat(BcaInterval.of(30, cases -> Double.NaN, 0.95, SEED)).isEqualTo(BcaInterval.NONE);
    assertThat(BcaInterval.of(30, cases -> cases[0] == 4 ? Double.NaN : 1, 0.95, SEED))
        .isEqualTo(BcaInterval.NONE);
  }

  @Test
  void confidenceIsAProbability() {
    assertThatIllegalArgumentException()
        .isThrownBy(() -> BcaInterval.of(30, cases -> 1, 95, SEED))
        .withMessageContaining("confidence");
  }
}
