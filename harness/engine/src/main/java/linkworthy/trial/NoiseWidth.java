package linkworthy.trial;

import org.apache.commons.statistics.distribution.TDistribution;

/**
 * Half-width of the two-sided 95 % interval of Student's t for the mean of values given one at a
 * time: {@code t s / sqrt(n)} with n - 1 degrees of freedom, in the unit of the values. 0 if all
 * values are equal, infinite ones included; infinite for fewer than two values or if one is not
 * finite.
 *
 * <p>The quantile t is rounded to six decimals, and all else is additions, multiplications,
 * divisions and square roots, so that every machine gets the same bits.
 */
final class NoiseWidth {
  private static final double TAIL = 0.025;
  private static final double DECIMALS = 1e6;

  private long count;
  private double first;
  private double sum;
  private double squares;
  private boolean equal = true;

  void add(double value) {
    if (count == 0) {
      first = value;
    }
    count++;
    equal &= value == first;
    double difference = value == first ? 0 : value - first;
    sum += difference;
    squares += difference * difference;
  }

  NoiseWidth copy() {
    NoiseWidth copy = new NoiseWidth();
    copy.count = count;
    copy.first = first;
    copy.sum = sum;
    copy.squares = squares;
    copy.equal = equal;
    return copy;
  }

  double halfWidth() {
    if (count < 2) {
      return Double.POSITIVE_INFINITY;
    }
    if (equal) {
      return 0;
    }
    double scatter = squares - sum * sum / count;
    return Double.isFinite(scatter)
        ? quantile() * Math.sqrt(Math.max(0, scatter) / (count - 1) / count)
        : Double.POSITIVE_INFINITY;
  }

  private double quantile() {
    double t = TDistribution.of(count - 1.0).inverseSurvivalProbability(TAIL);
    return Math.rint(t * DECIMALS) / DECIMALS;
  }
}
