package linkworthy.report;

import java.util.ArrayList;
import java.util.Collections;
import java.util.List;
import java.util.stream.DoubleStream;

/**
 * Figures in a row: one panel for at most six series. All panels of a trend share their axes. What
 * is infinite, or not above 0 on a logarithmic scale, is not drawn; an interval is cut at the
 * frame.
 */
record TrendPlot(
    ComparisonPage.Kind kind,
    String id,
    String title,
    String description,
    List<LinePlot.Tick> horizontal,
    List<LinePlot.Tick> vertical,
    List<Line> lines) {
  /** The frame of the drawing. */
  public PlotBox box() {
    return new PlotBox(LEFT, RIGHT, TOP, BOTTOM);
  }

  private static final int LEFT = 36;
  private static final int RIGHT = 384;
  private static final int TOP = 28;
  private static final int BOTTOM = 236;
  private static final int MOST_TICKS = 12;

  /** A series as path data, and its name for the key; what is not drawn is empty. */
  record Line(String css, String path, String whiskers, String markers, String sign, String name) {}

  /** The panels of each table of a page; none where nothing can be drawn. */
  static List<List<TrendPlot>> of(ComparisonPage page) {
    List<List<TrendPlot>> plots = new ArrayList<>();
    for (ComparisonPage.Table table : page.tables()) {
      plots.add(of(table.trends(), "trend-" + plots.size() + "-"));
    }
    return plots;
  }

  private static List<TrendPlot> of(List<ComparisonPage.Trend> trends, String id) {
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
          plots.add(panel(trend, part, parts, y, id + plots.size()));
        }
      }
    }
    return plots;
  }

  private static boolean isLinear(ComparisonPage.Trend trend) {
    return trend.kind() != ComparisonPage.Kind.BURSTS;
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
    List<Line> lines = new ArrayList<>();
    for (int i = 0; i < some.size(); i++) {
      lines.add(line(trend, some.get(i), i, y));
    }
    return new TrendPlot(
        trend.kind(),
        id,
        title,
        trend.kind().heading() + ", a line for each series; the numbers are in the tables.",
        horizontal(trend),
        y.ticks().stream()
            .map(v -> new LinePlot.Tick(Numbers.coordinate(y.at(v)), Numbers.typed(v)))
            .toList(),
        lines);
  }

  private static List<LinePlot.Tick> horizontal(ComparisonPage.Trend trend) {
    if (!trend.places().isEmpty()) {
      Axis across = across(trend);
      return across.ticks().stream()
          .map(at -> new LinePlot.Tick(Numbers.coordinate(across.at(at)), Numbers.typed(at)))
          .toList();
    }
    List<LinePlot.Tick> ticks = new ArrayList<>();
    int stride = (trend.runs().size() + MOST_TICKS - 1) / MOST_TICKS;
    for (int run = 0; run < trend.runs().size(); run += stride) {
      ticks.add(new LinePlot.Tick(Numbers.coordinate(x(trend, run)), trend.runs().get(run)));
    }
    return ticks;
  }

  private static double x(ComparisonPage.Trend trend, int run) {
    if (!trend.places().isEmpty()) {
      return across(trend).at(trend.places().get(run));
    }
    int last = Math.max(1, trend.runs().size() - 1);
    return LEFT + 14 + (double) run / last * (RIGHT - LEFT - 28);
  }

  private static Axis across(ComparisonPage.Trend trend) {
    return Axis.linear(
        Collections.min(trend.places()), Collections.max(trend.places()), LEFT, RIGHT);
  }

  private static Line line(
      ComparisonPage.Trend trend, ComparisonPage.Series series, int index, Axis y) {
    StringBuilder path = new StringBuilder();
    StringBuilder markers = new StringBuilder();
    StringBuilder whiskers = new StringBuilder();
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
        if (!series.halfWidths().isEmpty()) {
          double half = series.halfWidths().get(run);
          whiskers
              .append('M')
              .append(Numbers.coordinate(across))
              .append(' ')
              .append(Numbers.coordinate(Math.min(BOTTOM, y.at(value - half))))
              .append('V')
              .append(Numbers.coordinate(Math.max(TOP, y.at(value + half))));
        }
      }
      pen = drawn;
    }
    boolean hasLine = series.drawn() != ComparisonPage.Drawn.POINTS;
    boolean hasPoints = series.drawn() != ComparisonPage.Drawn.LINE;
    return new Line(
        "c" + index + " d" + index,
        hasLine ? path.toString() : "",
        whiskers.toString(),
        hasPoints ? markers.toString() : "",
        hasPoints ? Shape.at(index, 7, 7) : "",
        series.name());
  }
}
