package linkworthy.quality;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;
import static org.assertj.core.api.Assertions.within;

import java.util.Arrays;
import linkworthy.corpus.Picture;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class PsnrTest extends QualityContractTest {
  @Override
  protected QualityMeasure measure() {
    return new Psnr();
  }

  @Override
  protected double perfect() {
    return Double.POSITIVE_INFINITY;
  }

  /**
   * 10 log10(P^2 / MSE), recomputed independently in Python. An error of 1/12 is that of rounding
   * to integers (Bennett 1948).
   */
  @ParameterizedTest
  @CsvSource({
    "1, 255, 48.1308036087",
    "0.08333333333333333, 255, 58.9226160692",
    "10, 255, 38.1308036087",
    "1000, 255, 18.1308036087",
    "505, 255, 21.0978898275",
    "1, 65535, 96.3294660753",
    "1000, 65535, 66.3294660753",
    "1, 15, 23.5218251811",
    "65025, 255, 0"
  })
  void followsThePeak(double mse, int peak, double psnrDb) {
    assertThat(Psnr.psnrDb(mse, peak)).isCloseTo(psnrDb, within(1e-10));
  }

  /** Closed forms: (D^2 + 2)/12 with integer levels, (D^2 - 1)/12 with levels midway. */
  @ParameterizedTest
  @CsvSource({"2, 0.5, 0.25", "4, 1.5, 1.25", "8, 5.5, 5.25", "16, 21.5, 21.25", "32, 85.5, 85.25"})
  void measuresARequantisedRampExactly(int step, double integerLevels, double midwayLevels) {
    int[] ramp = new int[256];
    Arrays.setAll(ramp, x -> x);
    Picture clean = new Picture(256, 1, 8, ramp);
    Picture coarse = new Picture(256, 1, 8, map(ramp, x -> x / step * step + step / 2));
    assertThat(Psnr.meanSquaredError(clean, coarse)).isEqualTo(integerLevels);
    Picture doubled = new Picture(256, 1, 9, map(ramp, x -> 2 * x));
    Picture midway = new Picture(256, 1, 9, map(ramp, x -> 2 * (x / step * step) + step - 1));
    assertThat(Psnr.meanSquaredError(doubled, midway)).isEqualTo(4 * midwayLevels);
  }

  /** Odd sizes leave samples beyond the last whole run of sums. */
  @ParameterizedTest
  @CsvSource({"8, 512, 512", "12, 601, 403", "15, 512, 511", "16, 512, 512", "16, 3, 1"})
  void sumsTheLargestErrorsWithoutOverflow(int bitDepth, int width, int height) {
    int peak = (1 << bitDepth) - 1;
    Picture black = new Picture(width, height, bitDepth, new int[width * height]);
    int[] samples = new int[width * height];
    Arrays.fill(samples, peak);
    Picture white = new Picture(width, height, bitDepth, samples);
    assertThat(Psnr.meanSquaredError(black, white)).isEqualTo((double) peak * peak);
    assertThat(new Psnr().against(black).of(white)).isZero();
  }

  @Test
  void equalPicturesHaveNoError() {
    assertThat(Psnr.meanSquaredError(pattern(9, 5, 8), pattern(9, 5, 8))).isZero();
    assertThat(Psnr.psnrDb(0, 255)).isEqualTo(Double.POSITIVE_INFINITY);
  }

  @ParameterizedTest
  @ValueSource(doubles = {Double.NaN, -Double.MIN_VALUE, Double.POSITIVE_INFINITY})
  void refusesAnErrorThatIsNone(double mse) {
    assertThatIllegalArgumentException()
        .isThrownBy(() -> Psnr.psnrDb(mse, 255))
        .withMessageContaining("mean squared error (grey levels squared) is " + mse);
  }

  @ParameterizedTest
  @ValueSource(ints = {0, 65_536})
  void refusesAPeakThatIsNone(int peak) {
    assertThatIllegalArgumentException()
        .isThrownBy(() -> Psnr.psnrDb(1, peak))
        .withMessage("peak (grey levels) is " + peak + "; accepted: 1 to 65535");
  }
}
