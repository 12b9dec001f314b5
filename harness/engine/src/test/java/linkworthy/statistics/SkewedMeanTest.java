package linkworthy.statistics;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;
import static org.assertj.core.api.Assertions.within;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/** Expected values recomputed independently in Python with SciPy 1.10.1. */
class SkewedMeanTest {
  /** {@code scipy.stats.skew(x, bias=False)}. */
  @Test
  void skewnessOfASample() {
    assertThat(SkewedMean.skewness(28.1, 28.4, 27.9, 28.8, 28.2, 30.5, 28.0, 28.3, 28.6, 27.7))
        .isCloseTo(2.22624347275854, within(1e-12));
    assertThat(SkewedMean.skewness(-1, -2, -3, -4, -9))
        .isCloseTo(-1.5491313812566694, within(1e-12));
  }

  @Test
  void fewOrEqualValuesShowNoSkewness() {
    assertThat(SkewedMean.skewness()).isZero();
    assertThat(SkewedMean.skewness(1, 5)).isZero();
    assertThat(SkewedMean.skewness(7, 7, 7, 7)).isZero();
    assertThat(SkewedMean.skewness(7, 8, Double.POSITIVE_INFINITY)).isNaN();
  }

  @ParameterizedTest
  @CsvSource({
    "0.05, 10, -1, 3.0538479340431812",
    "0.05, 10, 1, 1.833112932656237",
    "0.01, 48, -0.5, 2.6356812613120844"
  })
  void standardErrorsGrowWithSkewnessToTheOtherSide(
      double error, int count, double skewness, double expected) {
    assertThat(SkewedMean.standardErrors(error, count, skewness))
        .isCloseTo(expected, within(1e-10));
  }

  @Test
  void aBoundNeedsTwoValuesAndAProbability() {
    assertThatIllegalArgumentException()
        .isThrownBy(() -> SkewedMean.standardErrors(0.05, 1, 0))
        .withMessageContaining("degrees of freedom");
    assertThatIllegalArgumentException()
        .isThrownBy(() -> SkewedMean.standardErrors(-0.05, 5, 0))
        .withMessageContaining("probability");
  }
}
