package linkworthy.codec;

import java.util.Comparator;
import java.util.stream.IntStream;
import org.ejml.data.DMatrixRMaj;

/**
 * Principal components: eigenvectors of the covariance {@code C = (1/n) Xc Xc'}, largest eigenvalue
 * first. The entry of largest magnitude of each eigenvector is positive (the lowest index where
 * magnitudes agree to 1e-9).
 *
 * <p>Directions whose eigenvalue is below 1e-10 of the total are left out: they would carry nothing
 * but rounding.
 */
final class PcaBasis implements Basis {
  private static final double NEGLIGIBLE = 1e-10;

  @Override
  public String id() {
    return "pca";
  }

  @Override
  public boolean isSent() {
    return true;
  }

  @Override
  public Directions directions(Arrangement arrangement, PictureShape shape, double[][] centred) {
    return of(Matrices.covariance(centred));
  }

  /** Principal directions of a symmetric matrix given row by row, {@code d * d} entries. */
  static Directions of(DMatrixRMaj covariance) {
    int d = covariance.getNumRows();
    double total = 0;
    for (int i = 0; i < d; i++) {
      total += covariance.get(i, i);
    }
    SymmetricEigen eigen = SymmetricEigen.of(covariance);
    double[] values = eigen.values();
    double floor = NEGLIGIBLE * total;
    int[] order =
        IntStream.range(0, d)
            .boxed()
            .filter(i -> values[i] > floor)
            .sorted(Comparator.comparingDouble(i -> -values[i]))
            .mapToInt(Integer::intValue)
            .toArray();
    double[][] rows = new double[order.length][];
    double[] variances = new double[order.length];
    for (int k = 0; k < order.length; k++) {
      rows[k] = withPositivePeak(eigen.vectors()[order[k]]);
      variances[k] = values[order[k]];
    }
    return new Directions(rows, variances);
  }

  private static double[] withPositivePeak(double[] vector) {
    double largest = 0;
    for (double entry : vector) {
      largest = Math.max(largest, Math.abs(entry));
    }
    int peak = 0;
    while (Math.abs(vector[peak]) < largest - 1e-9) {
      peak++;
    }
    if (vector[peak] < 0) {
      for (int i = 0; i < vector.length; i++) {
        vector[i] = -vector[i];
      }
    }
    return vector;
  }
}
