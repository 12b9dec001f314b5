package linkworthy.noise;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.Arrays;
import java.util.stream.DoubleStream;
import org.apache.commons.rng.UniformRandomProvider;
import org.apache.commons.statistics.distribution.NormalDistribution;
import org.junit.jupiter.api.Test;

/**
 * A million draws against the normal distribution. Limits of 5 standard errors have a false-alarm
 * rate of 5.7e-7 each.
 */
class GaussianDrawsTest {
  private static final int N = 1_000_000;
  private static final NormalDistribution NORMAL = NormalDistribution.of(0, 1);

  private static double[] draws(long seed) {
    UniformRandomProvider random = Measured.stream(seed);
    return DoubleStream.generate(() -> GaussianDraws.next(random)).limit(N).toArray();
  }

  private static double moment(double[] x, double mean, int power) {
    return Arrays.stream(x).map(v -> StrictMath.pow(v - mean, power)).sum() / x.length;
  }

  /** Standard errors of a normal sample: 1/sqrt(n) times 1, sqrt(2), sqrt(6), sqrt(24). */
  @Test
  void momentsAreThoseOfTheNormalDistribution() {
    double[] x = draws(20_261);
    double mean = Arrays.stream(x).sum() / N;
    double variance = moment(x, mean, 2);
    assertThat(mean).isCloseTo(0, within(5 * 0.001));
    assertThat(variance).isCloseTo(1, within(5 * 0.001414213562));
    assertThat(moment(x, mean, 3) / StrictMath.pow(variance, 1.5))
        .isCloseTo(0, within(5 * 0.002449489743));
    assertThat(moment(x, mean, 4) / (variance * variance) - 3)
        .isCloseTo(0, within(5 * 0.004898979486));
  }

  /**
   * Kolmogorov-Smirnov: D above 0.002693386 has probability 1e-6 at n = 1e6 (recomputed
   * independently in Python with SciPy). The distribution function is that of Commons Statistics.
   */
  @Test
  void distributionIsNormal() {
    double[] x = draws(20_262);
    Arrays.sort(x);
    double d = 0;
    for (int i = 0; i < N; i++) {
      double f = NORMAL.cumulativeProbability(x[i]);
      d = Math.max(d, Math.max(f - (double) i / N, (i + 1.0) / N - f));
    }
    assertThat(d).isLessThan(0.002693386134);
  }

  /** Expected counts and their deviations: binomial, recomputed independently in Python. */
  @Test
  void tailsHoldTheirShare() {
    double[] x = draws(20_263);
    assertThat((double) Arrays.stream(x).filter(v -> Math.abs(v) > 3).count())
        .isCloseTo(2699.8, within(5 * 51.9));
    assertThat((double) Arrays.stream(x).filter(v -> Math.abs(v) > 4).count())
        .isCloseTo(63.34, within(5 * 7.96));
    assertThat((double) Arrays.stream(x).filter(v -> v > 3).count())
        .isCloseTo(1349.9, within(5 * 36.72));
  }

  /** Of independent draws, xy has variance 1 and (xy)^2 variance 8. */
  @Test
  void neighboursAreUncorrelated() {
    double[] x = draws(20_264);
    double sum = 0;
    double squares = 0;
    for (int i = 1; i < N; i++) {
      sum += x[i] * x[i - 1];
      squares += x[i] * x[i] * x[i - 1] * x[i - 1];
    }
    assertThat(sum / N).isCloseTo(0, within(5 * 0.001));
    assertThat(squares / N).isCloseTo(1, within(5 * Math.sqrt(8) / 1000));
  }

  /**
   * The 256 layers have one area, that of the tail with its block, and end at the density's top.
   */
  @Test
  void layersCloseAtTheTop() {
    double tail = GaussianDraws.TAIL;
    double area =
        tail * StrictMath.exp(-0.5 * tail * tail)
            + NORMAL.survivalProbability(tail) * Math.sqrt(2 * Math.PI);
    double last = GaussianDraws.EDGES[255];
    assertThat(StrictMath.exp(-0.5 * last * last) + area / last).isCloseTo(1, within(1e-12));
  }

  /**
   * Recomputed independently in Python (hashlib, Philox and the ziggurat written out there); the
   * logarithms of the two may differ in the last bit.
   */
  @Test
  void firstDrawsAtAnAddressNeverChange() {
    UniformRandomProvider random =
        NoiseStreams.open(
            7,
            "field/a\u00f1il-01",
            "0123456789abcdef",
            Site.SAMPLES,
            new Severity(Severity.SNR_DB, 20),
            3,
            "noise");
    double[] expected = {
      1.9384654119861557,
      0.6529558584025015,
      0.26841986725311173,
      -0.0015398822366442817,
      -0.1425497318856802,
      0.5120745298787879
    };
    for (double value : expected) {
      assertThat(GaussianDraws.next(random)).isCloseTo(value, within(1e-14));
    }
    long thousandths = 0;
    for (double value : expected) {
      thousandths += (long) Math.floor(1000 * value);
    }
    double largest = 0;
    for (int i = expected.length; i < 200_000; i++) {
      double draw = GaussianDraws.next(random);
      thousandths += (long) Math.floor(1000 * draw);
      largest = Math.max(largest, Math.abs(draw));
    }
    assertThat(thousandths).isEqualTo(98_239);
    assertThat(largest).isCloseTo(4.433708422423864, within(1e-13));
  }
}
