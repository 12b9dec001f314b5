package linkworthy.statistics;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;
import static org.assertj.core.api.Assertions.within;
import static org.assertj.core.api.Assertions.withinPercentage;

import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

/** Expected values recomputed independently in Python with mpmath 1.2.1 at 30 digits. */
class StudentTTest {
  private static final double[] DIFFERENCES = {
    .12, -.05, .20, .31, -.11, .08, .02, .25, .16, -.03, .10, .19
  };

  @ParameterizedTest
  @CsvSource({
    "1, 12.7062047361747, 6.31375151467504",
    "2, 4.30265272974946, 2.91998558035373",
    "4, 2.77644510519779, 2.13184678632665",
    "5, 2.57058183563632, 2.01504837333302",
    "9, 2.26215716279821, 1.83311293265624",
    "10, 2.22813885198627, 1.81246112281168",
    "19, 2.09302405440831, 1.72913281152137",
    "29, 2.0452296421327, 1.6991270265335",
    "30, 2.04227245630124, 1.69726088659396",
    "60, 2.00029782201426, 1.67064886490464",
    "99, 1.98421695158642, 1.66039115601699"
  })
  void quantiles(double degreesOfFreedom, double upper975, double upper95) {
    assertThat(StudentT.quantile(0.975, degreesOfFreedom))
        .isCloseTo(upper975, withinPercentage(1e-10));
    assertThat(StudentT.quantile(0.95, degreesOfFreedom))
        .isCloseTo(upper95, withinPercentage(1e-10));
    assertThat(StudentT.quantile(0.025, degreesOfFreedom))
        .isCloseTo(-upper975, withinPercentage(1e-10));
  }

  /** Degrees of freedom need not be whole. */
  @ParameterizedTest
  @CsvSource({"2.5, 3.57465484200368", "0.7, 36.6114150315887"})
  void quantilesBetweenWholeDegrees(double degreesOfFreedom, double upper975) {
    assertThat(StudentT.quantile(0.975, degreesOfFreedom))
        .isCloseTo(upper975, withinPercentage(1e-10));
  }

  @Test
  void certaintyIsInfinitelyFar() {
    assertThat(StudentT.quantile(1, 3)).isEqualTo(Double.POSITIVE_INFINITY);
    assertThat(StudentT.quantile(0, 3)).isEqualTo(Double.NEGATIVE_INFINITY);
  }

  @Test
  void intervalOfAMean() {
    assertThat(StudentT.halfWidth(Moments.of(DIFFERENCES)))
        .isCloseTo(0.0810204881679106, within(1e-12));
  }

  /** Groups 1, 2, 4 and 10, 10.5: 2.30458 degrees of freedom. */
  @Test
  void intervalOfAMeanOverGroups() {
    assertThat(StudentT.halfWidthOfGroups(List.of(Moments.of(1, 2, 4), Moments.of(10, 10.5))))
        .isCloseTo(1.74218653992093, within(1e-13));
  }

  @Test
  void oneGroupHasTheIntervalOfItsMean() {
    Moments group = Moments.of(DIFFERENCES);
    assertThat(StudentT.halfWidthOfGroups(List.of(group)))
        .isCloseTo(StudentT.halfWidth(group), within(1e-14));
  }

  @Test
  void groupsOfEqualValuesAddNothing() {
    Moments group = Moments.of(1, 2, 4);
    Moments equal = Moments.of(7, 7, 7);
    assertThat(StudentT.halfWidthOfGroups(List.of(group, equal)))
        .isCloseTo(StudentT.halfWidth(group) / 2, within(1e-14));
    assertThat(StudentT.halfWidthOfGroups(List.of(equal, equal))).isZero();
  }

  @Test
  void thinEvidenceHasNoInterval() {
    Moments group = Moments.of(1, 2, 4);
    assertThat(StudentT.halfWidth(Moments.of())).isNaN();
    assertThat(StudentT.halfWidth(Moments.of(5))).isNaN();
    assertThat(StudentT.halfWidth(Moments.of(5, 6, Double.POSITIVE_INFINITY))).isNaN();
    assertThat(StudentT.halfWidthOfGroups(List.of())).isNaN();
    assertThat(StudentT.halfWidthOfGroups(List.of(group, Moments.of(5)))).isNaN();
    assertThat(
            StudentT.halfWidthOfGroups(
                List.of(group, Moments.of(Double.POSITIVE_INFINITY, Double.POSITIVE_INFINITY))))
        .isNaN();
  }

  @Test
  void pairedTest() {
    assertThat(StudentT.pairedP(Moments.of(DIFFERENCES)))
        .isCloseTo(0.0170558154170137, within(1e-14));
    double[] opposite = DIFFERENCES.clone();
    for (int i = 0; i < opposite.length; i++) {
      opposite[i] = -opposite[i];
    }
    assertThat(StudentT.pairedP(Moments.of(opposite)))
        .isEqualTo(StudentT.pairedP(Moments.of(DIFFERENCES)));
  }

  @Test
  void pairedTestOfEqualDifferences() {
    assertThat(StudentT.pairedP(Moments.of(0, 0))).isOne();
    assertThat(StudentT.pairedP(Moments.of(0.5, 0.5, 0.5))).isZero();
  }

  @Test
  void pairedTestNeedsTwoFiniteDifferences() {
    assertThat(StudentT.pairedP(Moments.of())).isNaN();
    assertThat(StudentT.pairedP(Moments.of(0.5))).isNaN();
    assertThat(StudentT.pairedP(Moments.of(0.5, 0.2, Double.NEGATIVE_INFINITY))).isNaN();
  }

  @ParameterizedTest
  @ValueSource(doubles = {0, -1, Double.NaN, Double.POSITIVE_INFINITY})
  void refusesDegreesOfFreedomThatAreNone(double degreesOfFreedom) {
    assertThatIllegalArgumentException()
        .isThrownBy(() -> StudentT.quantile(0.975, degreesOfFreedom))
        .withMessageContaining("degrees of freedom is " + degreesOfFreedom);
  }
}
