package linkworthy.decision;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import linkworthy.statistics.Moments;
import linkworthy.statistics.StudentT;

/**
 * Where the order of two codecs changes along the severities of one noise.
 *
 * <p>The mean difference of PSNR, paired on the same noise and by picture, is taken as linear
 * between neighbouring severities (on their logarithm, unless the axis is in dB); the codecs cross
 * where it is 0. The interval holds the severities around it at which a paired t test over pictures
 * does not tell the codecs apart, the same lines drawn through each picture's differences:
 * Fieller's interval (1954, Journal of the Royal Statistical Society B 16:175-185), continued over
 * neighbouring pieces. It is of {@link StudentT#CONFIDENCE} for one crossing, not corrected for
 * several.
 *
 * @param below the codec that is better below the crossing, on the axis
 * @param above the codec that is better above it
 * @param at severity of the crossing
 * @param low lower end of the interval; NaN if the codecs are not told apart at any severity of the
 *     study below
 * @param high upper end of the interval, likewise
 */
public record Crossover(String below, String above, double at, double low, double high) {
  /** A severity: its place on the axis, and the differences of each picture. */
  private record Place(double x, Map<String, Double> differences) {}

  /**
   * All crossings of two codecs, in ascending order on the axis.
   *
   * @param conditions severities of one impairment on one axis; those without a finite figure of
   *     both codecs for each picture are left out
   */
  public static List<Crossover> of(
      Measurements measured, List<Measurements.Condition> conditions, String a, String b) {
    boolean logarithmic = conditions.stream().noneMatch(c -> c.axis().endsWith("-db"));
    List<Place> places = new ArrayList<>();
    for (Measurements.Condition condition : conditions) {
      double x = logarithmic ? StrictMath.log10(condition.severity()) : condition.severity();
      differences(measured, condition, a, b)
          .filter(d -> Double.isFinite(x))
          .ifPresent(d -> places.add(new Place(x, d)));
    }
    places.sort(Comparator.comparingDouble(Place::x));
    List<Piece> pieces = new ArrayList<>();
    for (int i = 1; i < places.size(); i++) {
      if (places.get(i).differences().keySet().equals(places.get(i - 1).differences().keySet())) {
        pieces.add(Piece.of(places.get(i - 1), places.get(i)));
      }
    }
    List<Crossover> crossings = new ArrayList<>();
    for (int i = 0; i < pieces.size(); i++) {
      double w = pieces.get(i).crossing(i + 1 < pieces.size() ? pieces.get(i + 1).rise : 0);
      if (!Double.isNaN(w)) {
        boolean falls = pieces.get(i).from > 0;
        crossings.add(
            new Crossover(
                falls ? a : b,
                falls ? b : a,
                severity(pieces.get(i).at(w), logarithmic),
                severity(lowEnd(pieces, i, w), logarithmic),
                severity(highEnd(pieces, i, w), logarithmic)));
      }
    }
    return crossings;
  }

  private static Optional<Map<String, Double>> differences(
      Measurements measured, Measurements.Condition condition, String a, String b) {
    Optional<Sample> first = measured.find(condition, a);
    Optional<Sample> second = measured.find(condition, b);
    if (first.isEmpty() || second.isEmpty()) {
      return Optional.empty();
    }
    Map<String, Double> differences = first.get().means(Measurements.PSNR);
    Map<String, Double> minus = second.get().means(Measurements.PSNR);
    differences.replaceAll((picture, psnr) -> psnr - minus.getOrDefault(picture, Double.NaN));
    return differences.values().stream().allMatch(Double::isFinite)
        ? Optional.of(differences)
        : Optional.empty();
  }

  private static double severity(double x, boolean logarithmic) {
    return logarithmic ? StrictMath.pow(10, x) : x;
  }

  private static double lowEnd(List<Piece> pieces, int from, double w) {
    for (int i = from; i >= 0; i--) {
      double end = pieces.get(i).lastRootBelow(i == from ? w : 1);
      if (!Double.isNaN(end)) {
        return pieces.get(i).at(end);
      }
    }
    return Double.NaN;
  }

  private static double highEnd(List<Piece> pieces, int from, double w) {
    for (int i = from; i < pieces.size(); i++) {
      double end = pieces.get(i).firstRootAbove(i == from ? w : 0);
      if (!Double.isNaN(end)) {
        return pieces.get(i).at(end);
      }
    }
    return Double.NaN;
  }

  /**
   * The line between two severities: at the share w of the way the mean difference is {@code from +
   * w rise}, and {@code c0 + c1 w + c2 w^2}, its square less t^2 times its squared standard error,
   * is below 0 where the test does not tell the codecs apart.
   */
  private record Piece(
      double x0, double x1, double from, double rise, double c0, double c1, double c2) {
    /** Pictures that all differ by the same have a double root, which rounding must not hide. */
    private static final double ROUNDING = 1e-12;

    static Piece of(Place low, Place high) {
      Moments at0 = new Moments();
      Moments change = new Moments();
      Moments at1 = new Moments();
      low.differences()
          .forEach(
              (picture, d0) -> {
                double d1 = high.differences().getOrDefault(picture, Double.NaN);
                at0.add(d0);
                at1.add(d1);
                change.add(d1 - d0);
              });
      long n = at0.count();
      double t = n < 2 ? Double.NaN : StudentT.quantile((1 + StudentT.CONFIDENCE) / 2, n - 1.0);
      double q = t * t / n;
      double both = (at1.variance() - at0.variance() - change.variance()) / 2;
      double m = at0.mean();
      double rise = change.mean();
      return new Piece(
          low.x(),
          high.x(),
          m,
          rise,
          m * m - q * at0.variance(),
          2 * (m * rise - q * both),
          rise * rise - q * change.variance());
    }

    double at(double w) {
      return x0 + w * (x1 - x0);
    }

    /** Where the mean difference changes its sign, on the way or at the far end; or NaN. */
    double crossing(double nextRise) {
      double to = from + rise;
      return from * to < 0 || (to == 0 && rise * nextRise > 0) ? -from / rise : Double.NaN;
    }

    double lastRootBelow(double w) {
      double last = Double.NaN;
      for (double root : roots()) {
        last = root >= 0 && root <= w && !(root <= last) ? root : last;
      }
      return last;
    }

    double firstRootAbove(double w) {
      double first = Double.NaN;
      for (double root : roots()) {
        first = root <= 1 && root >= w && !(root >= first) ? root : first;
      }
      return first;
    }

    private double[] roots() {
      double discriminant = c1 * c1 - 4 * c2 * c0;
      if (!(discriminant >= -ROUNDING * c1 * c1) || (c1 == 0 && c2 == 0)) {
        return new double[0];
      }
      double half = -(c1 + (c1 < 0 ? -1 : 1) * Math.sqrt(Math.max(0, discriminant))) / 2;
      return half == 0 ? new double[] {0} : new double[] {half / c2, c0 / half};
    }
  }
}
