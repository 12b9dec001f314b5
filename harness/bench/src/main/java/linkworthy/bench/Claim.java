package linkworthy.bench;

import java.util.Locale;
import org.apache.commons.statistics.distribution.BinomialDistribution;

/**
 * How often something happened in a simulation, beside how often it may.
 *
 * @param table the table it stands in
 * @param row its row there
 * @param column its column there
 * @param hits how often it happened
 * @param count out of how many repetitions
 * @param lowest probability that is promised, from 0
 * @param highest probability that is promised, up to 1
 * @param note what else is worth knowing, or empty
 */
record Claim(
    String table,
    String row,
    String column,
    int hits,
    int count,
    double lowest,
    double highest,
    String note) {
  /** Share of the repetitions. */
  double share() {
    return (double) hits / count;
  }

  /** Monte Carlo standard error of the share. */
  double standardError() {
    return Math.sqrt(share() * (1 - share()) / count);
  }

  /**
   * Whether so many or so few hits would be rarer than the tail under every probability promised:
   * with one that is promised the answer is wrongly yes at most so often.
   */
  boolean isBroken(double tail) {
    return hits < BinomialDistribution.of(count, lowest).inverseCumulativeProbability(tail)
        || hits > BinomialDistribution.of(count, highest).inverseSurvivalProbability(tail);
  }

  /** The share and its standard error, in percent, and the note. */
  String text() {
    return String.format(Locale.ROOT, "%.1f ± %.1f", 100 * share(), 100 * standardError())
        + (note.isEmpty() ? "" : " (" + note + ")");
  }
}
