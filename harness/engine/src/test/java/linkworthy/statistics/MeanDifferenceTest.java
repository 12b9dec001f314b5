package linkworthy.statistics;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;
import static org.assertj.core.api.Assertions.within;
import static org.assertj.core.api.Assertions.withinPercentage;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

class MeanDifferenceTest {
  private static final double[] DIFFERENCES = {
    .12, -.05, .20, .31, -.11, .08, .02, .25, .16, -.03, .10, .19
  };

  /**
   * Two samples of 15 from an encyclopedia's article on Welch's test (from memory); t, degrees of
   * freedom and p recomputed independently in Python with SciPy.
   */
  @Test
  void welchOfTwoSamples() {
    Moments a =
        Moments.of(
            27.5, 21.0, 19.0, 23.6, 17.0, 17.9, 16.9, 20.1, 21.9, 22.6, 23.1, 19.6, 19.0, 21.7,
            21.4);
    Moments b =
        Moments.of(
            27.1, 22.0, 20.8, 23.4, 23.4, 23.5, 25.8, 22.0, 24.8, 20.2, 21.9, 22.1, 22.9, 20.5,
            24.4);
    MeanDifference difference = MeanDifference.welch(a, b);
    assertThat(a.mean()).isCloseTo(20.82, within(1e-12));
    assertThat(b.mean()).isCloseTo(22.98666667, within(1e-8));
    assertThat(difference.t()).isCloseTo(-2.455356398, within(1e-9));
    assertThat(difference.degreesOfFreedom()).isCloseTo(24.98852929, within(1e-8));
    assertThat(difference.p()).isCloseTo(0.02137800146, within(1e-11));
  }

  /**
   * Mileage of cars, dataset AUTO83B of the NIST/SEMATECH Engineering Statistics Handbook, section
   * 1.3.5.3 (from memory), by counts, means and standard deviations; recomputed independently in
   * Python to the digits printed there.
   */
  @Test
  void welchOfSummaries() {
    MeanDifference difference =
        MeanDifference.welch(
            20.14458 - 30.48101, 6.41470 * 6.41470 / 249, 248, 6.10771 * 6.10771 / 79, 78);
    assertThat(difference.t()).isCloseTo(-12.94627, within(5e-5));
    assertThat(difference.degreesOfFreedom()).isCloseTo(136.8750, within(5e-4));
  }

  /** Differences of our own; recomputed independently in Python with SciPy. */
  @Test
  void equivalenceOfPairs() {
    MeanDifference difference = MeanDifference.paired(Moments.of(DIFFERENCES));
    assertThat(difference.estimate()).isCloseTo(0.1033333333, within(1e-10));
    assertThat((difference.estimate() + 0.5) / difference.standardError())
        .isCloseTo(16.3900236, within(1e-7));
    assertThat((difference.estimate() - 0.5) / difference.standardError())
        .isCloseTo(-10.77576137, within(1e-8));
    assertThat(difference.equivalenceP(0.5)).isCloseTo(1.743542e-07, withinPercentage(1e-4));
    // not equivalent, though 0 is outside the 90 % interval 0.0372249982..0.1694416685
    assertThat(difference.equivalenceP(0.15)).isCloseTo(0.1155348695, within(1e-10));
    double half90 =
        StudentT.quantile(0.95, difference.degreesOfFreedom()) * difference.standardError();
    assertThat(difference.estimate() - half90).isCloseTo(0.0372249982, within(1e-9));
    assertThat(difference.estimate() + half90).isCloseTo(0.1694416685, within(1e-9));
  }

  @Test
  void ofPairsItIsTheTestAndTheIntervalOfTheirMean() {
    Moments differences = Moments.of(DIFFERENCES);
    MeanDifference difference = MeanDifference.paired(differences);
    assertThat(difference.p()).isEqualTo(StudentT.pairedP(differences));
    assertThat(difference.halfWidth()).isEqualTo(StudentT.halfWidth(differences));
  }

  @Test
  void withoutScatterNothingIsLeftToChance() {
    MeanDifference none = MeanDifference.paired(Moments.of(0, 0));
    assertThat(none.p()).isOne();
    assertThat(none.equivalenceP(0.1)).isZero();
    assertThat(none.halfWidth()).isZero();
    MeanDifference some = MeanDifference.welch(Moments.of(1, 1), Moments.of(3, 3, 3));
    assertThat(some.p()).isZero();
    assertThat(some.equivalenceP(2)).isOne();
    assertThat(some.equivalenceP(2.5)).isZero();
    assertThat(some.degreesOfFreedom()).isOne();
  }

  @Test
  void thinEvidenceIsNotANumber() {
    for (MeanDifference thin :
        new MeanDifference[] {
          MeanDifference.paired(Moments.of(0.5)),
          MeanDifference.paired(Moments.of(0.5, Double.NEGATIVE_INFINITY)),
          MeanDifference.welch(Moments.of(1), Moments.of(1, 2, 3)),
          MeanDifference.welch(Moments.of(1, 2), Moments.of(1, Double.POSITIVE_INFINITY))
        }) {
      assertThat(thin.p()).isNaN();
      assertThat(thin.equivalenceP(1)).isNaN();
      assertThat(thin.halfWidth()).isNaN();
    }
  }

  @ParameterizedTest
  @ValueSource(doubles = {-Double.MIN_VALUE, Double.NaN, Double.POSITIVE_INFINITY})
  void refusesWhatIsNoMargin(double margin) {
    assertThatIllegalArgumentException()
        .isThrownBy(() -> MeanDifference.paired(Moments.of(1, 2)).equivalenceP(margin))
        .withMessageContaining("margin is " + margin);
  }
}
