package linkworthy.quality;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.Arrays;
import linkworthy.codec.PictureShape;
import linkworthy.corpus.Picture;
import linkworthy.input.BadInput;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class SsimTest extends QualityContractTest {
  @Override
  protected QualityMeasure measure() {
    return new Ssim();
  }

  @Override
  protected double perfect() {
    return 1;
  }

  /** Recomputed independently in Python: exp(-k^2 / 4.5), k = -5 to 5, over its sum. */
  @ParameterizedTest
  @CsvSource({
    "0, 0.2660117249", "1, 0.2130055377", "2, 0.1093606895",
    "3, 0.03600077213", "4, 0.007598758135", "5, 0.001028380084"
  })
  void theWindowIsGaussian(int distance, double weight) {
    assertThat(GaussianRows.weight(distance)).isCloseTo(weight, within(1e-10));
  }

  /**
   * Closed form: without variance the figure is (2 a b + C1) / (a^2 + b^2 + C1), C1 = 6.5025 for 8
   * bits.
   */
  @ParameterizedTest
  @CsvSource({
    "11, 11, 100, 120, 24006.5025, 24406.5025",
    "40, 13, 100, 120, 24006.5025, 24406.5025",
    "13, 40, 0, 255, 6.5025, 65031.5025"
  })
  void flatPicturesDifferInLuminanceOnly(
      int width, int height, int a, int b, double numerator, double denominator) {
    double ssim = new Ssim().against(flat(width, height, a)).of(flat(width, height, b));
    assertThat(ssim).isCloseTo(numerator / denominator, within(1e-12));
  }

  /** The definition itself, window by window, with moments about the window's mean. */
  @ParameterizedTest
  @CsvSource({"11, 11", "12, 37", "53, 19", "11, 40", "40, 11", "33, 12"})
  void equalsTheDefinition(int width, int height) {
    for (int bitDepth : new int[] {1, 5, 8, 16}) {
      Picture clean = pattern(width, height, bitDepth);
      Picture decoded = noisy(clean, 1 << Math.max(0, bitDepth - 8));
      assertThat(new Ssim().against(clean).of(decoded))
          .isCloseTo(byDefinition(clean, decoded), within(1e-11));
    }
  }

  /** 65535 = 257 * 255, so that every term of the formula grows by the same factor. */
  @Test
  void doesNotDependOnTheUnit() {
    Picture clean = pattern(64, 50, 8);
    Picture decoded = noisy(clean, 2);
    double deep = new Ssim().against(times257(clean)).of(times257(decoded));
    assertThat(new Ssim().against(clean).of(decoded)).isCloseTo(deep, within(1e-12));
  }

  @ParameterizedTest
  @CsvSource({"10, 512", "512, 10", "1, 1"})
  void refusesPicturesSmallerThanTheWindow(int width, int height) {
    assertThatThrownBy(() -> new Ssim().check(new PictureShape(width, height, 8)))
        .isInstanceOf(BadInput.class)
        .hasMessage(
            "measure 'ssim': a picture of "
                + width
                + " x "
                + height
                + " samples is smaller than the 11 x 11 window; accepted: sides of at least 11");
    assertThatThrownBy(() -> new Ssim().against(flat(width, height, 0)))
        .isInstanceOf(BadInput.class);
  }

  private static double byDefinition(Picture x, Picture y) {
    double sum = 0;
    int count = 0;
    for (int top = 0; top + 11 <= x.height(); top++) {
      for (int left = 0; left + 11 <= x.width(); left++) {
        sum += window(x, y, left, top);
        count++;
      }
    }
    return sum / count;
  }

  private static double window(Picture x, Picture y, int left, int top) {
    double weights = 0;
    double[] m = new double[5];
    for (int i = 0; i < 121; i++) {
      double w = weight(i);
      weights += w;
      m[0] += w * sample(x, left, top, i);
      m[1] += w * sample(y, left, top, i);
    }
    m[0] /= weights;
    m[1] /= weights;
    for (int i = 0; i < 121; i++) {
      double w = weight(i) / weights;
      double dx = sample(x, left, top, i) - m[0];
      double dy = sample(y, left, top, i) - m[1];
      m[2] += w * dx * dx;
      m[3] += w * dy * dy;
      m[4] += w * dx * dy;
    }
    double c1 = 0.0001 * x.peak() * x.peak();
    double c2 = 0.0009 * x.peak() * x.peak();
    return (2 * m[0] * m[1] + c1)
        * (2 * m[4] + c2)
        / ((m[0] * m[0] + m[1] * m[1] + c1) * (m[2] + m[3] + c2));
  }

  private static double weight(int i) {
    int dx = i % 11 - 5;
    int dy = i / 11 - 5;
    return StrictMath.exp(-(dx * dx + dy * dy) / 4.5);
  }

  private static int sample(Picture picture, int left, int top, int i) {
    return picture.samples()[(top + i / 11) * picture.width() + left + i % 11];
  }

  private static Picture flat(int width, int height, int level) {
    int[] samples = new int[width * height];
    Arrays.fill(samples, level);
    return new Picture(width, height, 8, samples);
  }

  private static Picture times257(Picture picture) {
    return new Picture(picture.width(), picture.height(), 16, map(picture.samples(), s -> 257 * s));
  }
}
