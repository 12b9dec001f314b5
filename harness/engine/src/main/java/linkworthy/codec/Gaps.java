package linkworthy.codec;

import java.util.BitSet;
import java.util.function.IntPredicate;

/** Fills the missing values of a grid, such as local means, from those that arrived. */
final class Gaps {
  private Gaps() {}

  /**
   * Fills in place. A missing value lies on the line between the nearest values above and below
   * that arrived, or equals the nearest at either end; a column of which nothing arrived lies in
   * the same way between its neighbours.
   *
   * @param values row by row
   * @param got places that arrived
   * @param width values in a row
   * @param neutral the value everywhere if nothing arrived
   */
  static void fill(double[] values, BitSet got, int width, double neutral) {
    if (got.isEmpty()) {
      java.util.Arrays.fill(values, neutral);
      return;
    }
    int height = values.length / width;
    BitSet columns = new BitSet();
    for (int x = 0; x < width; x++) {
      int column = x;
      if (fillLine(values, x, width, height, y -> got.get(column + y * width))) {
        columns.set(x);
      }
    }
    if (columns.cardinality() < width) {
      for (int y = 0; y < height; y++) {
        fillLine(values, y * width, 1, width, columns::get);
      }
    }
  }

  /** Whether any value of the line was there; if none was, nothing changes. */
  private static boolean fillLine(
      double[] values, int start, int stride, int count, IntPredicate has) {
    int before = -1;
    for (int after = 0; after <= count; after++) {
      boolean end = after == count;
      if (!end && !has.test(after)) {
        continue;
      }
      for (int i = before + 1; i < after && !(end && before < 0); i++) {
        double low = values[start + (before < 0 ? after : before) * stride];
        double high = values[start + (end ? before : after) * stride];
        double share = before < 0 || end ? 0 : (double) (i - before) / (after - before);
        values[start + i * stride] = low + share * (high - low);
      }
      before = end ? before : after;
    }
    return before >= 0;
  }
}
