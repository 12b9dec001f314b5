package linkworthy.report;

import java.util.ArrayList;
import java.util.List;
import java.util.stream.DoubleStream;

/**
 * Mean PSNR over runs: one panel for at most six series. All panels of a trend share their axes.
 * Infinite values are not drawn.
 */
record TrendPlot(
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

  /** A series as path data, and its name for the key. */
  record Line(String css, String path, String markers, String sign, String name) {}

  /** All panels; none if nothing can be drawn. */
  static List<TrendPlot> of(List<ComparisonPage.Trend> trends) {
    List<TrendPlot> plots = new ArrayList<>();
    for (ComparisonPage.Trend trend : trends) {
      double[] values =
          trend.series().stream()
              .flatMapToDouble(s -> s.psnrDb().stream().flatMapToDouble(DoubleStream::of))
              .filter(Double::isFinite)
              .sorted()
              .toArray();
      if (values.length > 0) {
        Axis y = Axis.linear(values[0], values[values.length - 1], BOTTOM, TOP);
        int parts = (trend.series().size() + Shape.KINDS - 1) / Shape.KINDS;
        for (int part = 0; part < parts; part++) {
          plots.add(panel(trend, part, parts, y, "trend-" + plots.size()));
        }
      }
    }
    return plots;
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
        id,
        title,
        "Mean PSNR of each run, oldest on the left; the numbers are in the tables.",
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
    for (int run = 0; run < series.psnrDb().size(); run++) {
      double psnr = series.psnrDb().get(run);
      boolean drawn = Double.isFinite(psnr);
      if (drawn) {
        double across = x(trend, run);
        path.append(pen ? 'L' : 'M')
            .append(Numbers.coordinate(across))
            .append(' ')
            .append(Numbers.coordinate(y.at(psnr)));
        markers.append(Shape.at(index, across, y.at(psnr)));
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
