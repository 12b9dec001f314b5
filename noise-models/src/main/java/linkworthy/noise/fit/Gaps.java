package linkworthy.noise.fit;

import java.util.Map;
import java.util.TreeMap;
import linkworthy.noise.MarkovLoss;

/**
 * What the likelihood of Gilbert's chain needs of a trace. Nothing is lost in the good state (k =
 * 1), so each loss shows the bad state and the chain begins anew there: the forward algorithm has
 * to be run over each length of gap once, not over each packet.
 *
 * @param lead packets delivered before the first loss
 * @param between how many gaps of each length stand between neighbouring losses, 0 included
 * @param tail packets delivered after the last loss
 */
record Gaps(int lead, Map<Integer, Integer> between, int tail) {
  private static final double SCALE_BELOW = 1e-200;

  /** The gaps of a trace that has a loss. */
  static Gaps of(LossTrace trace) {
    int lead = -1;
    int last = -1;
    Map<Integer, Integer> between = new TreeMap<>();
    for (int i = 0; i < trace.packets(); i++) {
      if (trace.lost(i)) {
        if (lead < 0) {
          lead = i;
        } else {
          between.merge(i - last - 1, 1, Integer::sum);
        }
        last = i;
      }
    }
    return new Gaps(lead, between, trace.packets() - 1 - last);
  }

  /**
   * Natural logarithm of the probability of the trace given its first fate, for a chain with k = 1;
   * minus infinity where the chain cannot give the trace. With h = 0 it is n01 ln p + n00 ln(1-p) +
   * n10 ln r + n11 ln(1-r).
   */
  double logLikelihood(MarkovLoss chain) {
    double q = chain.lossRate();
    Forward start = new Forward(chain, 1 - chain.badShare(), chain.badShare());
    start.deliver(lead);
    double sum = start.logLoss() - StrictMath.log(lead == 0 ? q : 1 - q);
    Forward afterLoss = new Forward(chain, chain.r(), 1 - chain.r());
    for (Map.Entry<Integer, Integer> gap : between.entrySet()) {
      afterLoss.deliver(gap.getKey() - afterLoss.delivered);
      sum += gap.getValue() * afterLoss.logLoss();
    }
    Forward end = new Forward(chain, chain.r(), 1 - chain.r());
    end.deliver(tail);
    double logLikelihood = sum + end.logTotal();
    return Double.isNaN(logLikelihood) ? Double.NEGATIVE_INFINITY : logLikelihood;
  }

  /** Joint probability of the state and of the deliveries so far, with a common factor apart. */
  private static final class Forward {
    private final MarkovLoss chain;
    private double good;
    private double bad;
    private double logScale;
    private int delivered;

    Forward(MarkovLoss chain, double good, double bad) {
      this.chain = chain;
      this.good = good;
      this.bad = bad;
    }

    void deliver(int packets) {
      double p = chain.p();
      double r = chain.r();
      double h = chain.h();
      for (int i = 0; i < packets; i++) {
        double stillBad = bad * h;
        double next = good * (1 - p) + stillBad * r;
        bad = good * p + stillBad * (1 - r);
        good = next;
        if (good + bad < SCALE_BELOW && good + bad > 0) {
          logScale += StrictMath.log(good + bad);
          double total = good + bad;
          good /= total;
          bad /= total;
        }
      }
      delivered += packets;
    }

    double logLoss() {
      return logScale + StrictMath.log(bad * (1 - chain.h()));
    }

    double logTotal() {
      return logScale + StrictMath.log(good + bad);
    }
  }
}
