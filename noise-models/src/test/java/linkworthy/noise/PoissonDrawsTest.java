package linkworthy.noise;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import org.apache.commons.rng.UniformRandomProvider;
import org.apache.commons.statistics.distribution.ChiSquaredDistribution;
import org.apache.commons.statistics.distribution.PoissonDistribution;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

class PoissonDrawsTest {
  private static final int N = 200_000;

  /**
   * Mean and variance are both the mean; within 5 standard errors, false-alarm rate 5.7e-7 each.
   */
  @ParameterizedTest
  @ValueSource(doubles = {0.01, 0.7, 5, 9.999, 10, 30, 1000, 3e5, 9e7, 2e8, 1e12})
  void momentsAreThoseOfTheDistribution(double mean) {
    UniformRandomProvider random = Measured.stream(71);
    double[] values = new double[N];
    double[] squares = new double[N];
    for (int i = 0; i < N; i++) {
      double draw = PoissonDraws.next(mean, random);
      assertThat(draw).isEqualTo(Math.rint(draw)).isNotNegative();
      values[i] = draw - mean;
      squares[i] = values[i] * values[i];
    }
    assertThat(Measured.of(values).errorsFrom(0)).isBetween(-5.0, 5.0);
    assertThat(Measured.of(squares).errorsFrom(mean)).isBetween(-5.0, 5.0);
  }

  /**
   * Chi-square over single counts with at least 10 expected, the rest in one cell at each end;
   * false-alarm rate 1e-6 each. The oracle is Commons Statistics.
   */
  @ParameterizedTest
  @ValueSource(doubles = {0.3, 4, 9.9, 10, 12.5, 60, 400})
  void everyCountIsAsLikelyAsItShouldBe(double mean) {
    PoissonDistribution poisson = PoissonDistribution.of(mean);
    int low = 0;
    while (N * poisson.cumulativeProbability(low) < 10) {
      low++;
    }
    int high = low;
    while (N * poisson.survivalProbability(high) >= 10) {
      high++;
    }
    int[] counts = new int[high - low + 1];
    UniformRandomProvider random = Measured.stream(72);
    for (int i = 0; i < N; i++) {
      counts[(int) Math.max(low, Math.min(high, PoissonDraws.next(mean, random))) - low]++;
    }
    double chiSquare = 0;
    for (int k = low; k <= high; k++) {
      double expected =
          N
              * (k == low
                  ? poisson.cumulativeProbability(k)
                  : k == high ? poisson.survivalProbability(k - 1) : poisson.probability(k));
      chiSquare += (counts[k - low] - expected) * (counts[k - low] - expected) / expected;
    }
    assertThat(ChiSquaredDistribution.of(high - low).survivalProbability(chiSquare))
        .isGreaterThan(1e-6);
  }

  @Test
  void meanZeroGivesZero() {
    UniformRandomProvider random = Measured.stream(73);
    for (int i = 0; i < 1000; i++) {
      assertThat(PoissonDraws.next(0, random)).isCloseTo(0, within(0.0));
    }
  }
}
