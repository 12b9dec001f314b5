package linkworthy.decision;

import java.util.LinkedHashMap;
import java.util.Map;
import linkworthy.input.BadInput;
import linkworthy.results.ResultsFolder;
import linkworthy.results.RunRecord;
import linkworthy.trial.Trial;

/** The cells of one run, in the order of their first trials; about 200 bytes for each trial. */
final class RunFigures {
  private final Map<CellKey, CellFigures> cells = new LinkedHashMap<>();

  static RunFigures of(Iterable<Trial> trials) {
    RunFigures figures = new RunFigures();
    trials.forEach(figures::add);
    return figures;
  }

  /**
   * @throws BadInput if the run is not complete or its trials are not as many as it says
   */
  static RunFigures read(ResultsFolder folder) {
    requireComplete(folder);
    RunFigures figures = new RunFigures();
    long rows;
    try {
      rows = folder.trials(figures::add);
    } catch (IllegalArgumentException e) {
      throw new BadInput(folder.path() + ": " + e.getMessage(), e);
    }
    if (rows != folder.run().trialsDone()) {
      throw new BadInput(
          folder.path()
              + " has "
              + rows
              + " trials; accepted: "
              + folder.run().trialsDone()
              + ", as its run.json says");
    }
    return figures;
  }

  /**
   * @throws BadInput if the run is not complete
   */
  static void requireComplete(ResultsFolder folder) {
    RunRecord run = folder.run();
    if (!run.complete()) {
      throw new BadInput(
          folder.path()
              + " is the record of a run that is not complete ("
              + run.trialsDone()
              + " of "
              + run.trialsPlanned()
              + " trials); accepted: a complete run");
    }
  }

  private void add(Trial trial) {
    cells.computeIfAbsent(CellKey.of(trial), key -> new CellFigures()).add(trial);
  }

  Map<CellKey, CellFigures> cells() {
    return cells;
  }
}
