package linkworthy.statistics;

import linkworthy.input.Require;
import org.apache.commons.statistics.descriptive.Quantile;
import org.apache.commons.statistics.descriptive.Quantile.EstimationMethod;

/**
 * Sample quantiles of type 7 of Hyndman and Fan (1996, The American Statistician 50:361-365): with
 * the values in ascending order and counted from 0, linear interpolation at position {@code (n - 1)
 * p}.
 */
public final class Percentile {
  private static final Quantile TYPE_7 =
      Quantile.withDefaults().withCopy(true).with(EstimationMethod.HF7);

  private Percentile() {}

  /**
   * The value below which the share {@code p} of the values lies; NaN without values. Between a
   * finite and an infinite value it is infinite.
   *
   * @throws IllegalArgumentException if p lies outside 0 to 1
   */
  public static double of(double[] values, double p) {
    return TYPE_7.evaluate(values, Require.inRange(p, 0, 1, "share"));
  }
}
