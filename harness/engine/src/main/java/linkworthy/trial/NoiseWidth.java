package linkworthy.trial;

import java.util.concurrent.ConcurrentHashMap;
import java.util.concurrent.ConcurrentMap;
import org.apache.commons.statistics.distribution.TDistribution;

/**
 * Half-width of the two-sided 95 % interval of Student's t for the mean of values given one at a
 * time, as if there were fewer of them: {@code t s / sqrt(m)} with n - 1 degrees of freedom, in the
 * unit of the values. Of n values {@code m = n - 10} count, and of 11 or fewer {@code m = 3^(n -
 * 11)}. 0 if all values are equal, infinite ones included; infinite for fewer than five values or
 * if one is not finite.
 *
 * <p>Values that end because their own spread looks small look less spread than they are, and the
 * interval over them would be too narrow. A few more than that spread asks for mend it (Simons
 * 1968, "On the cost of not knowing the variance when making a fixed-width confidence interval for
 * the mean", Annals of Mathematical Statistics 39:1946-1952). How many, and the steep beginning,
 * were chosen by simulation: {@code EvidenceSimulation} among the benchmarks shows what comes of
 * it.
 *
 * <p>The quantile t is rounded to six decimals, and all else is additions, multiplications,
 * divisions and square roots, so that every machine gets the same bits.
 */
final class NoiseWidth {
  private static final double TAIL = 0.025;
  private static final double DECIMALS = 1e6;
  private static final int FEWEST = 5;
  private static final int RESERVE = 10;
  private static final double STEEPNESS = 3;

  private static final long MOST_REMEMBERED = 100_000;
  private static final ConcurrentMap<Long, Double> QUANTILES = new ConcurrentHashMap<>();

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
    if (count < FEWEST) {
      return Double.POSITIVE_INFINITY;
    }
    if (equal) {
      return 0;
    }
    double scatter = squares - sum * sum / count;
    return Double.isFinite(scatter)
        ? remembered(count) * Math.sqrt(Math.max(0, scatter) / (count - 1) / counted())
        : Double.POSITIVE_INFINITY;
  }

  private double counted() {
    double counted = Math.max(1, count - RESERVE);
    for (long n = count; n <= RESERVE; n++) {
      counted /= STEEPNESS;
    }
    return counted;
  }

  private static double remembered(long count) {
    return count > MOST_REMEMBERED
        ? quantile(count)
        : QUANTILES.computeIfAbsent(count, NoiseWidth::quantile);
  }

  private static double quantile(long count) {
    double t = TDistribution.of(count - 1.0).inverseSurvivalProbability(TAIL);
    return Math.rint(t * DECIMALS) / DECIMALS;
  }
}
