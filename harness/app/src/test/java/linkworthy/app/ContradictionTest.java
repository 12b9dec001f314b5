package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.function.UnaryOperator;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** A record that contradicts itself decides nothing. */
class ContradictionTest {
  private static final int MEAN = 13;

  @TempDir private static Path shared;
  private static Path whole = Path.of("");
  @TempDir private Path folder;

  @BeforeAll
  static void run() {
    whole = shared.resolve("whole");
    assertThat(
            Program.run(
                shared, "assess", SmallStudy.in(shared) + "", "--quiet", "--out", whole + ""))
        .isEqualTo(new Outcome(0, "", ""));
  }

  /** A copy in which the lines of one file went through an edit. */
  private Path altered(String file, UnaryOperator<List<String>> edit) throws IOException {
    Path copy = Files.createDirectories(folder.resolve("runs").resolve("copy"));
    for (Map.Entry<String, String> each : Program.contents(whole).entrySet()) {
      if (!each.getKey().isEmpty()) {
        Files.writeString(
            copy.resolve(each.getKey()), each.getValue(), StandardCharsets.ISO_8859_1);
      }
    }
    List<String> lines = edit.apply(new ArrayList<>(Files.readAllLines(copy.resolve(file))));
    Files.writeString(copy.resolve(file), String.join("\n", lines) + "\n");
    return copy;
  }

  /** By all that conclude anything from a record, in one line. */
  private void assertRefused(Path copy, String... parts) throws IOException {
    Path needs =
        Files.writeString(folder.resolve("needs.yaml"), "needs: [{measure: mse, at-most: 1}]");
    String old = whole.toString();
    for (List<String> command :
        List.of(
            List.of("shortlist", copy + "", "--need", needs + ""),
            List.of("drift", old, copy + ""),
            List.of("drift", copy + "", old),
            List.of("drift", "--over", copy.getParent() + ""),
            List.of("report", copy + "", "--out", folder.resolve("page.html") + ""))) {
      Outcome outcome = Program.run(folder, command.toArray(new String[0]));
      assertThat(outcome.errors())
          .describedAs(String.join(" ", command))
          .singleElement()
          .asString()
          .contains(parts)
          .contains("accepted: ");
      assertThat(outcome.code()).isEqualTo(2);
    }
    assertThat(folder.resolve("page.html")).doesNotExist();
  }

  @Test
  void aDoubledRow() throws IOException {
    Path copy =
        altered(
            "trials.csv",
            lines -> {
              lines.add(4, lines.get(3));
              return lines;
            });
    assertRefused(copy, "trials.csv, line 5: ", "each replicate once");
  }

  @Test
  void aRowTooFew() throws IOException {
    Path copy = altered("trials.csv", lines -> lines.subList(0, lines.size() - 1));
    assertRefused(copy, "trials.csv has 89 rows", "90, as run.json says");
  }

  @Test
  void anAlteredCell() throws IOException {
    Path copy =
        altered(
            "cells.csv",
            lines -> {
              List<String> fields = new ArrayList<>(List.of(lines.get(7).split(",", -1)));
              double mean = Double.parseDouble(fields.get(MEAN));
              fields.set(MEAN, Double.toString(mean + 0.01));
              lines.set(7, String.join(",", fields));
              return lines;
            });
    assertRefused(copy, "cells.csv, line 8: psnr_mean_db is '", "which follows from trials.csv");
  }

  @Test
  void aCellTooFew() throws IOException {
    Path copy = altered("cells.csv", lines -> lines.subList(0, lines.size() - 1));
    assertRefused(copy, "cells.csv, line 26 is ''", "which follows from trials.csv");
  }

  /** Another machine's library may round the last digit of a p value differently. */
  @Test
  void theLastDigitOfANumberIsNoContradiction() throws IOException {
    Path copy =
        altered(
            "cells.csv",
            lines -> {
              lines.replaceAll(line -> line.replaceFirst("(\\.\\d{13})\\d\\b", "$1"));
              return lines;
            });
    assertThat(Files.readString(copy.resolve("cells.csv")))
        .isNotEqualTo(Files.readString(whole.resolve("cells.csv")));
    assertThat(Program.run(folder, "drift", whole + "", copy + "").code()).isZero();
  }
}
