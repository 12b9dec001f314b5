package linkworthy.codec;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.Arrays;
import java.util.List;
import java.util.stream.IntStream;
import javax.imageio.plugins.jpeg.JPEGQTable;
import linkworthy.corpus.Picture;
import linkworthy.corpus.TestPattern;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class FrequencyStepsTest {
  private static int[] table(int quality) {
    FrequencySteps steps = new FrequencySteps(quality);
    return IntStream.range(0, 64).map(steps::step).toArray();
  }

  /**
   * The quality rule of the Independent JPEG Group's library, second-hand as in libjpeg-turbo's
   * jcparam.c; sums recomputed independently in Python.
   */
  @ParameterizedTest
  @CsvSource({
    "1, 16320",
    "5, 14655",
    "10, 12560",
    "25, 7376",
    "50, 3688",
    "75, 1858",
    "90, 736",
    "95, 369",
    "100, 64"
  })
  void sumOfTheScaledTable(int quality, int sum) {
    assertThat(Arrays.stream(table(quality)).sum()).isEqualTo(sum);
  }

  /** First rows, recomputed independently in Python from the same rule. */
  @ParameterizedTest
  @CsvSource({
    "10, 80 55 50 80 120 200 255 255",
    "50, 16 11 10 16 24 40 51 61",
    "75, 8 6 5 8 12 20 26 31",
    "90, 3 2 2 3 5 8 10 12",
    "95, 2 1 1 2 2 4 5 6"
  })
  void firstRowOfTheScaledTable(int quality, String row) {
    assertThat(Arrays.copyOf(table(quality), 8))
        .containsExactly(Arrays.stream(row.split(" ", -1)).mapToInt(Integer::parseInt).toArray());
  }

  /** ITU-T T.81 (1992), Annex K, table K.1, second-hand as in libjpeg-turbo's jcparam.c. */
  @Test
  void theTableOfTheStandard() {
    assertThat(table(50))
        .containsExactly(
            16, 11, 10, 16, 24, 40, 51, 61, 12, 12, 14, 19, 26, 58, 60, 55, 14, 13, 16, 24, 40, 57,
            69, 56, 14, 17, 22, 29, 51, 87, 80, 62, 18, 22, 37, 56, 68, 109, 103, 77, 24, 35, 55,
            64, 81, 104, 113, 92, 49, 64, 78, 87, 103, 121, 120, 101, 72, 92, 95, 98, 112, 100, 103,
            99);
  }

  /**
   * ITU-T T.81 (1992), Annex K, table K.2, from memory; the sum 5505 recomputed independently in
   * Python. Both tables are those of the Java platform as well.
   */
  @Test
  void theTableForChrominance() {
    FrequencySteps steps = new FrequencySteps(50).forChroma();
    int[] natural = IntStream.range(0, 64).map(steps::step).toArray();
    assertThat(Arrays.stream(natural).sum()).isEqualTo(5505);
    assertThat(Arrays.copyOf(natural, 32))
        .containsExactly(
            17, 18, 24, 47, 99, 99, 99, 99, 18, 21, 26, 66, 99, 99, 99, 99, 24, 26, 56, 99, 99, 99,
            99, 99, 47, 66, 99, 99, 99, 99, 99, 99);
    assertThat(Arrays.copyOfRange(natural, 32, 64)).containsOnly(99);
    assertThat(natural).isEqualTo(JPEGQTable.K2Chrominance.getTable());
    assertThat(table(50)).isEqualTo(JPEGQTable.K1Luminance.getTable());
    assertThat(new FrequencySteps(75).forChroma().step(0)).as("(50 17 + 50) / 100").isEqualTo(9);
  }

  /** The first ten steps along the zig-zag (Wallace 1991, figure 10). */
  @Test
  void componentsFollowTheZigZag() {
    FrequencySteps steps = new FrequencySteps(50);
    assertThat(IntStream.range(0, 10).mapToObj(steps::component).map(Quantizer::step).toList())
        .isEqualTo(List.of(16.0, 11.0, 12.0, 14.0, 12.0, 10.0, 16.0, 14.0, 13.0, 14.0));
  }

  /**
   * The pattern of 256 x 256 minus 128, 8 x 8 DCT, quantised at a quality and back: error before
   * and after rounding, PSNR of the latter, nonzero indices. Recomputed independently in Python
   * with SciPy; exact ties (4, 21 and 113 of them) are snapped, then rounded half away from zero.
   */
  @ParameterizedTest
  @CsvSource({
    "10, 135.4635339, 135.575592, 26.80898851, 5427",
    "50, 36.41397718, 36.51565552, 32.5060126, 13686",
    "90, 5.439431057, 5.52557373, 40.70702983, 25872"
  })
  void thePatternThroughTheQuantiser(
      int quality, double error, double errorOfSamples, double psnrDb, int nonzero) {
    Picture pattern = TestPattern.cvp(256);
    PictureShape shape = PictureShape.of(pattern);
    Arrangement blocks = new Arrangement.Blocks(8);
    Quantization steps = new FrequencySteps(quality);
    double[][] values = blocks.gather(pattern);
    for (double[] variable : values) {
      Arrays.setAll(variable, j -> variable[j] - 128);
    }
    double[][] directions = new DctBasis().directions(blocks, shape, values).rows();
    double[][] back = new double[64][1024];
    int found = 0;
    for (int k = 0; k < 64; k++) {
      double[] coefficients = new double[1024];
      Matrices.addCombination(coefficients, directions[k], values);
      for (int j = 0; j < 1024; j++) {
        int index = steps.component(k).index(coefficients[j]);
        found += index == 0 ? 0 : 1;
        for (int i = 0; i < 64; i++) {
          back[i][j] += directions[k][i] * steps.component(k).value(index);
        }
      }
    }
    double sum = 0;
    int[] samples = new int[256 * 256];
    for (int i = 0; i < 64; i++) {
      double[] shifted = back[i].clone();
      for (int j = 0; j < 1024; j++) {
        sum += (back[i][j] - values[i][j]) * (back[i][j] - values[i][j]);
        shifted[j] += 128;
      }
      blocks.scatter(shifted, i, shape, shifted, samples);
    }
    double sumOfSamples = 0;
    for (int i = 0; i < samples.length; i++) {
      double e = samples[i] - pattern.samples()[i];
      sumOfSamples += e * e;
    }
    assertThat(found).isEqualTo(nonzero);
    assertThat(sum / 65536).isCloseTo(error, within(1e-6));
    assertThat(sumOfSamples / 65536).isCloseTo(errorOfSamples, within(1e-6));
    assertThat(10 * StrictMath.log10(255 * 255 / (sumOfSamples / 65536)))
        .isCloseTo(psnrDb, within(1e-6));
  }
}
