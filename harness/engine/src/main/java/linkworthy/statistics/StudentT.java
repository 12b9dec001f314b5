package linkworthy.statistics;

import java.util.List;
import linkworthy.input.Require;
import org.apache.commons.statistics.distribution.TDistribution;

/**
 * Intervals and tests by Student's t distribution. Intervals are two-sided with {@link #CONFIDENCE}
 * and given as half-widths, in the unit of the values. NaN where the evidence is too thin: fewer
 * than two values, or an infinite one.
 */
public final class StudentT {
  /** Confidence of all intervals, a probability. */
  public static final double CONFIDENCE = 0.95;

  private StudentT() {}

  /**
   * The value that a t variable stays below with this probability. The library's inverse, which
   * stops within 1e-9, is refined by one step of Newton's method.
   *
   * @param probability 0 to 1
   * @param degreesOfFreedom above 0, not necessarily whole
   */
  public static double quantile(double probability, double degreesOfFreedom) {
    Require.inRange(probability, 0, 1, "probability");
    TDistribution distribution = distribution(degreesOfFreedom);
    double t = distribution.inverseCumulativeProbability(probability);
    double density = distribution.density(t);
    return density > 0 ? t + (probability - distribution.cumulativeProbability(t)) / density : t;
  }

  /** Half-width of the interval for the mean: {@code t s / sqrt(n)} with n - 1 degrees. */
  public static double halfWidth(Moments values) {
    return halfWidth(values.variance() / values.count(), values.count() - 1.0);
  }

  /**
   * Half-width of the interval for the mean of group means, every group counting the same and the
   * groups themselves held fixed: {@code SE^2 = (1/P^2) sum s_p^2 / R_p} over P groups of R_p
   * values, with the degrees of freedom of Satterthwaite (1946, Biometrics Bulletin 2:110-114) and
   * Welch (1947, Biometrika 34:28-35). Groups whose values are all equal add nothing. NaN without
   * groups, or if any group has fewer than two values or an infinite one.
   */
  public static double halfWidthOfGroups(List<Moments> groups) {
    return halfWidthOfGroups(
        groups.stream().mapToDouble(g -> g.variance() / g.count()).toArray(),
        groups.stream().mapToLong(Moments::count).toArray());
  }

  /**
   * @param parts {@code s_p^2 / R_p} of each group
   * @param counts {@code R_p}
   */
  static double halfWidthOfGroups(double[] parts, long[] counts) {
    double sum = 0;
    for (double part : parts) {
      sum += part;
    }
    double squares = 0;
    for (int p = 0; p < parts.length; p++) {
      double share = parts[p] / sum;
      squares += share * share / (counts[p] - 1.0);
    }
    double scale = (double) parts.length * parts.length;
    return halfWidth(sum / scale, sum > 0 ? 1 / squares : 1);
  }

  private static double halfWidth(double squaredStandardError, double degreesOfFreedom) {
    if (Double.isNaN(squaredStandardError)) {
      return Double.NaN;
    }
    return quantile((1 + CONFIDENCE) / 2, degreesOfFreedom) * Math.sqrt(squaredStandardError);
  }

  /**
   * The two-sided p value of the hypothesis that paired differences have mean 0. Differences that
   * are all equal give 1 if they are 0 and 0 otherwise. NaN for fewer than two differences or if
   * one is not finite.
   */
  public static double pairedP(Moments differences) {
    double variance = differences.variance();
    if (Double.isNaN(variance)) {
      return Double.NaN;
    }
    if (variance == 0) {
      return differences.mean() == 0 ? 1 : 0;
    }
    double t = differences.mean() / Math.sqrt(variance / differences.count());
    return 2 * distribution(differences.count() - 1.0).survivalProbability(Math.abs(t));
  }

  static TDistribution distribution(double degreesOfFreedom) {
    return TDistribution.of(Require.positive(degreesOfFreedom, "degrees of freedom"));
  }
}
