package linkworthy.corpus;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.Arrays;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class PictureTest {
  @Test
  void knowsItsMoments() {
    Picture picture = new Picture(4, 2, 8, new int[] {2, 4, 4, 4, 5, 5, 7, 9});
    assertThat(picture.mean()).as("40 / 8, by hand").isEqualTo(5);
    assertThat(picture.variance()).as("32 / 8, by hand").isEqualTo(4);
    assertThat(picture.meanSquare()).as("232 / 8, by hand").isEqualTo(29);
    assertThat(picture.peak()).isEqualTo(255);
    assertThat(picture.size()).isEqualTo(8);
  }

  @Test
  void powersOfATestPatternAgree() {
    Picture picture = TestPattern.cvp(64);
    assertThat(picture.variance())
        .as("variance = mean square - mean^2, to rounding")
        .isCloseTo(picture.meanSquare() - picture.mean() * picture.mean(), within(1e-8));
  }

  @Test
  void aFlatPictureHasNoVarianceAtAnyLevel() {
    for (int level : new int[] {0, 1, 100, 65535}) {
      int[] samples = new int[999];
      Arrays.fill(samples, level);
      Picture picture = new Picture(333, 3, 16, samples);
      assertThat(picture.variance()).isZero();
      assertThat(picture.mean()).isEqualTo(level);
    }
  }

  @ParameterizedTest
  @CsvSource({
    "0, 1, 8, 0, picture width (samples) is 0; accepted: 1 to 16384",
    "16385, 1, 8, 16385, picture width (samples) is 16385; accepted: 1 to 16384",
    "1, -1, 8, 1, picture height (samples) is -1; accepted: 1 to 16384",
    "1, 1, 0, 1, bit depth (bits) is 0; accepted: 1 to 16",
    "1, 1, 17, 1, bit depth (bits) is 17; accepted: 1 to 16",
    "2, 2, 8, 5, a 2 x 2 picture has 5 samples"
  })
  void refusesWhatIsNoPicture(int width, int height, int depth, int length, String message) {
    assertThatThrownBy(() -> new Picture(width, height, depth, new int[length]))
        .isInstanceOf(IllegalArgumentException.class)
        .hasMessage(message);
  }

  @ParameterizedTest
  @CsvSource({"1, 2", "1, -1", "8, 256", "8, -1", "12, 4096", "16, 65536", "16, -2147483648"})
  void refusesASampleOutsideItsRange(int depth, int sample) {
    assertThatThrownBy(() -> new Picture(3, 1, depth, new int[] {0, sample, 1}))
        .isInstanceOf(IllegalArgumentException.class)
        .hasMessage("a sample lies outside 0 to " + ((1 << depth) - 1));
  }
}
