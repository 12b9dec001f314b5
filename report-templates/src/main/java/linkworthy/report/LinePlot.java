package linkworthy.report;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.function.ToDoubleFunction;
import java.util.stream.DoubleStream;
import java.util.stream.Stream;

/**
 * PSNR against equivalent noise variance: one panel for at most six codecs of a family, the other
 * codecs faint behind them. All panels of an impairment share their axes. The clean condition has
 * no place on a logarithmic axis and stands apart on the left. Infinite values are not drawn.
 */
record LinePlot(
    String id,
    String title,
    String description,
    List<Tick> horizontal,
    List<Tick> vertical,
    List<Tick> top,
    String context,
    List<Line> lines,
    List<Fact> key) {
  /** The frame of the drawing. */
  public PlotBox box() {
    return new PlotBox(LEFT, RIGHT, TOP, BOTTOM);
  }

  static final int WIDTH = 300;
  static final int HEIGHT = 280;
  static final int LEFT = 34;
  static final int RIGHT = 234;
  static final int TOP = 44;
  static final int BOTTOM = 236;

  private static final int CLEAN_AT = 50;
  private static final int NOISY_FROM = 68;
  private static final int LONGEST_LABEL = 6;

  /** A place on an axis and what is written there. */
  record Tick(String at, String label) {}

  /** Where a figure is drawn, and by which the page finds its row among all figures. */
  record Spot(String x, String y, String id) {}

  /**
   * A codec's line as path data.
   *
   * @param at the codec's place in the study
   * @param css classes for colour and dash
   * @param whiskers picture intervals
   * @param noise noise intervals
   * @param leader from the last point to a label that had to move, or empty
   */
  record Line(
      int at,
      String css,
      String path,
      String whiskers,
      String noise,
      String markers,
      String leader,
      String label,
      String labelAt,
      List<Spot> spots) {}

  /** All panels of an impairment; none if nothing can be drawn. */
  static List<LinePlot> of(
      FigureGrid grid, List<CodecFamily> families, FigureGrid.Noise noise, String id) {
    List<Condition> noisy =
        noise.conditions().stream()
            .filter(c -> c.equivalentNoiseVariance() > 0)
            .filter(c -> Double.isFinite(c.equivalentNoiseVariance()))
            .toList();
    double[] values = values(grid, noisy);
    if (noisy.isEmpty() || values.length == 0) {
      return List.of();
    }
    double[] variances =
        noisy.stream().mapToDouble(Condition::equivalentNoiseVariance).sorted().toArray();
    Scene scene =
        new Scene(
            grid,
            noise,
            noisy,
            Axis.log(variances[0], variances[variances.length - 1], NOISY_FROM, RIGHT),
            Axis.linear(values[0], values[values.length - 1], BOTTOM, TOP));
    List<LinePlot> plots = new ArrayList<>();
    for (CodecFamily family : families) {
      List<CodecFamily.Member> members = family.members();
      int parts = (members.size() + Shape.KINDS - 1) / Shape.KINDS;
      for (int part = 0; part < parts; part++) {
        List<CodecFamily.Member> some =
            members.subList(members.size() * part / parts, members.size() * (part + 1) / parts);
        String title =
            family.heading() + (parts > 1 ? " (" + (part + 1) + " of " + parts + ")" : "");
        plots.add(new Panel(scene, families, family, some).draw(id + "-" + plots.size(), title));
      }
    }
    return plots;
  }

  private static double[] values(FigureGrid grid, List<Condition> noisy) {
    return Stream.concat(noisy.stream(), grid.clean().stream())
        .flatMap(c -> grid.codecs().stream().flatMap(codec -> grid.find(c, codec).stream()))
        .map(Figure::quality)
        .flatMapToDouble(
            q ->
                DoubleStream.of(
                    q.psnrMeanDb(),
                    q.psnrMeanDb() - q.pictureHalfWidthDb(),
                    q.psnrMeanDb() + q.pictureHalfWidthDb()))
        .filter(Double::isFinite)
        .sorted()
        .toArray();
  }

  /** What the panels of an impairment share. */
  private record Scene(
      FigureGrid grid, FigureGrid.Noise noise, List<Condition> noisy, Axis x, Axis y) {
    /** The clean condition, then the noisy ones from mild to harsh. */
    List<Condition> places() {
      return Stream.concat(grid.clean().stream(), noisy.stream()).toList();
    }

    double across(Condition condition) {
      return condition.isClean() ? CLEAN_AT : x.at(condition.equivalentNoiseVariance());
    }

    List<Tick> horizontal() {
      List<Tick> ticks = new ArrayList<>();
      grid.clean().ifPresent(c -> ticks.add(tick(CLEAN_AT, "clean")));
      x.ticks().forEach(v -> ticks.add(tick(x.at(v), Numbers.typed(v))));
      return spaced(ticks);
    }

    List<Tick> top() {
      List<Tick> ticks = new ArrayList<>();
      for (Condition condition : noisy) {
        if (Double.isFinite(condition.snrDb())) {
          double snr = Math.rint(condition.snrDb() * 10) / 10;
          ticks.add(tick(across(condition), Numbers.typed(snr)));
        }
      }
      return spaced(ticks);
    }

    List<Tick> vertical() {
      return y.ticks().stream().map(v -> tick(y.at(v), Numbers.typed(v))).toList();
    }

    private static Tick tick(double at, String label) {
      return new Tick(Numbers.coordinate(at), label);
    }

    /** Leaves out the ticks whose label would touch the one before. */
    private static List<Tick> spaced(List<Tick> ticks) {
      List<Tick> kept = new ArrayList<>();
      double last = Double.NEGATIVE_INFINITY;
      for (Tick tick : ticks) {
        double at = Double.parseDouble(tick.at());
        double half = 3.4 * tick.label().length();
        if (at - half >= last + 4) {
          kept.add(tick);
          last = at + half;
        }
      }
      return kept;
    }
  }

  /** The codecs of one panel. */
  private record Panel(
      Scene scene,
      List<CodecFamily> families,
      CodecFamily family,
      List<CodecFamily.Member> members) {
    LinePlot draw(String id, String title) {
      boolean direct = members.stream().allMatch(m -> m.label().length() <= LONGEST_LABEL);
      List<Fact> key = new ArrayList<>();
      List<Draft> drafts = new ArrayList<>();
      for (int i = 0; i < members.size(); i++) {
        String label = direct ? members.get(i).label() : String.valueOf((char) ('A' + i));
        if (!direct) {
          key.add(new Fact(label, members.get(i).label()));
        }
        drafts.add(draft(i, label));
      }
      return new LinePlot(
          id,
          title,
          "Mean PSNR of "
              + (title + " against the equivalent noise variance of " + scene.noise().title())
              + "; the numbers are in the table above.",
          scene.horizontal(),
          scene.vertical(),
          scene.top(),
          context(),
          placed(drafts),
          key);
    }

    private String context() {
      StringBuilder path = new StringBuilder();
      for (CodecFamily other : families) {
        for (CodecFamily.Member member : other.members()) {
          if (!members.contains(member)) {
            path.append(path(member.codec(), 0));
          }
        }
      }
      return path.toString();
    }

    private String path(CodecColumn codec, double shift) {
      StringBuilder path = new StringBuilder();
      boolean pen = false;
      Axis y = scene.y();
      for (Condition condition : scene.noisy()) {
        double psnr = scene.grid().psnr(condition, codec);
        if (Double.isFinite(psnr)) {
          path.append(pen ? 'L' : 'M').append(point(scene.across(condition) + shift, y.at(psnr)));
        }
        pen = Double.isFinite(psnr);
      }
      return path.toString();
    }

    private Draft draft(int i, String label) {
      CodecFamily.Member member = members.get(i);
      double shift = (i - (members.size() - 1) / 2.0) * 2;
      Axis y = scene.y();
      StringBuilder whiskers = new StringBuilder();
      StringBuilder noise = new StringBuilder();
      StringBuilder markers = new StringBuilder();
      List<Spot> spots = new ArrayList<>();
      double endX = RIGHT;
      double endY = Double.NaN;
      for (Condition condition : scene.places()) {
        double psnr = scene.grid().psnr(condition, member.codec());
        if (Double.isFinite(psnr)) {
          double x = scene.across(condition) + shift;
          markers.append(Shape.at(member.index(), x, y.at(psnr)));
          whiskers.append(whisker(condition, member.codec(), x, y, q -> q.pictureHalfWidthDb()));
          noise.append(whisker(condition, member.codec(), x, y, q -> q.noiseHalfWidthDb()));
          spots.add(
              new Spot(
                  Numbers.coordinate(x),
                  Numbers.coordinate(y.at(psnr)),
                  scene.grid().id(condition, member.codec().label())));
          endX = x;
          endY = y.at(psnr);
        }
      }
      String css = "c" + family.index() % 6 + " d" + member.index() % Shape.KINDS;
      Line line =
          new Line(
              scene.grid().place(member.codec()),
              css,
              path(member.codec(), shift),
              whiskers.toString(),
              noise.toString(),
              markers.toString(),
              "",
              label,
              "",
              List.copyOf(spots));
      return new Draft(line, endX, endY);
    }

    private String whisker(
        Condition condition,
        CodecColumn codec,
        double x,
        Axis y,
        ToDoubleFunction<Figure.Quality> halfWidth) {
      double psnr = scene.grid().psnr(condition, codec);
      double half =
          scene
              .grid()
              .find(condition, codec)
              .map(f -> halfWidth.applyAsDouble(f.quality()))
              .orElse(Double.NaN);
      return Double.isFinite(half)
          ? "M" + point(x, y.at(psnr - half)) + "L" + point(x, y.at(psnr + half))
          : "";
    }

    private static String point(double x, double y) {
      return Numbers.coordinate(x) + " " + Numbers.coordinate(y);
    }

    /** Labels at the right ends, moved apart where they would touch. */
    private List<Line> placed(List<Draft> drafts) {
      List<Draft> order =
          drafts.stream()
              .filter(d -> !Double.isNaN(d.endY()))
              .sorted(Comparator.comparingDouble(Draft::endY))
              .toList();
      double[] at = apart(order.stream().mapToDouble(Draft::endY).toArray());
      List<Line> lines = new ArrayList<>();
      for (int i = 0; i < drafts.size(); i++) {
        Draft draft = drafts.get(i);
        int place = order.indexOf(draft);
        if (place < 0) {
          lines.add(draft.placed("", "", ""));
          continue;
        }
        String leader =
            "M" + point(draft.endX() + 5, draft.endY()) + "L" + point(RIGHT + 7, at[place]);
        String sign = Shape.at(members.get(i).index(), RIGHT + 12, at[place]);
        lines.add(draft.placed(leader, sign, Numbers.coordinate(at[place] + 4)));
      }
      return lines;
    }

    /**
     * The places nearest to the wanted ones, in the least-squares sense, that keep a gap: isotonic
     * regression by pooling adjacent violators, then moved up where it would leave the frame.
     */
    private static double[] apart(double[] wanted) {
      double gap = 13;
      List<double[]> pools = new ArrayList<>();
      for (int i = 0; i < wanted.length; i++) {
        double[] pool = {wanted[i] - i * gap, 1};
        while (!pools.isEmpty() && pools.get(pools.size() - 1)[0] > pool[0]) {
          double[] last = pools.remove(pools.size() - 1);
          double size = last[1] + pool[1];
          pool = new double[] {(last[0] * last[1] + pool[0] * pool[1]) / size, size};
        }
        pools.add(pool);
      }
      double[] at = new double[wanted.length];
      int i = 0;
      for (double[] pool : pools) {
        for (int k = 0; k < pool[1]; k++, i++) {
          double most = BOTTOM - (wanted.length - 1 - i) * gap;
          at[i] = Math.min(pool[0] + i * gap, most);
        }
      }
      return at;
    }
  }

  /** A line whose label has no place yet. */
  private record Draft(Line line, double endX, double endY) {
    Line placed(String leader, String sign, String labelAt) {
      return new Line(
          line.at(),
          line.css(),
          line.path(),
          line.whiskers(),
          line.noise(),
          line.markers() + sign,
          leader,
          labelAt.isEmpty() ? "" : line.label(),
          labelAt,
          line.spots());
    }
  }
}
