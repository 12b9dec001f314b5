package linkworthy.statistics;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;
import static org.assertj.core.api.Assertions.within;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

class HolmTest {
  /**
   * p values of Benjamini and Hochberg (1995, Journal of the Royal Statistical Society B
   * 57:289-300); Holm's adjustment recomputed independently in Python.
   */
  private static final double[] P = {
    .0001, .0004, .0019, .0095, .0201, .0278, .0298, .0344, .0459, .3240, .4262, .5719, .6528,
    .7590, 1
  };

  private static final double[] ADJUSTED = {
    .0015, .0056, .0247, .114, .2211, .278, .278, .278, .3213, 1, 1, 1, 1, 1, 1
  };

  @Test
  void adjusts() {
    assertThat(Holm.adjust(P)).containsExactly(ADJUSTED, within(1e-12));
  }

  @Test
  void keepsTheOrderOfTheValues() {
    double[] reversed = new double[P.length];
    for (int i = 0; i < P.length; i++) {
      reversed[i] = P[P.length - 1 - i];
    }
    double[] adjusted = Holm.adjust(reversed);
    for (int i = 0; i < P.length; i++) {
      assertThat(adjusted[P.length - 1 - i]).isCloseTo(ADJUSTED[i], within(1e-12));
    }
  }

  /** By hand: 3 x 0.01, 2 x 0.02, 1 x 0.03 raised to the one before. */
  @Test
  void whatCouldNotBeTestedDoesNotCount() {
    assertThat(Holm.adjust(Double.NaN, 0.03, 0.01, Double.NaN, 0.02))
        .containsExactly(new double[] {Double.NaN, 0.04, 0.03, Double.NaN, 0.04}, within(1e-15));
    assertThat(Holm.adjust(Double.NaN)).containsExactly(Double.NaN);
    assertThat(Holm.adjust()).isEmpty();
  }

  @Test
  void leavesTheGivenArrayAlone() {
    double[] p = {0.03, 0.01};
    assertThat(Holm.adjust(p)).containsExactly(0.03, 0.02);
    assertThat(p).containsExactly(0.03, 0.01);
  }

  @ParameterizedTest
  @ValueSource(doubles = {-Double.MIN_VALUE, 1.0000000000000002})
  void refusesWhatIsNoProbability(double p) {
    assertThatIllegalArgumentException()
        .isThrownBy(() -> Holm.adjust(0.5, p))
        .withMessageContaining("p value is " + p);
  }
}
