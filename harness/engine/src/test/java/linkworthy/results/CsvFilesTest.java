package linkworthy.results;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.entry;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.SplittableRandom;
import linkworthy.input.BadInput;
import linkworthy.quality.QualityMeasure;
import linkworthy.quality.QualityMeasures;
import linkworthy.trial.NodeShare;
import linkworthy.trial.Prediction;
import linkworthy.trial.Timing;
import linkworthy.trial.Trial;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class CsvFilesTest {
  @TempDir Path folder;

  private List<Trial> read(String text) throws IOException {
    Path file = folder.resolve("trials.csv");
    Files.writeString(file, text);
    List<Trial> trials = new ArrayList<>();
    assertThat(TrialsCsv.read(file, trials::add)).isEqualTo(trials.size());
    return trials;
  }

  @ParameterizedTest
  @ValueSource(strings = {"en-US", "de-DE", "tr-TR"})
  void tablesAreTheSameInEveryLocale(String tag) throws IOException {
    Locale before = Locale.getDefault();
    try {
      Locale.setDefault(Locale.forLanguageTag(tag));
      assertThat(TrialsCsv.text(List.of(Samples.CLEAN, Samples.NOISY))).isEqualTo(Samples.TRIALS);
      assertThat(read(Samples.TRIALS)).containsExactly(Samples.CLEAN, Samples.NOISY);
      assertThat(CellsCsv.text(Samples.CELLS)).isEqualTo(Samples.CELLS_TEXT);
    } finally {
      Locale.setDefault(before);
    }
  }

  @Test
  void cellsReadBack() throws IOException {
    Path file = folder.resolve("cells.csv");
    Files.writeString(file, Samples.CELLS_TEXT);
    assertThat(CellsCsv.read(file)).isEqualTo(Samples.CELLS);
  }

  @Test
  void timingsHaveTheirColumns() throws IOException {
    Path file = folder.resolve("timings.csv");
    String text =
        """
        picture,impairment,severity,replicate,codec,encode_ms,decode_ms
        cat,gaussian,20.0,0,mean rows step16,1.5,0.25
        """;
    assertThat(TimingsCsv.TABLE.header() + TimingsCsv.TABLE.lines(List.of(Samples.TIMING)))
        .isEqualTo(text);
    Files.writeString(file, text);
    List<Timing> timings = new ArrayList<>();
    TimingsCsv.read(file, timings::add);
    assertThat(timings).containsExactly(Samples.TIMING);
  }

  @Test
  void anyTextAndNumberReadsBack() throws IOException {
    SplittableRandom random = new SplittableRandom(20261203);
    List<Trial> trials = new ArrayList<>();
    for (int i = 0; i < 2000; i++) {
      trials.add(
          new Trial(
              Long.toHexString(random.nextLong()),
              text(random),
              text(random),
              text(random),
              text(random),
              number(random),
              number(random),
              number(random),
              number(random),
              text(random),
              text(random),
              text(random),
              random.nextInt(-1, 100),
              text(random),
              random.nextInt(1000),
              number(random),
              number(random),
              number(random),
              random.nextLong(1L << 50),
              random.nextLong(1L << 50),
              number(random),
              random.nextInt(1 << 30),
              random.nextInt(1 << 30),
              random.nextBoolean(),
              text(random),
              further(random)));
    }
    assertThat(read(TrialsCsv.text(trials))).isEqualTo(trials);
  }

  private static Map<String, Double> further(SplittableRandom random) {
    Map<String, Double> further = new LinkedHashMap<>();
    further.put("spread_db", number(random));
    further.put("blur", random.nextBoolean() ? Double.NaN : number(random));
    return further;
  }

  private static String text(SplittableRandom random) {
    StringBuilder text = new StringBuilder();
    String letters = "ab ,\"\n\r;#'\\=+-@\u00e9\u2028\ud83d\ude00";
    for (int i = random.nextInt(8); i > 0; i--) {
      int at = random.nextInt(letters.codePointCount(0, letters.length()));
      text.appendCodePoint(letters.codePointAt(letters.offsetByCodePoints(0, at)));
    }
    return text.toString();
  }

  private static double number(SplittableRandom random) {
    double number = Double.longBitsToDouble(random.nextLong());
    return Double.isNaN(number) ? Double.POSITIVE_INFINITY : number;
  }

  @Test
  void furtherMeasuresStandBehindTheFixedColumns() throws IOException {
    String trials =
        Samples.TRIALS
            .replace(",failure\n", ",failure,spread_db,blur\n")
            .replace(",false,\n", ",false,,inf,0.25\n")
            .replace(",decode-exit\n", ",decode-exit,-3.0,\n");
    List<Trial> read = read(trials);
    assertThat(read.get(0).further())
        .containsExactly(entry("spread_db", Double.POSITIVE_INFINITY), entry("blur", 0.25));
    assertThat(read.get(1).further())
        .containsExactly(entry("spread_db", -3.0), entry("blur", Double.NaN));
    assertThat(TrialsCsv.text(read)).isEqualTo(trials);

    String cells =
        Samples.CELLS_TEXT
            .replace(",failures\n", ",failures,spread_db_mean,blur_mean\n")
            .replace(",untested,0\n", ",untested,0,inf,0.25\n")
            .replace(",below,2\n", ",below,2,-3.0,\n");
    Path file = folder.resolve("cells.csv");
    Files.writeString(file, cells);
    assertThat(CellsCsv.read(file).get(1).furtherMeans())
        .containsExactly(entry("spread_db", -3.0), entry("blur", Double.NaN));
    assertThat(CellsCsv.text(CellsCsv.read(file))).isEqualTo(cells);
  }

  @Test
  void predictionsReadBack() throws IOException {
    List<Prediction> predictions =
        List.of(
            new Prediction("gaussian", "samples", "snr-db", 20, "dct, K16", 31.25, ""),
            new Prediction(
                "loss", "packets", "loss-rate", 0.1, "pca", Double.NaN, "its basis is sent"));
    Path file = folder.resolve(PredictionsCsv.FILE);
    Files.writeString(file, PredictionsCsv.text(predictions));
    assertThat(PredictionsCsv.read(file)).isEqualTo(predictions);
    assertThat(Files.readString(file))
        .startsWith(String.join(",", PredictionsCsv.columns()) + "\n")
        .contains("gaussian,samples,snr-db,20.0,\"dct, K16\",31.25,\n");
  }

  @Test
  void aCellStandsOnce() throws IOException {
    String text = Samples.CELLS_TEXT;
    String last = text.substring(text.lastIndexOf('\n', text.length() - 2) + 1);
    Path file = folder.resolve("cells.csv");
    Files.writeString(file, text + last);
    assertThatThrownBy(() -> CellsCsv.read(file))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("has two rows of '" + Samples.CELLS.get(1).codec() + "' under ")
        .hasMessageEndingWith("; accepted: one row a cell");
  }

  @Test
  void nodesReadBack() throws IOException {
    List<NodeShare> shares =
        List.of(
            new NodeShare("pca, tiles", 0, 0, 0.09375, 1e6, 0, 0, 0, 115.5),
            new NodeShare("pca, tiles", 1, 716_000.2, 23.2, 0, 31_044, 5788.1, 40, 9.25));
    Path file = folder.resolve(NodesCsv.FILE);
    Files.writeString(file, NodesCsv.text(shares));
    assertThat(NodesCsv.read(file)).isEqualTo(shares);
    assertThat(Files.readString(file)).startsWith(String.join(",", NodesCsv.columns()) + "\n");
  }

  @Test
  void furtherMeasuresHaveColumnsOfTheirOwn() {
    assertThat(QualityMeasures.all())
        .filteredOn(measure -> !List.of("psnr", "ssim").contains(measure.id()))
        .extracting(QualityMeasure::column)
        .isNotEmpty()
        .noneMatch(column -> TrialsCsv.columns().contains(column))
        .noneMatch(column -> CellsCsv.columns().contains(column + "_mean"));
  }

  @ParameterizedTest
  @ValueSource(
      strings = {"failure,failure", "failure,Blur", "failure,", "failure,blur,blur", "blur"})
  void aHeaderThatIsNoneIsRefused(String end) {
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(
            () ->
                read(
                    Samples.TRIALS.lines().findFirst().orElseThrow().replace("failure", end)
                        + "\n"))
        .withMessageContaining("line 1: the columns are")
        .withMessageEndingWith("failure, then one for each further measure, each once");
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "00ff,cat | 00ff,cat,cat | line 2: the row has 26 fields; accepted: 25",
        "psnr_db | psnr | line 1: the columns are",
        "inf | infinity | line 2: psnr_db is 'infinity'; accepted: a number",
        "0.1, | 0x1p3, | line 3: severity is '0x1p3'",
        "1234.5 | 1234,5 | line 3: the row has 26 fields",
        "4096,8192,2.5 | -1,8192,2.5 | line 2: payload_bits is '-1'; accepted: a whole number from 0",
        "true | TRUE | line 3: outage is 'TRUE'; accepted: false, true",
        "\"mine | \"m\"ine | is no table"
      })
  void aRowThatIsNoneIsNamedWithItsPlace(String right, String wrong, String complaint) {
    String text = Samples.TRIALS.replace(right, wrong);
    assertThat(text).isNotEqualTo(Samples.TRIALS);
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> read(text))
        .withMessageContaining("trials.csv")
        .withMessageContaining(complaint)
        .satisfies(e -> assertThat(String.valueOf(e.getMessage()).lines()).hasSize(1));
  }

  @Test
  void aFileCutOffAnywhereIsNotTakenForAWholeOne() throws IOException {
    byte[] whole = Samples.TRIALS.getBytes(StandardCharsets.UTF_8);
    Path file = folder.resolve("cut.csv");
    for (int length = 0; length < whole.length; length++) {
      Files.write(file, Arrays.copyOf(whole, length));
      if (length > 0 && whole[length - 1] == '\n') {
        assertThat(TrialsCsv.read(file, trial -> {})).isLessThan(2);
      } else {
        assertThatExceptionOfType(BadInput.class)
            .isThrownBy(() -> TrialsCsv.read(file, trial -> {}));
      }
    }
  }

  @Test
  void aMissingOrForeignFileIsRefused() throws IOException {
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> TrialsCsv.read(folder.resolve("none.csv"), trial -> {}))
        .withMessageEndingWith("none.csv does not exist");
    Path latin = folder.resolve("latin.csv");
    Files.write(
        latin, Samples.TRIALS.replace("cat", "\u00e9").getBytes(StandardCharsets.ISO_8859_1));
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> TrialsCsv.read(latin, trial -> {}))
        .withMessageContaining("not UTF-8");
  }
}
