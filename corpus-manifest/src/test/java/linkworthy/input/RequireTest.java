package linkworthy.input;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

class RequireTest {
  @Test
  void returnsWhatItChecked() {
    assertThat(Require.inRange(3, 3, 5, "n")).isEqualTo(3);
    assertThat(Require.inRange(5, 3, 5, "n")).isEqualTo(5);
    assertThat(Require.inRange(0.1, 0.1, 0.2, "x")).isEqualTo(0.1);
    assertThat(Require.inRange(0.2, 0.1, 0.2, "x")).isEqualTo(0.2);
    assertThat(Require.positive(Double.MIN_VALUE, "x")).isEqualTo(Double.MIN_VALUE);
    assertThat(Require.positive(Double.MAX_VALUE, "x")).isEqualTo(Double.MAX_VALUE);
    assertThat(Require.notNegative(0, "x")).isZero();
    assertThat(Require.finite(-Double.MAX_VALUE, "x")).isEqualTo(-Double.MAX_VALUE);
    assertThat(Require.notBlank(" a ", "t")).isEqualTo(" a ");
  }

  @ParameterizedTest
  @ValueSource(ints = {2, 6, Integer.MIN_VALUE, Integer.MAX_VALUE})
  void refusesAnIntegerOutside(int value) {
    assertThatIllegalArgumentException()
        .isThrownBy(() -> Require.inRange(value, 3, 5, "width (samples)"))
        .withMessage("width (samples) is " + value + "; accepted: 3 to 5");
  }

  @Test
  void refusesOneUnitInTheLastPlaceOutside() {
    assertRefused(() -> Require.inRange(Math.nextDown(0.1), 0.1, 0.2, "x"));
    assertRefused(() -> Require.inRange(Math.nextUp(0.2), 0.1, 0.2, "x"));
    assertRefused(() -> Require.positive(Math.nextDown(Double.MIN_VALUE), "x"));
    assertRefused(() -> Require.positive(-0.0, "x"));
    assertRefused(() -> Require.notNegative(Math.nextDown(0.0), "x"));
    assertRefused(() -> Require.positive(Math.nextUp(Double.MAX_VALUE), "x"));
    assertRefused(() -> Require.notNegative(Math.nextUp(Double.MAX_VALUE), "x"));
    assertRefused(() -> Require.finite(Math.nextUp(Double.MAX_VALUE), "x"));
  }

  @ParameterizedTest
  @ValueSource(doubles = {Double.NaN, Double.POSITIVE_INFINITY, Double.NEGATIVE_INFINITY})
  void refusesWhatIsNotFinite(double value) {
    assertRefused(() -> Require.inRange(value, -1, 1, "x"));
    assertRefused(() -> Require.positive(value, "x"));
    assertRefused(() -> Require.notNegative(value, "x"));
    assertRefused(() -> Require.finite(value, "x"));
  }

  @ParameterizedTest
  @ValueSource(strings = {"", " ", "\t\n"})
  void refusesBlankText(String value) {
    assertThatIllegalArgumentException()
        .isThrownBy(() -> Require.notBlank(value, "name"))
        .withMessage("name is empty; accepted: some text");
  }

  private static void assertRefused(org.assertj.core.api.ThrowableAssert.ThrowingCallable check) {
    assertThatIllegalArgumentException()
        .isThrownBy(check)
        .withMessageStartingWith("x is ")
        .withMessageContaining("; accepted: ");
  }
}
