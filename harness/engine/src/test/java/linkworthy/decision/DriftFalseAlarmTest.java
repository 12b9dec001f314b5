package linkworthy.decision;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.LinkedHashSet;
import java.util.Set;
import java.util.SplittableRandom;
import org.apache.commons.statistics.distribution.BinomialDistribution;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/**
 * Runs that differ in their seed alone: a table has any moved cell in at most 5 % of the cases,
 * tolerance 0. {@code -Dlinkworthy.statistics=N} takes N tables instead of 40.
 *
 * <p>The number of tables with a false alarm must lie within the binomial interval of probability
 * 0.05, each tail below 0.0005; so a right program fails with a chance of 0.001 under a new seed.
 * Holm's bound is nearly exact here, where cells are independent: with 6 cells it is 4.9 %. Welch's
 * test of few values raises fewer alarms than stated (3.7 % of 10,000 tables with 6 replicates), so
 * there only the upper limit holds.
 */
class DriftFalseAlarmTest {
  private static final int TABLES = Integer.getInteger("linkworthy.statistics", 40);
  private static final double TAIL = 0.0005;
  private static final int CELLS = 6;

  @ParameterizedTest
  @CsvSource({
    "8, 6, true, SAME_PICTURES, true",
    "1, 30, true, REPLICATES, true",
    "1, 6, true, REPLICATES, false",
    "12, 6, false, PICTURES, true"
  })
  void noMoreThanStated(
      int pictures, int replicates, boolean samePictures, CellDrift.Test test, boolean exact) {
    long seed = Long.getLong("linkworthy.seed", 20261201);
    SplittableRandom random = new SplittableRandom(seed);
    Set<String> unchanged = new LinkedHashSet<>();
    double[] levels = new double[pictures];
    for (int p = 0; p < pictures; p++) {
      levels[p] = 30 + 4 * random.nextGaussian();
      if (samePictures) {
        unchanged.add("p" + p);
      }
    }
    int alarms = 0;
    for (int table = 0; table < TABLES; table++) {
      Drift drift =
          Drift.between(
              run(levels, replicates, samePictures, random),
              run(levels, replicates, samePictures, random),
              unchanged,
              key -> false,
              0);
      assertThat(drift.cells()).hasSize(CELLS).allMatch(cell -> cell.test() == test);
      alarms += drift.count(Movement.MOVED) > 0 ? 1 : 0;
    }
    BinomialDistribution stated = BinomialDistribution.of(TABLES, Drift.ALPHA);
    assertThat(alarms)
        .describedAs("tables with a false alarm of %d, seed %d", TABLES, seed)
        .isBetween(
            exact ? stated.inverseCumulativeProbability(TAIL) : 0,
            stated.inverseSurvivalProbability(TAIL));
  }

  private static RunFigures run(
      double[] levels, int replicates, boolean samePictures, SplittableRandom random) {
    Rows rows = new Rows();
    for (int p = 0; p < levels.length; p++) {
      for (int cell = 0; cell < CELLS; cell++) {
        double level = samePictures ? levels[p] : 30 + 4 * random.nextGaussian();
        double[] psnrDb = new double[replicates];
        for (int r = 0; r < replicates; r++) {
          psnrDb[r] = level + 0.3 * random.nextGaussian();
        }
        rows.add("codec " + cell, "p" + p, psnrDb);
      }
    }
    return rows.run();
  }
}
