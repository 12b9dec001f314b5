package linkworthy.app;

import java.nio.file.Path;
import java.util.List;
import linkworthy.codec.PluginFolder;
import linkworthy.results.ResultsFolder;
import linkworthy.results.ResultsWriter;
import linkworthy.results.RunRecord;
import linkworthy.statistics.Cells;
import linkworthy.trial.LocalRunner;
import linkworthy.trial.Plan;

/** One run of a plan into a results folder. */
final class Assessment {
  /** How long an interrupted run may take to finish the unit at hand and close its files. */
  private static final long PATIENCE_MS = 10_000;

  private final Surroundings surroundings;
  private final Plan plan;
  private final List<PluginFolder.Jar> plugins;
  private final Path folder;
  private final int threads;
  private final boolean overwrite;
  private final boolean quiet;

  Assessment(
      Surroundings surroundings,
      Plan plan,
      List<PluginFolder.Jar> plugins,
      Path folder,
      int threads,
      boolean overwrite,
      boolean quiet) {
    this.surroundings = surroundings;
    this.plan = plan;
    this.plugins = plugins;
    this.folder = folder;
    this.threads = threads;
    this.overwrite = overwrite;
    this.quiet = quiet;
  }

  /**
   * Runs it, writes the record and the report, prints the summary.
   *
   * @return the exit code
   */
  int run() {
    try (ResultsWriter writer = ResultsFolder.create(folder, overwrite)) {
      RunRecord begun =
          RunRecord.begin(
                  plan.study(),
                  Version.text(),
                  plan.manifest().fingerprint(),
                  plan.pictures(),
                  plan.trials(),
                  surroundings.clock())
              .withPlugins(plugins);
      writer.begin(plan.study(), begun);
      Cells cells = new Cells();
      int units = runUnits(writer, cells);
      RunRecord ended =
          begun.end((long) units * plan.study().codecs().size(), surroundings.clock());
      if (units < plan.units()) {
        writer.stop(ended);
        surroundings
            .err()
            .println(
                "linkworthy: stopped after "
                    + ended.trialsDone()
                    + " of "
                    + ended.trialsPlanned()
                    + " trials; the rows so far are in "
                    + folder);
        return Main.ENVIRONMENT;
      }
      writer.finish(cells.toList(), ended);
      ResultsFolder results = ResultsFolder.open(folder);
      writer.writeReport(Reports.html(results));
      if (!quiet) {
        summarise(results);
      }
      return Main.DONE;
    }
  }

  private int runUnits(ResultsWriter writer, Cells cells) {
    Thread worker = Thread.currentThread();
    Thread onSignal = new Thread(() -> stop(worker), "stop");
    Runtime.getRuntime().addShutdownHook(onSignal);
    Mishaps mishaps = new Mishaps();
    try (Progress progress = new Progress(surroundings, "assess", plan.trials(), quiet)) {
      return new LocalRunner(plan, threads, mishaps::add)
          .run(
              0,
              (unit, trials, timings) -> {
                writer.append(trials, timings);
                trials.forEach(cells::add);
                progress.step(trials.size());
              });
    } finally {
      mishaps.lines().forEach(surroundings.err()::println);
      release(onSignal);
    }
  }

  /** On Ctrl-C: the unit at hand is dropped, the files are closed, then the process may end. */
  private static void stop(Thread worker) {
    worker.interrupt();
    try {
      worker.join(PATIENCE_MS);
    } catch (InterruptedException e) {
      Thread.currentThread().interrupt();
    }
  }

  private static void release(Thread onSignal) {
    try {
      Runtime.getRuntime().removeShutdownHook(onSignal);
    } catch (IllegalStateException alreadyStopping) {
      // The hook is running: it waits for this thread, which closes the files next.
    }
  }

  private void summarise(ResultsFolder results) {
    var out = surroundings.out();
    Reports.answer(results).forEach(out::println);
    out.println();
    for (String line : SummaryTable.of(results.cells())) {
      out.println(line);
    }
    out.println("report: " + folder.resolve(ResultsFolder.REPORT));
  }
}
