package linkworthy.app;

import java.util.ArrayList;
import java.util.List;
import linkworthy.report.Condition;
import linkworthy.report.Predicted;
import linkworthy.results.ResultsFolder;
import linkworthy.statistics.Cell;
import linkworthy.trial.Prediction;

/** Puts the recorded predictions of a run beside its cells, for its report. */
final class ReportPredictions {
  private ReportPredictions() {}

  static List<Predicted> of(ResultsFolder results, ReportTrials trials) {
    List<Cell> cells = results.cells();
    List<Predicted> predicted = new ArrayList<>();
    for (Prediction prediction : results.predictions()) {
      cells.stream()
          .filter(cell -> isOf(cell, prediction))
          .forEach(cell -> predicted.add(beside(cell, prediction, trials)));
    }
    return predicted;
  }

  private static boolean isOf(Cell cell, Prediction prediction) {
    return cell.impairment().equals(prediction.impairment())
        && cell.actsOn().equals(prediction.actsOn())
        && cell.axis().equals(prediction.axis())
        && cell.severity() == prediction.severity()
        && cell.codec().equals(prediction.codec());
  }

  private static Predicted beside(Cell cell, Prediction prediction, ReportTrials trials) {
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
        trials.meanSquaredErrorHalfWidthDb(cell),
        prediction.refusal());
  }
}
