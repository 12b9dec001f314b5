package linkworthy.cluster;

import java.io.IOException;
import java.io.OutputStream;
import java.io.UncheckedIOException;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.CancellationException;
import linkworthy.results.PartFile;
import linkworthy.trial.Course;
import linkworthy.trial.LocalRunner;
import linkworthy.trial.Mishap;
import linkworthy.trial.Plan;
import linkworthy.trial.Stretch;
import org.apache.spark.TaskContext;
import org.apache.spark.api.java.function.VoidFunction;
import org.apache.spark.broadcast.Broadcast;
import org.apache.spark.util.SerializableConfiguration;

/**
 * Runs a stretch on an executor, with as many threads as Spark gives a task, and writes its part.
 */
final class StretchTask implements VoidFunction<Stretch> {
  private static final long serialVersionUID = 1L;

  private final String run;
  private final Broadcast<Freight> freight;
  private final String parts;
  private final Broadcast<SerializableConfiguration> hadoop;

  /**
   * @param run checksum of the freight
   * @param parts full address of the folder above that of the parts
   */
  StretchTask(
      String run,
      Broadcast<Freight> freight,
      String parts,
      Broadcast<SerializableConfiguration> hadoop) {
    this.run = run;
    this.freight = freight;
    this.parts = parts;
    this.hadoop = hadoop;
  }

  /** Does nothing where the part is there already, as after a task whose word was lost. */
  @Override
  public void call(Stretch stretch) throws IOException {
    PartsFolder folder = PartsFolder.at(parts, run, hadoop.value().value());
    folder.requireShared();
    if (folder.isWhole(stretch)) {
      return;
    }
    Plan plan = Workplace.plan(run, freight.value());
    folder.write(stretch, out -> write(plan, stretch, out));
  }

  private void write(Plan plan, Stretch stretch, OutputStream out) throws IOException {
    PartFile.Writer writer = new PartFile.Writer(out, plan, run, stretch);
    List<Mishap> mishaps = new ArrayList<>();
    Course course = new Course(plan, stretch);
    try {
      int unused =
          new LocalRunner(plan, TaskContext.get().cpus(), mishaps::add)
              .run(
                  course,
                  (unit, trials, timings) -> {
                    try {
                      writer.append(unit, trials, timings, mishaps);
                    } catch (IOException e) {
                      throw new UncheckedIOException(e);
                    }
                    mishaps.clear();
                  });
    } catch (UncheckedIOException e) {
      throw e.getCause() == null ? new IOException(e) : e.getCause();
    }
    if (!course.isAtEnd()) {
      throw new CancellationException("told to stop");
    }
    writer.end();
  }
}
