package linkworthy.results;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import linkworthy.input.BadInput;
import linkworthy.input.YamlNode;
import linkworthy.statistics.Cells;
import linkworthy.study.StudyReader;
import linkworthy.trial.Course;
import linkworthy.trial.LocalRunner;
import linkworthy.trial.Plan;
import linkworthy.trial.Trial;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** A record whose replicates end early is taken up anywhere and completed to the same bytes. */
class EarlyStoppedRecordTest {
  private static final int CODECS = 2;

  @TempDir private Path temporary;
  private Path out = Path.of("");
  private final Plan plan = plan();
  private String trials = "";
  private String timings = "";
  private String cells = "";

  private static Plan plan() {
    return Plan.of(
        StudyReader.read(
            YamlNode.parse(
                "study.yaml",
                """
                name: early
                pictures: {select: [canyon, cat], longest-side: 16}
                impairments: [{noise: gaussian, snr-db: [20, 10]}]
                codecs: [{transform: dct, keep: 3}, {transform: mean, step: 16}]
                replicates: {at-least: 2, at-most: 13, half-width-db: 1}
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
      finish(writer, new Cells(), new Course(plan));
    }
    trials = Files.readString(out.resolve("trials.csv"));
    timings = Files.readString(out.resolve("timings.csv"));
    cells = Files.readString(out.resolve("cells.csv"));
  }

  private void finish(ResultsWriter writer, Cells tally, Course course) {
    int done =
        new LocalRunner(plan, 2)
            .run(
                course,
                (unit, rows, times) -> {
                  writer.append(rows, times);
                  rows.forEach(tally::add);
                });
    long all = (long) (writer.unitsAtStart() + done) * CODECS;
    writer.finish(tally.toList(), writer.run().complete(all, Samples.CLOCK));
  }

  private void assertCompleted(int kept) throws IOException {
    Cells tally = new Cells();
    Course course = new Course(plan);
    try (ResultsWriter writer =
        ResultsFolder.resume(
            out,
            plan,
            run(),
            (Trial trial) -> {
              tally.add(trial);
              course.add(trial);
            })) {
      assertThat(writer.unitsAtStart()).isEqualTo(kept);
      assertThat(writer.run().trialsPlanned()).isEqualTo(plan.trials());
      finish(writer, tally, course);
    }
    assertThat(Files.readString(out.resolve("trials.csv"))).isEqualTo(trials);
    assertThat(Files.readString(out.resolve("cells.csv"))).isEqualTo(cells);
    assertThat(Files.readString(out.resolve("timings.csv")).lines().count())
        .isEqualTo(timings.lines().count());
    assertThat(ResultsFolder.open(out).isWhole()).isTrue();
  }

  private static int wholeUnits(String text) {
    return (int) Math.max(0, (text.chars().filter(c -> c == '\n').count() - 1) / CODECS);
  }

  @Test
  void aCompleteRecordHasAsManyTrialsAsItCameTo() {
    RunRecord ended = ResultsFolder.open(out).run();
    assertThat(ended.complete()).isTrue();
    assertThat(ended.trialsDone())
        .isEqualTo(trials.lines().count() - 1)
        .isEqualTo(ended.trialsPlanned())
        .isLessThan(plan.trials());
  }

  /** Every 83rd length, so that every replicate and every kind of line is cut. */
  @Test
  void howeverLittleIsLeftOfEitherTable() throws IOException {
    for (int bytes = 0; bytes < trials.length(); bytes += 83) {
      Files.writeString(out.resolve("trials.csv"), trials.substring(0, bytes));
      assertCompleted(wholeUnits(trials.substring(0, bytes)));
    }
    for (int bytes = 0; bytes < timings.length(); bytes += 83) {
      Files.writeString(out.resolve("timings.csv"), timings.substring(0, bytes));
      assertCompleted(wholeUnits(timings.substring(0, bytes)));
    }
  }

  @Test
  void timesThatEndWhereTheTrialsDoNotAreRefused() throws IOException {
    List<String> lines = timings.lines().toList();
    int second = 0;
    while (!lines.get(second).startsWith("canyon,gaussian,10.0,0,")) {
      second++;
    }
    StringBuilder shorter = new StringBuilder();
    for (int i = 0; i < lines.size(); i++) {
      boolean left = i >= second - CODECS && i < second;
      shorter.append(left ? "" : lines.get(i) + "\n");
    }
    Files.writeString(out.resolve("timings.csv"), shorter.toString());
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> ResultsFolder.resume(out, plan, run(), trial -> {}))
        .withMessageContaining("timings.csv, line " + (second - CODECS + 1))
        .withMessageContaining("times of the same trials");
  }
}
