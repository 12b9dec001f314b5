package linkworthy.statistics;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;

import java.util.Map;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

class CellTest {
  @ParameterizedTest
  @ValueSource(doubles = {0, 0.5, 1})
  void acceptsAnOutageRate(double rate) {
    assertThat(cell("gaussian", "A", 2, 2, rate).outageRate()).isEqualTo(rate);
  }

  @ParameterizedTest
  @ValueSource(doubles = {-Double.MIN_VALUE, 1.0000000000000002, Double.NaN})
  void refusesAnOutageRateThatIsNone(double rate) {
    assertThatIllegalArgumentException()
        .isThrownBy(() -> cell("gaussian", "A", 2, 2, rate))
        .withMessage("outage rate is " + rate + "; accepted: 0.0 to 1.0");
  }

  @Test
  void needsAPictureAndATrialForEach() {
    assertThatIllegalArgumentException()
        .isThrownBy(() -> cell("gaussian", "A", 0, 2, 0))
        .withMessageContaining("number of pictures is 0");
    assertThatIllegalArgumentException()
        .isThrownBy(() -> cell("gaussian", "A", 2, 1, 0))
        .withMessageContaining("number of trials is 1");
  }

  @Test
  void needsNames() {
    assertThatIllegalArgumentException()
        .isThrownBy(() -> cell(" ", "A", 1, 1, 0))
        .withMessage("impairment is empty; accepted: some text");
    assertThatIllegalArgumentException()
        .isThrownBy(() -> cell("gaussian", "", 1, 1, 0))
        .withMessage("codec is empty; accepted: some text");
  }

  private static Cell cell(
      String impairment, String codec, int pictures, long trials, double outageRate) {
    double none = Double.NaN;
    return new Cell(
        impairment,
        "",
        "",
        none,
        0,
        none,
        codec,
        "",
        "",
        -1,
        "",
        pictures,
        trials,
        30,
        none,
        none,
        30,
        30,
        none,
        1,
        outageRate,
        0,
        0,
        none,
        Standing.BEST,
        0,
        Map.of());
  }
}
