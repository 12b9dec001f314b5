package linkworthy.noise;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.stream.IntStream;
import linkworthy.input.BadInput;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class MarkovLossTest {
  /** Gilbert-Elliott: p .02, r .25, delivery .999 in the good and .4 in the bad state. */
  private static final MarkovLoss ELLIOTT = new MarkovLoss(0.02, 0.25, 0.999, 0.4);

  private static void assertEqual(double actual, double expected) {
    assertThat(actual).isCloseTo(expected, within(1e-9 * Math.abs(expected) + 1e-15));
  }

  /** Recomputed independently in Python, ten digits; the variance against brute force there. */
  @ParameterizedTest
  @CsvSource({
    "0.05, 2, 0.02631578947, 0.5, 0.4736842105, 38, 13.13755, 0.3571428571",
    "0.10, 4, 0.02777777778, 0.25, 0.7222222222, 36, 54.1152, 0.1612903226",
    "0.20, 8, 0.03125, 0.125, 0.84375, 32, 177.7408005, 0.08474576271",
    "0.10, 1.1111111111111112, 0.1, 0.9, 0, 10, 9, 1"
  })
  void simpleChainHasTheTextbookFigures(
      double lossRate,
      double burst,
      double p,
      double r,
      double correlation,
      double gap,
      double varianceOf100,
      double share) {
    MarkovLoss chain = MarkovLoss.simple(lossRate, burst);
    assertEqual(chain.p(), p);
    assertEqual(chain.r(), r);
    assertEqual(chain.lossRate(), lossRate);
    assertEqual(chain.badShare(), lossRate);
    assertEqual(chain.lagCorrelation(1), correlation);
    assertEqual(chain.lagCorrelation(5), StrictMath.pow(correlation, 5));
    assertEqual(chain.meanLossRun(), burst);
    assertEqual(chain.meanGap(), gap);
    assertEqual(chain.varianceOfLosses(100), varianceOf100);
    assertEqual(chain.effectiveShare(), share);
  }

  /** Recomputed independently in Python by matrix products. */
  @Test
  void generalChainHasTheFiguresOfItsMatrixProducts() {
    assertEqual(ELLIOTT.badShare(), 0.07407407407);
    assertEqual(ELLIOTT.lossRate(), 0.04537037037);
    assertEqual(ELLIOTT.lagCovariance(1), 0.01796465912);
    assertEqual(ELLIOTT.lagCorrelation(1), 0.4147742117);
    assertEqual(ELLIOTT.lossGivenLoss(), 0.4413261224);
    assertEqual(ELLIOTT.meanLossRun(), 1.78995303);
  }

  /** The distribution of the number of losses by recursion over state and count. */
  @Test
  void varianceOfLossesIsThatOfTheExactDistribution() {
    for (MarkovLoss chain : new MarkovLoss[] {ELLIOTT, MarkovLoss.simple(0.1, 4)}) {
      for (int n : new int[] {1, 2, 7, 40}) {
        double[] distribution = lossDistribution(chain, n);
        double mean = 0;
        double square = 0;
        for (int losses = 0; losses <= n; losses++) {
          mean += losses * distribution[losses];
          square += (double) losses * losses * distribution[losses];
        }
        assertEqual(n * chain.lossRate(), mean);
        assertThat(chain.varianceOfLosses(n)).isCloseTo(square - mean * mean, within(1e-10));
      }
    }
  }

  private static double[] lossDistribution(MarkovLoss chain, int n) {
    double[] good = new double[n + 2];
    double[] bad = new double[n + 2];
    bad[0] = chain.badShare();
    good[0] = 1 - bad[0];
    for (int packet = 0; packet < n; packet++) {
      double[] nextGood = new double[n + 2];
      double[] nextBad = new double[n + 2];
      for (int losses = 0; losses <= packet + 1; losses++) {
        double g = good[losses] * chain.k();
        double b = bad[losses] * chain.h();
        if (losses > 0) {
          g += good[losses - 1] * (1 - chain.k());
          b += bad[losses - 1] * (1 - chain.h());
        }
        nextGood[losses] = g * (1 - chain.p()) + b * chain.r();
        nextBad[losses] = g * chain.p() + b * (1 - chain.r());
      }
      good = nextGood;
      bad = nextBad;
    }
    double[] sum = new double[n + 1];
    for (int losses = 0; losses <= n; losses++) {
      sum[losses] = good[losses] + bad[losses];
    }
    return sum;
  }

  /**
   * Loss 10 %, mean burst 4: the standard error of the loss ratio of 1e5 packets is 0.0023621667
   * (recomputed independently in Python), 2.49 times that of independent losses. The mean of the
   * runs has the standard error sqrt(1-r)/r/sqrt(runs). 5 standard errors: false-alarm rate 5.7e-7
   * each.
   */
  @Test
  void simulatedSimpleChainKeepsItsLossRateAndBurstLength() {
    int n = 100_000;
    MarkovLoss chain = MarkovLoss.simple(0.1, 4);
    assertEqual(Math.sqrt(chain.varianceOfLosses(n)) / n, 0.0023621667);
    Impairment.Losses losses = chain.losses(Measured.stream(41));
    int lost = 0;
    int runs = 0;
    for (int i = 0; i < n; i++) {
      if (losses.lost(i)) {
        lost++;
        runs += i == 0 || !losses.lost(i - 1) ? 1 : 0;
      }
    }
    assertThat((double) lost / n).isCloseTo(0.1, within(5 * 0.0023621667));
    assertThat((double) lost / runs)
        .isCloseTo(4, within(5 * Math.sqrt(0.75) / 0.25 / Math.sqrt(runs)));
  }

  /**
   * Loss ratio and share of pairs lost, over 400 independent realisations of 1000 packets each. 6
   * standard errors of Student's t with 399 degrees of freedom: false-alarm rate 4.4e-9 each.
   */
  @Test
  void simulatedGeneralChainKeepsItsFigures() {
    double[] ratios = new double[400];
    double[] pairs = new double[400];
    for (int run = 0; run < ratios.length; run++) {
      Impairment.Losses losses = ELLIOTT.losses(Measured.stream(5000 + run));
      ratios[run] = IntStream.range(0, 1000).filter(losses::lost).count() / 1000.0;
      pairs[run] =
          IntStream.range(0, 999).filter(i -> losses.lost(i) && losses.lost(i + 1)).count() / 999.0;
    }
    assertThat(Measured.of(ratios).errorsFrom(0.04537037037)).isBetween(-6.0, 6.0);
    assertThat(Measured.of(pairs).errorsFrom(0.4413261224 * 0.04537037037)).isBetween(-6.0, 6.0);
  }

  /**
   * Variance of the number of losses of 1000 packets, over 400 independent realisations: 5 standard
   * errors sqrt((m4 - v^2)/400) from the exact distribution's fourth moment m4 and variance v;
   * false-alarm rate 5.7e-7 where that many variances average to a normal, 1e-5 at worst.
   */
  @Test
  void simulatedLossesScatterAsTheBurstsSay() {
    double[] distribution = lossDistribution(ELLIOTT, 1000);
    double mean = 1000 * ELLIOTT.lossRate();
    double variance = ELLIOTT.varianceOfLosses(1000);
    double fourth = 0;
    for (int losses = 0; losses <= 1000; losses++) {
      fourth += distribution[losses] * StrictMath.pow(losses - mean, 4);
    }
    double[] squares = new double[400];
    for (int run = 0; run < squares.length; run++) {
      Impairment.Losses losses = ELLIOTT.losses(Measured.stream(7000 + run));
      double lost = IntStream.range(0, 1000).filter(losses::lost).count();
      squares[run] = (lost - mean) * (lost - mean);
    }
    double standardError = Math.sqrt((fourth - variance * variance) / squares.length);
    assertThat(Measured.of(squares).mean()).isCloseTo(variance, within(5 * standardError));
  }

  /**
   * The first packet meets the long-run share of the bad state: 20000 first packets of independent
   * realisations, binomial, 5 standard deviations (false-alarm rate 5.7e-7).
   */
  @Test
  void firstPacketIsDrawnFromTheLongRun() {
    MarkovLoss chain = MarkovLoss.simple(0.2, 50);
    long lost =
        IntStream.range(0, 20_000)
            .filter(i -> chain.losses(Measured.stream(90_000 + i)).lost(0))
            .count();
    assertThat(lost / 20_000.0).isCloseTo(0.2, within(5 * Math.sqrt(0.16 / 20_000)));
  }

  /**
   * Transition counts of a trace and the maximum-likelihood estimates n01/(n00+n01) and
   * n10/(n10+n11); an example of our own, recomputed independently in Python.
   */
  @Test
  void transitionsOfATraceGiveTheChain() {
    int[] trace = "00011000010011100000".chars().map(c -> c - '0').toArray();
    int[][] counts = new int[2][2];
    for (int i = 1; i < trace.length; i++) {
      counts[trace[i - 1]][trace[i]]++;
    }
    assertThat(counts).isDeepEqualTo(new int[][] {{10, 3}, {3, 3}});
    MarkovLoss fitted = new MarkovLoss(3 / 13.0, 3 / 6.0, 1, 0);
    assertEqual(fitted.p(), 0.2307692308);
    assertEqual(fitted.lossRate(), 0.3157894737);
    assertEqual(fitted.meanLossRun(), 2);
    assertEqual(Math.sqrt(fitted.p() * (1 - fitted.p()) / 13), 0.1168545424);
    assertEqual(Math.sqrt(fitted.r() * (1 - fitted.r()) / 6), 0.2041241452);
  }

  /** A chain made of a loss rate has that loss rate, up to both ends of the range. */
  @Test
  void solverMeetsTheLossRateItIsGiven() {
    for (double k : new double[] {1, 0.999, 0.8}) {
      for (double h : new double[] {0, 0.3}) {
        for (double burst : new double[] {1, 1.5, 4, 100}) {
          double least = 1 - k;
          double most = least + (k - h) * burst / (burst + 1);
          for (double part : new double[] {0, 0.1, 0.5, 1}) {
            MarkovLoss chain = MarkovLoss.of(least + part * (most - least), burst, k, h);
            assertThat(chain.lossRate()).isCloseTo(least + part * (most - least), within(1e-14));
            assertEqual(1 / chain.r(), burst);
          }
        }
      }
    }
  }

  @Test
  void lossRatesBeyondTheLimitAreRefusedWithTheLimit() {
    assertThatThrownBy(() -> MarkovLoss.simple(0.9, 4))
        .isInstanceOf(BadInput.class)
        .hasMessage(
            "loss-rate is 0.9; accepted with mean-burst 4.0, delivery-good 1.0 and delivery-bad 0.0: 0.0 to 0.8");
    assertThatThrownBy(() -> MarkovLoss.of(0.005, 4, 0.99, 0))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("loss-rate is 0.005");
    assertThatThrownBy(() -> MarkovLoss.simple(Double.NaN, 4)).isInstanceOf(BadInput.class);
    assertThatThrownBy(() -> MarkovLoss.simple(0.1, Math.nextDown(1.0)))
        .isInstanceOf(BadInput.class)
        .hasMessageStartingWith("mean-burst is 0.99");
    assertThatThrownBy(() -> MarkovLoss.simple(0.1, Double.NaN))
        .isInstanceOf(BadInput.class)
        .hasMessageStartingWith("mean-burst is NaN; accepted: 1.0 to ");
    assertThatThrownBy(() -> MarkovLoss.of(0.1, 4, 0.5, 0.5))
        .isInstanceOf(BadInput.class)
        .hasMessage("delivery-bad is 0.5; accepted: below delivery-good, which is 0.5");
  }

  @Test
  void probabilitiesOutsideTheirRangeAreRefused() {
    assertThatThrownBy(() -> new MarkovLoss(Math.nextUp(1.0), 0.5, 1, 0))
        .isInstanceOf(IllegalArgumentException.class)
        .hasMessageStartingWith("p (probability) is 1.0000000000000002");
    assertThatThrownBy(() -> new MarkovLoss(0, 0, 1, 0))
        .isInstanceOf(IllegalArgumentException.class);
    assertThatThrownBy(() -> new MarkovLoss(0.1, 0.5, Double.NaN, 0))
        .isInstanceOf(IllegalArgumentException.class);
    assertThatThrownBy(() -> MarkovLoss.simple(0.1, 4).losses(Measured.stream(1)).lost(-1))
        .isInstanceOf(IllegalArgumentException.class)
        .hasMessageStartingWith("packet index is -1");
  }

  @Test
  void nothingIsLostAtLossRateZero() {
    MarkovLoss chain = MarkovLoss.simple(0, 4);
    Impairment.Losses losses = chain.losses(Measured.stream(3));
    assertThat(IntStream.range(0, 10_000).filter(losses::lost).count()).isZero();
    assertThat(chain.lagCorrelation(1)).isZero();
    assertThat(chain.effectiveShare()).isEqualTo(1);
    assertThat(chain.lossGivenLoss()).isNaN();
    assertThat(chain.varianceOfLosses(100)).isZero();
  }
}
