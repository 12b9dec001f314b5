package linkworthy.statistics;

import java.util.Comparator;
import java.util.stream.IntStream;
import linkworthy.input.Require;

/**
 * Holm's step-down adjustment of p values for several comparisons (Holm 1979, Scandinavian Journal
 * of Statistics 6:65-70): the i-th smallest of m is multiplied by m - i + 1, is never below the one
 * before and never above 1. Rejecting what lies below alpha keeps the chance of any false rejection
 * at most alpha.
 */
public final class Holm {
  private Holm() {}

  /**
   * Adjusted p values, in the order of the given ones. NaN marks a comparison that could not be
   * made: it stays NaN and does not count as one of the m.
   *
   * @throws IllegalArgumentException if a value lies outside 0 to 1
   */
  public static double[] adjust(double... p) {
    double[] adjusted = p.clone();
    int[] ascending =
        IntStream.range(0, p.length)
            .filter(i -> !Double.isNaN(p[i]))
            .boxed()
            .sorted(Comparator.comparingDouble((Integer i) -> p[i]))
            .mapToInt(Integer::intValue)
            .toArray();
    double floor = 0;
    for (int rank = 0; rank < ascending.length; rank++) {
      int i = ascending[rank];
      double raised = Require.inRange(p[i], 0, 1, "p value") * (ascending.length - rank);
      floor = Math.max(floor, Math.min(1, raised));
      adjusted[i] = floor;
    }
    return adjusted;
  }
}
