package linkworthy.codec;

/**
 * Bits of every run of a row of symbols under every Rice parameter, as sums from the row's start:
 * what any run costs, and how long a run fits a room, are then found without coding a symbol.
 * Shared by all codecs that send the same symbols.
 */
final class RiceCosts {
  /** {@code upTo[k][j]}: bits of the first j symbols with parameter k. */
  private final int[][] upTo;

  private final int length;

  /**
   * @throws ArithmeticException if there are more than 2^31 / 56 symbols
   */
  RiceCosts(int[] symbols) {
    length = symbols.length;
    Math.multiplyExact(length, RiceCoder.ESCAPE + Integer.SIZE);
    int[] folded = new int[length];
    int all = 0;
    for (int j = 0; j < length; j++) {
      folded[j] = RiceCoder.fold(symbols[j]);
      all |= folded[j];
    }
    upTo = new int[RiceCoder.parameters(all)][];
    for (int k = 0; k < upTo.length; k++) {
      upTo[k] = sums(folded, k);
    }
  }

  private static int[] sums(int[] folded, int k) {
    int[] sums = new int[folded.length + 1];
    int sum = 0;
    for (int j = 0; j < folded.length; j++) {
      sum += RiceCoder.bits(folded[j], k);
      sums[j + 1] = sum;
    }
    return sums;
  }

  /** The cheapest parameter for symbols {@code from} to {@code to}, the smaller on ties. */
  int parameter(int from, int to) {
    int best = 0;
    for (int k = 1; k < upTo.length; k++) {
      if (bits(k, from, to) < bits(best, from, to)) {
        best = k;
      }
    }
    return best;
  }

  /** Bits of symbols {@code from} to {@code to} with the cheapest parameter. */
  int least(int from, int to) {
    return bits(parameter(from, to), from, to);
  }

  private int bits(int k, int from, int to) {
    return upTo[k][to] - upTo[k][from];
  }

  /**
   * How many symbols from {@code from} on fit a number of bits, with the parameter that fits most.
   */
  int fitting(int from, long bits) {
    if (bits < 0) {
      return 0;
    }
    int to = from;
    for (int k = 0; k < upTo.length; k++) {
      int[] sums = upTo[k];
      long room = bits + sums[from];
      if (to < length && sums[to + 1] <= room) {
        // Each symbol takes k + 1 bits or more.
        int most = (int) Math.min(length, from + bits / (k + 1));
        to = last(sums, to + 1, most, room);
      }
    }
    return to - from;
  }

  /** The last place from {@code good}, where the sum is no more than {@code room}, to most. */
  private static int last(int[] sums, int good, int most, long room) {
    int low = good;
    int high = most;
    while (low < high) {
      int middle = (low + high + 1) >>> 1;
      if (sums[middle] <= room) {
        low = middle;
      } else {
        high = middle - 1;
      }
    }
    return low;
  }
}
