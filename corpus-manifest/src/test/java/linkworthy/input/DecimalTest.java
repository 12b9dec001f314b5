package linkworthy.input;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;

import java.math.BigDecimal;
import java.util.Locale;
import java.util.SplittableRandom;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class DecimalTest {
  /**
   * Source: Double.toString of Temurin 25.0 (its specification since JDK 19 is the shortest form).
   * JDK 17 gives 9.999999999999999E22, 1.9999999999999998E23, 8.409999999999999E21 and
   * 4.8726570056999995E288 for the first four.
   */
  @ParameterizedTest
  @ValueSource(
      strings = {
        "1.0E23",
        "2.0E23",
        "8.41E21",
        "4.8726570057E288",
        "2.2E-322",
        "9.5E-322",
        "4.9E-324",
        "1.7976931348623157E308",
        "2.2250738585072014E-308",
        "2.0E-44",
        "9.007199254740992E15",
        "3.0E21",
        "1.0E22",
        "1.1E-5",
        "9.0E-4",
        "0.001",
        "0.002",
        "0.1",
        "30.0",
        "9999999.0",
        "1.0E7",
        "1.2345678E7",
        "-0.30000000000000004",
        "0.0",
        "-0.0"
      })
  void shortestFormIsThatOfCurrentJdks(String text) {
    assertThat(Decimal.shortest(Double.parseDouble(text))).isEqualTo(text);
  }

  /** Powers of two have a rounding interval that is narrower below; source as above. */
  @ParameterizedTest
  @CsvSource({
    "-44, 5.684341886080802E-14",
    "-1022, 2.2250738585072014E-308",
    "-24, 5.960464477539063E-8",
    "89, 6.189700196426902E26",
    "1023, 8.98846567431158E307"
  })
  void powersOfTwoAreShort(int exponent, String text) {
    assertThat(Decimal.shortest(Math.scalb(1.0, exponent))).isEqualTo(text);
  }

  @Test
  void everyNumberReadsBackAndNoShorterOneDoes() {
    SplittableRandom random = new SplittableRandom(20261201);
    for (int i = 0; i < 20_000; i++) {
      double number = Double.longBitsToDouble(random.nextLong());
      if (!Double.isFinite(number)) {
        continue;
      }
      String text = Decimal.shortest(number);
      assertThat(Double.parseDouble(text)).as(text).isEqualTo(number);
      assertThat(text.length()).as(text).isLessThanOrEqualTo(Double.toString(number).length());
      int digits = new BigDecimal(text).stripTrailingZeros().precision();
      if (digits > 2) {
        String fewer = String.format(Locale.ROOT, "%." + (digits - 2) + "e", number);
        assertThat(Double.parseDouble(fewer)).as(text).isNotEqualTo(number);
      }
    }
  }

  @Test
  void numbersWithFewDigitsStayAsTheyWereWritten() {
    SplittableRandom random = new SplittableRandom(20261202);
    for (int i = 0; i < 20_000; i++) {
      long thousandths = random.nextLong(1, 10_000_000_000L);
      String written =
          thousandths / 1000 + "." + String.format(Locale.ROOT, "%03d", thousandths % 1000);
      String expected = written.replaceAll("0{1,2}$", "");
      assertThat(Decimal.shortest(Double.parseDouble(written))).isEqualTo(expected);
    }
  }

  @ParameterizedTest
  @ValueSource(doubles = {Double.NaN, Double.POSITIVE_INFINITY, Double.NEGATIVE_INFINITY})
  void numbersThatAreNoneAreRefused(double number) {
    assertThatIllegalArgumentException().isThrownBy(() -> Decimal.shortest(number));
  }
}
