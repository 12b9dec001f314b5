package linkworthy.cluster;

import java.util.List;
import java.util.Locale;
import java.util.function.Consumer;
import org.apache.spark.SparkJobInfo;
import org.apache.spark.SparkStageInfo;
import org.apache.spark.api.java.JavaSparkContext;
import org.apache.spark.api.java.JavaSparkStatusTracker;

/** Says every ten seconds how many tasks are done, and that no worker has taken one. */
final class TaskProgress {
  private static final long INTERVAL_NS = 10_000_000_000L;

  private final JavaSparkContext spark;
  private final int tasks;
  private final boolean quiet;
  private final Consumer<String> lines;
  private final long start = System.nanoTime();
  private long last = start;

  TaskProgress(JavaSparkContext spark, int tasks, boolean quiet, Consumer<String> lines) {
    this.spark = spark;
    this.tasks = tasks;
    this.quiet = quiet;
    this.lines = lines;
  }

  /** Looks at these jobs; says something if it is time to. */
  void look(List<Integer> jobs) {
    long now = System.nanoTime();
    if (quiet || now - last < INTERVAL_NS) {
      return;
    }
    last = now;
    int done = 0;
    int active = 0;
    JavaSparkStatusTracker tracker = spark.statusTracker();
    for (int job : jobs) {
      SparkJobInfo info = tracker.getJobInfo(job);
      for (int stage : info == null ? new int[0] : info.stageIds()) {
        SparkStageInfo stageInfo = tracker.getStageInfo(stage);
        if (stageInfo != null) {
          done += stageInfo.numCompletedTasks();
          active += stageInfo.numActiveTasks();
        }
      }
    }
    lines.accept(
        done == 0 && active == 0
            ? "waiting: no worker has taken a task yet"
            : line(done, (now - start) / 1e9));
  }

  private String line(int done, double seconds) {
    String left =
        done == 0
            ? ""
            : String.format(Locale.ROOT, ", about %.0f s left", seconds / done * (tasks - done));
    return String.format(
        Locale.ROOT, "%d of %d tasks, %d %%%s", done, tasks, 100L * done / tasks, left);
  }
}
