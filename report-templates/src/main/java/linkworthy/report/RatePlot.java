package linkworthy.report;

import java.util.ArrayList;
import java.util.Collection;
import java.util.Comparator;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.stream.Collectors;

/**
 * Mean PSNR against sent bits per pixel in one condition: a marker for each codec, a line through
 * those of a family whose labels differ in numbers alone, a ring around those that no other codec
 * dominates.
 */
record RatePlot(
    String id,
    String title,
    String description,
    List<LinePlot.Tick> horizontal,
    List<LinePlot.Tick> vertical,
    List<Curve> curves,
    List<Label> labels) {
  /** The frame of the drawing. */
  public PlotBox box() {
    return new PlotBox(LEFT, RIGHT, TOP, BOTTOM);
  }

  static final int WIDTH = 400;
  static final int HEIGHT = 310;
  static final int LEFT = 36;
  static final int RIGHT = 384;
  static final int TOP = 28;
  static final int BOTTOM = 266;

  /** A family: its lines as path data, and its codecs. */
  record Curve(String css, String path, List<Marker> markers) {}

  /** A codec: its place in the study, its marker as path data, and whether it has a ring. */
  record Marker(int at, String path, LinePlot.Spot spot, boolean ring) {}

  /** The name of a codec beside its marker. */
  record Label(int at, String x, String y, String text, boolean strong) {}

  private record Point(
      CodecFamily family,
      CodecFamily.Member member,
      double bits,
      double psnr,
      boolean front,
      int at,
      String id) {}

  /** The plot, or nothing where no codec has both numbers. */
  static List<RatePlot> of(
      FigureGrid grid, List<CodecFamily> families, Condition condition, String id, String title) {
    List<Point> points = points(grid, families, condition);
    if (points.isEmpty()) {
      return List.of();
    }
    double[] bits = points.stream().mapToDouble(Point::bits).sorted().toArray();
    double[] psnr = points.stream().mapToDouble(Point::psnr).sorted().toArray();
    Axis x = Axis.log(bits[0], bits[bits.length - 1], LEFT + 8, RIGHT - 20);
    Axis y = Axis.linear(psnr[0], psnr[psnr.length - 1], BOTTOM - 6, TOP + 12);
    return List.of(
        new RatePlot(
            id,
            title,
            "Mean PSNR against sent bits per pixel, "
                + title
                + "; the numbers are in the table below.",
            ticks(x),
            ticks(y),
            curves(families, points, x, y),
            labels(points, x, y)));
  }

  /** Codecs that no other one dominates in this condition. */
  static List<CodecColumn> front(FigureGrid grid, Condition condition) {
    return grid.codecs().stream()
        .filter(c -> !Double.isNaN(grid.bits(condition, c) + grid.psnr(condition, c)))
        .filter(
            c ->
                grid.codecs().stream()
                    .noneMatch(
                        o ->
                            Dominance.over(
                                grid.bits(condition, o),
                                grid.psnr(condition, o),
                                grid.bits(condition, c),
                                grid.psnr(condition, c))))
        .toList();
  }

  private static List<Point> points(
      FigureGrid grid, List<CodecFamily> families, Condition condition) {
    List<CodecColumn> front = front(grid, condition);
    List<Point> points = new ArrayList<>();
    for (CodecFamily family : families) {
      for (CodecFamily.Member member : family.members()) {
        double bits = grid.bits(condition, member.codec());
        double psnr = grid.psnr(condition, member.codec());
        if (bits > 0 && Double.isFinite(bits) && Double.isFinite(psnr)) {
          points.add(
              new Point(
                  family,
                  member,
                  bits,
                  psnr,
                  front.contains(member.codec()),
                  grid.place(member.codec()),
                  grid.id(condition, member.codec().label())));
        }
      }
    }
    return points;
  }

  private static List<LinePlot.Tick> ticks(Axis axis) {
    return axis.ticks().stream()
        .map(v -> new LinePlot.Tick(Numbers.coordinate(axis.at(v)), Numbers.typed(v)))
        .toList();
  }

  /** Codecs of a family whose labels differ in numbers alone, by their bits: one line each. */
  private static Collection<List<Point>> lines(CodecFamily family, List<Point> points) {
    return points.stream()
        .filter(p -> p.family().index() == family.index())
        .sorted(Comparator.comparingDouble(Point::bits))
        .collect(
            Collectors.groupingBy(
                p -> p.member().label().replaceAll("[0-9.]+", "0"),
                LinkedHashMap::new,
                Collectors.toList()))
        .values();
  }

  private static List<Curve> curves(
      List<CodecFamily> families, List<Point> points, Axis x, Axis y) {
    List<Curve> curves = new ArrayList<>();
    for (CodecFamily family : families) {
      StringBuilder path = new StringBuilder();
      List<Marker> markers = new ArrayList<>();
      for (List<Point> line : lines(family, points)) {
        char step = 'M';
        for (Point p : line) {
          String across = Numbers.coordinate(x.at(p.bits()));
          String up = Numbers.coordinate(y.at(p.psnr()));
          path.append(step).append(across).append(' ').append(up);
          step = 'L';
          markers.add(
              new Marker(
                  p.at(),
                  Shape.at(p.member().index(), x.at(p.bits()), y.at(p.psnr())),
                  new LinePlot.Spot(across, up, p.id()),
                  p.front()));
        }
      }
      String css = "c" + family.index() % 6 + " d" + family.index() % Shape.KINDS;
      curves.add(new Curve(css, path.toString(), markers));
    }
    return curves;
  }

  /**
   * Names beside markers, the rings' first; a name that finds no free place is left to the table.
   */
  private static List<Label> labels(List<Point> points, Axis x, Axis y) {
    List<double[]> taken = new ArrayList<>();
    for (Point p : points) {
      taken.add(new double[] {x.at(p.bits()) - 5, y.at(p.psnr()) - 5, 10, 10});
    }
    List<Label> labels = new ArrayList<>();
    points.stream()
        .sorted(Comparator.comparing((Point p) -> !p.front()))
        .forEach(p -> place(p, x.at(p.bits()), y.at(p.psnr()), taken, labels));
    return labels;
  }

  private static void place(
      Point point, double x, double y, List<double[]> taken, List<Label> labels) {
    String text = point.member().label();
    double width = (point.front() ? 7.2 : 6.4) * text.codePointCount(0, text.length());
    double near = point.front() ? 10 : 7;
    double[][] boxes = {
      {x + near, y - 6, width, 12},
      {x - near - width, y - 6, width, 12},
      {x - width / 2, y - 13 - near, width, 12},
      {x - width / 2, y + near + 1, width, 12},
    };
    for (double[] box : boxes) {
      boolean inside =
          box[0] > LEFT && box[0] + width < WIDTH && box[1] > TOP - 12 && box[1] + 12 < BOTTOM;
      if (inside && taken.stream().noneMatch(other -> overlap(box, other))) {
        taken.add(box);
        labels.add(
            new Label(
                point.at(),
                Numbers.coordinate(box[0] + width / 2),
                Numbers.coordinate(box[1] + 10),
                text,
                point.front()));
        return;
      }
    }
  }

  private static boolean overlap(double[] a, double[] b) {
    return a[0] < b[0] + b[2] && b[0] < a[0] + a[2] && a[1] < b[1] + b[3] && b[1] < a[1] + a[3];
  }
}
