package linkworthy.noise.fit;

import java.util.List;
import linkworthy.noise.MarkovLoss;
import org.apache.commons.statistics.distribution.ChiSquaredDistribution;

/**
 * Whether the runs of a trace have the lengths that a fitted chain gives them: Pearson's chi-square
 * over classes of neighbouring lengths, each with at least 5 expected runs, for runs of losses and
 * runs of deliveries together. Runs cut by the ends of the trace are left out. As the chain was
 * fitted to the packets and not to the classes, the degrees of freedom counted here are the lower
 * of two bounds (Chernoff and Lehmann 1954, quoted from memory), so that the p value is if anything
 * too small.
 *
 * @param statistic chi-square
 * @param degreesOfFreedom classes less one for each kind of run, less the parameters fitted; below
 *     1 where there are too few runs for a test
 */
public record RunLengths(double statistic, int degreesOfFreedom) {
  private static final double LEAST_EXPECTED = 5;
  private static final int LONGEST = 10_000_000;

  /** Compares a trace with a chain fitted to it. */
  static RunLengths of(LossTrace trace, ChainEstimate estimate) {
    Tally tally = new Tally();
    MarkovLoss chain = estimate.chain();
    double stay = (1 - chain.r()) * (1 - chain.h());
    List<Integer> losses = trace.runs(true, true);
    tally.add(losses, new Geometric(stay));
    tally.add(trace.runs(false, true), new AfterLoss(chain, 1 - stay));
    return new RunLengths(tally.statistic, tally.degreesOfFreedom - estimate.parameters());
  }

  /** Whether there were runs enough for a test. */
  public boolean tested() {
    return degreesOfFreedom > 0;
  }

  /** Chance of a chi-square at least as large if the chain were true; NaN without a test. */
  public double pValue() {
    return tested()
        ? ChiSquaredDistribution.of(degreesOfFreedom).survivalProbability(statistic)
        : Double.NaN;
  }

  /** Probabilities of the lengths 1, 2, ... in turn. */
  private interface Lengths {
    double next();
  }

  private static final class Geometric implements Lengths {
    private final double stay;
    private double left = 1;

    Geometric(double stay) {
      this.stay = stay;
    }

    @Override
    public double next() {
      double here = left * (1 - stay);
      left *= stay;
      return here;
    }
  }

  /** Gaps of at least one packet behind a loss. */
  private static final class AfterLoss implements Lengths {
    private final MarkovLoss chain;
    private final double share;
    private double good;
    private double bad;

    AfterLoss(MarkovLoss chain, double share) {
      this.chain = chain;
      this.share = share;
      this.good = chain.r();
      this.bad = 1 - chain.r();
    }

    @Override
    public double next() {
      double stillBad = bad * chain.h();
      double nextGood = good * (1 - chain.p()) + stillBad * chain.r();
      bad = good * chain.p() + stillBad * (1 - chain.r());
      good = nextGood;
      return bad * (1 - chain.h()) / share;
    }
  }

  private static final class Tally {
    private double statistic;
    private int degreesOfFreedom;

    void add(List<Integer> runs, Lengths lengths) {
      int longest = runs.stream().mapToInt(Integer::intValue).max().orElse(0);
      int[] counts = new int[longest + 2];
      runs.forEach(length -> counts[length]++);
      double expectedLeft = runs.size();
      int observedLeft = runs.size();
      double expected = 0;
      int observed = 0;
      int classes = 0;
      for (int length = 1; expectedLeft >= LEAST_EXPECTED && length < LONGEST; length++) {
        double here = runs.size() * lengths.next();
        int seen = length <= longest ? counts[length] : 0;
        expected += here;
        observed += seen;
        expectedLeft -= here;
        observedLeft -= seen;
        if (expected >= LEAST_EXPECTED && expectedLeft >= LEAST_EXPECTED) {
          close(expected, observed);
          classes++;
          expected = 0;
          observed = 0;
        }
      }
      if (classes > 0) {
        close(expected + expectedLeft, observed + observedLeft);
        degreesOfFreedom += classes;
      }
    }

    private void close(double expected, double observed) {
      statistic += (observed - expected) * (observed - expected) / expected;
    }
  }
}
