package linkworthy.codec;

import org.ejml.data.DMatrixRMaj;

/**
 * The few products of the transform codec, written so that each output element is summed in the
 * order of its terms (the same bits everywhere) while the inner loops run over neighbouring
 * elements (so that the compiler can use vector instructions).
 */
final class Matrices {
  private Matrices() {}

  /**
   * Population covariance {@code (1/n) Xc Xc'} of d centred variables by n observations; grey
   * levels squared.
   */
  static DMatrixRMaj covariance(double[][] centred) {
    int d = centred.length;
    int n = centred[0].length;
    double[][] observations = new double[n][d];
    for (int i = 0; i < d; i++) {
      for (int j = 0; j < n; j++) {
        observations[j][i] = centred[i][j];
      }
    }
    double[][] sums = new double[d][];
    for (int i = 0; i < d; i++) {
      sums[i] = new double[d];
      int j = 0;
      for (; j + 4 <= n; j += 4) {
        addFour(sums[i], i, observations, j);
      }
      for (; j < n; j++) {
        add(sums[i], i, observations[j][i], observations[j]);
      }
    }
    DMatrixRMaj covariance = new DMatrixRMaj(d, d);
    for (int i = 0; i < d; i++) {
      for (int k = i; k < d; k++) {
        double value = sums[i][k] / n;
        covariance.set(i, k, value);
        covariance.set(k, i, value);
      }
    }
    return covariance;
  }

  private static void addFour(double[] sums, int i, double[][] observations, int j) {
    double[] o0 = observations[j];
    double[] o1 = observations[j + 1];
    double[] o2 = observations[j + 2];
    double[] o3 = observations[j + 3];
    double a0 = o0[i];
    double a1 = o1[i];
    double a2 = o2[i];
    double a3 = o3[i];
    for (int k = i; k < sums.length; k++) {
      sums[k] = (((sums[k] + a0 * o0[k]) + a1 * o1[k]) + a2 * o2[k]) + a3 * o3[k];
    }
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
