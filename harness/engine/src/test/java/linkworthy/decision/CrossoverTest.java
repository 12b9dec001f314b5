package linkworthy.decision;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import java.util.Map;
import java.util.Random;
import java.util.TreeMap;
import org.junit.jupiter.api.Test;

/**
 * Expected ends recomputed independently in Python with SciPy: the roots, by Brent's method, of
 * |mean| - t s / sqrt(n) of the pictures' differences interpolated by numpy.interp.
 */
class CrossoverTest {
  /** Simulated studies; {@code -Dlinkworthy.statistics=20000} for a thorough run. */
  private static final int STUDIES = Integer.getInteger("linkworthy.statistics", 1000);

  private static List<Crossover> crossings(String axis, Map<Double, double[]> differences) {
    Measurements measured = new Measurements();
    differences.forEach(
        (severity, of) -> {
          for (int picture = 0; picture < of.length; picture++) {
            String name = "p" + picture;
            double psnr = 25 + 3 * picture;
            measured.add(
                Trials.of("a", "n", axis, severity, name, 0, psnr + of[picture], 1, false));
            measured.add(Trials.of("b", "n", axis, severity, name, 0, psnr, 1, false));
          }
        });
    return Crossover.of(measured, measured.conditions(), "a", "b");
  }

  private static final Map<Double, double[]> CLOSE =
      new TreeMap<>(
          Map.of(
              30.0, new double[] {1.9, 2.4, 1.2, 2.2, 1.6},
              20.0, new double[] {.9, 1.3, .1, .8, .4},
              10.0, new double[] {-.8, -.2, -1.5, -.4, -1.1},
              0.0, new double[] {-2.5, -2.0, -3.1, -2.2, -2.9}));

  @Test
  void oneCrossingWithItsInterval() {
    Crossover found = crossings("snr-db", CLOSE).get(0);
    assertThat(crossings("snr-db", CLOSE)).hasSize(1);
    assertThat(found.below()).isEqualTo("b");
    assertThat(found.above()).isEqualTo("a");
    assertThat(found.at()).isCloseTo(15.333333333333332, within(1e-9));
    assertThat(found.low()).isCloseTo(11.070216019543329, within(1e-9));
    assertThat(found.high()).isCloseTo(19.191601820119956, within(1e-9));
  }

  /** The lower end lies below all severities, the upper one beyond the next severity. */
  @Test
  void anIntervalMayBeOpenOrReachOverASeverity() {
    Map<Double, double[]> wide =
        new TreeMap<>(
            Map.of(
                30.0, new double[] {1.0, 3.4, 0.2, 2.2, 1.6},
                20.0, new double[] {.9, 2.3, -1.1, .8, -.4},
                10.0, new double[] {-.8, 1.2, -2.5, -.4, -1.1}));
    Crossover found = crossings("snr-db", wide).get(0);
    assertThat(found.at()).isCloseTo(15.901639344262296, within(1e-9));
    assertThat(found.low()).isNaN();
    assertThat(found.high()).isCloseTo(28.420182999170773, within(1e-9));
  }

  /** Half way on a logarithmic axis from 0.01 to 0.1 is 0.0316; equal pictures leave no width. */
  @Test
  void ratesAreOnALogarithmicAxis() {
    Map<Double, double[]> rates =
        new TreeMap<>(Map.of(0.01, new double[] {1, 1, 1}, 0.1, new double[] {-1, -1, -1}));
    Crossover found = crossings("loss-rate", rates).get(0);
    assertThat(found.below()).isEqualTo("a");
    assertThat(found.at()).isCloseTo(Math.sqrt(0.001), within(1e-9));
    assertThat(found.low()).isCloseTo(found.at(), within(1e-6));
    assertThat(found.high()).isCloseTo(found.at(), within(1e-6));
  }

  @Test
  void touchingIsNoCrossing() {
    assertThat(
            crossings(
                "snr-db",
                new TreeMap<>(
                    Map.of(
                        10.0, new double[] {1, 2},
                        20.0, new double[] {1, -1},
                        30.0, new double[] {2, 1}))))
        .isEmpty();
  }

  @Test
  void aCrossingAtASeverityCountsOnce() {
    List<Crossover> found =
        crossings(
            "snr-db",
            new TreeMap<>(
                Map.of(
                    10.0, new double[] {1, 2},
                    20.0, new double[] {1, -1},
                    30.0, new double[] {-2, -1})));
    assertThat(found).hasSize(1);
    assertThat(found.get(0).at()).isCloseTo(20, within(1e-9));
  }

  @Test
  void onePictureGivesNoInterval() {
    Crossover found =
        crossings("snr-db", new TreeMap<>(Map.of(10.0, new double[] {1}, 20.0, new double[] {-1})))
            .get(0);
    assertThat(found.at()).isCloseTo(15, within(1e-9));
    assertThat(found.low()).isNaN();
    assertThat(found.high()).isNaN();
  }

  /**
   * The true difference is linear and 0 at 17 dB. 95 % of the intervals hold it; both limits are
   * 4.5 standard deviations off, so a right program fails in fewer than 1 of 100 000 runs.
   */
  @Test
  void intervalsHoldTheTruthAsOftenAsStated() {
    Random random = new Random(20_261_204);
    int missed = 0;
    for (int study = 0; study < STUDIES; study++) {
      Map<Double, double[]> differences = new TreeMap<>();
      double[] own = new double[8];
      for (int picture = 0; picture < own.length; picture++) {
        own[picture] = 0.5 * random.nextGaussian();
      }
      for (double snr : new double[] {10, 15, 20, 25}) {
        double[] of = new double[own.length];
        for (int picture = 0; picture < of.length; picture++) {
          of[picture] = 0.3 * (snr - 17) + own[picture] + 0.2 * random.nextGaussian();
        }
        differences.put(snr, of);
      }
      Crossover found = crossings("snr-db", differences).get(0);
      missed += found.low() > 17 || found.high() < 17 ? 1 : 0;
    }
    double spread = 4.5 * Math.sqrt(STUDIES * 0.05 * 0.95);
    assertThat((double) missed).isBetween(STUDIES * 0.05 - spread, STUDIES * 0.05 + spread);
  }
}
