package linkworthy.codec;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.Arrays;
import java.util.stream.IntStream;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class TridiagonalEigenTest {
  private static TridiagonalEigen secondDifference(int d, double scale) {
    double[] diagonal = new double[d];
    double[] beside = new double[d - 1];
    Arrays.fill(diagonal, 2 * scale);
    Arrays.fill(beside, -scale);
    return new TridiagonalEigen(diagonal, beside);
  }

  /**
   * The closed forms for the second difference of d points: 4 sin^2(m pi / (2 (d + 1))) and sqrt(2
   * / (d + 1)) sin(m i pi / (d + 1)), m counted from the smallest.
   */
  @ParameterizedTest
  @CsvSource({"2, 1, 1", "10, 10, 1", "100, 7, 1e-200", "300, 64, 1e200", "513, 20, 1e6"})
  void eigenvectorsOfTheSecondDifference(int d, int count, double scale) {
    TridiagonalEigen eigen = secondDifference(d, scale);
    double[] values = eigen.values(count);
    double[][] vectors = eigen.vectors(values);
    assertThat(vectors).hasNumberOfRows(count);
    double step = StrictMath.PI / (d + 1);
    for (int k = 0; k < count; k++) {
      int m = d - k;
      double sine = StrictMath.sin(m * step / 2);
      assertThat(values[k]).isCloseTo(4 * sine * sine * scale, within(2e-15 * 4 * scale));
      double sign = Math.signum(vectors[k][0]);
      for (int i = 0; i < d; i++) {
        double expected = Math.sqrt(2.0 / (d + 1)) * StrictMath.sin(m * (i + 1) * step);
        assertThat(sign * vectors[k][i]).isCloseTo(expected, within(1e-10));
      }
    }
  }

  /** Wilkinson 1965: the pairs of W21+ agree to 13 and 11 digits. */
  @Test
  void eigenvaluesOfTheWilkinsonMatrix() {
    double[] beside = new double[20];
    Arrays.fill(beside, 1);
    double[] diagonal = IntStream.range(0, 21).mapToDouble(i -> Math.abs(i - 10)).toArray();
    assertThat(new TridiagonalEigen(diagonal, beside).values(4))
        .containsExactly(
            new double[] {
              10.746194182903393, 10.746194182903322, 9.210678647361332, 9.210678647304919
            },
            within(1e-14));
  }

  /** Parts that do not touch: eigenvalues are those of the parts, here the diagonal itself. */
  @Test
  void aDiagonalIsItsOwnEigenvalues() {
    TridiagonalEigen eigen = new TridiagonalEigen(new double[] {3, 0, 7, 5}, new double[3]);
    assertThat(eigen.values(4)).containsExactly(new double[] {7, 5, 3, 0}, within(1e-15));
  }
}
