package linkworthy.report;

import java.util.ArrayList;
import java.util.List;

/**
 * Quality over pictures in one condition: a row for each codec, a dot for each picture, a stroke at
 * the mean over the pictures. Infinite values are not drawn.
 */
record SpreadPlot(
    String id,
    String title,
    String description,
    int height,
    List<LinePlot.Tick> horizontal,
    List<LinePlot.Tick> vertical,
    List<Row> rows) {
  static final int WIDTH = 640;
  private static final int LEFT = 190;
  private static final int RIGHT = 536;
  private static final int TOP = 24;
  private static final int PITCH = 17;
  private static final int LONGEST_LABEL = 26;

  /** A codec; {@code at} is its place in the study. */
  record Row(
      int at,
      String css,
      String codec,
      String label,
      String y,
      String dots,
      String mean,
      String range) {}

  /** The frame of the drawing. */
  public PlotBox box() {
    return new PlotBox(LEFT, RIGHT, TOP, height - 40);
  }

  /** The plot of a noise, or nothing where it has no spread. */
  static List<SpreadPlot> of(
      FigureGrid grid,
      List<CodecFamily> families,
      FigureGrid.Noise noise,
      List<Particulars.Spread> spreads,
      String id) {
    List<Particulars.Spread> here =
        spreads.stream().filter(s -> s.condition().key().equals(noise.middle().key())).toList();
    List<Drawn> drawn = new ArrayList<>();
    for (CodecFamily family : families) {
      for (CodecFamily.Member member : family.members()) {
        here.stream()
            .filter(s -> s.codec().equals(member.codec().label()))
            .map(s -> new Drawn(family, member, finite(s)))
            .filter(d -> !d.psnr().isEmpty())
            .forEach(drawn::add);
      }
    }
    if (drawn.isEmpty()) {
      return List.of();
    }
    double[] all =
        drawn.stream().flatMap(d -> d.psnr().stream()).mapToDouble(v -> v).sorted().toArray();
    Axis x = Axis.linear(all[0], all[all.length - 1], LEFT + 8, RIGHT - 8);
    List<Row> rows = new ArrayList<>();
    for (Drawn one : drawn) {
      rows.add(one.row(grid, x, TOP + 12 + PITCH * rows.size()));
    }
    String title = noise.title() + ", " + MatrixTable.given(noise.middle());
    return List.of(
        new SpreadPlot(
            id,
            title,
            "Mean PSNR of each picture under "
                + title
                + ", a row for each codec; the ends of each row stand at its right.",
            TOP + PITCH * rows.size() + 46,
            x.ticks().stream()
                .map(v -> new LinePlot.Tick(Numbers.coordinate(x.at(v)), Numbers.typed(v)))
                .toList(),
            List.of(),
            rows));
  }

  private static List<Double> finite(Particulars.Spread spread) {
    return spread.psnrDb().stream().filter(Double::isFinite).toList();
  }

  /** A codec with something to draw. */
  private record Drawn(CodecFamily family, CodecFamily.Member member, List<Double> psnr) {
    Row row(FigureGrid grid, Axis x, int y) {
      StringBuilder dots = new StringBuilder();
      double sum = 0;
      double least = Double.POSITIVE_INFINITY;
      double most = Double.NEGATIVE_INFINITY;
      for (double value : psnr) {
        dots.append('M').append(Numbers.coordinate(x.at(value))).append(' ').append(y).append("h0");
        sum += value;
        least = Math.min(least, value);
        most = Math.max(most, value);
      }
      String label = member.codec().label();
      return new Row(
          grid.place(member.codec()),
          "c" + family.index() % 6,
          label,
          shortened(label),
          Integer.toString(y),
          dots.toString(),
          "M" + Numbers.coordinate(x.at(sum / psnr.size())) + " " + (y - 6) + "v12",
          Numbers.db(least) + " to " + Numbers.db(most));
    }

    private static String shortened(String label) {
      return label.codePointCount(0, label.length()) <= LONGEST_LABEL
          ? label
          : label.substring(0, label.offsetByCodePoints(0, LONGEST_LABEL - 1)) + "\u2026";
    }
  }
}
