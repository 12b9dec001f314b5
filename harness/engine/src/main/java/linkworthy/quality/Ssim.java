package linkworthy.quality;

import linkworthy.codec.PictureShape;
import linkworthy.corpus.Picture;
import linkworthy.input.BadInput;

/**
 * Structural similarity (Wang, Bovik, Sheikh and Simoncelli 2004, IEEE Transactions on Image
 * Processing 13:600-612), without unit, at most 1; identical pictures have exactly 1.
 *
 * <p>In every 11 x 11 window (Gaussian weights w, standard deviation 1.5 samples, sum one)
 *
 * <pre>(2 mx my + C1) (2 sxy + C2) / ((mx^2 + my^2 + C1) (sx^2 + sy^2 + C2))</pre>
 *
 * with {@code mx = sum w x}, {@code sx^2 = sum w x^2 - mx^2}, {@code sxy = sum w x y - mx my}
 * (population moments), {@code C1 = (0.01 P)^2}, {@code C2 = (0.03 P)^2} and P the peak of the bit
 * depth. The figure is the mean over the windows that lie wholly inside the picture; pictures are
 * never shrunk beforehand. A judge keeps about 28 bytes for each sample of the clean picture.
 */
public final class Ssim implements QualityMeasure {
  private static final double K1 = 0.01;
  private static final double K2 = 0.03;

  @Override
  public String id() {
    return "ssim";
  }

  @Override
  public String column() {
    return "ssim";
  }

  /**
   * @throws BadInput if a side is shorter than the window's 11 samples
   */
  @Override
  public void check(PictureShape shape) {
    if (Math.min(shape.width(), shape.height()) < GaussianRows.SIDE) {
      throw new BadInput(
          "measure 'ssim': a picture of "
              + shape.width()
              + " x "
              + shape.height()
              + " samples is smaller than the 11 x 11 window; accepted: sides of at least 11");
    }
  }

  @Override
  public Judge against(Picture clean) {
    check(PictureShape.of(clean));
    return new Windows(clean);
  }

  private static final class Windows implements Judge {
    private final Picture clean;
    private final double[][] cleanRows;
    private final double[][] cleanMeans;
    private final double[][] cleanVariances;
    private final double c1;
    private final double c2;

    Windows(Picture clean) {
      this.clean = clean;
      c1 = K1 * clean.peak() * (K1 * clean.peak());
      c2 = K2 * clean.peak() * (K2 * clean.peak());
      int width = clean.width();
      int windowRows = clean.height() - GaussianRows.SIDE + 1;
      cleanMeans = new double[windowRows][GaussianRows.meansLength(width)];
      cleanVariances = new double[windowRows][GaussianRows.meansLength(width)];
      cleanRows = new double[clean.height()][GaussianRows.length(width)];
      GaussianRows values = new GaussianRows(width);
      GaussianRows squares = new GaussianRows(width);
      for (int y = 0; y < clean.height(); y++) {
        double[] row = cleanRows[y];
        values.load(clean.samples(), y * width, row);
        System.arraycopy(row, 0, values.nextRow(), 0, row.length);
        multiply(row, row, squares.nextRow());
        int window = y - GaussianRows.SIDE + 1;
        if (window >= 0) {
          values.means(cleanMeans[window]);
          squares.variances(cleanMeans[window], cleanVariances[window]);
        }
      }
    }

    @Override
    public double of(Picture decoded) {
      Psnr.requireSameShape(clean, decoded);
      int width = clean.width();
      int length = GaussianRows.meansLength(width);
      GaussianRows values = new GaussianRows(width);
      GaussianRows squares = new GaussianRows(width);
      GaussianRows products = new GaussianRows(width);
      double[] means = new double[length];
      double[] variances = new double[length];
      double[] meanProducts = new double[length];
      double[] columnSums = new double[length];
      for (int y = 0; y < clean.height(); y++) {
        double[] row = values.nextRow();
        values.load(decoded.samples(), y * width, row);
        multiply(row, cleanRows[y], squares.nextRow(), products.nextRow());
        int window = y - GaussianRows.SIDE + 1;
        if (window >= 0) {
          values.means(means);
          squares.variances(means, variances);
          products.means(meanProducts);
          addSimilarity(window, means, variances, meanProducts, columnSums);
        }
      }
      int windowColumns = width - GaussianRows.SIDE + 1;
      double sum = 0;
      for (int column = 0; column < windowColumns; column++) {
        sum += columnSums[values.place(column)];
      }
      return sum / ((double) cleanMeans.length * windowColumns);
    }

    /** The covariance is the mean product less the product of the means. */
    private void addSimilarity(
        int window, double[] my, double[] vy, double[] meanProducts, double[] columnSums) {
      double[] mx = cleanMeans[window];
      double[] vx = cleanVariances[window];
      double luminanceFloor = c1;
      double contrastFloor = c2;
      for (int i = 0; i < columnSums.length; i++) {
        double product = mx[i] * my[i];
        double numerator =
            (2 * product + luminanceFloor) * (2 * (meanProducts[i] - product) + contrastFloor);
        double denominator =
            (mx[i] * mx[i] + my[i] * my[i] + luminanceFloor) * (vx[i] + vy[i] + contrastFloor);
        columnSums[i] += numerator / denominator;
      }
    }

    private static void multiply(double[] a, double[] b, double[] product) {
      for (int i = 0; i < product.length; i++) {
        product[i] = a[i] * b[i];
      }
    }

    /** The squares of a row and its products with another in one sweep. */
    private static void multiply(double[] a, double[] b, double[] squares, double[] products) {
      for (int i = 0; i < products.length; i++) {
        squares[i] = a[i] * a[i];
        products[i] = a[i] * b[i];
      }
    }
  }
}
