package linkworthy.decision;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;
import static org.assertj.core.api.Assertions.within;

import java.util.Random;
import java.util.function.ToDoubleFunction;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class BoundsTest {
  /** Simulated samples; {@code -Dlinkworthy.statistics=200000} for a thorough run. */
  private static final int SAMPLES = Integer.getInteger("linkworthy.statistics", 4000);

  private static final double ERROR = 0.05;

  /**
   * A right bound passes this limit in fewer than 1 of 100 000 runs (normal approximation, 4.5
   * standard deviations: 3.4e-6 on one side).
   */
  private static final double MOST_WRONG =
      SAMPLES * ERROR + 4.5 * Math.sqrt(SAMPLES * ERROR * (1 - ERROR));

  /**
   * 0 of 10 and 3 of 50: two-sided limits by R's binom.test, as SciPy's tests cite them. The others
   * recomputed independently in Python with SciPy (beta quantiles). A two-sided interval of 95 %
   * has two one-sided bounds of error 0.025.
   */
  @ParameterizedTest
  @CsvSource({
    "0, 10, 0.025, 0, 0.3084971, 5e-8",
    "3, 50, 0.005, 0.006872485, 0.202706269, 5e-10",
    "3, 100, 0.025, 0.0062299715, 0.0851760530, 5e-11",
    "0, 50, 0.025, 0, 0.0711217365, 5e-11"
  })
  void sharesByClopperAndPearson(
      int hits, int count, double error, double lower, double upper, double tolerance) {
    Bounds bounds = Bounds.ofShare(hits, count, error, error);
    assertThat(bounds.lower()).isCloseTo(lower, within(tolerance));
    assertThat(bounds.upper()).isCloseTo(upper, within(tolerance));
  }

  /** Nothing but hits: the lower bound is error^(1/n), so 59 are the fewest to show 95 %. */
  @Test
  void nothingButHits() {
    assertThat(Bounds.ofShare(12, 12, 0.05, 0.05))
        .isEqualTo(new Bounds(Bounds.ofShare(12, 12, 0.05, 0.2).lower(), 1));
    assertThat(Bounds.ofShare(12, 12, 0.05, 0.05).lower())
        .isCloseTo(StrictMath.pow(0.05, 1 / 12.0), within(1e-12));
    assertThat(Bounds.ofShare(58, 58, 0.05, 0.05).lower()).isLessThan(0.95);
    assertThat(Bounds.ofShare(59, 59, 0.05, 0.05).lower()).isGreaterThan(0.95);
  }

  /** t(0.95, 4) = 2.13184678632665, recomputed independently in Python with mpmath. */
  @Test
  void meansByStudent() {
    Bounds bounds = Bounds.ofMean(new double[] {1, 2, 3, 4, 5}, 0.05, 0.025);
    assertThat(bounds.lower()).isCloseTo(3 - 2.13184678632665 * Math.sqrt(0.5), within(1e-12));
    assertThat(bounds.upper()).isCloseTo(3 + 2.77644510519779 * Math.sqrt(0.5), within(1e-12));
  }

  /** Skewness moves the bound in the short tail alone; figures as in SkewedMeanTest. */
  @Test
  void meansOfSkewedValues() {
    Bounds right = Bounds.ofMean(new double[] {1, 2, 3, 4, 9}, 0.05, 0.025);
    assertThat(right.lower()).isCloseTo(0.8306810212575253, within(1e-11));
    assertThat(right.upper()).isCloseTo(15.588062181793035, within(1e-10));
    Bounds left = Bounds.ofMean(new double[] {-1, -2, -3, -4, -9}, 0.025, 0.05);
    assertThat(left).isEqualTo(new Bounds(-right.upper(), -right.lower()));
  }

  @Test
  void equalValuesHaveNoWidthAndThinEvidenceNoBounds() {
    assertThat(Bounds.ofMean(new double[] {7, 7, 7}, 0.05, 0.05)).isEqualTo(new Bounds(7, 7));
    assertThat(Bounds.ofMean(new double[] {7}, 0.05, 0.05)).isEqualTo(Bounds.NONE);
    assertThat(Bounds.ofMean(new double[] {7, Double.POSITIVE_INFINITY}, 0.05, 0.05))
        .isEqualTo(Bounds.NONE);
    assertThat(Bounds.NONE.or(new Bounds(0, 1))).isEqualTo(Bounds.NONE);
    assertThat(new Bounds(0.2, 0.4).or(new Bounds(0, 0.3))).isEqualTo(new Bounds(0, 0.4));
  }

  @ParameterizedTest
  @ValueSource(doubles = {0, 0.5, -0.1, Double.NaN})
  void anErrorIsBelowOneHalf(double error) {
    assertThatIllegalArgumentException()
        .isThrownBy(() -> Bounds.ofShare(1, 2, error, 0.05))
        .withMessageContaining("accepted: above 0 and below 0.5");
    assertThatIllegalArgumentException()
        .isThrownBy(() -> Bounds.ofMean(new double[] {1, 2}, 0.05, error));
  }

  @ParameterizedTest
  @CsvSource({"12, 0.5", "12, 0.9", "40, 0.95", "100, 0.02"})
  void boundsOfSharesAreWrongAtMostAsOftenAsStated(int count, double share) {
    Random random = new Random(20_261_201);
    int low = 0;
    int high = 0;
    for (int sample = 0; sample < SAMPLES; sample++) {
      int hits = 0;
      for (int i = 0; i < count; i++) {
        hits += random.nextDouble() < share ? 1 : 0;
      }
      Bounds bounds = Bounds.ofShare(hits, count, ERROR, ERROR);
      low += bounds.lower() > share ? 1 : 0;
      high += bounds.upper() < share ? 1 : 0;
    }
    assertThat(low).isLessThanOrEqualTo((int) MOST_WRONG);
    assertThat(high).isLessThanOrEqualTo((int) MOST_WRONG);
  }

  /**
   * Means of values with the truth 30. Bounds of few values are more cautious than stated, as any
   * skewness that they show is feared; of 200 they are as stated to within the limits.
   */
  @ParameterizedTest
  @CsvSource({"3, 0.02", "12, 0.03", "30, 0.035", "200, 0.04"})
  void boundsOfMeansAreWrongAboutAsOftenAsStated(int count, double lowest) {
    int[] wrong = wrongMeans(count, random -> random.nextGaussian());
    int fewest = (int) (SAMPLES * lowest - 4.5 * Math.sqrt(SAMPLES * lowest * (1 - lowest)));
    assertThat(wrong[0]).isBetween(fewest, (int) MOST_WRONG);
    assertThat(wrong[1]).isBetween(fewest, (int) MOST_WRONG);
  }

  /**
   * The same with a mirrored gamma distribution of shape 4, whose skewness is -1. Lower bounds by
   * Student's t alone are wrong in 8.4 % for 12 values (SciPy), 9.8 standard deviations too many.
   */
  @ParameterizedTest
  @ValueSource(ints = {12, 20, 60})
  void boundsOfMeansOfSkewedValuesAreWrongAtMostAsOftenAsStated(int count) {
    int[] wrong = wrongMeans(count, BoundsTest::skewed);
    assertThat(wrong[0]).isLessThanOrEqualTo((int) MOST_WRONG);
    assertThat(wrong[1]).isLessThanOrEqualTo((int) MOST_WRONG);
  }

  private static double skewed(Random random) {
    double product = 1;
    for (int i = 0; i < 4; i++) {
      product *= 1 - random.nextDouble();
    }
    return (4 + StrictMath.log(product)) / 2;
  }

  /** How many lower and how many upper bounds are wrong. */
  private static int[] wrongMeans(int count, ToDoubleFunction<Random> drawn) {
    Random random = new Random(20_261_202);
    int[] wrong = new int[2];
    double[] values = new double[count];
    for (int sample = 0; sample < SAMPLES; sample++) {
      for (int i = 0; i < count; i++) {
        values[i] = 30 + 4 * drawn.applyAsDouble(random);
      }
      Bounds bounds = Bounds.ofMean(values, ERROR, ERROR);
      wrong[0] += bounds.lower() > 30 ? 1 : 0;
      wrong[1] += bounds.upper() < 30 ? 1 : 0;
    }
    return wrong;
  }
}
