package linkworthy.app;

import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import linkworthy.report.Condition;
import linkworthy.report.Predicted;
import linkworthy.results.ResultsFolder;
import linkworthy.statistics.Cell;
import linkworthy.trial.Prediction;

/** Puts the recorded predictions of a run beside its cells, for its report. */
final class ReportPredictions {
  private ReportPredictions() {}

  static List<Predicted> of(ResultsFolder results) {
    Map<Key, Cell> cells = new HashMap<>();
    for (Cell cell : results.cells()) {
      cells.put(
          new Key(cell.impairment(), cell.actsOn(), cell.axis(), cell.severity(), cell.codec()),
          cell);
    }
    List<Predicted> predicted = new ArrayList<>();
    for (Prediction prediction : results.predictions()) {
      Cell cell =
          cells.get(
              new Key(
                  prediction.impairment(),
                  prediction.actsOn(),
                  prediction.axis(),
                  prediction.severity(),
                  prediction.codec()));
      if (cell != null) {
        predicted.add(beside(cell, prediction));
      }
    }
    return predicted;
  }

  /** What names a cell. */
  private record Key(
      String impairment, String actsOn, String axis, double severity, String codec) {}

  private static Predicted beside(Cell cell, Prediction prediction) {
    return new Predicted(
        new Condition(
            cell.impairment(),
            cell.actsOn(),
            cell.axis(),
            cell.severity(),
            cell.equivalentNoiseVariance(),
            cell.realisedNoiseVarianceMean(),
            cell.snrDb()),
        cell.codec(),
        prediction.psnrOfMeanMseDb(),
        cell.psnrOfMeanMseDb(),
        cell.psnrNoiseHalfWidthDb(),
        prediction.refusal());
  }
}
