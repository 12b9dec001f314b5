package linkworthy.report;

import java.math.BigDecimal;
import java.math.MathContext;
import java.math.RoundingMode;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.function.DoubleFunction;

/** {@link Comparisons} laid out for the template. */
record ComparisonView(String reference, List<CurveTable> tables, List<CrossingRow> crossings) {
  /** The gaps under one noise. */
  record CurveTable(String title, List<CurveRow> rows) {}

  /** A gap between two curves. */
  record CurveRow(
      String family,
      String given,
      String psnr,
      String psnrInterval,
      String rate,
      String rateInterval,
      String cubicPsnr,
      String cubicRate,
      String note) {}

  /** A crossing. */
  record CrossingRow(String noise, String below, String above, String at, String interval) {}

  static ComparisonView of(Comparisons comparisons) {
    Map<String, List<CurveRow>> rows = new LinkedHashMap<>();
    for (Comparisons.CurveGap gap : comparisons.curves()) {
      rows.computeIfAbsent(title(gap.condition()), t -> new ArrayList<>()).add(row(gap));
    }
    List<CurveTable> tables = new ArrayList<>();
    rows.forEach((title, all) -> tables.add(new CurveTable(title, List.copyOf(all))));
    return new ComparisonView(
        comparisons.curves().isEmpty() ? "" : comparisons.curves().get(0).reference(),
        tables,
        comparisons.crossings().stream().map(ComparisonView::row).toList());
  }

  private static String title(Condition condition) {
    return condition.isClean()
        ? "no noise"
        : new FigureGrid.Noise(condition.impairment(), condition.actsOn(), List.of(condition))
            .title();
  }

  private static CurveRow row(Comparisons.CurveGap gap) {
    boolean swings = !gap.cubic().rising();
    return new CurveRow(
        gap.family(),
        MatrixTable.given(gap.condition()),
        Numbers.db(gap.pchip().psnrDb()),
        interval(gap.psnrDb(), Numbers::db),
        percent(gap.pchip().ratePercent()),
        interval(gap.ratePercent(), ComparisonView::percent),
        Numbers.db(gap.cubic().psnrDb()),
        percent(gap.cubic().ratePercent()),
        swings ? "the cubic swings: do not use its numbers" : gap.refusal());
  }

  private static String interval(Comparisons.Interval interval, DoubleFunction<String> text) {
    return Double.isNaN(interval.lower() + interval.upper())
        ? ""
        : text.apply(interval.lower()) + " to " + text.apply(interval.upper());
  }

  private static String percent(double percent) {
    return Numbers.percent(percent / 100);
  }

  private static CrossingRow row(Comparisons.Crossing crossing) {
    return new CrossingRow(
        title(crossing.noise()),
        crossing.below(),
        crossing.above(),
        place(crossing.noise(), crossing.at()),
        interval(crossing));
  }

  private static String interval(Comparisons.Crossing crossing) {
    String low = place(crossing.noise(), crossing.low());
    String high = place(crossing.noise(), crossing.high());
    if (Double.isNaN(crossing.low())) {
      return Double.isNaN(crossing.high()) ? "not told apart at any severity" : "below " + high;
    }
    return Double.isNaN(crossing.high()) ? "above " + low : low + " to " + high;
  }

  /** A severity in three significant digits. */
  private static String place(Condition noise, double severity) {
    double rounded =
        Double.isFinite(severity)
            ? new BigDecimal(severity)
                .round(new MathContext(3, RoundingMode.HALF_EVEN))
                .doubleValue()
            : severity;
    return MatrixTable.given(
        new Condition(
            noise.impairment(),
            noise.actsOn(),
            noise.axis(),
            rounded,
            Double.NaN,
            Double.NaN,
            Double.NaN));
  }
}
