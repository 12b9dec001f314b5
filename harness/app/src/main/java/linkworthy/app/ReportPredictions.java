package linkworthy.app;

import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import linkworthy.report.Predicted;
import linkworthy.results.ResultsFolder;
import linkworthy.statistics.Cell;
import linkworthy.trial.Prediction;

/** Puts the recorded predictions of a run beside its cells, for its report. */
final class ReportPredictions {
  private ReportPredictions() {}

  static List<Predicted> of(ResultsFolder results, ReportTrials trials) {
    Map<ReportTrials.Place, Cell> cells = new HashMap<>();
    results.cells().forEach(cell -> cells.put(ReportTrials.Place.of(cell), cell));
    List<Predicted> predicted = new ArrayList<>();
    for (Prediction prediction : results.predictions()) {
      Cell cell = cells.get(ReportTrials.Place.of(prediction));
      if (cell != null) {
        predicted.add(beside(cell, prediction, trials));
      }
    }
    return predicted;
  }

  private static Predicted beside(Cell cell, Prediction prediction, ReportTrials trials) {
    return new Predicted(
        Reports.condition(cell),
        cell.codec(),
        prediction.psnrOfMeanMseDb(),
        cell.psnrOfMeanMseDb(),
        trials.meanSquaredErrorHalfWidthDb(cell),
        prediction.refusal());
  }
}
