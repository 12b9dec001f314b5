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

  /** A codec is content with the first of these numbers of directions that it does not exceed. */
  private static final int[] FEW = {32, 64};

  /** Below so many variables, finding all directions is no slower. */
  private static final int MANY_VARIABLES = 192;

  private static final int ALL = 0;

  /** Directions wanted, or {@link #ALL}. */
  private final int few;

  PcaBasis() {
    this(ALL);
  }

  private PcaBasis(int few) {
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
    return new PcaBasis(Arrays.stream(FEW).filter(n -> n >= components).findFirst().orElse(ALL));
  }

  @Override
  public String work(int variables) {
    return isLeading(variables) ? ID + " of " + few : ID;
  }

  /** Whether directions are left out; where there are few variables, all are found for everyone. */
  private boolean isLeading(int variables) {
    return few != ALL && variables >= MANY_VARIABLES;
  }

  @Override
  public Directions directions(Arrangement arrangement, PictureShape shape, double[][] centred) {
    DMatrixRMaj covariance = Matrices.covariance(centred);
    return isLeading(centred.length) ? leading(covariance, few) : of(covariance);
  }

  /** Principal directions of a covariance, without the negligible ones. */
  static Directions of(DMatrixRMaj covariance) {
    return above(negligible(covariance), SymmetricEigen.of(covariance).largestFirst());
  }

  /** The first {@code count} of them. */
  static Directions leading(DMatrixRMaj covariance, int count) {
    double floor = negligible(covariance);
    return above(floor, SymmetricEigen.largest(covariance, count, floor));
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
