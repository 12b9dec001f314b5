package linkworthy.codec;

import java.util.Arrays;
import java.util.Comparator;
import java.util.stream.IntStream;
import org.ejml.data.DMatrixRMaj;
import org.ejml.dense.row.decomposition.eig.symm.SymmetricQREigenHelper_DDRM;
import org.ejml.dense.row.decomposition.eig.symm.SymmetricQrAlgorithm_DDRM;
import org.ejml.dense.row.decomposition.qr.QrHelperFunctions_DDRM;

/**
 * Eigenvalues and eigenvectors of a symmetric matrix: Householder reflections to tridiagonal form,
 * then the implicit QR algorithm, first for the values and then, with these as shifts, for the
 * vectors (Watkins, Fundamentals of Matrix Computations, second edition, pages 349 to 355).
 *
 * <p>Where only some of the largest are wanted, their vectors come from {@link InverseIteration} on
 * the tridiagonal matrix; if one of them does not pass the check there, all are computed.
 *
 * <p>The QR algorithm is EJML's. The three steps that take a multiple of d^3 operations are here,
 * because on one array for each row the virtual machine makes vector instructions of them. Every
 * number is the sum of the same terms in the same order as in EJML's own decomposition, so the two
 * agree to the last bit.
 */
final class SymmetricEigen {
  private final double[] values;
  private final double[][] vectors;

