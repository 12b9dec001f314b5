package linkworthy.codec;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import linkworthy.corpus.Picture;
import linkworthy.corpus.TestPattern;
import linkworthy.noise.Impairment;
import linkworthy.noise.NoiseLibrary;
import linkworthy.noise.NoiseModel;
import linkworthy.noise.NoiseStreams;
import linkworthy.noise.Severity;
import linkworthy.noise.SignalStatistics;
import linkworthy.noise.Site;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class SingularValueThresholdTest {
  /**
   * Gavish and Donoho 2014 print 4/sqrt(3) and 2.858 for square matrices; the formula for lambda is
   * second-hand, from public ports of the authors' code. Digits recomputed independently in Python
   * with SciPy (quadrature of the Marchenko-Pastur density).
   */
  @ParameterizedTest
  @CsvSource({
    "0.05, 0.9833083, 1.5066074, 1.5193410",
    "0.10, 0.9665651, 1.5816484, 1.6087716",
    "0.20, 0.9329155, 1.7048151, 1.7650464",
    "0.25, 0.9160041, 1.7580294, 1.8368658",
    "0.50, 0.8304659, 1.9785991, 2.1711853",
    "0.75, 0.7429485, 2.1560938, 2.5014297",
    "1.00, 0.6527759, 2.3094011, 2.8583624"
  })
  void factorsByShape(double beta, double median, double lambda, double omega) {
    assertThat(SingularValueThreshold.marchenkoPasturMedian(beta)).isCloseTo(median, within(1e-6));
    assertThat(SingularValueThreshold.lambda(beta)).isCloseTo(lambda, within(1e-6));
    assertThat(SingularValueThreshold.omega(beta)).isCloseTo(omega, within(1e-6));
  }

  /** {@code 4/sqrt(3)} by arithmetic; 2.858362424 recomputed independently in Python. */
  @Test
  void squareMatrices() {
    assertThat(SingularValueThreshold.lambda(1)).isCloseTo(4 / Math.sqrt(3), within(1e-12));
    assertThat(SingularValueThreshold.omega(1)).isCloseTo(2.858362424, within(1e-6));
  }

  /** Without shape there is no spread: all singular values of pure noise agree. */
  @Test
  void veryLongMatrices() {
    assertThat(SingularValueThreshold.marchenkoPasturMedian(1e-6)).isCloseTo(1, within(1e-5));
    assertThat(SingularValueThreshold.shape(64, 1024)).isEqualTo(0.0625);
    assertThat(SingularValueThreshold.shape(1024, 64)).isEqualTo(0.0625);
  }

  /**
   * How many singular values of the centred pattern lie above the threshold, recomputed
   * independently in Python with NumPy and SciPy; 0 stands for unknown noise.
   */
  @ParameterizedTest
  @CsvSource({
    "256, rows, 1, 34",
    "256, rows, 5, 12",
    "256, rows, 20, 7",
    "256, rows, 0, 28",
    "256, blocks, 1, 62",
    "256, blocks, 5, 26",
    "256, blocks, 20, 8",
    "256, blocks, 0, 27",
    "200, rows, 2, 17",
    "200, rows, 40, 5",
    "200, rows, 0, 26"
  })
  void componentsAboveTheFloor(int width, String over, double deviation, int expected) {
    Arrangement arrangement =
        over.equals("rows") ? new Arrangement.Rows() : new Arrangement.Blocks(8);
    Keep keep = deviation == 0 ? Keep.NoiseFloor.UNKNOWN : new Keep.NoiseFloor(deviation);
    assertThat(Analysis.of(TestPattern.cvp(width, 256), arrangement, new PcaBasis()).kept(keep))
        .isEqualTo(expected);
  }

  /**
   * Three strong components under noise of deviation 5 are found again. The largest singular value
   * of 128 x 128 noise exceeds the threshold with a probability below 1e-6 (Tracy-Widom tail).
   */
  @ParameterizedTest
  @ValueSource(ints = {1, 2, 3})
  void strongComponentsAreToldFromNoise(int seed) {
    int[] samples = new int[128 * 128];
    for (int y = 0; y < 128; y++) {
      for (int x = 0; x < 128; x++) {
        samples[128 * y + x] =
            100 + 20 * (x / 64) * (y % 2) + 20 * (x / 32 % 2) + 10 * (x / 16 % 2) * (y / 64);
      }
    }
    Picture clean = new Picture(128, 128, 8, samples);
    NoiseModel gaussian = NoiseLibrary.find("gaussian");
    Severity severity = new Severity("variance", 25);
    Impairment impairment = gaussian.at(severity, Site.SAMPLES, SignalStatistics.of(clean));
    Picture noisy =
        ((Impairment.OnSamples) impairment)
            .apply(
                clean,
                NoiseStreams.open(
                    seed, "steps", gaussian.fingerprint(), Site.SAMPLES, severity, 0, "test"));
    Analysis analysis = Analysis.of(noisy, new Arrangement.Rows(), new PcaBasis());
    assertThat(analysis.kept(new Keep.NoiseFloor(5))).isEqualTo(3);
    assertThat(analysis.kept(Keep.NoiseFloor.UNKNOWN)).isEqualTo(3);
  }

  @Test
  void aConstantPictureHasNothingAboveAnyFloor() {
    Picture flat = new Picture(16, 16, 8, new int[256]);
    Analysis analysis = Analysis.of(flat, new Arrangement.Rows(), new PcaBasis());
    assertThat(analysis.kept(Keep.NoiseFloor.UNKNOWN)).isZero();
    assertThat(analysis.kept(new Keep.NoiseFloor(0.001))).isZero();
  }
}
