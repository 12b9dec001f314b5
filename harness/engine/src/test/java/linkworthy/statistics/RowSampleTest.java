package linkworthy.statistics;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import java.util.stream.LongStream;
import org.apache.commons.statistics.distribution.HypergeometricDistribution;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class RowSampleTest {
  /** Closed forms: one row altered, 1 - n/M; one sampled, 1 - D/M; two altered, by hand. */
  @Test
  void theChanceHasClosedForms() {
    assertThat(RowSample.chanceMissed(90, 1, 30)).isEqualTo(60.0 / 90);
    assertThat(RowSample.chanceMissed(90, 30, 1)).isEqualTo(60.0 / 90);
    assertThat(RowSample.chanceMissed(90, 2, 30)).isCloseTo(60.0 * 59 / (90.0 * 89), within(1e-15));
    assertThat(RowSample.chanceMissed(90, 0, 30)).isEqualTo(1);
    assertThat(RowSample.chanceMissed(90, 5, 0)).isEqualTo(1);
    assertThat(RowSample.chanceMissed(90, 1, 90)).isZero();
    assertThat(RowSample.chanceMissed(0, 0, 0)).isEqualTo(1);
  }

  /** Against Apache Commons Statistics, whose logarithms are good for about ten digits. */
  @ParameterizedTest
  @CsvSource({"90, 5, 30", "90, 5, 10", "9600, 96, 100", "9600, 480, 100", "1000000, 10000, 250"})
  void theChanceIsTheHypergeometricOne(int rows, int altered, int sampled) {
    double expected = HypergeometricDistribution.of(rows, altered, sampled).probability(0);
    assertThat(RowSample.chanceMissed(rows, altered, sampled) / expected)
        .isCloseTo(1, within(1e-9));
  }

  @Test
  void sharesAreRoundedUp() {
    assertThat(RowSample.rowsOf(0.01, 90)).isEqualTo(1);
    assertThat(RowSample.rowsOf(0.05, 90)).isEqualTo(5);
    assertThat(RowSample.rowsOf(0.05, 0)).isZero();
  }

  @Test
  void aSampleHasDistinctRowsAndFollowsItsSeed() {
    List<Long> sample = rows(1000, 100, 7);
    assertThat(sample).hasSize(100).isEqualTo(rows(1000, 100, 7));
    assertThat(RowSample.draw(1000, 100, 7).size()).isEqualTo(100);
    assertThat(rows(1000, 100, 8)).isNotEqualTo(sample);
    assertThat(rows(5, 5, 1)).containsExactly(0L, 1L, 2L, 3L, 4L);
    assertThat(rows(5, 0, 1)).isEmpty();
  }

  /** Rows far apart: more than an int counts. */
  @Test
  void rowsMayBeMoreThanBillions() {
    RowSample sample = RowSample.draw(1L << 40, 3, 7);
    assertThat(sample.size()).isEqualTo(3);
    assertThat(sample.contains(1L << 40)).isFalse();
  }

  private static List<Long> rows(long rows, long sampled, long seed) {
    RowSample sample = RowSample.draw(rows, sampled, seed);
    return LongStream.range(-1, rows + 1).filter(sample::contains).boxed().toList();
  }

  /**
   * Each of 20 rows is in 5 of 20 for a quarter of 4000 seeds. Limit: 5 standard deviations of the
   * binomial distribution, exceeded by a correct program for any of the 20 rows with a chance of
   * about 1e-5.
   */
  @Test
  void everyRowIsAsLikely() {
    int seeds = 4000;
    int[] counts = new int[20];
    for (int seed = 0; seed < seeds; seed++) {
      rows(20, 5, seed).forEach(row -> counts[row.intValue()]++);
    }
    assertThat(counts)
        .satisfies(
            all -> {
              for (int count : all) {
                assertThat((double) count)
                    .isCloseTo(seeds / 4.0, within(5 * Math.sqrt(seeds * 0.25 * 0.75)));
              }
            });
  }

  @Test
  void moreThanThereAreIsRefused() {
    assertThatIllegalArgumentException().isThrownBy(() -> RowSample.draw(5, 6, 1));
    assertThatIllegalArgumentException().isThrownBy(() -> RowSample.chanceMissed(5, 6, 1));
    assertThatIllegalArgumentException().isThrownBy(() -> RowSample.chanceMissed(5, 1, -1));
  }
}
