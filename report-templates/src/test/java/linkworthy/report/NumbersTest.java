package linkworthy.report;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/** Expected texts are the definition of the formats: rounding done by hand. */
class NumbersTest {
  @ParameterizedTest
  @CsvSource({
    "31.236, 31.24",
    "0.004, 0.00",
    "-0.004, 0.00",
    "-1.5, -1.50",
    "NaN, n/a",
    "Infinity, inf",
    "-Infinity, -inf",
    "1234.5, 1234.50",
    "0, 0.00"
  })
  void decibelsHaveTwoDecimals(double value, String text) {
    assertThat(Numbers.db(value)).isEqualTo(text);
  }

  @ParameterizedTest
  @CsvSource({
    "30, 30.0",
    "0.03127, 0.0313",
    "1234.5, 1230",
    "9.996, 10.0",
    "0, 0",
    "NaN, n/a",
    "Infinity, inf",
    "0.999, 0.999",
    "1e-7, 0.000000100"
  })
  void measuresOverDecadesHaveThreeDigits(double value, String text) {
    assertThat(Numbers.significant(value)).isEqualTo(text);
  }

  @ParameterizedTest
  @CsvSource({"20, 20", "0.1, 0.1", "0.005, 0.005", "100000, 100000", "NaN, n/a", "-2.5, -2.5"})
  void typedValuesKeepTheirForm(double value, String text) {
    assertThat(Numbers.typed(value)).isEqualTo(text);
  }

  @ParameterizedTest
  @CsvSource({"0.4249, 0.42", "0.0421, 0.042", "0.0999, 0.10", "3.3, 3.30", "NaN, n/a"})
  void ratesFitNarrowColumns(double value, String text) {
    assertThat(Numbers.narrowBits(value)).isEqualTo(text);
  }

  @ParameterizedTest
  @CsvSource({
    "0, 0",
    "999, 999",
    "8640, 8640",
    "30408, 30\u202f408",
    "1234567, 1\u202f234\u202f567"
  })
  void countsAreGroupedFromFiveDigits(long value, String text) {
    assertThat(Numbers.count(value)).isEqualTo(text);
  }

  @ParameterizedTest
  @CsvSource({"0.0125, 1.3 %", "0, 0.0 %", "1, 100.0 %", "NaN, n/a"})
  void sharesAreShownAsPerCent(double value, String text) {
    assertThat(Numbers.percent(value)).isEqualTo(text);
  }
}
