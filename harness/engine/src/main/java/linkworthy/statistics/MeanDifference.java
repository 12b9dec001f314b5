package linkworthy.statistics;

import linkworthy.input.Require;
import org.apache.commons.statistics.distribution.TDistribution;

/**
 * A difference of two means with what is known of its error, for tests and intervals by Student's t
 * distribution. NaN stands where the evidence is too thin: fewer than two values on a side, or an
 * infinite one.
 *
 * @param estimate the difference, first minus second
 * @param standardError of the estimate, in the unit of the values, or NaN
 * @param degreesOfFreedom of that error, not necessarily whole, or NaN
 */
public record MeanDifference(double estimate, double standardError, double degreesOfFreedom) {
  /** From differences of pairs: {@code SE = s / sqrt(n)} with n - 1 degrees of freedom. */
  public static MeanDifference paired(Moments differences) {
    double squared = differences.variance() / differences.count();
    return new MeanDifference(differences.mean(), Math.sqrt(squared), degrees(differences));
  }

  /**
   * From independent samples of unlike variance (Welch 1947, Biometrika 34:28-35): {@code SE^2 =
   * s1^2/n1 + s2^2/n2}, with the degrees of freedom of Satterthwaite (1946, Biometrics Bulletin
   * 2:110-114).
   */
  public static MeanDifference welch(Moments first, Moments second) {
    return welch(
        first.mean() - second.mean(),
        first.variance() / first.count(),
        degrees(first),
        second.variance() / second.count(),
        degrees(second));
  }

  static MeanDifference welch(
      double estimate, double squared1, double degrees1, double squared2, double degrees2) {
    double sum = squared1 + squared2;
    double share1 = squared1 / sum;
    double share2 = squared2 / sum;
    double degrees =
        sum == 0
            ? Math.min(degrees1, degrees2)
            : 1 / (share1 * share1 / degrees1 + share2 * share2 / degrees2);
    return new MeanDifference(estimate, Math.sqrt(sum), Double.isNaN(sum) ? Double.NaN : degrees);
  }

  private static double degrees(Moments values) {
    return Double.isNaN(values.variance()) ? Double.NaN : values.count() - 1.0;
  }

  /** The estimate over its standard error. */
  public double t() {
    return estimate / standardError;
  }

  /**
   * The two-sided p value of the hypothesis that the means are equal. Without any scatter it is 1
   * for equal means and 0 otherwise.
   */
  public double p() {
    if (Double.isNaN(standardError)) {
      return Double.NaN;
    }
    if (standardError == 0) {
      return estimate == 0 ? 1 : 0;
    }
    return 2 * distribution().survivalProbability(Math.abs(t()));
  }

  /** Half-width of the interval with {@link StudentT#CONFIDENCE}. */
  public double halfWidth() {
    return Double.isNaN(standardError)
        ? Double.NaN
        : StudentT.quantile((1 + StudentT.CONFIDENCE) / 2, degreesOfFreedom) * standardError;
  }

  /**
   * The p value of the hypothesis that the means differ by the margin or more: the larger of two
   * one-sided tests (Schuirmann 1987, Journal of Pharmacokinetics and Biopharmaceutics 15:657-680).
   * Below alpha, the means are equivalent within the margin. Without any scatter it is 0 for a
   * difference smaller than the margin and 1 otherwise.
   *
   * @throws IllegalArgumentException if the margin is negative or not finite
   */
  public double equivalenceP(double margin) {
    Require.notNegative(margin, "margin");
    if (Double.isNaN(standardError)) {
      return Double.NaN;
    }
    if (standardError == 0) {
      return Math.abs(estimate) < margin ? 0 : 1;
    }
    TDistribution distribution = distribution();
    return Math.max(
        distribution.survivalProbability((estimate + margin) / standardError),
        distribution.cumulativeProbability((estimate - margin) / standardError));
  }

  private TDistribution distribution() {
    return StudentT.distribution(degreesOfFreedom);
  }
}
