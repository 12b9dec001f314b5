package linkworthy.decision;

import linkworthy.input.Require;
import linkworthy.statistics.Moments;
import linkworthy.statistics.SkewedMean;
import org.apache.commons.statistics.interval.BinomialConfidenceInterval;

/**
 * A one-sided lower and a one-sided upper bound for the same quantity, each of which is wrong with
 * a probability of its own.
 *
 * @param lower lower bound, or NaN if there is none
 * @param upper upper bound, or NaN if there is none
 */
public record Bounds(double lower, double upper) {
  /** Nothing is known. */
  static final Bounds NONE = new Bounds(Double.NaN, Double.NaN);

  /**
   * Bounds of a share, of which {@code hits} of {@code count} independent cases were seen (Clopper
   * and Pearson 1934, Biometrika 26:404-413). Wrong at most as often as stated, whatever the share;
   * mostly less often. The lower bound of no hit is 0, the upper one of nothing but hits 1.
   *
   * @param lowerError chance that the lower bound lies above the share, above 0 and below 0.5
   * @param upperError chance that the upper bound lies below it, likewise
   * @throws IllegalArgumentException if a number is out of range
   */
  public static Bounds ofShare(int hits, int count, double lowerError, double upperError) {
    Require.inRange(count, 1, Integer.MAX_VALUE, "number of cases");
    Require.inRange(hits, 0, count, "number of hits");
    return new Bounds(
        BinomialConfidenceInterval.CLOPPER_PEARSON
            .fromErrorRate(count, hits, 2 * error(lowerError))
            .getLowerBound(),
        BinomialConfidenceInterval.CLOPPER_PEARSON
            .fromErrorRate(count, hits, 2 * error(upperError))
            .getUpperBound());
  }

  /**
   * Bounds of the mean of a population of which these values are a sample: so many standard errors
   * from their mean as {@link SkewedMean} says. Equal values give bounds without width.
   *
   * @return no bounds for fewer than two values, or if one is not finite
   * @throws IllegalArgumentException if an error is not above 0 and below 0.5
   */
  public static Bounds ofMean(double[] values, double lowerError, double upperError) {
    error(lowerError);
    error(upperError);
    Moments moments = Moments.of(values);
    double variance = moments.variance();
    if (Double.isNaN(variance)) {
      return NONE;
    }
    double scale = Math.sqrt(variance / values.length);
    double skewness = SkewedMean.skewness(values);
    return new Bounds(
        moments.mean() - SkewedMean.standardErrors(lowerError, values.length, skewness) * scale,
        moments.mean() + SkewedMean.standardErrors(upperError, values.length, -skewness) * scale);
  }

  /** The wider of two pairs on either side; none where one has none. */
  Bounds or(Bounds other) {
    return new Bounds(Math.min(lower, other.lower), Math.max(upper, other.upper));
  }

  private static double error(double error) {
    if (!(error > 0 && error < 0.5)) {
      throw new IllegalArgumentException(
          "error of a bound is " + error + "; accepted: above 0 and below 0.5");
    }
    return error;
  }
}
