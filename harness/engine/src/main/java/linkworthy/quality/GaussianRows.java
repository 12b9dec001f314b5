package linkworthy.quality;

/**
 * Weighted means over an 11 x 11 Gaussian window (standard deviation 1.5 samples, weights that sum
 * to one), a row of windows at a time and only where the window lies wholly inside.
 *
 * <p>Rows are given from top to bottom; the last eleven are kept, so the working set is eleven rows
 * whatever the height. The window is separable and symmetric: rows are folded about the middle one,
 * then columns. The order of additions is fixed.
 *
 * <p>A row lies in eight lanes: it is cut into eight strips of columns, each overlapping the next
 * by ten, and what stands at the same place of the strips is neighbours in the array. A step of one
 * column is then a step of eight elements, and the virtual machine turns the inner loops into
 * vector instructions without shifting anything.
 *
 * <p>Each pass over a row is a class of its own behind one call, because the virtual machine gives
 * up on vector instructions where it compiles many loops as one piece of code.
 */
final class GaussianRows {
  static final int RADIUS = 5;
  static final int SIDE = 2 * RADIUS + 1;
  static final double SIGMA = 1.5;

  private static final double[] WEIGHTS = weights();

  private static final int LANES = 8;

  /** One sweep over a row: two down the columns, then three along the row. */
  private interface Pass {
    void run(GaussianRows rows, double[] means, double[] to);
  }

  private static final Pass NEAR_ROWS =
      (r, means, to) -> foldNear(r.row(3), r.row(4), r.row(5), r.row(6), r.row(7), r.folded);
  private static final Pass FAR_ROWS =
      (r, means, to) ->
          addFar(r.row(0), r.row(1), r.row(2), r.row(8), r.row(9), r.row(10), r.folded);
  private static final Pass INNER = (r, means, to) -> foldInner(r.folded, to);
  private static final Pass MIDDLE = (r, means, to) -> addMiddle(r.folded, to);
  private static final Pass OUTER = (r, means, to) -> addOuter(r.folded, to);
  private static final Pass OUTER_LESS_SQUARES =
      (r, means, to) -> addOuterLessSquares(r.folded, means, to);

  private static final Pass[] MEANS = {NEAR_ROWS, FAR_ROWS, INNER, MIDDLE, OUTER};
  private static final Pass[] VARIANCES = {NEAR_ROWS, FAR_ROWS, INNER, MIDDLE, OUTER_LESS_SQUARES};

  private final int width;
  private final int strip;
  private final double[][] rows;
  private final double[] folded;
  private int next;

  /**
   * @param width columns of a row, at least 11
   */
  GaussianRows(int width) {
    this.width = width;
    strip = (width - 2 * RADIUS + LANES - 1) / LANES;
    rows = new double[SIDE][length(width)];
    folded = new double[length(width)];
  }

  /** Elements of a row of so many columns. */
  static int length(int width) {
    return meansLength(width) + 2 * RADIUS * LANES;
  }

  /** Elements of a row of means. */
  static int meansLength(int width) {
    return (width - 2 * RADIUS + LANES - 1) / LANES * LANES;
  }

  /** Puts a row of samples into lanes; places beyond the last column are 0. */
  void load(int[] samples, int start, double[] row) {
    for (int lane = 0; lane < LANES; lane++) {
      int first = lane * strip;
      int count = Math.max(0, Math.min(strip + 2 * RADIUS, width - first));
      for (int i = 0; i < count; i++) {
        row[i * LANES + lane] = samples[start + first + i];
      }
    }
  }

  /** Where the mean of the window that begins at a column is. */
  int place(int column) {
    return column % strip * LANES + column / strip;
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

  /** Means of the windows that end at the newest row into {@code means}, in lanes. */
  void means(double[] means) {
    run(MEANS, means, means);
  }

  /** Where the rows hold squares: these means less the squares of others. */
  void variances(double[] means, double[] variances) {
    run(VARIANCES, means, variances);
  }

  private void run(Pass[] passes, double[] means, double[] to) {
    for (Pass pass : passes) {
      pass.run(this, means, to);
    }
  }

  private double[] row(int fromOldest) {
    return rows[(next + fromOldest) % SIDE];
  }

  /** Rows 0 to 2 from the middle. One loop over all eleven is not made into vectors. */
  private static void foldNear(
      double[] a, double[] b, double[] middle, double[] c, double[] d, double[] to) {
    double w0 = WEIGHTS[0];
    double w1 = WEIGHTS[1];
    double w2 = WEIGHTS[2];
    for (int i = 0; i < to.length; i++) {
      to[i] = (w0 * middle[i] + w1 * (b[i] + c[i])) + w2 * (a[i] + d[i]);
    }
  }

  /** Rows 3 to 5 from the middle. */
  private static void addFar(
      double[] a, double[] b, double[] c, double[] d, double[] e, double[] f, double[] to) {
    double w3 = WEIGHTS[3];
    double w4 = WEIGHTS[4];
    double w5 = WEIGHTS[5];
    for (int i = 0; i < to.length; i++) {
      to[i] = ((to[i] + w3 * (c[i] + d[i])) + w4 * (b[i] + e[i])) + w5 * (a[i] + f[i]);
    }
  }

  /** Columns 0 and 1 from the middle. */
  private static void foldInner(double[] f, double[] to) {
    double w0 = WEIGHTS[0];
    double w1 = WEIGHTS[1];
    for (int i = 0; i < to.length; i++) {
      to[i] = w0 * f[i + 5 * LANES] + w1 * (f[i + 4 * LANES] + f[i + 6 * LANES]);
    }
  }

  /** Columns 2 and 3 from the middle. */
  private static void addMiddle(double[] f, double[] to) {
    double w2 = WEIGHTS[2];
    double w3 = WEIGHTS[3];
    for (int i = 0; i < to.length; i++) {
      to[i] =
          (to[i] + w2 * (f[i + 3 * LANES] + f[i + 7 * LANES]))
              + w3 * (f[i + 2 * LANES] + f[i + 8 * LANES]);
    }
  }

  /** Columns 4 and 5 from the middle. */
  private static void addOuter(double[] f, double[] to) {
    double w4 = WEIGHTS[4];
    double w5 = WEIGHTS[5];
    for (int i = 0; i < to.length; i++) {
      to[i] = (to[i] + w4 * (f[i + LANES] + f[i + 9 * LANES])) + w5 * (f[i] + f[i + 10 * LANES]);
    }
  }

  /** The same, less squares. */
  private static void addOuterLessSquares(double[] f, double[] means, double[] to) {
    double w4 = WEIGHTS[4];
    double w5 = WEIGHTS[5];
    for (int i = 0; i < to.length; i++) {
      to[i] =
          ((to[i] + w4 * (f[i + LANES] + f[i + 9 * LANES])) + w5 * (f[i] + f[i + 10 * LANES]))
              - means[i] * means[i];
    }
  }
}
