package linkworthy.decision;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import linkworthy.input.Require;

/**
 * Quality against rate of one family of codecs: points in ascending order of rate.
 *
 * @param points at least {@value #FEWEST}, rate above 0, rate and PSNR both increasing throughout
 */
public record RateCurve(List<Point> points) {
  /** Fewer points are no curve; common practice, no source. */
  public static final int FEWEST = 3;

  /**
   * A codec.
   *
   * @param rate sent bits, in any unit that all curves share
   * @param psnrDb in dB
   */
  public record Point(double rate, double psnrDb) {
    public Point {
      Require.positive(rate, "rate");
      Require.finite(psnrDb, "PSNR");
    }
  }

  /**
   * Sorts the points by rate.
   *
   * @throws IllegalArgumentException if there are too few points, or a point has no more rate or no
   *     more PSNR than the one before: more bits for no gain are no trade-off, and averages over
   *     such a curve mean nothing
   */
  public RateCurve {
    if (points.size() < FEWEST) {
      throw new IllegalArgumentException(
          "a curve of " + points.size() + " points; accepted: at least " + FEWEST);
    }
    List<Point> sorted = new ArrayList<>(points);
    sorted.sort(Comparator.comparingDouble(Point::rate).thenComparingDouble(Point::psnrDb));
    for (int i = 1; i < sorted.size(); i++) {
      if (sorted.get(i).rate() <= sorted.get(i - 1).rate()) {
        throw new IllegalArgumentException(
            "two points have the same rate; accepted: different ones");
      }
      if (sorted.get(i).psnrDb() <= sorted.get(i - 1).psnrDb()) {
        throw new IllegalArgumentException(
            "PSNR does not increase with rate; accepted: a curve that rises throughout");
      }
    }
    points = List.copyOf(sorted);
  }

  double[] logRates() {
    return points.stream().mapToDouble(point -> StrictMath.log10(point.rate())).toArray();
  }

  double[] psnrsDb() {
    return points.stream().mapToDouble(Point::psnrDb).toArray();
  }
}
