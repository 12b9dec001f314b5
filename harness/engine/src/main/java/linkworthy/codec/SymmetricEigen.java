package linkworthy.codec;

import java.util.Arrays;
import org.ejml.data.DMatrixRMaj;
import org.ejml.dense.row.decomposition.eig.symm.SymmetricQREigenHelper_DDRM;
import org.ejml.dense.row.decomposition.eig.symm.SymmetricQrAlgorithm_DDRM;
import org.ejml.dense.row.decomposition.qr.QrHelperFunctions_DDRM;

/**
 * Eigenvalues and eigenvectors of a symmetric matrix: Householder reflections to tridiagonal form,
 * then the implicit QR algorithm, first for the values and then, with these as shifts, for the
 * vectors (Watkins, Fundamentals of Matrix Computations, second edition, pages 349 to 355).
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
    int d = matrix.getNumRows();
    Tridiagonal tridiagonal = new Tridiagonal(matrix);
    double[] diagonal = tridiagonal.diagonal();
    double[] beside = tridiagonal.beside();
    Rotations rotations = new Rotations(tridiagonal.vectors());
    SymmetricQrAlgorithm_DDRM algorithm = new SymmetricQrAlgorithm_DDRM(rotations);
    algorithm.setFastEigenvalues(true);
    boolean found = algorithm.process(d, diagonal.clone(), beside.clone());
    double[] shifts = rotations.copyEigenvalues(new double[d]);
    algorithm.setQ(Rotations.ASKED_FOR);
    if (!found || !algorithm.process(d, diagonal, beside, shifts)) {
      throw new IllegalStateException("no eigenvalues found of a " + d + " x " + d + " matrix");
    }
    return new SymmetricEigen(rotations.copyEigenvalues(new double[d]), rotations.vectors);
  }

  /** Eigenvalues, in no order. */
  double[] values() {
    return values;
  }

  /** The eigenvector of each eigenvalue. */
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
      return beside;
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
      double[][] transposed = new double[d][d];
      for (int i = 0; i < d; i++) {
        for (int j = 0; j < d; j++) {
          transposed[i][j] = product[j][i];
        }
      }
      return transposed;
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
