package linkworthy.decision;

import java.util.LinkedHashMap;
import java.util.Map;
import linkworthy.results.ResultsFolder;
import linkworthy.statistics.Numbering;
import linkworthy.trial.Trial;

/**
 * The cells of one run, in the order of their first trials; about 10 bytes for each trial and 24
 * for each picture of a cell.
 */
final class RunFigures {
  private final Numbering pictures = new Numbering();
  private final Map<CellKey, CellFigures> cells = new LinkedHashMap<>();

  static RunFigures of(Iterable<Trial> trials) {
    RunFigures figures = new RunFigures();
    trials.forEach(figures::add);
    figures.cells.values().forEach(CellFigures::end);
    return figures;
  }

  /**
   * @throws linkworthy.input.BadInput if the run is not complete or its record contradicts itself
   */
  static RunFigures read(ResultsFolder folder) {
    folder.requireComplete();
    RunFigures figures = new RunFigures();
    long unused = folder.trials(figures::add);
    figures.cells.values().forEach(CellFigures::end);
    return figures;
  }

  private void add(Trial trial) {
    cells.computeIfAbsent(CellKey.of(trial), key -> new CellFigures(pictures)).add(trial);
  }

  Map<CellKey, CellFigures> cells() {
    return cells;
  }
}
