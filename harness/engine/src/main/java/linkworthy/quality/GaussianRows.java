package linkworthy.quality;

/**
 * Weighted means over an 11 x 11 Gaussian window (standard deviation 1.5 samples, weights that sum
 * to one), a row of windows at a time and only where the window lies wholly inside.
 *
 * <p>Rows are given from top to bottom; the last eleven are kept, so the working set is eleven rows
 * whatever the height. The window is separable and symmetric: rows are folded about the middle one,
 * then columns. The inner loops read and write at one common index, on separate arrays, because
 * that is what the virtual machine turns into vector instructions; for the same reason columns are
 * shifted by copying. The order of additions is fixed.
 */
final class GaussianRows {
  static final int RADIUS = 5;
  static final int SIDE = 2 * RADIUS + 1;
  static final double SIGMA = 1.5;

  private static final double[] WEIGHTS = weights();

  private final double[][] rows;
  private final double[] folded;
  private final double[] left;
  private final double[] right;
  private int next;

  GaussianRows(int width) {
    rows = new double[SIDE][width];
    folded = new double[width];
    left = new double[width];
    right = new double[width];
  }

  /** Weight of the window at a distance of 0 to 5 samples from its middle, along one axis. */
  static double weight(int distance) {
    return WEIGHTS[distance];
  }

  private static double[] weights() {
    double[] weights = new double[RADIUS + 1];
    double total = 0;
    for (int k = RADIUS; k >= 0; k--) {
      weights[k] = StrictMath.exp(-k * k / (2 * SIGMA * SIGMA));
      total += k == 0 ? weights[k] : 2 * weights[k];
    }
    for (int k = 0; k <= RADIUS; k++) {
      weights[k] /= total;
    }
    return weights;
  }

  /** The array of the next row, to be filled by the caller; it replaces the oldest row. */
  double[] nextRow() {
    double[] row = rows[next];
    next = (next + 1) % SIDE;
    return row;
  }

  /** Means of the windows that end at the newest row, left to right, into {@code means}. */
  void means(double[] means) {
    scale(row(RADIUS), WEIGHTS[0], folded, folded.length);
    for (int k = 1; k <= RADIUS; k++) {
      addPair(row(RADIUS - k), row(RADIUS + k), WEIGHTS[k], folded, folded.length);
    }
    int count = folded.length - 2 * RADIUS;
    System.arraycopy(folded, RADIUS, left, 0, count);
    scale(left, WEIGHTS[0], means, count);
    for (int k = 1; k <= RADIUS; k++) {
      System.arraycopy(folded, RADIUS - k, left, 0, count);
      System.arraycopy(folded, RADIUS + k, right, 0, count);
      addPair(left, right, WEIGHTS[k], means, count);
    }
  }

  private double[] row(int fromOldest) {
    return rows[(next + fromOldest) % SIDE];
  }

  private static void scale(double[] from, double weight, double[] to, int count) {
    for (int i = 0; i < count; i++) {
      to[i] = weight * from[i];
    }
  }

  private static void addPair(double[] a, double[] b, double weight, double[] to, int count) {
    for (int i = 0; i < count; i++) {
      to[i] += weight * (a[i] + b[i]);
    }
  }
}
