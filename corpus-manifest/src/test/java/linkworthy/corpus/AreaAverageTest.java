package linkworthy.corpus;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.math.BigInteger;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class AreaAverageTest {
  @Test
  void averagesWholeBoxes() {
    Picture picture = new Picture(4, 2, 8, new int[] {1, 2, 10, 20, 3, 4, 30, 42});
    Picture reduced = AreaAverage.toLongestSide(picture, 2);
    assertThat(reduced.samples())
        .as("(1+2+3+4)/4 = 2.5 rounds up; (10+20+30+42)/4 = 25.5 rounds up: by hand")
        .containsExactly(3, 26);
    assertThat(reduced.height()).isEqualTo(1);
  }

  @Test
  void sharesSamplesThatAreCut() {
    Picture picture = new Picture(3, 1, 8, new int[] {0, 90, 240});
    assertThat(AreaAverage.toLongestSide(picture, 2).samples())
        .as("(0 + 90/2) / 1.5 = 30; (90/2 + 240) / 1.5 = 190: by hand")
        .containsExactly(30, 190);
  }

  @Test
  void eachSideHasItsOwnFactor() {
    Picture picture = new Picture(4, 2, 8, new int[] {1, 2, 10, 20, 3, 4, 30, 42});
    assertThat(AreaAverage.toSize(picture, 2, 2).samples())
        .as("1.5, 15, 3.5 and 36, halves up: by hand")
        .containsExactly(2, 15, 4, 36);
    assertThat(AreaAverage.toSize(picture, 4, 2).samples()).isEqualTo(picture.samples());
    assertThatThrownBy(() -> AreaAverage.toSize(picture, 5, 2))
        .isInstanceOf(IllegalArgumentException.class)
        .hasMessageContaining("new width (samples)");
    assertThatThrownBy(() -> AreaAverage.toSize(picture, 4, 0))
        .isInstanceOf(IllegalArgumentException.class)
        .hasMessageContaining("new height (samples)");
  }

  /** Repeats every sample so often that all boxes are whole, then averages those. */
  @ParameterizedTest
  @CsvSource({
    "7, 5, 3, 8",
    "5, 7, 4, 8",
    "13, 2, 12, 16",
    "16, 16, 5, 1",
    "9, 1, 1, 16",
    "1, 9, 8, 8"
  })
  void equalsTheAverageOfARepeatedPicture(int width, int height, int side, int bitDepth) {
    Picture picture = PictureFiles.noise(width, height, 1, bitDepth, 11).get(0);
    Picture reduced = AreaAverage.toLongestSide(picture, side);
    int newWidth = reduced.width();
    int newHeight = reduced.height();
    for (int y = 0; y < newHeight; y++) {
      for (int x = 0; x < newWidth; x++) {
        BigInteger sum = BigInteger.ZERO;
        for (int v = y * height; v < (y + 1) * height; v++) {
          for (int u = x * width; u < (x + 1) * width; u++) {
            int sample = picture.samples()[v / newHeight * width + u / newWidth];
            sum = sum.add(BigInteger.valueOf(sample));
          }
        }
        BigInteger area = BigInteger.valueOf((long) width * height);
        BigInteger expected = sum.shiftLeft(1).add(area).divide(area.shiftLeft(1));
        assertThat(reduced.samples()[y * newWidth + x]).isEqualTo(expected.intValueExact());
      }
    }
  }

  @ParameterizedTest
  @CsvSource({
    "512, 336, 256, 256, 168",
    "500, 372, 256, 256, 190",
    "3, 1000, 10, 1, 10",
    "5, 2, 2, 2, 1"
  })
  void keepsTheProportion(int width, int height, int side, int newWidth, int newHeight) {
    Picture reduced =
        AreaAverage.toLongestSide(new Picture(width, height, 8, new int[width * height]), side);
    assertThat(reduced.width()).as("372 * 256 / 500 = 190.46, by hand").isEqualTo(newWidth);
    assertThat(reduced.height()).isEqualTo(newHeight);
  }

  @Test
  void keepsBlackAndWhiteAtEverySize() {
    int[] white = new int[37 * 23];
    java.util.Arrays.fill(white, 65535);
    for (int side = 1; side < 37; side++) {
      assertThat(AreaAverage.toLongestSide(new Picture(37, 23, 16, white), side).samples())
          .containsOnly(65535);
      assertThat(
              AreaAverage.toLongestSide(new Picture(37, 23, 16, new int[37 * 23]), side).samples())
          .containsOnly(0);
    }
  }

  @Test
  void keepsTheMeanOfALargeDeepPicture() {
    Picture picture = PictureFiles.noise(Picture.MAX_SIDE, 3, 1, 16, 5).get(0);
    Picture reduced = AreaAverage.toLongestSide(picture, 5461);
    assertThat(reduced.height()).isEqualTo(1);
    assertThat(reduced.mean())
        .as("each of 5461 samples is rounded by at most half a grey level")
        .isCloseTo(picture.mean(), within(0.5));
  }

  @ParameterizedTest
  @ValueSource(ints = {64, 65, Picture.MAX_SIDE})
  void leavesASmallPictureAsItIs(int side) {
    Picture picture = TestPattern.cvp(64, 40);
    assertThat(AreaAverage.toLongestSide(picture, side)).isSameAs(picture);
  }

  @ParameterizedTest
  @ValueSource(ints = {0, -1, Picture.MAX_SIDE + 1})
  void refusesASideOutsideItsRange(int side) {
    Picture picture = TestPattern.cvp(8);
    assertThatThrownBy(() -> AreaAverage.toLongestSide(picture, side))
        .isInstanceOf(IllegalArgumentException.class)
        .hasMessage("longest side (samples) is " + side + "; accepted: 1 to 16384");
  }
}
