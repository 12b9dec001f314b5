package linkworthy.noise;

import linkworthy.corpus.Picture;
import linkworthy.input.Require;

/**
 * What a severity needs to know of the clean picture.
 *
 * @param power signal power S, in grey levels squared: the population variance, or the mean square
 *     where the study says so
 * @param mean mean sample, in grey levels
 * @param meanSquare E[x^2], in grey levels squared
 * @param variance population variance, in grey levels squared
 * @param peak largest sample value P
 */
public record SignalStatistics(
    double power, double mean, double meanSquare, double variance, int peak) {
  public SignalStatistics {
    Require.notNegative(power, "signal power (grey levels squared)");
    Require.notNegative(variance, "variance (grey levels squared)");
    Require.inRange(peak, 1, 65_535, "peak (grey levels)");
  }

  /** Statistics of a picture with its variance as the signal power. */
  public static SignalStatistics of(Picture picture) {
    double variance = picture.variance();
    return new SignalStatistics(
        variance, picture.mean(), picture.meanSquare(), variance, picture.peak());
  }
}
