package linkworthy.codec;

import java.util.Arrays;

/**
 * The largest eigenvalues of a symmetric tridiagonal matrix T and their eigenvectors, all of them
 * at once: each has a lane of its own, and every step is the same in all lanes, so that the virtual
 * machine makes vector instructions of them.
 *
 * <p>Both rest on the pivots of {@code T - x I}, with diagonal a and b beside it: {@code q[i] =
 * a[i] - x - b[i-1]^2 / q[i-1]}. As many of them are negative as there are eigenvalues below x, and
 * so each eigenvalue is bisected (Golub and Van Loan, Matrix Computations, section 8.4, from
 * memory). For the vector, pivots run down from the first row and up from the last; they meet in
 * the row r where {@code T - x I} is nearest to singular, z[r] is 1, and the other entries follow
 * from their neighbour on the side of r by one product each (the twisted factorization of Parlett
 * and Dhillon, Fernando's solution to Wilkinson's problem, 1997, from memory). Vectors of close
 * eigenvalues are made orthogonal by the Cholesky factor of their inner products.
 */
final class TridiagonalEigen {
  /** Points that are counted at once, as far as the eigenvalues share them evenly. */
  private static final int LANES = 64;

  /** Times the norm of T: the largest residual and, without the norm, the largest inner product. */
  private static final double TOLERANCE = 1e-13;

  /** A bracket is no wider than this part of the norm in the end. */
  private static final double LEAST_WIDTH = 0x1p-54;

  /** Makes any pivot that is not 0 larger than 1. */
  private static final double HUGE = 0x1p200;

  /** Square of the least number beside the diagonal, so that no pivot is 0/0. */
  private static final double LEAST_SQUARE = 0x1p-400;

  private static final int MOST_ROUNDS = 3;

  private final int d;
  private final int exponent;
  private final double[] diagonal;
  private final double[] beside;
  private final double[] squares;
  private final double norm;

  /**
   * @param diagonal d entries
   * @param beside d - 1 entries above, and below, the diagonal
   */
  TridiagonalEigen(double[] diagonal, double[] beside) {
    this.d = diagonal.length;
    this.exponent = Math.getExponent(norm(diagonal, beside)) + 1;
    this.diagonal = scaled(diagonal, -exponent);
    this.beside = scaled(beside, -exponent);
    this.norm = norm(this.diagonal, this.beside);
    this.squares = new double[d];
    for (int i = 1; i < d; i++) {
      squares[i] = Math.max(LEAST_SQUARE, this.beside[i - 1] * this.beside[i - 1]);
    }
  }

  private static double[] scaled(double[] values, int exponent) {
    double[] scaled = new double[values.length];
    Arrays.setAll(scaled, i -> Math.scalb(values[i], exponent));
    return scaled;
  }

  /** The largest sum of magnitudes in a row, which no eigenvalue exceeds. */
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

  /**
   * The largest eigenvalues, to the precision of the largest of them.
   *
   * @param count how many, up to d
   */
  double[] values(int count) {
    int points = Math.max(1, LANES / count);
    double[] low = new double[count];
    double[] high = new double[count];
    Arrays.fill(low, -norm);
    Arrays.fill(high, norm);
    double[] x = new double[count * points];
    for (double width = 2; width > LEAST_WIDTH; width /= points + 1) {
      for (int lane = 0; lane < x.length; lane++) {
        int k = lane / points;
        double share = (lane % points + 1.0) / (points + 1);
        x[lane] = low[k] + share * (high[k] - low[k]);
      }
      double[] below = countBelow(x);
      for (int lane = 0; lane < x.length; lane++) {
        int k = lane / points;
        if (d - below[lane] > k) {
          low[k] = Math.max(low[k], x[lane]);
        } else {
          high[k] = Math.min(high[k], x[lane]);
        }
      }
    }
    double[] values = new double[count];
    Arrays.setAll(values, k -> Math.scalb((low[k] + high[k]) / 2, exponent));
    return values;
  }

  /** How many eigenvalues are less than x, for each lane. */
  private double[] countBelow(double[] x) {
    double[] pivots = new double[x.length];
    double[] counts = new double[x.length];
    Arrays.fill(pivots, 1);
    for (int i = 0; i < d; i++) {
      countNext(pivots, counts, x, diagonal[i], squares[i]);
    }
    return counts;
  }

  private static void countNext(
      double[] pivots, double[] counts, double[] x, double diagonal, double square) {
    for (int lane = 0; lane < x.length; lane++) {
      double pivot = (diagonal - x[lane]) - square / pivots[lane];
      pivots[lane] = pivot;
      counts[lane] -= Math.max(-1, Math.min(0, pivot * HUGE));
    }
  }

  /**
   * Orthonormal eigenvectors, one for each eigenvalue.
   *
   * @param values eigenvalues of this matrix
   * @return as many vectors as there are values, or none if one of them fails its check: a residual
   *     {@code |T z - x z|} above 1e-13 of the norm, an inner product with another above 1e-13, or
   *     a pivot of exactly 0 on the way
   */
  double[][] vectors(double[] values) {
    if (values.length == 0) {
      return new double[0][];
    }
    double[] x = scaled(values, -exponent);
    double[][] vectors = twisted(x);
    boolean sound = areOrthonormal(vectors);
    for (int k = 0; k < x.length && sound; k++) {
      sound = residual(vectors[k], x[k]) <= TOLERANCE * norm;
    }
    return sound ? vectors : new double[0][];
  }

