package linkworthy.codec;

import org.ejml.data.DMatrixRMaj;

/**
 * The few products of the transform codec, written so that each output element is summed in the
 * order of its terms (the same bits everywhere) while the inner loops run over neighbouring
 * elements (so that the compiler can use vector instructions).
 */
final class Matrices {
  /** So many observations stay in the first-level cache while all sums go by. */
  private static final int NEAR = 8;

  /**
   * Columns transposed at once: entries of one column of 512 doubles fall into the same few places
   * of the first-level cache, and so many of them are written to the end before they are driven
   * out.
   */
  private static final int STREAMS = 8;

  private Matrices() {}

  /**
   * Takes the mean off a variable of samples and returns it. Sums of whole numbers are exact in any
   * order, so there are four.
   */
  static double centre(double[] variable) {
    double s0 = 0;
    double s1 = 0;
    double s2 = 0;
    double s3 = 0;
    int i = 0;
    for (; i + 4 <= variable.length; i += 4) {
      s0 += variable[i];
      s1 += variable[i + 1];
      s2 += variable[i + 2];
      s3 += variable[i + 3];
    }
    for (; i < variable.length; i++) {
      s0 += variable[i];
    }
    double sum = s0 + s1 + s2 + s3;
    double mean = sum / variable.length;
    for (int j = 0; j < variable.length; j++) {
      variable[j] -= mean;
    }
    return mean;
  }

  /**
   * Population covariance {@code (1/n) Xc Xc'} of d centred variables by n observations; grey
   * levels squared.
   */
  static DMatrixRMaj covariance(double[][] centred) {
    int d = centred.length;
    int n = centred[0].length;
    double[][] sums = products(centred);
    DMatrixRMaj covariance = new DMatrixRMaj(d, d);
    double[] data = covariance.data;
    for (int from = 0; from < d; from += STREAMS) {
      int to = Math.min(d, from + STREAMS);
      for (int i = 0; i < to; i++) {
        for (int k = Math.max(i, from); k < to; k++) {
          double value = sums[i][k] / n;
          data[i * d + k] = value;
          data[k * d + i] = value;
        }
      }
    }
    return covariance;
  }

  /** The upper triangle of {@code X X'}, d rows of d sums over n columns. */
  static double[][] products(double[][] rows) {
    int d = rows.length;
    int n = rows[0].length;
    double[][] columns = new double[n][d];
    for (int from = 0; from < n; from += STREAMS) {
      int to = Math.min(n, from + STREAMS);
      for (int i = 0; i < d; i++) {
        for (int j = from; j < to; j++) {
          columns[j][i] = rows[i][j];
        }
      }
    }
    double[][] sums = new double[d][d];
    for (int j = 0; j < n; j += NEAR) {
      addObservations(sums, columns, j, Math.min(n, j + NEAR));
    }
    return sums;
  }

  private static void addObservations(double[][] sums, double[][] observations, int from, int to) {
    int i = 0;
    for (; i + 2 <= sums.length; i += 2) {
      int j = from;
      for (; j + 2 <= to; j += 2) {
        addTwoByTwo(sums[i], sums[i + 1], i, observations[j], observations[j + 1]);
      }
      for (; j < to; j++) {
        add(sums[i], i, observations[j][i], observations[j]);
        add(sums[i + 1], i, observations[j][i + 1], observations[j]);
      }
    }
    for (; i < sums.length; i++) {
      for (int j = from; j < to; j++) {
        add(sums[i], i, observations[j][i], observations[j]);
      }
    }
  }

  /** Two observations to two rows of sums, i and i + 1, from column i. */
  private static void addTwoByTwo(double[] upper, double[] lower, int i, double[] p, double[] q) {
    double up = p[i];
    double uq = q[i];
    double lp = p[i + 1];
    double lq = q[i + 1];
    for (int k = i; k < upper.length; k++) {
      double pk = p[k];
      double qk = q[k];
      upper[k] = (upper[k] + up * pk) + uq * qk;
      lower[k] = (lower[k] + lp * pk) + lq * qk;
    }
  }

  /** The inner product from one entry on, as four sums that are added in the end. */
  static double dot(double[] a, double[] b, int from) {
    double s0 = 0;
    double s1 = 0;
    double s2 = 0;
    double s3 = 0;
    int i = from;
    for (; i < a.length - 3; i += 4) {
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

  /** {@code sums[k] += factor terms[k]} for k from {@code from}. */
  static void add(double[] sums, int from, double factor, double[] terms) {
    for (int k = from; k < sums.length; k++) {
      sums[k] += factor * terms[k];
    }
  }

  /** {@code sum + factors[0] rows[0] + factors[1] rows[1] + ...}, added to {@code sum} in order. */
  static void addCombination(double[] sum, double[] factors, double[][] rows) {
    addCombination(sum, 0, factors, rows, 0);
  }

  /** The same from one column and one row on. */
  static void addCombination(
      double[] sum, int fromColumn, double[] factors, double[][] rows, int fromRow) {
    int k = fromRow;
    for (; k + 4 <= factors.length; k += 4) {
      double[] r0 = rows[k];
      double[] r1 = rows[k + 1];
      double[] r2 = rows[k + 2];
      double[] r3 = rows[k + 3];
      double f0 = factors[k];
      double f1 = factors[k + 1];
      double f2 = factors[k + 2];
      double f3 = factors[k + 3];
      for (int j = fromColumn; j < sum.length; j++) {
        sum[j] = (((sum[j] + f0 * r0[j]) + f1 * r1[j]) + f2 * r2[j]) + f3 * r3[j];
      }
    }
    for (; k < factors.length; k++) {
      add(sum, fromColumn, factors[k], rows[k]);
    }
  }
}
