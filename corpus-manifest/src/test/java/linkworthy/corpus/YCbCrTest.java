package linkworthy.corpus;

import static org.assertj.core.api.Assertions.assertThat;

import java.math.BigDecimal;
import java.math.MathContext;
import java.math.RoundingMode;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class YCbCrTest {
  /**
   * The formulas of ITU-T T.871, section 7, worked by hand for corners of the colour cube; of
   * yellow Cb is exactly 0.5, which rounds up to 1.
   */
  @ParameterizedTest
  @CsvSource({
    "0, 0, 0, 0, 128, 128",
    "255, 255, 255, 255, 128, 128",
    "255, 0, 0, 76, 85, 255",
    "0, 255, 0, 150, 44, 21",
    "0, 0, 255, 29, 255, 107",
    "255, 255, 0, 226, 1, 149",
    "100, 100, 100, 100, 128, 128"
  })
  void hasTheKnownCorners(int r, int g, int b, int y, int cb, int cr) {
    List<Picture> planes = new ReadPicture(pixel(8, r, g, b), "none").planes();
    assertThat(planes.stream().map(plane -> plane.samples()[0])).containsExactly(y, cb, cr);
  }

  @ParameterizedTest
  @ValueSource(ints = {1, 4, 8, 10, 16})
  void equalsTheFormulaInDecimals(int bitDepth) {
    ReadPicture read = new ReadPicture(PictureFiles.noise(40, 25, 3, bitDepth, 9), "none");
    List<Picture> planes = read.planes();
    assertThat(read.luma().samples()).isEqualTo(planes.get(0).samples());
    int peak = (1 << bitDepth) - 1;
    for (int i = 0; i < 1000; i++) {
      BigDecimal r = BigDecimal.valueOf(read.channels().get(0).samples()[i]);
      BigDecimal g = BigDecimal.valueOf(read.channels().get(1).samples()[i]);
      BigDecimal b = BigDecimal.valueOf(read.channels().get(2).samples()[i]);
      BigDecimal y =
          r.multiply(new BigDecimal("0.299"))
              .add(g.multiply(new BigDecimal("0.587")))
              .add(b.multiply(new BigDecimal("0.114")));
      assertThat(planes.get(0).samples()[i]).isEqualTo(rounded(y, peak));
      assertThat(planes.get(1).samples()[i]).isEqualTo(difference(b.subtract(y), "1.772", peak));
      assertThat(planes.get(2).samples()[i]).isEqualTo(difference(r.subtract(y), "1.402", peak));
    }
  }

  @Test
  void grayIsItsOwnLuma() {
    Picture gray = TestPattern.cvp(8);
    ReadPicture read = new ReadPicture(List.of(gray), "none");
    assertThat(read.luma()).isSameAs(gray);
    assertThat(read.planes()).containsExactly(gray);
  }

  private static int difference(BigDecimal numerator, String scale, int peak) {
    BigDecimal middle = BigDecimal.valueOf((peak + 1) / 2);
    return rounded(numerator.divide(new BigDecimal(scale), new MathContext(40)).add(middle), peak);
  }

  /** Half up, also where the value is negative. */
  private static int rounded(BigDecimal value, int peak) {
    int rounded = value.add(new BigDecimal("0.5")).setScale(0, RoundingMode.FLOOR).intValueExact();
    return Math.max(0, Math.min(peak, rounded));
  }

  private static List<Picture> pixel(int bitDepth, int r, int g, int b) {
    return List.of(
        new Picture(1, 1, bitDepth, new int[] {r}),
        new Picture(1, 1, bitDepth, new int[] {g}),
        new Picture(1, 1, bitDepth, new int[] {b}));
  }
}
