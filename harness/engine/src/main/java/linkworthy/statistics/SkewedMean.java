package linkworthy.statistics;

import linkworthy.input.Require;

/**
 * One-sided bounds for the mean of a population that may be skewed, in standard errors {@code s /
 * sqrt(n)} of a sample of n values.
 *
 * <p>Student's t is wrong too often on the side of the shorter tail: a sample that happens to lie
 * there has a small standard deviation as well. To first order in {@code 1 / sqrt(n)} its quantile
 * moves by {@code -g (1 + 2 t^2) / (6 sqrt(n))} for a skewness g (Johnson 1978, Journal of the
 * American Statistical Association 73:536-544; Hall 1983, Annals of Probability 11:569-576). The
 * bound takes this where it is the more cautious one and t itself otherwise.
 *
 * <p>A small sample shows its population's skewness badly, least of all where it lies in the short
 * tail. Therefore it counts {@code 1 + 24 / max(n, 12)} times: chosen by simulation, so that bounds
 * of 12 and more values from a gamma distribution of skewness 1 are wrong in 5 % where 5 % are
 * stated. The price: those of normal values are wrong in 3.7 % for 12 and in 4.8 % for 60.
 */
public final class SkewedMean {
  private static final double CORRECTION = 24;
  private static final long FEWEST = 12;

  private SkewedMean() {}

  /**
   * Sample skewness {@code G1 = sqrt(n (n - 1)) / (n - 2) m3 / m2^(3/2)} with the central moments
   * m2 and m3 (Joanes and Gill 1998, The Statistician 47:183-189). 0 for fewer than three values
   * and for equal ones; NaN if one is not finite.
   */
  public static double skewness(double... values) {
    Moments moments = Moments.of(values);
    int count = values.length;
    if (count < 3 || moments.variance() == 0) {
      return 0;
    }
    double mean = moments.mean();
    double scale = moments.standardDeviation();
    double sum = 0;
    for (double value : values) {
      double z = (value - mean) / scale;
      sum += z * z * z;
    }
    return sum * count / ((count - 1.0) * (count - 2.0));
  }

  /**
   * How many standard errors the lower bound lies below the mean; the upper bound lies as far above
   * it as the lower one for the opposite skewness lies below.
   *
   * @param error chance that the bound is wrong, below 0.5
   * @param count number of values
   * @param skewness of the sample, as {@link #skewness} has it
   * @throws IllegalArgumentException if the error is no probability or the count is below 2
   */
  public static double standardErrors(double error, long count, double skewness) {
    double t = StudentT.quantile(1 - error, Require.positive(count - 1.0, "degrees of freedom"));
    double counted = (1 + CORRECTION / (double) Math.max(count, FEWEST)) * Math.max(0, -skewness);
    return t + counted * (1 + 2 * t * t) / (6 * Math.sqrt((double) count));
  }
}
