package linkworthy.cluster;

import java.util.List;
import java.util.concurrent.ExecutionException;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.TimeoutException;
import java.util.function.BooleanSupplier;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;
import linkworthy.trial.Stretch;
import org.apache.spark.api.java.JavaFutureAction;
import org.apache.spark.api.java.JavaSparkContext;
import org.apache.spark.broadcast.Broadcast;
import org.apache.spark.util.SerializableConfiguration;

/** Tasks at work on the executors. */
final class RunningJob implements AutoCloseable {
  private final Broadcast<Freight> freight;
  private final Broadcast<SerializableConfiguration> hadoop;
  private final JavaFutureAction<Void> job;
  private final TaskProgress progress;

  /** Starts a task for each of these stretches. */
  RunningJob(
      JavaSparkContext spark,
      Freight freight,
      PartsFolder parts,
      List<Stretch> stretches,
      TaskProgress progress) {
    this.freight = spark.broadcast(freight);
    this.hadoop = spark.broadcast(new SerializableConfiguration(spark.hadoopConfiguration()));
    this.progress = progress;
    this.job =
        spark
            .parallelize(stretches, stretches.size())
            .foreachAsync(new StretchTask(freight.checksum(), this.freight, parts.above(), hadoop));
  }

  /**
   * Waits for something that a task does, or the end of all tasks.
   *
   * @throws BadInput if a task failed with it
   * @throws Unavailable if a task failed otherwise, or this thread is told to stop
   */
  void await(BooleanSupplier done) {
    try {
      while (!done.getAsBoolean() && !isOver()) {
        progress.look(job.jobIds());
      }
    } catch (InterruptedException e) {
      Thread.currentThread().interrupt();
      throw new Unavailable("told to stop", e);
    } catch (ExecutionException e) {
      throw failure(e);
    }
  }

  private boolean isOver() throws InterruptedException, ExecutionException {
    try {
      Object unused = job.get(1, TimeUnit.SECONDS);
      return true;
    } catch (TimeoutException e) {
      return false;
    }
  }

  /** What a task said of its failure, if it is one of ours; else what Spark says. */
  private static RuntimeException failure(ExecutionException e) {
    for (Throwable cause = e; cause != null; cause = cause.getCause()) {
      if (cause instanceof BadInput bad) {
        return bad;
      }
      if (cause instanceof Unavailable unavailable) {
        return unavailable;
      }
    }
    Throwable said = e.getCause() == null ? e : e.getCause();
    String words = String.valueOf(said.getMessage());
    return new Unavailable("the Spark job failed: " + words.lines().findFirst().orElse(words), e);
  }

  /** Ends tasks that are still at work, and lets go of what was sent. */
  @Override
  public void close() {
    if (!job.isDone()) {
      job.cancel(true);
    }
    freight.destroy();
    hadoop.destroy();
  }
}
