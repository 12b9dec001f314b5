package linkworthy.codec;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.io.IOException;
import java.io.InputStream;
import java.nio.charset.StandardCharsets;
import linkworthy.corpus.Picture;
import linkworthy.corpus.TestPattern;
import org.apache.commons.math3.linear.Array2DRowRealMatrix;
import org.apache.commons.math3.linear.EigenDecomposition;
import org.ejml.data.DMatrixRMaj;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class BasisTest {
  /** T.81 A.3.3 scaling (from memory); digits recomputed independently with SciPy. */
  @Test
  void dctMatrixAndTransformOfARamp() {
    double[][] dct = DctBasis.oneDimensional(8);
    double[] first = {
      0.3535533906, 0.4903926402, 0.4619397663, 0.4157348062,
      0.3535533906, 0.2777851165, 0.1913417162, 0.09754516101
    };
    double[] ramp = {
      9.899494937, -6.442323023, 0, -0.6734548009, 0, -0.2009029037, 0, -0.05070232276
    };
    for (int k = 0; k < 8; k++) {
      assertThat(dct[k][0]).isCloseTo(first[k], within(1e-10));
      double sum = 0;
      for (int i = 0; i < 8; i++) {
        sum += dct[k][i] * i;
      }
      assertThat(sum).isCloseTo(ramp[k], within(1e-9));
    }
    assertOrthonormal(dct);
    assertOrthonormal(
        new DctBasis()
            .directions(new Arrangement.Blocks(8), new PictureShape(64, 64, 8), new double[0][])
            .rows());
  }

  /** Figure A.6 of ITU-T T.81 (from memory), the table as a public JPEG library prints it. */
  @Test
  void zigZagFollowsTheStandard() {
    assertThat(DctBasis.zigZag(8))
        .containsExactly(
            0, 1, 8, 16, 9, 2, 3, 10, 17, 24, 32, 25, 18, 11, 4, 5, 12, 19, 26, 33, 40, 48, 41, 34,
            27, 20, 13, 6, 7, 14, 21, 28, 35, 42, 49, 56, 57, 50, 43, 36, 29, 22, 15, 23, 30, 37,
            44, 51, 58, 59, 52, 45, 38, 31, 39, 46, 53, 60, 61, 54, 47, 55, 62, 63);
  }

  /**
   * The worked block of Wallace, "The JPEG still picture compression standard" (1991/1992), figure
   * 10: block second-hand from a public repository, coefficients recomputed independently with
   * SciPy. The figure prints 0 where -7.0816 / 14 rounds to -1.
   */
  @Test
  void theWorkedBlockOfThePaper() {
    int[] block = {
      139, 144, 149, 153, 155, 155, 155, 155, 144, 151, 153, 156, 159, 156, 156, 156, 150, 155,
      160, 163, 158, 156, 156, 156, 159, 161, 162, 160, 160, 159, 159, 159, 159, 160, 161, 162,
      162, 155, 155, 155, 161, 161, 161, 161, 160, 157, 157, 157, 162, 162, 161, 163, 162, 157,
      157, 157, 162, 162, 161, 161, 163, 158, 158, 158
    };
    double[][] expected = {
      {235.625, -1.0333, -12.0809, -5.2029, 2.125, -1.6724, -2.708, 1.3238},
      {-22.5904, -17.4842, -6.2405, -3.1574, -2.8557, -0.0695, 0.4342, -1.1856},
      {-10.9493, -9.2624, -1.5758, 1.5301},
      {-7.0816, -1.9072, 0.2248, 1.4539}
    };
    int[] firstSteps = {16, 11, 12, 14, 12, 10, 16, 14, 13, 14};
    int[] firstIndices = {15, 0, -2, -1, -1, -1, 0, 0, -1, -1};
    double[][] rows =
        new DctBasis()
            .directions(new Arrangement.Blocks(8), new PictureShape(8, 8, 8), new double[0][])
            .rows();
    int[] order = DctBasis.zigZag(8);
    for (int k = 0; k < 64; k++) {
      double coefficient = 0;
      for (int i = 0; i < 64; i++) {
        coefficient += rows[k][i] * (block[i] - 128);
      }
      int v = order[k] / 8;
      int h = order[k] % 8;
      if (v < 4 && h < expected[v].length) {
        assertThat(coefficient).isCloseTo(expected[v][h], within(1e-4));
      }
      if (k < firstSteps.length) {
        assertThat(new Quantizer(firstSteps[k]).index(coefficient)).isEqualTo(firstIndices[k]);
      }
    }
  }

  /**
   * Eigenvalues of the AR(1) covariance from the roots of the characteristic equation (Ray and
   * Driver 1970, from memory), confirmed with LAPACK through NumPy.
   */
  @ParameterizedTest
  @CsvSource({
    "0.95, 4, 3.756766316 0.1626532692 0.05060868418 0.02997173081",
    "0.95, 8, 7.030310314 0.5750970447 0.1682542945 0.08178881394 0.05092448912 0.03697278063"
        + " 0.03000413596 0.02664812711",
    "0.9, 8, 6.202999023 1.007191188 0.329657352 0.1647436224 0.103635015 0.07559838142"
        + " 0.06149551046 0.05467990824"
  })
  void eigenvaluesOfAutoregressiveCovariances(double rho, int n, String expected) {
    DMatrixRMaj covariance = new DMatrixRMaj(n, n);
    for (int i = 0; i < n; i++) {
      for (int j = 0; j < n; j++) {
        covariance.set(i, j, StrictMath.pow(rho, Math.abs(i - j)));
      }
    }
    assertEigenvalues(covariance, expected, 1e-9);
  }

  /** Rosser et al. 1951 (from memory): 10 sqrt(10405), 1020, 510 + 100 sqrt(26), 1000 twice. */
  @Test
  void eigenvaluesOfTheRosserMatrix() {
    double[][] rosser = {
      {611, 196, -192, 407, -8, -52, -49, 29},
      {196, 899, 113, -192, -71, -43, -8, -44},
      {-192, 113, 899, 196, 61, 49, 8, 52},
      {407, -192, 196, 611, 8, 44, 59, -23},
      {-8, -71, 61, 8, 411, -599, 208, 208},
      {-52, -43, 49, 44, -599, 411, 208, 208},
      {-49, -8, 8, 59, 208, 208, 99, -911},
      {29, -44, 52, -23, 208, 208, -911, 99}
    };
    assertEigenvalues(
        new DMatrixRMaj(rosser),
        Math.sqrt(10405) * 10
            + " 1020 "
            + (510 + 100 * Math.sqrt(26))
            + " 1000 1000 "
            + (510 - 100 * Math.sqrt(26)),
        1e-9);
  }

  /** Wilkinson 1965: the two largest eigenvalues of W21+ agree to 13 digits. */
  @Test
  void eigenvaluesOfTheWilkinsonMatrix() {
    DMatrixRMaj wilkinson = new DMatrixRMaj(21, 21);
    for (int i = 0; i < 21; i++) {
      wilkinson.set(i, i, Math.abs(i - 10));
      if (i > 0) {
        wilkinson.set(i, i - 1, 1);
        wilkinson.set(i - 1, i, 1);
      }
    }
    assertEigenvalues(
        wilkinson,
        "10.746194182903393 10.746194182903322 9.210678647361332 9.210678647304919",
        1e-12);
  }

  /** 4 sin^2(k pi / 18), the closed form for the second difference of 8 points. */
  @Test
  void eigenvaluesOfTheSecondDifference() {
    DMatrixRMaj difference = new DMatrixRMaj(8, 8);
    StringBuilder expected = new StringBuilder();
    for (int i = 0; i < 8; i++) {
      difference.set(i, i, 2);
      if (i > 0) {
        difference.set(i, i - 1, -1);
        difference.set(i - 1, i, -1);
      }
      double sine = StrictMath.sin((8 - i) * StrictMath.PI / 18);
      expected.append(4 * sine * sine).append(' ');
    }
    assertEigenvalues(difference, expected.toString().trim(), 1e-12);
  }

  /** 1 / 266716800000 is the determinant of the Hilbert matrix of order 5 (exact rationals). */
  @Test
  void eigenvaluesOfTheHilbertMatrix() {
    DMatrixRMaj hilbert = new DMatrixRMaj(5, 5);
    for (int i = 0; i < 5; i++) {
      for (int j = 0; j < 5; j++) {
        hilbert.set(i, j, 1.0 / (i + j + 1));
      }
    }
    double product = 1;
    for (double eigenvalue : PcaBasis.of(hilbert).variances()) {
      product *= eigenvalue;
    }
    assertThat(product * 266_716_800_000.0).isCloseTo(1, within(1e-7));
    assertEigenvalues(
        hilbert, "1.567050691 0.2085342186 0.01140749162 0.0003058980402 3.287928772e-06", 1e-9);
  }

  private static void assertEigenvalues(DMatrixRMaj matrix, String expected, double tolerance) {
    Basis.Directions directions = PcaBasis.of(matrix);
    String[] values = expected.split(" ", -1);
    for (int k = 0; k < values.length; k++) {
      double value = Double.parseDouble(values[k]);
      assertThat(directions.variances()[k])
          .isCloseTo(value, within(tolerance * Math.max(1, Math.abs(value))));
    }
    assertOrthonormal(directions.rows());
    double[] oracle =
        new EigenDecomposition(new Array2DRowRealMatrix(rows(matrix))).getRealEigenvalues();
    java.util.Arrays.sort(oracle);
    for (int k = 0; k < directions.variances().length; k++) {
      assertThat(directions.variances()[k])
          .isCloseTo(
              oracle[oracle.length - 1 - k],
              within(1e-9 * (1 + Math.abs(oracle[oracle.length - 1]))));
    }
  }

  private static double[][] rows(DMatrixRMaj matrix) {
    double[][] rows = new double[matrix.getNumRows()][matrix.getNumCols()];
    for (int i = 0; i < rows.length; i++) {
      for (int j = 0; j < rows.length; j++) {
        rows[i][j] = matrix.get(i, j);
      }
    }
    return rows;
  }

  private static void assertOrthonormal(double[][] rows) {
    for (int a = 0; a < rows.length; a++) {
      for (int b = 0; b <= a; b++) {
        double dot = 0;
        for (int i = 0; i < rows[a].length; i++) {
          dot += rows[a][i] * rows[b][i];
        }
        assertThat(dot).isCloseTo(a == b ? 1 : 0, within(1e-12));
      }
    }
  }

  /**
   * Fisher's iris measurements (1936; the values of R and scikit-learn, whose data file this is).
   * Published eigenvalues are of the 1/(n-1) covariance; digits recomputed independently with
   * NumPy.
   */
  @Test
  void eigenvaluesOfTheIrisMeasurements() throws IOException {
    double[][] variables = new double[4][150];
    try (InputStream in = BasisTest.class.getResourceAsStream("iris.csv")) {
      String[] lines =
          new String(in.readAllBytes(), StandardCharsets.UTF_8).strip().split("\\R", -1);
      assertThat(lines).hasSize(150);
      for (int j = 0; j < lines.length; j++) {
        String[] values = lines[j].split(",", -1);
        for (int i = 0; i < 4; i++) {
          variables[i][j] = Double.parseDouble(values[i]);
        }
      }
    }
    for (double[] variable : variables) {
      double mean = java.util.Arrays.stream(variable).sum() / variable.length;
      for (int j = 0; j < variable.length; j++) {
        variable[j] -= mean;
      }
    }
    double[] expected = {4.228241706, 0.2426707479, 0.07820950004, 0.02383509297};
    double[] found = PcaBasis.of(Matrices.covariance(variables)).variances();
    for (int k = 0; k < 4; k++) {
      assertThat(found[k] * 150 / 149).isCloseTo(expected[k], within(1e-9 * expected[0]));
    }
  }

  /** Own data; eigenvalues recomputed independently with NumPy, 1/n covariance. */
  @Test
  void errorIsTheSumOfTheDiscardedEigenvalues() {
    double[][] data = {{2, 4, 6, 8, 10}, {0, 2, 1, 5, 2}, {1, 0, 3, 2, 4}};
    double[] expected = {10.32929589, 2.315504116, 0.1551999911};
    for (double[] variable : data) {
      double mean = java.util.Arrays.stream(variable).sum() / 5;
      for (int j = 0; j < 5; j++) {
        variable[j] -= mean;
      }
    }
    Basis.Directions directions = PcaBasis.of(Matrices.covariance(data));
    assertThat(directions.variances()).containsExactly(expected, within(1e-8));
  }

  /**
   * The pattern as 1024 blocks of 8 x 8 (values recomputed independently with NumPy and SciPy).
   * Eckart and Young 1936: no other K directions do better, so PCA beats the first K of the DCT.
   */
  @ParameterizedTest
  @CsvSource({
    "0, 1063.407455",
    "1, 593.746624",
    "2, 381.1023864",
    "4, 179.1164261",
    "8, 90.97395155",
    "16, 23.81643125",
    "32, 2.790877264",
    "48, 0.740761521"
  })
  void errorOfThePatternInBlocks(int keep, double expected) {
    Analysis pca = analysis(new Arrangement.Blocks(8), new PcaBasis());
    Analysis dct = analysis(new Arrangement.Blocks(8), new DctBasis());
    assertThat(discarded(pca, keep)).isCloseTo(expected, within(1e-8 * expected));
    assertThat(discarded(pca, keep)).isLessThanOrEqualTo(discarded(dct, keep) + 1e-9);
  }

  /** Rows as variables; values recomputed independently with NumPy's singular values. */
  @ParameterizedTest
  @CsvSource({"80, 4", "90, 8", "95, 12", "99, 23"})
  void componentsNeededForAShare(int percent, int expected) {
    assertThat(
            analysis(new Arrangement.Blocks(8), new PcaBasis())
                .kept(new Keep.Share(percent / 100.0)))
        .isEqualTo(expected);
  }

  @Test
  void coefficientsAreUncorrelatedWithTheEigenvaluesAsVariances() {
    Analysis analysis = analysis(new Arrangement.Rows(), new PcaBasis());
    for (int a = 0; a < 12; a++) {
      for (int b = 0; b <= a; b++) {
        double covariance = covariance(analysis.component(a), analysis.component(b));
        assertThat(covariance).isCloseTo(a == b ? analysis.variance(a) : 0, within(1e-6));
      }
    }
  }

  /** The picture turned, so that its columns are the variables; NumPy's singular values squared. */
  @ParameterizedTest
  @CsvSource({"1, 636.8111802", "4, 146.8622978", "16, 1.927126941", "64, 0.6102344152"})
  void errorOfThePatternTurnedOnItsSide(int keep, double expected) {
    Picture pattern = TestPattern.cvp(256);
    int[] turned = new int[pattern.size()];
    for (int i = 0; i < turned.length; i++) {
      turned[i % 256 * 256 + i / 256] = pattern.samples()[i];
    }
    Analysis pca =
        Analysis.of(new Picture(256, 256, 8, turned), new Arrangement.Rows(), new PcaBasis());
    assertThat(discarded(pca, keep)).isCloseTo(expected, within(1e-7 * expected));
  }

  private static Analysis analysis(Arrangement arrangement, Basis basis) {
    return Analysis.of(TestPattern.cvp(256), arrangement, basis);
  }

  private static double discarded(Analysis analysis, int keep) {
    double sum = analysis.totalVariance();
    for (int k = 0; k < keep; k++) {
      sum -= analysis.variance(k);
    }
    return sum / analysis.variables();
  }

  private static double covariance(double[] a, double[] b) {
    double meanA = java.util.Arrays.stream(a).sum() / a.length;
    double meanB = java.util.Arrays.stream(b).sum() / b.length;
    double sum = 0;
    for (int j = 0; j < a.length; j++) {
      sum += (a[j] - meanA) * (b[j] - meanB);
    }
    return sum / a.length;
  }
}
