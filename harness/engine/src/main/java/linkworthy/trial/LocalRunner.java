package linkworthy.trial;

import java.util.ArrayDeque;
import java.util.List;
import java.util.Queue;
import java.util.concurrent.CancellationException;
import java.util.concurrent.ExecutionException;
import java.util.concurrent.ExecutorService;
import java.util.concurrent.Executors;
import java.util.concurrent.Future;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.TimeoutException;
import java.util.function.Consumer;
import linkworthy.input.Require;

/**
 * Runs a plan on threads of this machine and hands over finished units in the canonical order,
 * whatever the order they finish in.
 */
public final class LocalRunner {
  /** Units waiting or running for each thread; bounds the memory that finished rows take. */
  private static final int WINDOW = 4;

  /** How often a wait for a unit looks whether to stop, in milliseconds. */
  private static final long GLANCE_MS = 50;

  private static final long PATIENCE_MS = 2000;

  private final Plan plan;
  private final int threads;
  private final Consumer<Mishap> mishaps;
  private volatile boolean stopped;

  /**
   * @param threads 1 to 1024
   */
  public LocalRunner(Plan plan, int threads) {
    this(plan, threads, mishap -> {});
  }

  /**
   * @param threads 1 to 1024
   * @param mishaps takes the codecs' failures, in canonical order, before the rows of their unit
   */
  public LocalRunner(Plan plan, int threads, Consumer<Mishap> mishaps) {
    this.plan = plan;
    this.threads = Require.inRange(threads, 1, 1024, "threads");
    this.mishaps = mishaps;
  }

  /** Takes the rows of one unit after the other, in canonical order, on one thread. */
  public interface Sink {
    /**
     * @param trials a row for each codec
     * @param timings the same trials' times
     */
    void accept(WorkUnit unit, List<Trial> trials, List<Timing> timings);
  }

  /**
   * Runs the units from {@code firstUnit} on. If the calling thread is interrupted, or {@link
   * #stop} is called, the units that have been handed over stay whole and the rest is dropped.
   *
   * @return the number of units handed over
   */
  public int run(int firstUnit, Sink sink) {
    Subjects subjects = new Subjects(plan, threads + 1);
    ExecutorService executor = Executors.newFixedThreadPool(threads);
    Queue<Future<UnitRunner.Rows>> window = new ArrayDeque<>();
    int next = firstUnit;
    int done = firstUnit;
    try {
      while (done < plan.units() && !stopped && !Thread.currentThread().isInterrupted()) {
        while (next < plan.units() && window.size() < WINDOW * threads) {
          WorkUnit unit = plan.unit(next++);
          window.add(
              executor.submit(() -> new UnitRunner(plan.study(), subjects.get(unit), unit).run()));
        }
        if (isReady(window.element())) {
          UnitRunner.Rows rows = window.remove().get();
          rows.mishaps().forEach(mishaps);
          sink.accept(plan.unit(done++), rows.trials(), rows.timings());
        }
      }
    } catch (InterruptedException | CancellationException e) {
      Thread.currentThread().interrupt();
    } catch (ExecutionException e) {
      if (e.getCause() instanceof RuntimeException known) {
        throw known;
      }
      if (e.getCause() instanceof Error serious) {
        throw serious;
      }
      throw new IllegalStateException(e.getCause());
    } finally {
      executor.shutdownNow();
      awaitEnd(executor);
    }
    return done - firstUnit;
  }

  /**
   * Makes {@link #run} return soon; for another thread. An interrupt would do so too, but would
   * also close the files that the sink is writing.
   */
  public void stop() {
    stopped = true;
  }

  private static boolean isReady(Future<?> unit) throws InterruptedException, ExecutionException {
    try {
      Object unused = unit.get(GLANCE_MS, TimeUnit.MILLISECONDS);
      return true;
    } catch (TimeoutException notYet) {
      return false;
    }
  }

  /** Gives units that were dropped the time to end the programs they run. */
  private static void awaitEnd(ExecutorService executor) {
    boolean interrupted = Thread.interrupted();
    try {
      boolean unused = executor.awaitTermination(PATIENCE_MS, TimeUnit.MILLISECONDS);
    } catch (InterruptedException e) {
      interrupted = true;
    }
    if (interrupted) {
      Thread.currentThread().interrupt();
    }
  }
}
