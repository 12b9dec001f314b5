package linkworthy.trial;

import java.util.ArrayDeque;
import java.util.List;
import java.util.Queue;
import java.util.concurrent.ArrayBlockingQueue;
import java.util.concurrent.BlockingQueue;
import java.util.concurrent.CancellationException;
import java.util.concurrent.ExecutionException;
import java.util.concurrent.ExecutorService;
import java.util.concurrent.Executors;
import java.util.concurrent.Future;
import java.util.concurrent.TimeUnit;
import java.util.function.Consumer;
import linkworthy.input.Require;
import org.jspecify.annotations.Nullable;

/**
 * Runs a plan on threads of this machine and hands over finished units in the canonical order,
 * whatever the order they finish in.
 */
public final class LocalRunner {
  /**
   * Groups of units waiting or running for each thread; bounds the memory that finished rows take.
   */
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
   * Runs the units from {@code firstUnit} on, as {@link #run(Course, Sink)} does.
   *
   * @param firstUnit where replicates may end early, the first replicate of a severity
   * @return the number of units handed over
   */
  public int run(int firstUnit, Sink sink) {
    return run(new Course(plan, firstUnit), sink);
  }

  /**
   * Runs the rest of a course, and moves it on. If the calling thread is interrupted, or {@link
   * #stop} is called, the units that have been handed over stay whole and the rest is dropped.
   *
   * @param course stands before the first trial of a unit
   * @return the number of units handed over
   */
  public int run(Course course, Sink sink) {
    Subjects subjects = new Subjects(plan, threads + 1);
    ExecutorService executor = Executors.newFixedThreadPool(threads);
    Queue<Group> window = new ArrayDeque<>();
    int next = course.next();
    int done = 0;
    try {
      while (!course.isAtEnd() && !stopped && !Thread.currentThread().isInterrupted()) {
        while (next < course.end() && window.size() < WINDOW * threads) {
          Course own = next == course.next() ? course.copy() : new Course(plan, next);
          next = own.groupEnd();
          window.add(new Group(own, subjects, executor));
        }
        UnitRunner.Rows rows = window.element().poll();
        if (rows != null) {
          rows.mishaps().forEach(mishaps);
          sink.accept(course.unit(), rows.trials(), rows.timings());
          rows.trials().forEach(course::add);
          done++;
          if (course.next() >= window.element().end) {
            window.remove();
          }
        }
      }
    } catch (InterruptedException | CancellationException e) {
      Thread.currentThread().interrupt();
    } catch (ExecutionException e) {
      throw Awaited.failure(e);
    } finally {
      executor.shutdownNow();
      awaitEnd(executor);
    }
    return done;
  }

  /**
   * Makes {@link #run} return soon; for another thread. An interrupt would do so too, but would
   * also close the files that the sink is writing.
   */
  public void stop() {
    stopped = true;
  }

  /**
   * Units that one task runs, one after the other: a single one, or where replicates may end early
   * the replicates of one severity.
   */
  private final class Group {
    /** Finished units that may wait; a task with more waits itself. */
    private static final int WAITING = 32;

    private final BlockingQueue<UnitRunner.Rows> finished = new ArrayBlockingQueue<>(WAITING);
    private final Course course;
    private final Subjects subjects;
    private final int end;
    private final Future<?> task;

    Group(Course course, Subjects subjects, ExecutorService executor) {
      this.course = course;
      this.subjects = subjects;
      this.end = course.groupEnd();
      this.task = executor.submit(this::run);
    }

    private @Nullable Void run() throws InterruptedException {
      while (course.next() < end && !Thread.currentThread().isInterrupted()) {
        WorkUnit unit = course.unit();
        UnitRunner.Rows rows = new UnitRunner(plan.study(), subjects.get(unit), unit).run();
        rows.trials().forEach(course::add);
        finished.put(rows);
      }
      return null;
    }

    /** The next finished unit, or null if there is none for a while. */
    UnitRunner.@Nullable Rows poll() throws InterruptedException, ExecutionException {
      UnitRunner.Rows rows = finished.poll(GLANCE_MS, TimeUnit.MILLISECONDS);
      if (rows == null && task.isDone() && finished.isEmpty()) {
        Object unused = task.get();
      }
      return rows;
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
