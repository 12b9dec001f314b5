package linkworthy.statistics;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;
import static org.assertj.core.api.Assertions.withinPercentage;

import java.util.Arrays;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

/** Certified values of the NIST Statistical Reference Datasets, univariate summary statistics. */
class MomentsTest {
  private static final String MICHELSO =
      "299.85 299.74 299.90 300.07 299.93 299.85 299.95 299.98 299.98 299.88 "
          + "300.00 299.98 299.93 299.65 299.76 299.81 300.00 300.00 299.96 299.96 "
          + "299.96 299.94 299.96 299.94 299.88 299.80 299.85 299.88 299.90 299.84 "
          + "299.83 299.79 299.81 299.88 299.88 299.83 299.80 299.79 299.76 299.80 "
          + "299.88 299.88 299.88 299.86 299.72 299.72 299.62 299.86 299.97 299.95 "
          + "299.88 299.91 299.85 299.87 299.84 299.84 299.85 299.84 299.84 299.84 "
          + "299.89 299.81 299.81 299.82 299.80 299.77 299.76 299.74 299.75 299.76 "
          + "299.91 299.92 299.89 299.86 299.88 299.72 299.84 299.85 299.85 299.78 "
          + "299.89 299.84 299.78 299.81 299.76 299.81 299.79 299.81 299.82 299.85 "
          + "299.87 299.87 299.81 299.74 299.81 299.94 299.95 299.80 299.81 299.87";

  @Test
  void michelso() {
    Moments moments =
        Moments.of(Arrays.stream(MICHELSO.split(" ")).mapToDouble(Double::parseDouble).toArray());
    assertThat(moments.count()).isEqualTo(100);
    assertThat(moments.mean()).isCloseTo(299.852400000000, within(1e-12));
    assertThat(moments.standardDeviation()).isCloseTo(0.0790105478190518, withinPercentage(1e-11));
  }

  @Test
  void numAcc1() {
    Moments moments = Moments.of(10000001, 10000003, 10000002);
    assertThat(moments.mean()).isEqualTo(10000002);
    assertThat(moments.standardDeviation()).isEqualTo(1);
  }

  /**
   * NumAcc2 to NumAcc4: the first value, then two values in turn, 500 times. The inputs of the last
   * two are not numbers of the double format, so that even exact arithmetic on them reaches 0.1
   * only to 3.5e-11 and 5.6e-10 (recomputed independently in Python with NumPy).
   */
  @ParameterizedTest
  @CsvSource({
    "1.2, 1.1, 1.3, 1e-15, 1e-15",
    "1000000.2, 1000000.1, 1000000.3, 2e-10, 1e-10",
    "10000000.2, 10000000.1, 10000000.3, 2e-9, 1e-9"
  })
  void numAcc(double first, double low, double high, double meanReach, double deviationReach) {
    Moments moments = new Moments();
    moments.add(first);
    for (int i = 0; i < 500; i++) {
      moments.add(low);
      moments.add(high);
    }
    assertThat(moments.mean()).isCloseTo(first, within(meanReach));
    assertThat(moments.standardDeviation()).isCloseTo(0.1, within(deviationReach));
  }

  /** By hand: an offset of 2^40 leaves the deviations 0, 1 and 2 exact. */
  @Test
  void aLargeOffsetCostsNoDigits() {
    double offset = 0x1p40;
    Moments moments = Moments.of(offset, offset + 1, offset + 2);
    assertThat(moments.mean()).isEqualTo(offset + 1);
    assertThat(moments.variance()).isOne();
  }

  @Test
  void infinitiesOfBothSignsHaveNoMean() {
    Moments moments = Moments.of(Double.POSITIVE_INFINITY, 1, Double.NEGATIVE_INFINITY);
    assertThat(moments.mean()).isNaN();
    assertThat(moments.variance()).isNaN();
  }

  @Test
  void oneValueHasNoVariance() {
    assertThat(Moments.of(3).mean()).isEqualTo(3);
    assertThat(Moments.of(3).variance()).isNaN();
    assertThat(Moments.of().mean()).isNaN();
    assertThat(Moments.of().standardDeviation()).isNaN();
  }

  @ParameterizedTest
  @ValueSource(doubles = {Double.POSITIVE_INFINITY, Double.NEGATIVE_INFINITY})
  void anInfiniteValueMakesTheMeanInfinite(double infinite) {
    Moments moments = Moments.of(1, infinite, 3);
    assertThat(moments.mean()).isEqualTo(infinite);
    assertThat(moments.variance()).isNaN();
  }

  @Test
  void equalValuesHaveExactlyTheirMean() {
    Moments moments = Moments.of(0.1, 0.1, 0.1);
    assertThat(moments.mean()).isEqualTo(0.1);
    assertThat(moments.variance()).isZero();
  }
}
