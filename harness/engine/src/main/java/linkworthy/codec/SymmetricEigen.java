package linkworthy.codec;

import java.util.Arrays;
import java.util.Comparator;
import java.util.function.IntFunction;
import java.util.stream.IntStream;
import org.ejml.data.DMatrixRMaj;
import org.ejml.dense.row.decomposition.eig.symm.SymmetricQREigenHelper_DDRM;
import org.ejml.dense.row.decomposition.eig.symm.SymmetricQrAlgorithm_DDRM;

/**
 * Eigenvalues and eigenvectors of a symmetric matrix: reflections to {@link Tridiagonal} form, then
 * the implicit QR algorithm, first for the values and then, with these as shifts, for the vectors
 * (Watkins, Fundamentals of Matrix Computations, second edition, pages 349 to 355). The QR
 * algorithm is EJML's, but for the rotation of vectors.
 *
 * <p>Where only some of the largest are wanted, they come from {@link Lanczos}; if there are too
 * many of them for that or it gives up, from {@link TridiagonalEigen}; and if one of their vectors
 * does not pass the check there, all are computed.
 */
final class SymmetricEigen {
  /** With fewer rows for each eigenvalue, Lanczos' iteration is not quicker. */
  private static final int ROWS_FOR_EACH = 6;

  private final double[] values;
  private final IntFunction<double[]> vectors;

  /**
   * @param vectors the vector of each value
   */
  SymmetricEigen(double[] values, IntFunction<double[]> vectors) {
    this.values = values;
    this.vectors = vectors;
  }

  /**
   * Decomposes a matrix of which only the upper triangle is read.
   *
   * @throws IllegalStateException if the iteration does not converge
   */
  static SymmetricEigen of(DMatrixRMaj matrix) {
    Tridiagonal tridiagonal = new Tridiagonal(matrix);
    return new Qr(tridiagonal.vectors()).decompose(tridiagonal);
  }

  /**
   * The same of a positive semidefinite matrix, of the largest eigenvalues alone, largest first:
   * those above {@code floor}, at most {@code count}.
   *
   * @throws IllegalStateException if the iteration does not converge
   */
  static SymmetricEigen largest(DMatrixRMaj matrix, int count, double floor) {
    int d = matrix.getNumRows();
    SymmetricEigen found = d >= ROWS_FOR_EACH * count ? Lanczos.largest(matrix, count) : null;
    if (found != null) {
      return new SymmetricEigen(above(floor, found.values), found.vectors);
    }
    Tridiagonal tridiagonal = new Tridiagonal(matrix);
    TridiagonalEigen eigen = new TridiagonalEigen(tridiagonal.diagonal(), tridiagonal.beside());
    double[] wanted = above(floor, eigen.values(Math.min(count, d)));
    double[][] vectors = eigen.vectors(wanted);
    return vectors.length == wanted.length
        ? new SymmetricEigen(wanted, k -> tridiagonal.reflected(vectors[k]))
        : of(matrix).largestFirst(wanted.length);
  }

  private static double[] above(double floor, double[] values) {
    return Arrays.stream(values).filter(value -> value > floor).toArray();
  }

  /** The same in the order of the eigenvalues, the largest first. */
  SymmetricEigen largestFirst() {
    return largestFirst(values.length);
  }

  private SymmetricEigen largestFirst(int count) {
    int[] order =
        IntStream.range(0, values.length)
            .boxed()
            .sorted(Comparator.comparingDouble(i -> -values[i]))
            .mapToInt(Integer::intValue)
            .toArray();
    double[] sortedValues = new double[count];
    Arrays.setAll(sortedValues, k -> values[order[k]]);
    return new SymmetricEigen(sortedValues, k -> vectors.apply(order[k]));
  }

  /** The eigenvalues found; {@link #of} has them in no order. */
  double[] values() {
    return values;
  }

  /** The eigenvector of eigenvalue k, which may be made anew for each call. */
  double[] vector(int k) {
    return vectors.apply(k);
  }

  /** EJML's QR algorithm on a tridiagonal matrix. */
  private static final class Qr {
    private final Rotations rotations;
    private final SymmetricQrAlgorithm_DDRM algorithm;

    /**
     * @param vectors to be rotated
     */
    Qr(double[][] vectors) {
      rotations = new Rotations(vectors);
      algorithm = new SymmetricQrAlgorithm_DDRM(rotations);
      algorithm.setFastEigenvalues(true);
    }

    double[] values(Tridiagonal matrix) {
      int d = matrix.size();
      if (!algorithm.process(d, matrix.diagonal(), matrix.beside())) {
        throw notFound(d);
      }
      return rotations.copyEigenvalues(new double[d]);
    }

    SymmetricEigen decompose(Tridiagonal matrix) {
      int d = matrix.size();
      double[] shifts = values(matrix);
      algorithm.setQ(Rotations.ASKED_FOR);
      if (!algorithm.process(d, matrix.diagonal(), matrix.beside(), shifts)) {
        throw notFound(d);
      }
      return new SymmetricEigen(
          rotations.copyEigenvalues(new double[d]), k -> rotations.vectors[k]);
    }

    private static IllegalStateException notFound(int d) {
      return new IllegalStateException("no eigenvalues found of a " + d + " x " + d + " matrix");
    }
  }

  /** Applies the rotations of the QR algorithm to the vectors. */
  private static final class Rotations extends SymmetricQREigenHelper_DDRM {
    /** Tells the algorithm that vectors are wanted; its numbers are not used. */
    static final DMatrixRMaj ASKED_FOR = new DMatrixRMaj(1, 1);

    private final double[][] vectors;

    Rotations(double[][] vectors) {
      this.vectors = vectors;
    }

    @Override
    protected void updateQ(int m, int n, double c, double s) {
      rotate(vectors[m], vectors[n], c, s);
    }

    private static void rotate(double[] a, double[] b, double c, double s) {
      for (int i = 0; i < a.length; i++) {
        double x = a[i];
        double y = b[i];
        a[i] = c * x + s * y;
        b[i] = c * y - s * x;
      }
    }
  }
}
