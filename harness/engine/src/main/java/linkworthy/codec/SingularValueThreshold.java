package linkworthy.codec;

/**
 * The hard threshold for singular values of Gavish and Donoho, "The optimal hard threshold for
 * singular values is 4/sqrt(3)", IEEE Transactions on Information Theory 60 (2014) 5040-5053. A
 * matrix of d by n with white noise on it has the shape {@code beta = min(d, n) / max(d, n)}; what
 * lies below the threshold is better left out, in the sense of asymptotic mean squared error.
 */
final class SingularValueThreshold {
  private SingularValueThreshold() {}

  /** {@code min(d, n) / max(d, n)}. */
  static double shape(int d, int n) {
    return (double) Math.min(d, n) / Math.max(d, n);
  }

  /**
   * Threshold over {@code sqrt(max(d, n)) * sigma} where the noise's standard deviation sigma is
   * known; 4/sqrt(3) for square matrices.
   *
   * @param beta above 0, up to 1
   */
  static double lambda(double beta) {
    double sum = beta + 1;
    return Math.sqrt(2 * sum + 8 * beta / (sum + Math.sqrt(beta * beta + 14 * beta + 1)));
  }

  /**
   * Threshold over the median singular value where the noise is unknown: {@code lambda} over the
   * square root of the median of the Marchenko-Pastur distribution.
   */
  static double omega(double beta) {
    return lambda(beta) / Math.sqrt(marchenkoPasturMedian(beta));
  }

  /**
   * Median of the Marchenko-Pastur distribution of unit variance. With {@code t = 1 + beta - 2 r
   * cos(a)}, {@code r = sqrt(beta)}, its distribution function is {@code (a + (1 - 1/beta) atan2(r
   * sin a, 1 - r cos a) + sin(a) / r) / pi}, solved by bisection.
   */
  static double marchenkoPasturMedian(double beta) {
    double r = Math.sqrt(beta);
    double low = 0;
    double high = StrictMath.PI;
    for (int i = 0; i < 60; i++) {
      double a = (low + high) / 2;
      double sine = StrictMath.sin(a);
      double angle = StrictMath.atan2(r * sine, 1 - r * StrictMath.cos(a));
      if (a + (1 - 1 / beta) * angle + sine / r < StrictMath.PI / 2) {
        low = a;
      } else {
        high = a;
      }
    }
    return 1 + beta - 2 * r * StrictMath.cos(low);
  }
}
