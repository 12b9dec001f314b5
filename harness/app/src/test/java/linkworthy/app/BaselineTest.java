package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Map;
import java.util.regex.Pattern;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/**
 * The reference run in results/baselines is what this version computes. A change that moves numbers
 * updates it in the same commit, by the command in results/README.md.
 */
class BaselineTest {
  private static final Path ROOT = Path.of("../..");
  private static final Path BASELINE = ROOT.resolve("results/baselines/baseline");
  private static final int MOST_BYTES = 300_000;

  @TempDir private Path folder;

  @Test
  void thisVersionGivesTheSameNumbers() {
    String out = folder.resolve("again").toString();
    String study = ROOT.resolve("harness/studies/baseline.yaml").toString();
    assertThat(Program.run(folder, "assess", study, "--out", out, "--quiet"))
        .isEqualTo(new Outcome(0, "", ""));
    assertThat(Program.run(folder, "drift", BASELINE.toString(), out))
        .isEqualTo(
            new Outcome(
                0, "identical: trials.csv is the same bytes in both runs (56 cells)\n", ""));
  }

  @Test
  void itIsSmallAndNamesNoPlaceOfAMachine() throws IOException {
    assertThat(Files.size(BASELINE.resolve("trials.csv"))).isLessThan(MOST_BYTES);
    Pattern absolute = Pattern.compile("[\"' ](/|[A-Za-z]:\\\\|file:)");
    for (Map.Entry<String, String> file : Program.contents(BASELINE).entrySet()) {
      if (!file.getKey().equals("report.html")) {
        assertThat(file.getValue()).as(file.getKey()).doesNotContainPattern(absolute);
      }
    }
  }
}
