package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** A study whose replicates end early, from the command line. */
class EarlyStopTest {
  private static final String TEXT =
      SmallStudy.TEXT.replace(
          "replicates: 2", "replicates: {at-least: 2, at-most: 12, half-width-db: 1}");

  @TempDir private Path folder;
  private Path study = Path.of("");
  private Path results = Path.of("");

  @BeforeEach
  void write() {
    study = SmallStudy.write(folder, TEXT);
    results = folder.resolve("results");
  }

  private Outcome run(String... args) {
    return Program.run(folder, args);
  }

  private Outcome assess(String... further) {
    List<String> args = new ArrayList<>(List.of("assess", study + "", "--out", results + ""));
    args.addAll(List.of(further));
    return run(args.toArray(String[]::new));
  }

  @Test
  void theSummaryAndTheReportSayWhereTheWantedWidthWasNotReached() throws IOException {
    Outcome outcome = assess();
    assertThat(outcome.code()).isZero();
    // 4 conditions with noise and 5 options.
    assertThat(outcome.out())
        .containsPattern(
            "wanted noise half-width 1\\.0 dB not reached in \\d+ of 20 cells"
                + " \\(12 replicates at most\\)");
    assertThat(Files.readString(results.resolve("report.html")))
        .containsPattern("wanted noise half-width 1\\.0 dB not reached in \\d+ of 20 cells")
        .contains("2 to 12, until the noise half-width is 1.0 dB");
  }

  @Test
  void theEstimateIsWhatItTakesAtLeastAndAtMost() {
    // 2 pictures, each clean and 12 replicates of 4 conditions; 5 options.
    assertThat(assess("--dry-run").out())
        .contains("up to 98 (", "trials:   up to 490")
        .containsPattern("\ntime: +(at least )?about .+ on \\d+ threads\n")
        .containsPattern("\ndisk: +at least about [\\d.]+, at most about [\\d.]+ MiB\n");
  }

  @Test
  void theRecordIsRecheckedAndReplayed() throws IOException {
    assertThat(assess("--quiet")).isEqualTo(new Outcome(0, "", ""));
    List<String> lines = Files.readAllLines(results.resolve("trials.csv"));
    assertThat(lines).hasSizeBetween(92, 490);
    Outcome recheck = run("recheck", results + "", "--all", "--quiet");
    assertThat(recheck.out()).contains("the record stands").doesNotContain("MISMATCH");
    assertThat(recheck.code()).isZero();
    String last = lines.get(lines.size() - 1).split(",", -1)[0];
    assertThat(run("replay", results + "", "--trial", last).out())
        .contains("every figure equals the recorded one, bit for bit");
  }

  @Test
  void aRowThatIsMissingAtTheEndIsFound() throws IOException {
    assertThat(assess("--quiet").code()).isZero();
    Path trials = results.resolve("trials.csv");
    List<String> lines = Files.readAllLines(trials);
    Files.writeString(trials, String.join("\n", lines.subList(0, lines.size() - 1)) + "\n");
    assertThat(run("recheck", results + "", "--quiet").out())
        .contains("run.json says complete", "rows; accepted: ");
  }
}
