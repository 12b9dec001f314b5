package linkworthy.app;

import java.nio.file.Path;
import java.util.List;
import java.util.concurrent.CountDownLatch;
import java.util.concurrent.TimeUnit;
import linkworthy.codec.Confinement;
import linkworthy.codec.PluginFolder;
import linkworthy.results.ResultsFolder;
import linkworthy.results.ResultsWriter;
import linkworthy.results.RunRecord;
import linkworthy.statistics.Cells;
import linkworthy.trial.Course;
import linkworthy.trial.LocalRunner;
import linkworthy.trial.Mishaps;
import linkworthy.trial.Plan;

/** One run of a plan into a results folder. */
final class Assessment {
  /** How long a run that is told to stop may take to close its files. */
  private static final long PATIENCE_MS = 10_000;

  private final Surroundings surroundings;
  private final Plan plan;
  private final List<PluginFolder.Jar> plugins;
  private final Path folder;
  private final int threads;
  private final ResultsFolder.Start start;
  private final boolean quiet;
  private final Ending ending;
  private final String goOn;

  /**
   * @param goOn the command that takes the run up again once it has been stopped
   */
  Assessment(
      Surroundings surroundings,
      Plan plan,
      List<PluginFolder.Jar> plugins,
      Path folder,
      ResultsFolder.Start start,
      int threads,
      boolean quiet,
      Ending ending,
      String goOn) {
    this.surroundings = surroundings;
    this.plan = plan;
    this.plugins = plugins;
    this.folder = folder;
    this.threads = threads;
    this.start = start;
    this.quiet = quiet;
    this.ending = ending;
    this.goOn = goOn;
  }

  /**
   * Runs it, writes the record and the report, prints the summary.
   *
   * @return the exit code
   */
  int run() {
    Mishaps mishaps = new Mishaps();
    LocalRunner runner = new LocalRunner(plan, threads, mishaps::add);
    CountDownLatch closed = new CountDownLatch(1);
    Thread onSignal = new Thread(() -> stop(runner, closed), "stop");
    Runtime.getRuntime().addShutdownHook(onSignal);
    try {
      return run(runner, mishaps);
    } finally {
      closed.countDown();
      release(onSignal);
    }
  }

  private int run(LocalRunner runner, Mishaps mishaps) {
    try (ResultsWriter writer = record(runner, mishaps)) {
      if (!writer.run().complete()) {
        return Main.ENVIRONMENT;
      }
      ResultsFolder results = ResultsFolder.open(folder);
      writer.writeReport(Reports.html(results, () -> plan, null));
      ending.print(results, surroundings.out());
      return Main.DONE;
    }
  }

  /**
   * Runs the plan to the end of its record, or to where it is stopped. What is known of the trials
   * is let go before the report reads them again.
   */
  private ResultsWriter record(LocalRunner runner, Mishaps mishaps) {
    Cells cells = new Cells();
    Course course = new Course(plan);
    ResultsWriter writer = open(cells, course);
    try {
      record(runner, mishaps, writer, cells, course);
      return writer;
    } catch (RuntimeException | Error e) {
      writer.close();
      throw e;
    }
  }

  private void record(
      LocalRunner runner, Mishaps mishaps, ResultsWriter writer, Cells cells, Course course) {
    if (!writer.run().programs().isEmpty() && !quiet) {
      surroundings.err().println("linkworthy: " + Confinement.ofThisMachine().sentence());
    }
    int first = writer.unitsAtStart();
    if (first > 0 && !quiet) {
      sayWhatIsKept(first);
    }
    int units = first + runUnits(runner, course, mishaps, writer, cells);
    long done = (long) units * plan.study().codecs().size();
    if (course.isAtEnd()) {
      writer.complete(plan, cells.toList(), writer.run().complete(done, surroundings.clock()));
    } else {
      writer.stop(writer.run().end(done, surroundings.clock()));
      surroundings
          .err()
          .println(
              "linkworthy: stopped after "
                  + writer.run().trialsDone()
                  + " of "
                  + upTo()
                  + writer.run().trialsPlanned()
                  + " trials; go on with: "
                  + goOn);
    }
  }

  /** What stands before a number of trials that may turn out to be smaller. */
  private String upTo() {
    return plan.study().earlyStop() == null ? "" : Progress.UP_TO;
  }

  private ResultsWriter open(Cells cells, Course course) {
    RunRecord now =
        RunRecord.begin(plan, Version.text(), surroundings.clock()).withPlugins(plugins);
    return ResultsFolder.open(
        folder,
        start,
        plan,
        now,
        trial -> {
          cells.add(trial);
          course.add(trial);
        });
  }

  private void sayWhatIsKept(int units) {
    surroundings
        .err()
        .println(
            "linkworthy: going on after "
                + (long) units * plan.study().codecs().size()
                + " of "
                + upTo()
                + plan.trials()
                + " trials");
  }

  private int runUnits(
      LocalRunner runner, Course course, Mishaps mishaps, ResultsWriter writer, Cells cells) {
    int codecs = plan.study().codecs().size();
    long left = (long) (plan.units() - course.next()) * codecs;
    int[] next = {course.next()};
    try (Progress progress = new Progress(surroundings, "assess", upTo(), left, quiet)) {
      return runner.run(
          course,
          (unit, trials, timings) -> {
            writer.append(trials, timings);
            trials.forEach(cells::add);
            progress.leaveOut((long) (unit.index() - next[0]) * codecs);
            next[0] = unit.index() + 1;
            progress.step(trials.size());
          });
    } finally {
      mishaps.lines().forEach(surroundings.err()::println);
    }
  }

  /** On Ctrl-C: the units at hand are dropped, the files are closed, then the process may end. */
  private static void stop(LocalRunner runner, CountDownLatch closed) {
    runner.stop();
    try {
      boolean unused = closed.await(PATIENCE_MS, TimeUnit.MILLISECONDS);
    } catch (InterruptedException e) {
      Thread.currentThread().interrupt();
    }
  }

  static void release(Thread onSignal) {
    try {
      Runtime.getRuntime().removeShutdownHook(onSignal);
    } catch (IllegalStateException alreadyStopping) {
      // The hook is running; it does not wait any longer.
    }
  }
}
