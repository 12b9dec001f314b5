package linkworthy.decision;

import java.util.LinkedHashMap;
import java.util.Map;
import linkworthy.results.ResultsFolder;
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
   * @throws linkworthy.input.BadInput if the run is not complete or its record contradicts itself
   */
  static RunFigures read(ResultsFolder folder) {
    folder.requireComplete();
    RunFigures figures = new RunFigures();
    long unused = folder.trials(figures::add);
    return figures;
  }

  private void add(Trial trial) {
    cells.computeIfAbsent(CellKey.of(trial), key -> new CellFigures()).add(trial);
  }

  Map<CellKey, CellFigures> cells() {
    return cells;
  }
}
