package linkworthy.codec;

/**
 * Code of values most of which may be zero. Either every value by {@link RiceCoder}; or in turn the
 * number of zeros before the next other value, and that value (its folded form less 1), with a Rice
 * parameter for each of the two; zeros at the end are a number of zeros alone.
 *
 * <p>Starts with the parameter of the numbers of zeros (4 bits, {@link #DENSE} for the first form)
 * and that of the values (4 bits).
 */
final class SparseCoder {
  private static final int DENSE = 15;
  private static final int PARAMETER_BITS = 4;
  private static final int LARGEST_RUN = (1 << (DENSE - 1)) - 1;

  private SparseCoder() {}

  /** Running cost of a run of folded values under every parameter. */
  static final class Cost {
    private final RiceCoder.Cost dense;
    private final RiceCoder.Cost zeros = new RiceCoder.Cost(LARGEST_RUN);
    private final RiceCoder.Cost others;
    private int open;

    /**
     * @param largest no folded value to come is larger
     */
    Cost(int largest) {
      dense = new RiceCoder.Cost(largest);
      others = new RiceCoder.Cost(largest);
    }

    void clear() {
      dense.clear();
      zeros.clear();
      others.clear();
      open = 0;
    }

    void add(int folded) {
      dense.add(folded);
      if (folded == 0) {
        open++;
      } else {
        zeros.add(open);
        others.add(folded - 1);
        open = 0;
      }
    }

    /** Bits with the cheapest parameters. */
    long least() {
      close();
      long least = 2 * PARAMETER_BITS + Math.min(dense.least(), zeros.least() + others.least());
      reopen();
      return least;
    }

    private void close() {
      if (open > 0) {
        zeros.add(open);
      }
    }

    private void reopen() {
      if (open > 0) {
        zeros.remove(open);
      }
    }
  }

  /**
   * Writes values {@code from} to before {@code to}.
   *
   * @param cost to which just these values have been added
   */
  static void write(BitWriter out, int[] values, int from, int to, Cost cost) {
    cost.close();
    boolean dense = cost.dense.least() <= cost.zeros.least() + cost.others.least();
    int zeroParameter = dense ? DENSE : cost.zeros.parameter();
    int parameter = dense ? cost.dense.parameter() : cost.others.parameter();
    cost.reopen();
    out.write(zeroParameter, PARAMETER_BITS);
    out.write(parameter, PARAMETER_BITS);
    int zeros = 0;
    for (int i = from; i < to; i++) {
      int folded = RiceCoder.fold(values[i]);
      if (dense) {
        RiceCoder.write(out, folded, parameter);
      } else if (folded == 0) {
        zeros++;
      } else {
        RiceCoder.write(out, zeros, zeroParameter);
        RiceCoder.write(out, folded - 1, parameter);
        zeros = 0;
      }
    }
    if (zeros > 0) {
      RiceCoder.write(out, zeros, zeroParameter);
    }
  }

  /**
   * Reads values into their places.
   *
   * @return the place after the last value that was there whole
   */
  static int read(BitReader in, int[] values, int from, int to) {
    int zeroParameter = (int) in.read(PARAMETER_BITS);
    int parameter = (int) in.read(PARAMETER_BITS);
    int at = from;
    while (at < to) {
      if (zeroParameter != DENSE) {
        int zeros = RiceCoder.read(in, zeroParameter);
        if (in.isExhausted() || zeros < 0 || zeros > to - at) {
          return at;
        }
        java.util.Arrays.fill(values, at, at + zeros, 0);
        at += zeros;
        if (at == to) {
          return at;
        }
      }
      int folded = RiceCoder.read(in, parameter) + (zeroParameter == DENSE ? 0 : 1);
      if (in.isExhausted()) {
        return at;
      }
      values[at++] = RiceCoder.unfold(folded);
    }
    return at;
  }
}
