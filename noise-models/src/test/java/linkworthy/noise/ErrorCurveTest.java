package linkworthy.noise;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import linkworthy.input.BadInput;
import org.apache.commons.statistics.distribution.NormalDistribution;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.EnumSource;

/**
 * Formulas from Proakis, "Digital Communications" (from memory), and IEEE 802.15.4 annex E (as
 * written in open network simulators); numbers recomputed independently in Python with SciPy.
 */
class ErrorCurveTest {
  private static double ratio(double decibels) {
    return StrictMath.pow(10, decibels / 10);
  }

  private static void assertRate(String curve, double decibels, double expected, double relative) {
    assertThat(ErrorCurve.find(curve).meanRate(ratio(decibels)))
        .as("%s at %s dB", curve, decibels)
        .isCloseTo(expected, within(expected * relative));
  }

  @ParameterizedTest
  @CsvSource({
    "0, 0.07864960353, 0.1839397206, 0.3032653299, 0.1464466094",
    "2, 0.03750612836, 0.1024848421, 0.2263678888, 0.108484732",
    "4, 0.01250081804, 0.04055753839, 0.1424035435, 0.07713691606",
    "6, 0.002388290781, 0.009332812281, 0.06831109822, 0.05299888393",
    "8, 0.0001909077741, 0.0009094044481, 0.02132374789, 0.03545906763",
    "10, 3.872108216e-06, 2.269996488e-05, 0.0033689735, 0.02326870538",
    "12, 9.006010351e-09, 6.5443471e-08, 0.000180891502, 0.01506468037",
  })
  void ratesByEbN0(double decibels, double bpsk, double dbpsk, double ncfsk, double rayleigh) {
    assertRate("bpsk", decibels, bpsk, 1e-8);
    assertRate("dbpsk", decibels, dbpsk, 1e-8);
    assertRate("ncfsk", decibels, ncfsk, 1e-8);
    assertRate("bpsk-rayleigh", decibels, rayleigh, 1e-8);
  }

  /**
   * The Eb/N0 is printed to ten digits, 5e-10 dB at least, which moves the rate by up to 1.2e-8 of
   * itself where the curves are steepest.
   */
  @ParameterizedTest
  @CsvSource({
    "bpsk, 6.789522612, 9.587858347",
    "dbpsk, 7.934137466, 10.34218361",
    "ncfsk, 10.94443742, 13.35248357",
    "bpsk-rayleigh, 23.96635603, 43.9792698",
  })
  void ratiosForRatesOfOneInAThousandAndInAHundredThousand(
      String curve, double thousand, double hundredThousand) {
    assertRate(curve, thousand, 1e-3, 2e-8);
    assertRate(curve, hundredThousand, 1e-5, 2e-8);
  }

  @ParameterizedTest
  @CsvSource({
    "-6, 0.1222103788",
    "-4, 0.03916345993",
    "-3, 0.01641863778",
    "-2, 0.005196999567",
    "-1, 0.001148943716",
    "0, 0.0001615266879",
    "1, 1.291186626e-05",
    "2, 5.131392089e-07",
    "3, 8.597191275e-09",
  })
  void ratesOfTheStandardsOqpskBySinr(double decibels, double expected) {
    assertRate("oqpsk-2450", decibels, expected, 1e-9);
  }

  /** 1 - (1 - b)^(8 n) for frames of 20 and 127 octets; recomputed independently in Python. */
  @ParameterizedTest
  @CsvSource({
    "-6, 1, 1",
    "-4, 0.998325359, 1",
    "-3, 0.9292630193, 0.9999999504",
    "-2, 0.5655559671, 0.9949779635",
    "-1, 0.1680115174, 0.6890110587",
    "0, 0.02551519967, 0.15136353",
    "1, 0.002063779413, 0.01303286781",
    "2, 8.209892418e-05, 0.0005212136909",
    "3, 1.375549664e-06, 8.734708225e-06"
  })
  void framesOfTheStandardsOqpskThatAreHit(double decibels, double shorter, double longer) {
    assertThat(framesHit(decibels, 20)).isCloseTo(shorter, within(1e-9 * shorter));
    assertThat(framesHit(decibels, 127)).isCloseTo(longer, within(1e-9 * longer));
  }

  private static double framesHit(double decibels, int octets) {
    double rate = ErrorCurve.OQPSK_2450.meanRate(ratio(decibels));
    return -StrictMath.expm1(8 * octets * StrictMath.log1p(-rate));
  }

  /** 1 - (1 - b)^(8 n): one frame in a hundred of 20 octets, the standard's sensitivity point. */
  @ParameterizedTest
  @CsvSource({"20, 0.4034989", "127, 1.0923863"})
  void sinrOfOneFrameInAHundred(int octets, double decibels) {
    assertThat(framesHit(decibels, octets)).isCloseTo(0.01, within(0.01 * 2e-6));
  }

  @ParameterizedTest
  @EnumSource
  void ratesFallFromOneHalfToNothing(ErrorCurve curve) {
    assertThat(curve.meanRate(0)).isEqualTo(0.5);
    double before = 0.5;
    for (double decibels = -100; decibels <= 300; decibels += 0.25) {
      double rate = curve.meanRate(ratio(decibels));
      assertThat(rate).as("%s dB", decibels).isBetween(0.0, before + 1e-12);
      before = rate;
    }
    assertThat(before).isLessThan(1e-30);
  }

  /** The oracle is the normal distribution of Commons Statistics: erfc(x) = 2 Q(sqrt(2) x). */
  @Test
  void complementaryErrorFunctionAgreesWithALibrary() {
    NormalDistribution normal = NormalDistribution.of(0, 1);
    for (double x = 0; x < 26; x += 0.01) {
      double expected = 2 * normal.survivalProbability(Math.sqrt(2) * x);
      assertThat(ErrorCurve.complementaryError(x))
          .as("x = %s", x)
          .isCloseTo(expected, within(expected * 1e-12 + Double.MIN_NORMAL));
    }
  }

  /** Mean over the exponential gain, by the midpoint rule over its distribution function. */
  @ParameterizedTest
  @CsvSource({"0.1", "1", "10"})
  void fadingCurveIsTheMeanOverGains(double g) {
    int steps = 200_000;
    double sum = 0;
    for (int i = 0; i < steps; i++) {
      double gain = -StrictMath.log(1 - (i + 0.5) / steps);
      sum += ErrorCurve.BPSK_RAYLEIGH.steadyRate(g * gain);
    }
    double mean = ErrorCurve.BPSK_RAYLEIGH.meanRate(g);
    assertThat(sum / steps).isCloseTo(mean, within(mean * 1e-5));
    assertThat(ErrorCurve.BPSK_RAYLEIGH.meanRatio(mean)).isCloseTo(g, within(g * 1e-12));
  }

  @Test
  void unknownCurveIsRefusedWithWhatExists() {
    assertThatThrownBy(() -> ErrorCurve.find("oqpsk-2540"))
        .isInstanceOf(BadInput.class)
        .hasMessage(
            "no curve 'oqpsk-2540'; did you mean 'oqpsk-2450'?"
                + " accepted: bpsk, dbpsk, ncfsk, bpsk-rayleigh, oqpsk-2450");
    assertThatThrownBy(() -> ErrorCurve.BPSK.meanRatio(0.1))
        .isInstanceOf(UnsupportedOperationException.class);
  }
}
