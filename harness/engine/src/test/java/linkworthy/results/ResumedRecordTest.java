package linkworthy.results;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.channels.FileChannel;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardOpenOption;
import linkworthy.input.YamlNode;
import linkworthy.statistics.Cells;
import linkworthy.study.StudyReader;
import linkworthy.trial.LocalRunner;
import linkworthy.trial.Plan;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** A record that was cut off anywhere is taken up and completed to the same bytes. */
class ResumedRecordTest {
  private static final int CODECS = 2;
  private static final int UNITS = 4;

  @TempDir private Path temporary;
  private Path out = Path.of("");
  private Plan plan = plan();
  private String trials = "";
  private String timings = "";
  private String cells = "";

  private static Plan plan() {
    return Plan.of(
        StudyReader.read(
            YamlNode.parse(
                "study.yaml",
                """
                name: small
                pictures: {select: [cat], longest-side: 16}
                impairments: [{noise: gaussian, snr-db: 10}]
                codecs: [{transform: dct, keep: 3}, {transform: mean, step: 16}]
                replicates: 3
                seed: 7
                """),
            Path.of("")));
  }

  private RunRecord run() {
    return Samples.run(plan.study(), plan.trials());
  }

  @BeforeEach
  void runUndisturbed() throws IOException {
    out = temporary.resolve("out");
    try (ResultsWriter writer = ResultsFolder.create(out, false)) {
      writer.begin(plan.study(), run());
      finish(writer, new Cells());
    }
    trials = Files.readString(out.resolve("trials.csv"));
    timings = Files.readString(out.resolve("timings.csv"));
    cells = Files.readString(out.resolve("cells.csv"));
    assertThat(trials).hasLineCount(1 + UNITS * CODECS);
  }

  private void finish(ResultsWriter writer, Cells tally) {
    int done =
        new LocalRunner(plan, 1)
            .run(
                writer.unitsAtStart(),
                (unit, rows, times) -> {
                  writer.append(rows, times);
                  rows.forEach(tally::add);
                });
    assertThat(writer.unitsAtStart() + done).isEqualTo(UNITS);
    writer.finish(tally.toList(), writer.run().end(plan.trials(), Samples.CLOCK));
  }

  private static void cut(Path file, long bytes) throws IOException {
    try (FileChannel channel = FileChannel.open(file, StandardOpenOption.WRITE)) {
      assertThat(channel.truncate(bytes).size()).isEqualTo(bytes);
    }
  }

  /** The number of whole units in a text of the table. */
  private static int wholeUnits(String text) {
    long lines = text.chars().filter(c -> c == '\n').count();
    return (int) Math.max(0, (lines - 1) / CODECS);
  }

  private void assertCompleted(int kept) throws IOException {
    Cells tally = new Cells();
    try (ResultsWriter writer = ResultsFolder.resume(out, plan, run(), tally::add)) {
      assertThat(writer.unitsAtStart()).isEqualTo(kept);
      assertThat(writer.run().trialsDone()).isEqualTo((long) kept * CODECS);
      finish(writer, tally);
    }
    assertThat(out.resolve("trials.csv")).hasContent(trials);
    assertThat(out.resolve("cells.csv")).hasContent(cells);
    assertThat(Files.readString(out.resolve("timings.csv"))).hasLineCount(1 + UNITS * CODECS);
    assertThat(ResultsFolder.open(out).isWhole()).isTrue();
  }

  @Test
  void whereverItsTrialsAreCut() throws IOException {
    int lastTwoRows = trials.length();
    for (int row = 0; row < 2; row++) {
      lastTwoRows = trials.lastIndexOf('\n', lastTwoRows - 2) + 1;
    }
    for (int bytes = trials.length(); bytes >= lastTwoRows; bytes--) {
      cut(out.resolve("trials.csv"), bytes);
      assertCompleted(wholeUnits(trials.substring(0, bytes)));
    }
  }

  /** Every 61st length down to none, so that every part of every kind of line is met. */
  @Test
  void howeverLittleIsLeftOfEitherTable() throws IOException {
    for (int bytes = 0; bytes < trials.length(); bytes += 61) {
      cut(out.resolve("trials.csv"), bytes);
      assertCompleted(wholeUnits(trials.substring(0, bytes)));
    }
    for (int bytes = 0; bytes < timings.length(); bytes += 61) {
      Files.writeString(out.resolve("timings.csv"), timings.substring(0, bytes));
      assertCompleted(wholeUnits(timings.substring(0, bytes)));
    }
  }

  @Test
  void aMissingTableIsBegunAgain() throws IOException {
    Files.delete(out.resolve("trials.csv"));
    Files.delete(out.resolve("timings.csv"));
    assertCompleted(0);
  }
}
