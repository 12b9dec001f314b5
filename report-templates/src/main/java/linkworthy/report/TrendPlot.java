package linkworthy.report;

import java.util.ArrayList;
import java.util.List;
import java.util.stream.DoubleStream;

/**
 * Figures in a row: one panel for at most six series. All panels of a trend share their axes. What
 * is infinite, or not above 0 on a logarithmic scale, is not drawn.
 */
record TrendPlot(
    ComparisonPage.Kind kind,
    String id,
    String title,
    String description,
    List<LinePlot.Tick> horizontal,
    List<LinePlot.Tick> vertical,
    List<Line> lines) {
  private static final int LEFT = 36;
  private static final int RIGHT = 384;
  private static final int TOP = 28;
  private static final int BOTTOM = 236;
  private static final int MOST_TICKS = 12;

  /** A series as path data, and its name for the key. */
  record Line(String css, String path, String markers, String sign, String name) {}

  /** All panels; none if nothing can be drawn. */
  static List<TrendPlot> of(List<ComparisonPage.Trend> trends) {
    List<TrendPlot> plots = new ArrayList<>();
    for (ComparisonPage.Trend trend : trends) {
      double[] values =
          trend.series().stream()
              .flatMapToDouble(s -> s.values().stream().flatMapToDouble(DoubleStream::of))
              .filter(value -> isDrawn(trend, value))
              .sorted()
              .toArray();
      if (values.length > 0) {
        double most = values[values.length - 1];
        Axis y =
            isLinear(trend)
                ? Axis.linear(values[0], most, BOTTOM, TOP)
                : Axis.log(values[0], most, BOTTOM, TOP);
        int parts = (trend.series().size() + Shape.KINDS - 1) / Shape.KINDS;
        for (int part = 0; part < parts; part++) {
          plots.add(panel(trend, part, parts, y, "trend-" + plots.size()));
        }
      }
    }
    return plots;
  }

  private static boolean isLinear(ComparisonPage.Trend trend) {
    return trend.kind() == ComparisonPage.Kind.RUNS;
  }

  private static boolean isDrawn(ComparisonPage.Trend trend, double value) {
    return Double.isFinite(value) && (isLinear(trend) || value > 0);
  }

  private static TrendPlot panel(
      ComparisonPage.Trend trend, int part, int parts, Axis y, String id) {
    String title = trend.heading() + (parts > 1 ? " (" + (part + 1) + " of " + parts + ")" : "");
    int size = trend.series().size();
    List<ComparisonPage.Series> some =
        trend.series().subList(size * part / parts, size * (part + 1) / parts);
    List<LinePlot.Tick> horizontal = new ArrayList<>();
    int stride = (trend.runs().size() + MOST_TICKS - 1) / MOST_TICKS;
    for (int run = 0; run < trend.runs().size(); run += stride) {
      horizontal.add(new LinePlot.Tick(Numbers.coordinate(x(trend, run)), trend.runs().get(run)));
    }
    List<Line> lines = new ArrayList<>();
    for (int i = 0; i < some.size(); i++) {
      lines.add(line(trend, some.get(i), i, y));
    }
    return new TrendPlot(
        trend.kind(),
        id,
        title,
        trend.kind().heading() + ", a line for each series; the numbers are in the tables.",
        horizontal,
        y.ticks().stream()
            .map(v -> new LinePlot.Tick(Numbers.coordinate(y.at(v)), Numbers.typed(v)))
            .toList(),
        lines);
  }

  private static double x(ComparisonPage.Trend trend, int run) {
    int last = Math.max(1, trend.runs().size() - 1);
    return LEFT + 14 + (double) run / last * (RIGHT - LEFT - 28);
  }

  private static Line line(
      ComparisonPage.Trend trend, ComparisonPage.Series series, int index, Axis y) {
    StringBuilder path = new StringBuilder();
    StringBuilder markers = new StringBuilder();
    boolean pen = false;
    for (int run = 0; run < series.values().size(); run++) {
      double value = series.values().get(run);
      boolean drawn = isDrawn(trend, value);
      if (drawn) {
        double across = x(trend, run);
        path.append(pen ? 'L' : 'M')
            .append(Numbers.coordinate(across))
            .append(' ')
            .append(Numbers.coordinate(y.at(value)));
        markers.append(Shape.at(index, across, y.at(value)));
      }
      pen = drawn;
    }
    return new Line(
        "c" + index + " d" + index,
        path.toString(),
        markers.toString(),
        Shape.at(index, 7, 7),
        series.name());
  }
}
