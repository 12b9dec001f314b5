package linkworthy.statistics;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;
import static org.assertj.core.api.Assertions.within;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class PercentileTest {
  private static final double INFINITY = Double.POSITIVE_INFINITY;

  /** Recomputed independently in Python with NumPy 1.24 (percentile, method linear). */
  @ParameterizedTest
  @CsvSource({"0, 1", "0.05, 1", "0.25, 1.75", "0.5, 3.5", "0.95, 7.95", "1, 9"})
  void interpolatesLinearly(double p, double expected) {
    double[] values = {3, 1, 4, 1, 5, 9, 2, 6};
    assertThat(Percentile.of(values, p)).isCloseTo(expected, within(1e-12));
    assertThat(values).containsExactly(3, 1, 4, 1, 5, 9, 2, 6);
  }

  @Test
  void infiniteValuesComeLast() {
    assertThat(Percentile.of(new double[] {INFINITY, 1, 2}, 0.5)).isEqualTo(2);
    assertThat(Percentile.of(new double[] {INFINITY, 1, 2}, 0.6)).isEqualTo(INFINITY);
    assertThat(Percentile.of(new double[] {INFINITY, INFINITY}, 0.05)).isEqualTo(INFINITY);
  }

  @Test
  void fewValues() {
    assertThat(Percentile.of(new double[] {4}, 0.05)).isEqualTo(4);
    assertThat(Percentile.of(new double[0], 0.05)).isNaN();
  }

  @ParameterizedTest
  @ValueSource(doubles = {-Double.MIN_VALUE, 1.0000000000000002, Double.NaN})
  void refusesAShareThatIsNone(double p) {
    assertThatIllegalArgumentException()
        .isThrownBy(() -> Percentile.of(new double[] {1}, p))
        .withMessageContaining("share is " + p);
  }
}
