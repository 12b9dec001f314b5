package linkworthy.codec;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.concurrent.ConcurrentHashMap;

/**
 * The orthonormal DCT-II: {@code c(k) cos((2i+1) k pi / 2N)} with {@code c(0) = sqrt(1/N)} and
 * {@code c(k) = sqrt(2/N)}. Over blocks it is the separable two-dimensional transform with its
 * coefficients in zig-zag order (ITU-T T.81, figure A.6); over rows the one-dimensional one.
 */
final class DctBasis implements Basis {
  private final ConcurrentHashMap<String, Directions> known = new ConcurrentHashMap<>();

  @Override
  public String id() {
    return "dct";
  }

  @Override
  public boolean isSent() {
    return false;
  }

  @Override
  public Directions directions(Arrangement arrangement, PictureShape shape, double[][] centred) {
    int d = arrangement.variables(shape);
    return known.computeIfAbsent(
        arrangement.id() + " " + d,
        key ->
            new Directions(
                arrangement instanceof Arrangement.Blocks blocks
                    ? zigZagProducts(oneDimensional(blocks.side()))
                    : oneDimensional(d),
                new double[0]));
  }

  static double[][] oneDimensional(int n) {
    double[][] rows = new double[n][n];
    for (int k = 0; k < n; k++) {
      double scale = Math.sqrt((k == 0 ? 1.0 : 2.0) / n);
      for (int i = 0; i < n; i++) {
        rows[k][i] = scale * StrictMath.cos((2 * i + 1) * k * StrictMath.PI / (2 * n));
      }
    }
    return rows;
  }

  /** Separable products of one-dimensional functions, in zig-zag order of their two numbers. */
  static double[][] zigZagProducts(double[][] one) {
    int side = one.length;
    int[] order = zigZag(side);
    double[][] rows = new double[side * side][side * side];
    for (int k = 0; k < rows.length; k++) {
      double[] vertical = one[order[k] / side];
      double[] horizontal = one[order[k] % side];
      for (int i = 0; i < rows.length; i++) {
        rows[k][i] = vertical[i / side] * horizontal[i % side];
      }
    }
    return rows;
  }

  /** Natural index ({@code vertical * side + horizontal frequency}) of each zig-zag position. */
  static int[] zigZag(int side) {
    List<Integer> places = new ArrayList<>();
    for (int i = 0; i < side * side; i++) {
      places.add(i);
    }
    places.sort(
        Comparator.comparingInt((Integer i) -> i / side + i % side)
            .thenComparingInt(i -> (i / side + i % side) % 2 == 1 ? i / side : i % side));
    return places.stream().mapToInt(Integer::intValue).toArray();
  }
}