  private double[][] twisted(double[] x) {
    double[][] down = new double[d][x.length];
    double[][] up = new double[d][x.length];
    double[] none = new double[x.length];
    Arrays.fill(none, Double.POSITIVE_INFINITY);
    for (int i = 0; i < d; i++) {
      pivots(down[i], i > 0 ? down[i - 1] : none, x, diagonal[i], squares[i]);
    }
    for (int i = d - 1; i >= 0; i--) {
      double[] below = i + 1 < d ? up[i + 1] : none;
      pivots(up[i], below, x, diagonal[i], i + 1 < d ? squares[i + 1] : 0);
    }
    int[] meeting = meeting(down, up, x);
    Arrays.fill(none, 0);
    for (int i = d - 1; i >= 0; i--) {
      entries(down[i], i + 1 < d ? down[i + 1] : none, i + 1 < d ? beside[i] : 0);
      setOne(down[i], i, meeting);
    }
    for (int i = 0; i < d; i++) {
      entries(up[i], i > 0 ? up[i - 1] : none, i > 0 ? beside[i - 1] : 0);
      setOne(up[i], i, meeting);
    }
    double[][] vectors = new double[x.length][d];
    for (int i = 0; i < d; i++) {
      for (int k = 0; k < x.length; k++) {
        vectors[k][i] = i < meeting[k] ? down[i][k] : up[i][k];
      }
    }
    for (double[] vector : vectors) {
      scaleToUnit(vector);
    }
    return vectors;
  }

  private static void pivots(
      double[] pivots, double[] before, double[] x, double diagonal, double square) {
    for (int lane = 0; lane < x.length; lane++) {
      pivots[lane] = (diagonal - x[lane]) - square / before[lane];
    }
  }

  /** The row of each lane in which pivots from both sides leave least. */
  private int[] meeting(double[][] down, double[][] up, double[] x) {
    int[] meeting = new int[x.length];
    double[] least = new double[x.length];
    Arrays.fill(least, Double.POSITIVE_INFINITY);
    for (int i = 0; i < d; i++) {
      for (int lane = 0; lane < x.length; lane++) {
        double left = Math.abs((down[i][lane] + up[i][lane]) - (diagonal[i] - x[lane]));
        if (left < least[lane]) {
          least[lane] = left;
          meeting[lane] = i;
        }
      }
    }
    return meeting;
  }

  /** Entries of the vectors in a row, in place of its pivots. */
  private static void entries(double[] pivots, double[] neighbours, double beside) {
    for (int lane = 0; lane < pivots.length; lane++) {
      pivots[lane] = -beside * neighbours[lane] / pivots[lane];
    }
  }

  private static void setOne(double[] entries, int row, int[] meeting) {
    for (int lane = 0; lane < meeting.length; lane++) {
      if (meeting[lane] == row) {
        entries[lane] = 1;
      }
    }
  }

  private static void scaleToUnit(double[] vector) {
    double largest = 0;
    for (double entry : vector) {
      largest = Math.max(largest, Math.abs(entry));
    }
    double squares = 0;
    for (int i = 0; i < vector.length; i++) {
      vector[i] /= largest;
      squares += vector[i] * vector[i];
    }
    double length = Math.sqrt(squares);
    for (int i = 0; i < vector.length; i++) {
      vector[i] /= length;
    }
  }

  /** Makes unit vectors orthogonal; whether that has succeeded. */
  private static boolean areOrthonormal(double[][] vectors) {
    for (int round = 0; round < MOST_ROUNDS; round++) {
      double[][] products = Matrices.products(vectors);
      if (isIdentity(products)) {
        return true;
      }
      makeOrthonormal(vectors, products);
    }
    return false;
  }

  private static boolean isIdentity(double[][] products) {
    boolean is = true;
    for (int k = 0; k < products.length; k++) {
      is &= Math.abs(products[k][k] - 1) <= TOLERANCE;
      for (int other = k + 1; other < products.length; other++) {
        is &= Math.abs(products[k][other]) <= TOLERANCE;
      }
    }
    return is;
  }

  /**
   * V becomes R'^-1 V with the upper triangle R of V V' = R' R, row by row.
   *
   * @param products upper triangle of V V', which is overwritten
   */
  private static void makeOrthonormal(double[][] vectors, double[][] products) {
    for (int k = 0; k < vectors.length; k++) {
      double[] factors = new double[k];
      for (int j = 0; j < k; j++) {
        factors[j] = -products[j][k];
        Matrices.add(products[k], k, factors[j], products[j]);
      }
      Matrices.addCombination(vectors[k], factors, vectors);
      double length = Math.sqrt(products[k][k]);
      for (int i = k; i < products.length; i++) {
        products[k][i] /= length;
      }
      for (int i = 0; i < vectors[k].length; i++) {
        vectors[k][i] /= length;
      }
    }
  }

  private double residual(double[] z, double x) {
    double squares = 0;
    for (int i = 0; i < d; i++) {
      double sum = (diagonal[i] - x) * z[i];
      sum += i > 0 ? beside[i - 1] * z[i - 1] : 0;
      sum += i + 1 < d ? beside[i] * z[i + 1] : 0;
      squares += sum * sum;
    }
    return Math.sqrt(squares);
  }
}
