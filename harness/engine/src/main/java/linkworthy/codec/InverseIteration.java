package linkworthy.codec;

import java.util.Arrays;

/**
 * Eigenvectors of a symmetric tridiagonal matrix T for given eigenvalues, by inverse iteration:
 * {@code (T - lambda I) x' = x} is solved until x' grows by as much as the precision allows, each
 * vector being made orthogonal to those before it (Golub and Van Loan, Matrix Computations, section
 * 8.4, from memory). The start is a fixed sequence, so the same matrix always gives the same
 * vectors.
 */
final class InverseIteration {
  private static final double EPSILON = 0x1p-52;
  private static final double GOLDEN = (Math.sqrt(5) - 1) / 2;
  private static final int MOST_ROUNDS = 6;

  /** Times the norm of T: the largest residual and, without the norm, the largest inner product. */
  private static final double TOLERANCE = 1e-13;

  private final double[] diagonal;
  private final double[] beside;
  private final double norm;

  /** T - lambda I as row exchanges, multipliers and an upper triangle of three diagonals. */
  private final double[] pivots;

  private final double[] above;
  private final double[] farAbove;
  private final double[] multipliers;
  private final boolean[] exchanged;

  private InverseIteration(double[] diagonal, double[] beside) {
    int d = diagonal.length;
    this.diagonal = diagonal;
    this.beside = beside;
    this.norm = norm(diagonal, beside);
    this.pivots = new double[d];
    this.above = new double[d];
    this.farAbove = new double[d];
    this.multipliers = new double[d];
    this.exchanged = new boolean[d];
  }

  /**
   * Orthonormal eigenvectors, one for each eigenvalue.
   *
   * @param diagonal d entries
   * @param beside d - 1 entries above, and below, the diagonal
   * @param values eigenvalues, largest first
   * @return as many vectors as there are values; fewer, up to the first that fails its check: a
   *     residual {@code |T x - lambda x|} above 1e-13 of the norm, or an inner product with another
   *     above 1e-13
   */
  static double[][] vectors(double[] diagonal, double[] beside, double[] values) {
    InverseIteration iteration = new InverseIteration(diagonal, beside);
    double[][] vectors = new double[values.length][];
    double shift = Double.POSITIVE_INFINITY;
    for (int k = 0; k < values.length; k++) {
      shift = Math.min(values[k], shift - 10 * EPSILON * iteration.norm);
      double[] vector = iteration.vector(shift, k, vectors);
      if (!iteration.isSound(vector, values[k], k, vectors)) {
        return Arrays.copyOf(vectors, k);
      }
      vectors[k] = vector;
    }
    return vectors;
  }

  private static double norm(double[] diagonal, double[] beside) {
    double norm = Double.MIN_NORMAL;
    for (int i = 0; i < diagonal.length; i++) {
      double sum = Math.abs(diagonal[i]);
      sum += i > 0 ? Math.abs(beside[i - 1]) : 0;
      sum += i < beside.length ? Math.abs(beside[i]) : 0;
      norm = Math.max(norm, sum);
    }
    return norm;
  }

  private double[] vector(double shift, int k, double[][] before) {
    factor(shift);
    double[] x = start(k);
    double growth = 0;
    boolean settled = false;
    for (int round = 0; round < MOST_ROUNDS && !settled; round++) {
      solve(x);
      double length = unit(x);
      for (int j = 0; j < k; j++) {
        Matrices.add(x, 0, -dot(x, before[j]), before[j]);
      }
      length *= unit(x);
      settled = round > 0 && length <= 2 * growth;
      growth = length;
    }
    return x;
  }

  /** Fractions of multiples of a number that differs from vector to vector, about 0. */
  private double[] start(int k) {
    double[] x = new double[diagonal.length];
    double pace = (k + 1) * GOLDEN;
    pace -= Math.floor(pace);
    double at = 0;
    for (int i = 0; i < x.length; i++) {
      at += pace;
      at -= Math.floor(at);
      x[i] = at - 0.5;
    }
    return x;
  }

  private void factor(double shift) {
    int d = diagonal.length;
    double least = EPSILON * norm;
    double pivot = diagonal[0] - shift;
    double next = d > 1 ? beside[0] : 0;
    for (int i = 0; i < d; i++) {
      boolean last = i == d - 1;
      double below = last ? 0 : beside[i];
      exchanged[i] = Math.abs(below) > Math.abs(pivot);
      if (exchanged[i]) {
        double factor = pivot / below;
        multipliers[i] = factor;
        pivots[i] = below;
        above[i] = diagonal[i + 1] - shift;
        farAbove[i] = i + 1 < beside.length ? beside[i + 1] : 0;
        pivot = next - factor * above[i];
        next = -factor * farAbove[i];
      } else {
        pivots[i] = Math.abs(pivot) < least ? least : pivot;
        above[i] = next;
        farAbove[i] = 0;
        if (!last) {
          multipliers[i] = below / pivots[i];
          pivot = diagonal[i + 1] - shift - multipliers[i] * next;
          next = i + 1 < beside.length ? beside[i + 1] : 0;
        }
      }
    }
  }

  private void solve(double[] x) {
    int d = x.length;
    for (int i = 0; i < d - 1; i++) {
      if (exchanged[i]) {
        double upper = x[i + 1];
        x[i + 1] = x[i] - multipliers[i] * upper;
        x[i] = upper;
      } else {
        x[i + 1] -= multipliers[i] * x[i];
      }
    }
    for (int i = d - 1; i >= 0; i--) {
      double sum = x[i];
      sum -= i + 1 < d ? above[i] * x[i + 1] : 0;
      sum -= i + 2 < d ? farAbove[i] * x[i + 2] : 0;
      x[i] = sum / pivots[i];
    }
  }

  private boolean isSound(double[] x, double value, int k, double[][] before) {
    double residual = 0;
    for (int i = 0; i < x.length; i++) {
      double sum = (diagonal[i] - value) * x[i];
      sum += i > 0 ? beside[i - 1] * x[i - 1] : 0;
      sum += i < beside.length ? beside[i] * x[i + 1] : 0;
      residual += sum * sum;
    }
    boolean sound = Math.sqrt(residual) <= TOLERANCE * norm;
    for (int j = 0; sound && j < k; j++) {
      sound = Math.abs(dot(x, before[j])) <= TOLERANCE;
    }
    return sound;
  }

  private static double dot(double[] a, double[] b) {
    double s0 = 0;
    double s1 = 0;
    double s2 = 0;
    double s3 = 0;
    int i = 0;
    for (; i + 4 <= a.length; i += 4) {
      s0 += a[i] * b[i];
      s1 += a[i + 1] * b[i + 1];
      s2 += a[i + 2] * b[i + 2];
      s3 += a[i + 3] * b[i + 3];
    }
    for (; i < a.length; i++) {
      s0 += a[i] * b[i];
    }
    return (s0 + s1) + (s2 + s3);
  }

  /** Scales to length 1 and returns the length it had. */
  private static double unit(double[] x) {
    double largest = 0;
    for (double entry : x) {
      largest = Math.max(largest, Math.abs(entry));
    }
    double squares = 0;
    for (int i = 0; i < x.length; i++) {
      x[i] /= largest;
      squares += x[i] * x[i];
    }
    double length = Math.sqrt(squares);
    for (int i = 0; i < x.length; i++) {
      x[i] /= length;
    }
    return largest * length;
  }
}
