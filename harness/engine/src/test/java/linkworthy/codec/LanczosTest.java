package linkworthy.codec;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.Objects;
import java.util.function.IntToDoubleFunction;
import org.ejml.data.DMatrixRMaj;
import org.junit.jupiter.api.Test;

class LanczosTest {
  private static final int D = 200;

  /** Eigenvector m of the second difference, entry i: sqrt(2 / (d + 1)) sin(m i pi / (d + 1)). */
  private static double sine(int m, int i) {
    return Math.sqrt(2.0 / (D + 1)) * StrictMath.sin((m + 1.0) * (i + 1) * StrictMath.PI / (D + 1));
  }

  private static DMatrixRMaj withEigenvalues(IntToDoubleFunction value) {
    DMatrixRMaj matrix = new DMatrixRMaj(D, D);
    for (int i = 0; i < D; i++) {
      for (int j = 0; j <= i; j++) {
        double sum = 0;
        for (int m = 0; m < D; m++) {
          sum += value.applyAsDouble(m) * sine(m, i) * sine(m, j);
        }
        matrix.set(i, j, sum);
        matrix.set(j, i, sum);
      }
    }
    return matrix;
  }

  private static double value(int m) {
    return 5000 / (1.0 + m * m);
  }

  private static SymmetricEigen found(DMatrixRMaj matrix) {
    return Objects.requireNonNull(Lanczos.largest(matrix, 16));
  }

  /** Values and vectors that the matrix was made of. */
  @Test
  void findsTheLargest() {
    SymmetricEigen found = found(withEigenvalues(LanczosTest::value));
    for (int k = 0; k < 16; k++) {
      assertThat(found.values()[k]).isCloseTo(value(k), within(1e-11));
      double sign = Math.signum(found.vector(k)[0]);
      for (int i = 0; i < D; i++) {
        assertThat(sign * found.vector(k)[i]).isCloseTo(sine(k, i), within(1e-11));
      }
    }
  }

  /**
   * A diagonal with each of its largest 24 entries twice in turn: the second of the pair shows by
   * rounding alone, in most cases soon enough.
   */
  @Test
  void anEigenvalueThatIsThereTwiceIsNotOverlooked() {
    int answers = 0;
    for (int twin = 0; twin < 24; twin++) {
      DMatrixRMaj matrix = new DMatrixRMaj(D, D);
      for (int m = 0; m < D; m++) {
        matrix.set(m, m, value(m <= twin ? m : m - 1));
      }
      SymmetricEigen found = Lanczos.largest(matrix, 24);
      for (int k = 0; found != null && k < 24; k++) {
        assertThat(found.values()[k]).isCloseTo(matrix.get(k, k), within(1e-11));
      }
      answers += found == null ? 0 : 1;
    }
    assertThat(answers).isBetween(1, 23);
  }

  @Test
  void givesUpOnEqualOrFewEigenvalues() {
    assertThat(Lanczos.largest(withEigenvalues(m -> 2.0), 8)).isNull();
    assertThat(Lanczos.largest(withEigenvalues(m -> m < 20 ? 20 - m : 0), 24)).isNull();
    assertThat(Lanczos.largest(withEigenvalues(m -> 100 - m * 0.01), 24)).isNull();
    assertThat(Lanczos.largest(new DMatrixRMaj(D, D), 8)).isNull();
  }

  /** The same bits each time: nothing depends on chance or on what was done before. */
  @Test
  void isRepeatable() {
    DMatrixRMaj matrix = withEigenvalues(LanczosTest::value);
    SymmetricEigen first = found(matrix);
    SymmetricEigen second = found(matrix);
    for (int k = 0; k < 16; k++) {
      assertThat(first.vector(k)).containsExactly(second.vector(k));
    }
    assertThat(first.values()).containsExactly(second.values());
  }
}
