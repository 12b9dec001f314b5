package linkworthy.statistics;

import java.util.BitSet;
import java.util.HashMap;
import java.util.Map;
import java.util.SplittableRandom;
import linkworthy.input.Require;

/**
 * Simple random samples of rows, without replacement: every set of {@code sampled} rows is as
 * likely as every other, so that what is said of altered rows does not depend on where they stand.
 */
public final class RowSample {
  /** Rows of a block, as a power of two; a block that has a drawn row takes a bit for each row. */
  private static final int BLOCK = 24;

  private final Map<Long, BitSet> blocks = new HashMap<>();
  private long size;

  private RowSample() {}

  /**
   * Draws a sample by Floyd's algorithm (Bentley and Floyd 1987, "A sample of brilliance", CACM
   * 30(9):754-757); equal seeds give equal samples.
   *
   * @param rows there are, from 0
   * @param sampled 0 to {@code rows}
   * @throws IllegalArgumentException if there are fewer rows than that
   */
  public static RowSample draw(long rows, long sampled, long seed) {
    requireUpTo(rows, sampled, "sampled");
    SplittableRandom random = new SplittableRandom(seed);
    RowSample drawn = new RowSample();
    for (long last = rows - sampled; last < rows; last++) {
      if (!drawn.add(random.nextLong(last + 1))) {
        boolean unused = drawn.add(last);
      }
    }
    return drawn;
  }

  private boolean add(long row) {
    BitSet block = blocks.computeIfAbsent(row >> BLOCK, number -> new BitSet());
    int bit = bit(row);
    if (block.get(bit)) {
      return false;
    }
    block.set(bit);
    size++;
    return true;
  }

  private static int bit(long row) {
    return (int) (row & ((1 << BLOCK) - 1));
  }

  /** Whether a row was drawn; rows are counted from 0. */
  public boolean contains(long row) {
    BitSet block = blocks.get(row >> BLOCK);
    return block != null && block.get(bit(row));
  }

  /** How many rows were drawn. */
  public long size() {
    return size;
  }

  /** So many rows as a share of them is, rounded up: the fewest that are at least this share. */
  public static long rowsOf(double share, long rows) {
    Require.inRange(share, 0, 1, "share");
    return (long) Math.ceil(share * rows);
  }

  /**
   * The chance that none of the altered rows is in the sample: the hypergeometric probability of 0,
   * {@code C(M - D, n) / C(M, n)} for D altered of M rows and a sample of n, as the product of
   * {@code (M - n - i) / (M - i)} for i from 0 to D - 1. Exact but for rounding. 1 if nothing is
   * altered or sampled; 0 if the two together are more than there are.
   *
   * @throws IllegalArgumentException if there are fewer rows than altered or sampled
   */
  public static double chanceMissed(long rows, long altered, long sampled) {
    requireUpTo(rows, altered, "altered");
    requireUpTo(rows, sampled, "sampled");
    if (altered + sampled > rows) {
      return 0;
    }
    long fewer = Math.min(altered, sampled);
    long more = Math.max(altered, sampled);
    double chance = 1;
    for (long i = 0; i < fewer && chance > 0; i++) {
      chance *= (double) (rows - more - i) / (rows - i);
    }
    return chance;
  }

  private static void requireUpTo(long rows, long value, String name) {
    if (value < 0 || value > rows) {
      throw new IllegalArgumentException(name + " rows are " + value + "; accepted: 0 to " + rows);
    }
  }
}
