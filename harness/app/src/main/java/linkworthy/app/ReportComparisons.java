package linkworthy.app;

import java.util.List;
import java.util.Optional;
import linkworthy.decision.BjontegaardDelta;
import linkworthy.decision.Crossover;
import linkworthy.decision.CurveComparison;
import linkworthy.decision.Measurements;
import linkworthy.decision.OrderChange;
import linkworthy.report.Comparisons;
import linkworthy.report.Condition;
import linkworthy.results.ResultsFolder;
import linkworthy.statistics.BcaInterval;
import linkworthy.statistics.Cell;

/** Compares the codecs of a run over rates and severities, for its report. */
final class ReportComparisons {
  private ReportComparisons() {}

  /** Of a record whose trials have been {@link ReportTrials checked}. */
  static Comparisons of(ResultsFolder results) {
    List<Cell> cells = results.cells();
    Measurements measured = Measurements.ofPsnrAndBits();
    long unused = results.rows(measured::add);
    return new Comparisons(
        CurveComparison.of(cells, measured, results.run().seed()).stream()
            .map(ReportComparisons::gap)
            .toList(),
        OrderChange.of(cells, measured).stream().map(ReportComparisons::crossing).toList());
  }

  private static Comparisons.CurveGap gap(CurveComparison comparison) {
    Measurements.Condition condition = comparison.condition();
    return new Comparisons.CurveGap(
        condition(
            condition.impairment(), condition.actsOn(), condition.axis(), condition.severity()),
        comparison.reference(),
        comparison.family(),
        delta(comparison.pchip()),
        delta(comparison.cubic()),
        interval(comparison.psnrInterval()),
        interval(comparison.rateInterval()),
        comparison.refusal());
  }

  private static Comparisons.Interval interval(BcaInterval interval) {
    return new Comparisons.Interval(interval.lower(), interval.upper());
  }

  private static Comparisons.Delta delta(Optional<BjontegaardDelta> delta) {
    return delta
        .map(d -> new Comparisons.Delta(d.psnrDb(), d.ratePercent(), d.rising()))
        .orElse(Comparisons.Delta.NONE);
  }

  private static Comparisons.Crossing crossing(OrderChange change) {
    Crossover crossover = change.crossover();
    return new Comparisons.Crossing(
        condition(change.impairment(), change.actsOn(), change.axis(), crossover.at()),
        crossover.below(),
        crossover.above(),
        crossover.at(),
        crossover.low(),
        crossover.high());
  }

  private static Condition condition(
      String impairment, String actsOn, String axis, double severity) {
    return new Condition(impairment, actsOn, axis, severity, Double.NaN, Double.NaN, Double.NaN);
  }
}
