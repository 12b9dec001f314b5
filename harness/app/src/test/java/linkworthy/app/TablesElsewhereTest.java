package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.File;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import linkworthy.results.ResultsFolder;
import linkworthy.statistics.Cell;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** The tables of a run whose labels look like formulas, in this program and in others. */
class TablesElsewhereTest {
  private static final String PYTHON = "/usr/bin/python3";

  private static final String STUDY =
      """
      name: hostile
      pictures: {select: [cat], longest-side: 32}
      impairments:
        - {noise: gaussian, snr-db: -3, label: "@SUM(A1)"}
      codecs:
        - {transform: dct, keep: 4, label: "=1+1"}
        - {transform: dct, keep: 8, label: "'=2"}
        - {transform: mean, label: "-3 dB"}
        - {transform: mean, step: 4, label: "plain, with a comma"}
      replicates: 2
      """;

  /** Reads both tables with pandas, or where it is missing with Python's own reader. */
  private static final String SCRIPT =
      """
      import sys
      try:
          import pandas
          read = lambda file: pandas.read_csv(file).to_dict("records")
      except ImportError:
          import csv
          read = lambda file: list(csv.DictReader(open(file, newline="")))
      trials = read(sys.argv[1] + "/trials.csv")
      cells = read(sys.argv[1] + "/cells.csv")
      print(len(trials), len(cells), sum(float(row["mse"]) >= 0 for row in trials))
      print(sorted({row["codec"] for row in cells}))
      print(sorted({float(row["severity"]) for row in trials if row["impairment"] != "none"}))
      """;

  @TempDir Path folder;

  @Test
  void textIsNeverAFormulaAndNumbersStayNumbers() throws IOException {
    Path out = folder.resolve("out");
    Path study = SmallStudy.write(folder, STUDY);
    assertThat(
            Program.run(folder, "assess", study.toString(), "--quiet", "--out", out.toString())
                .code())
        .isZero();
    String trials = Files.readString(out.resolve("trials.csv"));
    assertThat(trials)
        .contains(
            ",'@SUM(A1),", ",-3.0,", ",'=1+1,", ",''=2,", ",'-3 dB,", ",\"plain, with a comma\",");
    for (String line : trials.lines().toList()) {
      assertThat(line).doesNotContainPattern("(^|,)\"?[=+@]").doesNotContainPattern("(^|,)-[^0-9]");
    }
    assertThat(ResultsFolder.open(out).cells())
        .extracting(Cell::codec)
        .contains("=1+1", "'=2", "-3 dB", "plain, with a comma");
    assertThat(Program.run(folder, "recheck", out.toString(), "--all").code()).isZero();
    if (new File(PYTHON).canExecute()) {
      Outcome read = Program.execute(List.of(PYTHON, "-c", SCRIPT, out.toString()));
      // clean once and one severity twice, 4 codecs; a cell for each codec, clean and noisy
      assertThat(read)
          .isEqualTo(
              new Outcome(
                  0,
                  """
                  12 8 12
                  [\"''=2\", \"'-3 dB\", \"'=1+1\", 'plain, with a comma']
                  [-3.0]
                  """,
                  ""));
    }
  }
}
