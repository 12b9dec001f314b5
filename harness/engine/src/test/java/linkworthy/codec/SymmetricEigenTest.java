package linkworthy.codec;

import static org.assertj.core.api.Assertions.assertThat;

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
      assertThat(found.vectors()[i]).containsExactly(expected.getEigenVector(i).getData());
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
}
