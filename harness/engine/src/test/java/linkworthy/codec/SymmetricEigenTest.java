package linkworthy.codec;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.Arrays;
import java.util.SplittableRandom;
import org.ejml.data.DMatrixRMaj;
import org.ejml.dense.row.factory.DecompositionFactory_DDRM;
import org.ejml.interfaces.decomposition.EigenDecomposition_F64;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

class SymmetricEigenTest {
  private static DMatrixRMaj covariance(int d, int observations, long seed) {
    SplittableRandom random = new SplittableRandom(seed);
    double[][] centred = new double[d][observations];
    for (double[] variable : centred) {
      for (int j = 0; j < observations; j++) {
        variable[j] = random.nextInt(-128, 128);
      }
    }
    return Matrices.covariance(centred);
  }

  /** The reference is the library's own decomposition of the same matrix, to the last bit. */
  private static void assertSameBitsAsTheLibrary(DMatrixRMaj matrix) {
    int d = matrix.getNumRows();
    EigenDecomposition_F64<DMatrixRMaj> expected = DecompositionFactory_DDRM.eig(d, true, true);
    assertThat(expected.decompose(matrix.copy())).isTrue();
    SymmetricEigen found = SymmetricEigen.of(matrix);
    for (int i = 0; i < d; i++) {
      assertThat(found.values()[i]).isEqualTo(expected.getEigenvalue(i).getReal());
      assertThat(found.vector(i)).containsExactly(expected.getEigenVector(i).getData());
    }
  }

  @ParameterizedTest
  @ValueSource(ints = {1, 2, 3, 4, 5, 17, 64, 130})
  void agreesWithTheLibraryToTheLastBit(int d) {
    assertSameBitsAsTheLibrary(covariance(d, 2 * d + 3, 7));
  }

  @Test
  void agreesWhereThereAreFewerObservationsThanVariables() {
    assertSameBitsAsTheLibrary(covariance(40, 12, 8));
  }

  @Test
  void agreesWhereVariablesAreConstant() {
    DMatrixRMaj matrix = covariance(24, 50, 9);
    for (int constant : new int[] {0, 1, 7, 8, 9, 23}) {
      for (int i = 0; i < 24; i++) {
        matrix.set(constant, i, 0);
        matrix.set(i, constant, 0);
      }
    }
    assertSameBitsAsTheLibrary(matrix);
    assertSameBitsAsTheLibrary(new DMatrixRMaj(5, 5));
  }

  /**
   * The reference is the full decomposition: the same eigenvalues to 1e-12 of the largest, vectors
   * that are orthonormal to 1e-12 and fulfil {@code C v = lambda v} to 1e-12 of the largest.
   */
  private static void assertLargestAreRight(DMatrixRMaj matrix, int count, int expected) {
    int d = matrix.getNumRows();
    SymmetricEigen all = SymmetricEigen.of(matrix).largestFirst();
    SymmetricEigen found = SymmetricEigen.largest(matrix, count, 1e-10 * all.values()[0]);
    double scale = 1e-12 * all.values()[0];
    assertThat(found.values())
        .containsExactly(Arrays.copyOf(all.values(), expected), within(scale));
    for (int k = 0; k < expected; k++) {
      double[] v = found.vector(k);
      for (int i = 0; i < d; i++) {
        double sum = 0;
        for (int j = 0; j < d; j++) {
          sum += matrix.get(i, j) * v[j];
        }
        assertThat(sum).isCloseTo(found.values()[k] * v[i], within(scale));
      }
      for (int other = 0; other <= k; other++) {
        double[] before = found.vector(other);
        double product = 0;
        for (int i = 0; i < d; i++) {
          product += v[i] * before[i];
        }
        assertThat(product).isCloseTo(other == k ? 1 : 0, within(1e-12));
      }
    }
  }

  @ParameterizedTest
  @ValueSource(ints = {2, 3, 17, 64, 130, 256})
  void theLargestAreThoseOfTheFullDecomposition(int d) {
    assertLargestAreRight(covariance(d, 2 * d + 3, 11), Math.min(d, 24), Math.min(d, 24));
  }

  @Test
  void noVectorsAreMadeOfNothing() {
    assertLargestAreRight(covariance(200, 12, 12), 64, 12);
  }

  /** Equal eigenvalues, from two to a hundred of them, have any orthonormal set of vectors. */
  @ParameterizedTest
  @ValueSource(ints = {2, 20, 100})
  void equalEigenvaluesHaveOrthonormalVectors(int equal) {
    double[] values = new double[200];
    for (int i = 0; i < values.length; i++) {
      values[i] = i < equal ? 1000 : 900.0 / (i + 1);
    }
    assertLargestAreRight(withEigenvalues(values), 64, 64);
    DMatrixRMaj diagonal = new DMatrixRMaj(200, 200);
    for (int i = 0; i < values.length; i++) {
      diagonal.set(i, i, values[i]);
    }
    assertLargestAreRight(diagonal, 64, 64);
  }

  /** Q diag Q' with two reflections for Q. */
  private static DMatrixRMaj withEigenvalues(double[] values) {
    int d = values.length;
    SplittableRandom random = new SplittableRandom(13);
    double[][] product = new double[d][d];
    for (int i = 0; i < d; i++) {
      product[i][i] = values[i];
    }
    for (int reflection = 0; reflection < 2; reflection++) {
      double[] u = new double[d];
      double squares = 0;
      for (int i = 0; i < d; i++) {
        u[i] = random.nextDouble(-1, 1);
        squares += u[i] * u[i];
      }
      for (int side = 0; side < 2; side++) {
        double[][] transposed = new double[d][d];
        for (int i = 0; i < d; i++) {
          double sum = 0;
          for (int j = 0; j < d; j++) {
            sum += product[i][j] * u[j];
          }
          for (int j = 0; j < d; j++) {
            transposed[j][i] = product[i][j] - 2 * sum * u[j] / squares;
          }
        }
        product = transposed;
      }
    }
    DMatrixRMaj matrix = new DMatrixRMaj(d, d);
    for (int i = 0; i < d; i++) {
      for (int j = 0; j < d; j++) {
        matrix.set(i, j, (product[i][j] + product[j][i]) / 2);
      }
    }
    return matrix;
  }

  /** What does not pass its check is computed in full. */
  @Test
  void aFailedCheckEndsInTheFullDecomposition() {
    double[] diagonal = {3, 2, 1};
    double[] beside = {0.5, 0.25};
    TridiagonalEigen eigen = new TridiagonalEigen(diagonal, beside);
    assertThat(eigen.vectors(new double[] {17})).isEmpty();
    DMatrixRMaj overflowing = new DMatrixRMaj(2, 2);
    overflowing.set(0, 0, 1e-310);
    overflowing.set(1, 1, 1e-310);
    SymmetricEigen found = SymmetricEigen.largest(overflowing, 2, 0);
    assertThat(found.values()).containsExactly(1e-310, 1e-310);
    assertThat(found.vector(0)).containsExactly(1, 0);
    assertThat(found.vector(1)).containsExactly(0, 1);
  }
}
