package linkworthy.quality;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;
import static org.assertj.core.api.Assertions.withinPercentage;

import linkworthy.corpus.Picture;
import linkworthy.corpus.TestPattern;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/**
 * All measures on one table. Recomputed independently in Python: MSE and PSNR with NumPy, SSIM with
 * scikit-image 0.19.3 (gaussian_weights=True, sigma=1.5, use_sample_covariance=False,
 * data_range=255, five samples cropped all round) and with a direct valid convolution in SciPy; the
 * two agree to 1e-10. Ten digits are printed.
 */
class DamagedPatternTest {
  @ParameterizedTest
  @CsvSource({
    "64, SHIFT1, 218.4277344, 24.7377258, 0.7912481077",
    "64, CONTRAST, 72.04052734, 29.55503478, 0.9628751362",
    "64, BRIGHT20, 400, 22.1102037, 0.9874158162",
    "64, NOISE, 84.46337891, 28.8641191, 0.8814045887",
    "64, SALTPEP, 801.869873, 19.08976464, 0.5699836321",
    "64, BLKMEAN, 564.8759766, 20.61127256, 0.4328421423",
    "64, LOSTROWS, 145.3361816, 26.50706615, 0.8795956426",
    "64, BLUR3, 35.22949219, 32.66173978, 0.9407409844",
    "64, NEGATIVE, 4623.152344, 11.48142156, -0.7287536722",
    "256, SHIFT1, 277.9669189, 23.69087248, 0.7356479425",
    "256, CONTRAST, 66.6399231, 29.89345874, 0.9625171937",
    "256, BRIGHT20, 400, 22.1102037, 0.9878376612",
    "256, NOISE, 84.59870911, 28.85716625, 0.8957980023",
    "256, SALTPEP, 819.7041931, 18.99423204, 0.5764167823",
    "256, BLKMEAN, 618.3617706, 20.21837729, 0.3644701771",
    "256, LOSTROWS, 34.18527222, 32.79241318, 0.973751538",
    "256, BLUR3, 49.83435059, 31.15551558, 0.9286139373",
    "256, NEGATIVE, 4272.836304, 11.82364106, -0.7682495737"
  })
  void isMeasuredAsByOthers(int n, DamagedPattern damage, double mse, double psnrDb, double ssim) {
    Picture clean = TestPattern.cvp(n);
    Picture decoded = damage.of(clean);
    assertThat(Psnr.meanSquaredError(clean, decoded)).isCloseTo(mse, withinPercentage(1e-7));
    assertThat(new Psnr().against(clean).of(decoded)).isCloseTo(psnrDb, withinPercentage(1e-7));
    assertThat(new Ssim().against(clean).of(decoded)).isCloseTo(ssim, within(1e-9));
  }
}
