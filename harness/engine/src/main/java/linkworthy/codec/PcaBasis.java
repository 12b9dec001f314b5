package linkworthy.codec;

import java.util.Arrays;
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
  static final String ID = "pca";

  private static final double NEGLIGIBLE = 1e-10;

  /** A codec of no more components is content with so many directions. */
  private static final int FEW = 64;

  /** Below so many variables, finding all directions is no slower. */
  private static final int MANY_VARIABLES = 192;

  private final boolean few;

  PcaBasis() {
    this(false);
  }

  private PcaBasis(boolean few) {
    this.few = few;
  }

  @Override
  public String id() {
    return ID;
  }

  @Override
  public boolean isSent() {
    return true;
  }

  @Override
  public Basis forAtMost(int components) {
    return new PcaBasis(components <= FEW);
  }

  @Override
  public String work(int variables) {
    return isLeading(variables) ? ID + " of " + FEW : ID;
  }

  /** Whether directions are left out; where there are few variables, all are found for everyone. */
  private boolean isLeading(int variables) {
    return few && variables >= MANY_VARIABLES;
  }

  @Override
  public Directions directions(Arrangement arrangement, PictureShape shape, double[][] centred) {
    DMatrixRMaj covariance = Matrices.covariance(centred);
    return isLeading(centred.length) ? leading(covariance) : of(covariance);
  }

  /** Principal directions of a covariance, without the negligible ones. */
  static Directions of(DMatrixRMaj covariance) {
    return above(negligible(covariance), SymmetricEigen.of(covariance).largestFirst());
  }

  /** The first 64 of them. */
  static Directions leading(DMatrixRMaj covariance) {
    double floor = negligible(covariance);
    return above(floor, SymmetricEigen.largest(covariance, FEW, floor));
  }

  /** All d principal directions of a covariance. */
  static Directions allOf(DMatrixRMaj covariance) {
    return above(Double.NEGATIVE_INFINITY, SymmetricEigen.of(covariance).largestFirst());
  }

  private static double negligible(DMatrixRMaj covariance) {
    double total = 0;
    for (int i = 0; i < covariance.getNumRows(); i++) {
      total += covariance.get(i, i);
    }
    return NEGLIGIBLE * total;
  }

  private static Directions above(double floor, SymmetricEigen largestFirst) {
    double[] variances = Arrays.stream(largestFirst.values()).filter(v -> v > floor).toArray();
    return new Directions(
        variances.length, k -> withPositivePeak(largestFirst.vector(k)), variances);
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