  private SymmetricEigen(double[] values, double[][] vectors) {
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
   * The same, of the largest eigenvalues first and with vectors for those above {@code floor}
   * alone, at most {@code count}.
   *
   * @throws IllegalStateException if the iteration does not converge
   */
  static SymmetricEigen largest(DMatrixRMaj matrix, int count, double floor) {
    Tridiagonal tridiagonal = new Tridiagonal(matrix);
    double[] values = new Qr(new double[0][]).values(tridiagonal);
    sortDown(values);
    double[] wanted = Arrays.stream(values).limit(count).filter(v -> v > floor).toArray();
    double[][] vectors =
        InverseIteration.vectors(tridiagonal.diagonal(), tridiagonal.beside(), wanted);
    return vectors.length == wanted.length
        ? new SymmetricEigen(values, tridiagonal.reflected(vectors))
        : of(matrix).largestFirst(wanted.length);
  }

  private static void sortDown(double[] values) {
    Arrays.sort(values);
    for (int i = 0, j = values.length - 1; i < j; i++, j--) {
      double low = values[i];
      values[i] = values[j];
      values[j] = low;
    }
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
    double[] sortedValues = new double[order.length];
    double[][] sortedVectors = new double[count][];
    Arrays.setAll(sortedValues, k -> values[order[k]]);
    Arrays.setAll(sortedVectors, k -> vectors[order[k]]);
    return new SymmetricEigen(sortedValues, sortedVectors);
  }

  /** All eigenvalues; {@link #of} has them in no order. */
  double[] values() {
    return values;
  }

  /** The eigenvectors, in the order of the eigenvalues. */
  double[][] vectors() {
    return vectors;
  }

  /** Householder's reflections {@code I - gamma u u'} that leave a tridiagonal matrix. */
  private static final class Tridiagonal {
    private final int d;

    /** What is left of the matrix, both triangles; row k-1 then keeps u of reflection k. */
    private final double[][] rows;

    private final double[] gammas;
    private final double[] beside;

    Tridiagonal(DMatrixRMaj matrix) {
      d = matrix.getNumRows();
      rows = new double[d][d];
      gammas = new double[d];
      beside = new double[d - 1];
      for (int i = 0; i < d; i++) {
        for (int j = i; j < d; j++) {
          rows[i][j] = matrix.get(i, j);
          rows[j][i] = matrix.get(i, j);
        }
      }
      for (int k = 1; k < d; k++) {
        reflect(k);
      }
    }

    private void reflect(int k) {
      double[] u = rows[k - 1];
      double largest = 0;
      for (int i = k; i < d; i++) {
        largest = Math.max(largest, Math.abs(u[i]));
      }
      if (largest > 0) {
        double tau = QrHelperFunctions_DDRM.computeTauAndDivide(k, d, u, 0, largest);
        double nu = u[k] + tau;
        QrHelperFunctions_DDRM.divideElements(k + 1, d, u, 0, nu);
        gammas[k] = nu / tau;
        beside[k - 1] = -tau * largest;
        u[k] = 1;
        reflectBothSides(k, u, gammas[k]);
      }
      u[k] = 1;
    }

    /** A + w u' + u w' with w = v - (gamma/2) (u'v) u and v = -gamma A u. */
    private void reflectBothSides(int k, double[] u, double gamma) {
      double[] w = new double[d];
      Matrices.addCombination(w, k, u, rows, k);
      double product = 0;
      for (int i = k; i < d; i++) {
        w[i] = -gamma * w[i];
        product += u[i] * w[i];
      }
      product *= -0.5 * gamma;
      for (int i = k; i < d; i++) {
        w[i] += product * u[i];
      }
      for (int i = k; i < d; i++) {
        addTwo(rows[i], k, w[i], u, u[i], w);
      }
    }

    private static void addTwo(
        double[] sums, int from, double a, double[] u, double b, double[] w) {
      for (int j = from; j < sums.length; j++) {
        sums[j] += a * u[j] + w[j] * b;
      }
    }

    double[] diagonal() {
      double[] diagonal = new double[d];
      for (int i = 0; i < d; i++) {
        diagonal[i] = rows[i][i];
      }
      return diagonal;
    }

    double[] beside() {
      return beside.clone();
    }

    /** Vectors of the tridiagonal matrix as vectors of the whole one: all reflections in turn. */
    double[][] reflected(double[][] vectors) {
      double[][] columns = transposed(vectors, d);
      double[] sums = new double[vectors.length];
      for (int k = d - 1; k >= 1; k--) {
        double[] u = rows[k - 1];
        Arrays.fill(sums, 0);
        for (int i = k; i < d; i++) {
          Matrices.add(sums, 0, u[i], columns[i]);
        }
        for (int i = k; i < d; i++) {
          Matrices.add(columns[i], 0, -gammas[k] * u[i], sums);
        }
      }
      return transposed(columns, vectors.length);
    }

    private static double[][] transposed(double[][] matrix, int columns) {
      double[][] transposed = new double[columns][matrix.length];
      for (int i = 0; i < matrix.length; i++) {
        for (int j = 0; j < columns; j++) {
          transposed[j][i] = matrix[i][j];
        }
      }
      return transposed;
    }

    /** The product of all reflections, transposed. */
    double[][] vectors() {
      double[][] product = new double[d][d];
      for (int i = 0; i < d; i++) {
        product[i][i] = 1;
      }
      double[] sums = new double[d];
      for (int k = d - 1; k >= 1; k--) {
        double[] u = rows[k - 1];
        Arrays.fill(sums, k, d, 0);
        Matrices.addCombination(sums, k, u, product, k);
        for (int i = k; i < d; i++) {
          sums[i] = -gammas[k] * sums[i];
        }
        for (int i = k; i < d; i++) {
          Matrices.add(product[i], k, u[i], sums);
        }
      }
      return transposed(product, d);
    }
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
      int d = matrix.d;
      if (!algorithm.process(d, matrix.diagonal(), matrix.beside())) {
        throw notFound(d);
      }
      return rotations.copyEigenvalues(new double[d]);
    }

    SymmetricEigen decompose(Tridiagonal matrix) {
      int d = matrix.d;
      double[] shifts = values(matrix);
      algorithm.setQ(Rotations.ASKED_FOR);
      if (!algorithm.process(d, matrix.diagonal(), matrix.beside(), shifts)) {
        throw notFound(d);
      }
      return new SymmetricEigen(rotations.copyEigenvalues(new double[d]), rotations.vectors);
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
