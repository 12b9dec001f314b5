package linkworthy.noise;

import org.apache.commons.rng.UniformRandomProvider;

/**
 * Draws from the Poisson distribution in strict arithmetic (see {@link GaussianDraws} for why no
 * library is used). Means below 10: inversion by sequential search. From 10 to 1e8: transformed
 * rejection with squeeze, algorithm PTRS (Hoermann 1993, "The transformed rejection method for
 * generating Poisson random variables"). Above: the nearest whole number to a normal draw of the
 * same mean and variance, whose skewness of at most 1e-4 is left out.
 */
final class PoissonDraws {
  private static final double SEARCH_BELOW = 10;
  private static final double NORMAL_ABOVE = 1e8;

  /** No draw of a mean below 10 is larger, but by rounding: the chance is below 1e-70. */
  private static final int SEARCH_LIMIT = 120;

  private PoissonDraws() {}

  /**
   * The next draw.
   *
   * @param mean at least 0 and finite
   */
  static double next(double mean, UniformRandomProvider random) {
    if (mean < SEARCH_BELOW) {
      return search(mean, random);
    }
    return mean <= NORMAL_ABOVE
        ? reject(mean, random)
        : Math.floor(mean + Math.sqrt(mean) * GaussianDraws.next(random) + 0.5);
  }

  private static double search(double mean, UniformRandomProvider random) {
    double left = random.nextDouble();
    double probability = StrictMath.exp(-mean);
    int count = 0;
    while (left >= probability && count < SEARCH_LIMIT) {
      left -= probability;
      count++;
      probability *= mean / count;
    }
    return count;
  }

  private static double reject(double mean, UniformRandomProvider random) {
    double b = 0.931 + 2.53 * Math.sqrt(mean);
    double a = -0.059 + 0.02483 * b;
    double inverseAlpha = 1.1239 + 1.1328 / (b - 3.4);
    double squeeze = 0.9277 - 3.6224 / (b - 2);
    while (true) {
      double u = random.nextDouble() - 0.5;
      double v = random.nextDouble();
      double us = 0.5 - Math.abs(u);
      double count = Math.floor((2 * a / us + b) * u + mean + 0.43);
      if (us >= 0.07 && v <= squeeze) {
        return count;
      }
      if (count >= 0
          && (us >= 0.013 || v <= us)
          && StrictMath.log(v * inverseAlpha / (a / (us * us) + b))
              <= count * StrictMath.log(mean) - mean - logFactorial(count)) {
        return count;
      }
    }
  }

  /** ln n!, by its terms below 10 and Stirling's series, to an absolute 1e-10 or better, above. */
  private static double logFactorial(double n) {
    if (n < 10) {
      double product = 1;
      for (int i = 2; i <= n; i++) {
        product *= i;
      }
      return StrictMath.log(product);
    }
    double square = n * n;
    double series = (1 / 12.0 - (1 / 360.0 - 1 / (1260.0 * square)) / square) / n;
    return (n + 0.5) * StrictMath.log(n) - n + 0.5 * StrictMath.log(2 * Math.PI) + series;
  }
}
