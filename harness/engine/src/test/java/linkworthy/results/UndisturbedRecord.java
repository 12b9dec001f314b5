package linkworthy.results;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import linkworthy.input.YamlNode;
import linkworthy.statistics.Cells;
import linkworthy.study.StudyReader;
import linkworthy.trial.Course;
import linkworthy.trial.LocalRunner;
import linkworthy.trial.Plan;
import linkworthy.trial.Trial;

/** A record made in one go, to which one that was stopped and taken up again must be equal. */
final class UndisturbedRecord {
  private final Path out;
  private final Plan plan;
  private final int codecs;
  private final String trials;
  private final String timings;
  private final String cells;

  /** Runs a study and leaves its record in a folder. */
  UndisturbedRecord(Path out, String study) throws IOException {
    this.out = out;
    this.plan = Plan.of(StudyReader.read(YamlNode.parse("study.yaml", study), Path.of("")));
    this.codecs = plan.study().codecs().size();
    try (ResultsWriter writer = ResultsFolder.create(out, false)) {
      writer.begin(plan.study(), run());
      finish(writer, new Cells(), new Course(plan));
    }
    this.trials = Files.readString(out.resolve("trials.csv"));
    this.timings = Files.readString(out.resolve("timings.csv"));
    this.cells = Files.readString(out.resolve("cells.csv"));
  }

  private RunRecord run() {
    return Samples.run(plan.study(), plan.trials());
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
    long all = (long) (writer.unitsAtStart() + done) * codecs;
    writer.finish(tally.toList(), writer.run().complete(all, Samples.CLOCK));
  }

  Plan plan() {
    return plan;
  }

  String trials() {
    return trials;
  }

  String timings() {
    return timings;
  }

  /** Opens what is in the folder to go on with it; each trial that is kept goes to the course. */
  ResultsWriter resume(Cells tally, Course course) {
    return ResultsFolder.resume(
        out,
        plan,
        run(),
        (Trial trial) -> {
          tally.add(trial);
          course.add(trial);
        });
  }

  /** Completes what is in the folder, of which so many units can be kept. */
  private void assertCompleted(int kept) throws IOException {
    Cells tally = new Cells();
    Course course = new Course(plan);
    try (ResultsWriter writer = resume(tally, course)) {
      assertThat(writer.unitsAtStart()).isEqualTo(kept);
      assertThat(writer.run().trialsDone()).isEqualTo((long) kept * codecs);
      assertThat(writer.run().trialsPlanned()).isEqualTo(plan.trials());
      finish(writer, tally, course);
    }
    assertThat(Files.readString(out.resolve("trials.csv"))).isEqualTo(trials);
    assertThat(Files.readString(out.resolve("cells.csv"))).isEqualTo(cells);
    assertThat(Files.readString(out.resolve("timings.csv")).lines().count())
        .isEqualTo(timings.lines().count());
    assertThat(ResultsFolder.open(out).isWhole()).isTrue();
  }

  /** Leaves so much of the trials and completes them. */
  void assertCompletedFromTrials(int bytes) throws IOException {
    assertCompletedFrom("trials.csv", trials.substring(0, bytes));
  }

  /** Leaves so much of the times and completes them. */
  void assertCompletedFromTimings(int bytes) throws IOException {
    assertCompletedFrom("timings.csv", timings.substring(0, bytes));
  }

  private void assertCompletedFrom(String table, String left) throws IOException {
    Files.writeString(out.resolve(table), left);
    long lines = left.chars().filter(c -> c == '\n').count();
    assertCompleted((int) Math.max(0, (lines - 1) / codecs));
  }

  /** Leaves neither table. */
  void assertCompletedFromNothing() throws IOException {
    Files.delete(out.resolve("trials.csv"));
    Files.delete(out.resolve("timings.csv"));
    assertCompleted(0);
  }
}
