package linkworthy.codec;

import java.util.concurrent.ConcurrentHashMap;
import linkworthy.input.BadInput;

/**
 * The orthonormal Walsh-Hadamard transform (Walsh 1923, from memory): entries {@code +-1/sqrt(N)},
 * function k with k sign changes (sequency order), N a power of two. Over blocks it is the
 * separable two-dimensional transform with its coefficients in zig-zag order, like the DCT; over
 * rows the one-dimensional one.
 */
final class WalshBasis implements Basis {
  private final ConcurrentHashMap<String, Directions> known = new ConcurrentHashMap<>();

  @Override
  public String id() {
    return "wht";
  }

  @Override
  public boolean isSent() {
    return false;
  }

  /**
   * @throws BadInput unless the number of rows, or the side of a block, is a power of two
   */
  @Override
  public void check(Arrangement arrangement, PictureShape shape) {
    if (arrangement instanceof Arrangement.Blocks blocks) {
      if (!isPowerOfTwo(blocks.side())) {
        throw new BadInput(
            "a block has a side of " + blocks.side() + "; accepted for wht: a power of two");
      }
    } else if (!isPowerOfTwo(shape.height())) {
      throw new BadInput(
          "a picture has "
              + shape.height()
              + " rows; accepted for wht over rows: a power of two, as 64, 128 or 256");
    }
  }

  static boolean isPowerOfTwo(int n) {
    return Integer.bitCount(n) == 1;
  }

  @Override
  public Directions directions(Arrangement arrangement, PictureShape shape, double[][] centred) {
    int d = arrangement.variables(shape);
    return known.computeIfAbsent(
        arrangement.id() + " " + d,
        key ->
            new Directions(
                arrangement instanceof Arrangement.Blocks blocks
                    ? DctBasis.zigZagProducts(oneDimensional(blocks.side()))
                    : oneDimensional(d),
                new double[0]));
  }

  /** Row k of the Sylvester-Hadamard matrix at the bit-reversed Gray code of k. */
  static double[][] oneDimensional(int n) {
    double[][] rows = new double[n][n];
    double entry = 1 / Math.sqrt(n);
    for (int k = 0; k < n; k++) {
      int natural =
          n == 1 ? 0 : Integer.reverse(k ^ (k >>> 1)) >>> (Integer.numberOfLeadingZeros(n) + 1);
      for (int i = 0; i < n; i++) {
        rows[k][i] = Integer.bitCount(natural & i) % 2 == 0 ? entry : -entry;
      }
    }
    return rows;
  }
}
