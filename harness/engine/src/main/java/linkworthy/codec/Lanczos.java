package linkworthy.codec;

import java.util.Arrays;
import org.ejml.data.DMatrixRMaj;
import org.jspecify.annotations.Nullable;

/**
 * The largest eigenvalues of a symmetric matrix C and their eigenvectors from far fewer products
 * with C than it has rows: Lanczos' iteration {@code b[j] q[j+1] = C q[j] - a[j] q[j] - b[j-1]
 * q[j-1]}, each q made orthogonal to all before it, leaves C as a tridiagonal matrix T on the span
 * of the q. An eigenvector s of T is an eigenvector {@code Q s} of C but for a residual of b times
 * the last entry of s (Golub and Van Loan, Matrix Computations, sections 10.1 and 10.3, from
 * memory). The first q is fixed, so the same matrix always gives the same vectors.
 *
 * <p>A single q[0] cannot see that an eigenvalue is there twice. So C without what was found is
 * shown to have no eigenvalue as large as the least of it: {@code x I - (C - V L V')} has a
 * Cholesky factor.
 */
final class Lanczos {
  /** Largest residual, times the largest eigenvalue. */
  private static final double TOLERANCE = 1e-15;

  /** What is left of a product, times the first entry of T, is no more than rounding. */
  private static final double NOTHING = 1e-10;

  /** Steps between two looks at the eigenvectors of T. */
  private static final int PATIENCE = 16;

  /** Rows of Cholesky's factor that are taken off all others at once. */
  private static final int NEAR = 8;

  private final double[][] rows;
  private final int d;
  private final double[][] q;
  private final double[] diagonal;
  private final double[] beside;

  private Lanczos(DMatrixRMaj matrix) {
    d = matrix.getNumRows();
    rows = new double[d][];
    Arrays.setAll(rows, i -> Arrays.copyOfRange(matrix.data, i * d, (i + 1) * d));
    int most = d / 2;
    q = new double[most + 1][];
    diagonal = new double[most];
    beside = new double[most];
  }

  /**
   * The largest eigenvalues of a positive semidefinite matrix.
   *
   * @param count how many
   * @return null if half of them have not converged after 5 / 2 {@code count} steps or all after d
   *     / 2, or if it is not certain that none is missing
   */
  static @Nullable SymmetricEigen largest(DMatrixRMaj matrix, int count) {
    Lanczos lanczos = new Lanczos(matrix);
    SymmetricEigen found = lanczos.iterate(count);
    return found != null && lanczos.isComplete(found) ? found : null;
  }

  private @Nullable SymmetricEigen iterate(int count) {
    q[0] = start();
    int steps = 0;
    for (int next = 5 * count / 2; next <= diagonal.length; next += PATIENCE) {
      while (steps < next) {
        if (!step(steps++)) {
          return null;
        }
      }
      TridiagonalEigen eigen =
          new TridiagonalEigen(Arrays.copyOf(diagonal, steps), Arrays.copyOf(beside, steps - 1));
      double[] values = eigen.values(count);
      double[][] vectors = eigen.vectors(values);
      int found = converged(values, vectors, steps);
      if (found == count) {
        double[][] combined = combined(vectors);
        return new SymmetricEigen(values, k -> combined[k]);
      }
      if (found < count / 2) {
        return null;
      }
    }
    return null;
  }

  /** How many of the first have residuals within the tolerance. */
  private int converged(double[] values, double[][] vectors, int steps) {
    double last = beside[steps - 1];
    int k = 0;
    while (k < vectors.length && Math.abs(last * vectors[k][steps - 1]) <= TOLERANCE * values[0]) {
      k++;
    }
    return k;
  }

  private double[][] combined(double[][] vectors) {
    double[][] combined = new double[vectors.length][d];
    for (int k = 0; k < vectors.length; k++) {
      Matrices.addCombination(combined[k], vectors[k], q);
    }
    return combined;
  }

  /** Numbers of Knuth's congruential generator, as a unit vector. */
  private double[] start() {
    double[] start = new double[d];
    long state = 1;
    for (int i = 0; i < d; i++) {
      state = state * 6364136223846793005L + 1442695040888963407L;
      start[i] = (state >>> 11) * 0x1p-53 - 0.5;
    }
    scale(start, 1 / Math.sqrt(Matrices.dot(start, start, 0)));
    return start;
  }

  private static void scale(double[] vector, double factor) {
    for (int i = 0; i < vector.length; i++) {
      vector[i] *= factor;
    }
  }

  /** Finds q[j + 1]; false if there is nothing left of it but rounding. */
  private boolean step(int j) {
    double[] next = new double[d];
    Matrices.addCombination(next, q[j], rows);
    diagonal[j] = Matrices.dot(next, q[j], 0);
    Matrices.add(next, 0, -diagonal[j], q[j]);
    if (j > 0) {
      Matrices.add(next, 0, -beside[j - 1], q[j - 1]);
    }
    double[] factors = new double[j + 1];
    Arrays.setAll(factors, i -> -Matrices.dot(next, q[i], 0));
    Matrices.addCombination(next, factors, q);
    beside[j] = Math.sqrt(Matrices.dot(next, next, 0));
    scale(next, 1 / beside[j]);
    q[j + 1] = next;
    return beside[j] > NOTHING * diagonal[0];
  }

  /** Whether all other eigenvalues are less than those found; overwrites the matrix. */
  private boolean isComplete(SymmetricEigen found) {
    double[] values = found.values();
    int count = values.length;
    double[][] vectors = new double[count][];
    Arrays.setAll(vectors, found::vector);
    double[] factors = new double[count];
    for (int i = 0; i < d; i++) {
      double[] row = rows[i];
      for (int j = i; j < d; j++) {
        row[j] = -row[j];
      }
      for (int k = 0; k < count; k++) {
        factors[k] = values[k] * vectors[k][i];
      }
      Matrices.addCombination(row, i, factors, vectors, 0);
      row[i] += values[count - 1];
    }
    return isPositiveDefinite();
  }

  /** Cholesky's factor of the upper triangle, in its place, a few rows at a time. */
  private boolean isPositiveDefinite() {
    double[] factors = new double[NEAR];
    double[][] done = new double[NEAR][];
    for (int from = 0; from < d; from += NEAR) {
      int to = Math.min(d, from + NEAR);
      for (int i = from; i < to; i++) {
        for (int k = from; k < i; k++) {
          Matrices.add(rows[i], i, -rows[k][i], rows[k]);
        }
        if (!(rows[i][i] > 0)) {
          return false;
        }
        double factor = 1 / Math.sqrt(rows[i][i]);
        for (int j = i; j < d; j++) {
          rows[i][j] *= factor;
        }
        done[i - from] = rows[i];
      }
      for (int i = to; i < d; i++) {
        for (int k = 0; k < NEAR; k++) {
          factors[k] = -done[k][i];
        }
        Matrices.addCombination(rows[i], i, factors, done, 0);
      }
    }
    return true;
  }
}
