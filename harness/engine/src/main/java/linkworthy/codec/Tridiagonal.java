package linkworthy.codec;

import java.util.Arrays;
import org.ejml.data.DMatrixRMaj;
import org.ejml.dense.row.decomposition.qr.QrHelperFunctions_DDRM;

/**
 * Householder's reflections {@code I - gamma u u'} that leave a tridiagonal matrix of a symmetric
 * one (Watkins, Fundamentals of Matrix Computations, second edition, pages 349 to 355).
 *
 * <p>Every number is the sum of the same terms in the same order as in EJML's own decomposition, so
 * the two agree to the last bit; on one array for each row the virtual machine makes vector
 * instructions of the steps that take a multiple of d^3 operations.
 */
final class Tridiagonal {
  private final int d;

  /** What is left of the matrix, both triangles; row k-1 then keeps u of reflection k. */
  private final double[][] rows;

  private final double[] gammas;
  private final double[] beside;

  /**
   * @param matrix d by d, of which only the upper triangle is read
   */
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

  private static void addTwo(double[] sums, int from, double a, double[] u, double b, double[] w) {
    for (int j = from; j < sums.length; j++) {
      sums[j] += a * u[j] + w[j] * b;
    }
  }

  /** Number of rows d. */
  int size() {
    return d;
  }

  /** The d entries of the diagonal. */
  double[] diagonal() {
    double[] diagonal = new double[d];
    for (int i = 0; i < d; i++) {
      diagonal[i] = rows[i][i];
    }
    return diagonal;
  }

  /** The d - 1 entries above, and below, the diagonal. */
  double[] beside() {
    return beside.clone();
  }

  /** A vector of the tridiagonal matrix as a vector of the whole one: all reflections in turn. */
  double[] reflected(double[] vector) {
    double[] reflected = vector.clone();
    for (int k = d - 1; k >= 1; k--) {
      double[] u = rows[k - 1];
      Matrices.add(reflected, k, -gammas[k] * Matrices.dot(u, reflected, k), u);
    }
    return reflected;
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
