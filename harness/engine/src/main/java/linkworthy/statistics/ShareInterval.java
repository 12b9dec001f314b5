package linkworthy.statistics;

import linkworthy.input.Require;
import org.apache.commons.statistics.interval.BinomialConfidenceInterval;

/**
 * A two-sided interval for a share, from 0 to 1.
 *
 * @param lower the lower end
 * @param upper the upper end
 */
public record ShareInterval(double lower, double upper) {
  /**
   * Wilson's score interval (1927, Journal of the American Statistical Association 22:209-212) for
   * the share of which {@code hits} of {@code count} cases were seen. Right on average over all
   * shares, not for each. Cases are taken as independent; where they have unlike chances, as trials
   * of several pictures do, it is wide rather than narrow for the mean of these chances.
   *
   * @param confidence above 0 and below 1
   * @throws IllegalArgumentException if a number is out of range
   */
  public static ShareInterval wilson(int hits, int count, double confidence) {
    Require.inRange(count, 1, Integer.MAX_VALUE, "number of cases");
    Require.inRange(hits, 0, count, "number of hits");
    var interval =
        BinomialConfidenceInterval.WILSON_SCORE.fromErrorRate(count, hits, 1 - confidence);
    return new ShareInterval(
        Math.max(0, interval.getLowerBound()), Math.min(1, interval.getUpperBound()));
  }
}
