package linkworthy.results;

import static org.assertj.core.api.Assertions.assertThat;

import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

/** Text that spreadsheets would take for a formula. */
class CsvTableTest {
  @ParameterizedTest
  @ValueSource(
      strings = {
        "=1+1",
        "+4",
        "-3 dB",
        "@SUM(A1)",
        "\tx",
        "\rx",
        "'=1",
        "''=1",
        "'''-",
        "=",
        "-",
        "=HYPERLINK(\"https://example.org\")"
      })
  void aFormulaGetsAnApostropheAndReadsBack(String text) {
    assertThat(CsvTable.harmless(text)).isEqualTo("'" + text);
    assertThat(CsvTable.original(CsvTable.harmless(text))).isEqualTo(text);
  }

  @ParameterizedTest
  @ValueSource(strings = {"", "dct blocks8 K16 step8", "'", "'quoted'", "a=1", "8.0", "''", " =1"})
  void otherTextIsLeftAlone(String text) {
    assertThat(CsvTable.harmless(text)).isEqualTo(text);
    assertThat(CsvTable.original(text)).isEqualTo(text);
  }
}
