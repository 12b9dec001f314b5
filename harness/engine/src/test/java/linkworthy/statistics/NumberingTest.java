package linkworthy.statistics;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import org.junit.jupiter.api.Test;

class NumberingTest {
  private final Numbering numbering = new Numbering();

  @Test
  void namesAreNumberedInTheOrderInWhichTheyFirstCome() {
    // "Aa" and "BB" have the same hash code.
    assertThat(numbering.add("field")).isZero();
    assertThat(numbering.add("BB")).isEqualTo(1);
    assertThat(numbering.add("Aa")).isEqualTo(2);
    assertThat(numbering.add("")).isEqualTo(3);
  }

  @Test
  void aNameKeepsItsNumber() {
    numbering.add("cat");
    numbering.add("canyon");
    assertThat(numbering.add("cat")).isZero();
    assertThat(numbering.add("harbour")).isEqualTo(2);
    assertThat(numbering.find("canyon")).isEqualTo(1);
    assertThat(numbering.name(1)).isEqualTo("canyon");
  }

  @Test
  void aNameOrNumberThatWasNotGivenIsNotMadeByAsking() {
    assertThat(numbering.find("cat")).isEqualTo(-1);
    assertThatThrownBy(() -> numbering.name(0)).isInstanceOf(IndexOutOfBoundsException.class);
    assertThat(numbering.add("canyon")).isZero();
    assertThat(numbering.find("cat")).isEqualTo(-1);
  }
}
