package linkworthy.noise;

import java.util.BitSet;
import linkworthy.input.BadInput;
import linkworthy.input.Require;
import org.apache.commons.rng.UniformRandomProvider;

/**
 * Losses driven by a two-state Markov chain (Gilbert 1960, "Capacity of a burst-noise channel";
 * Elliott 1963, "Estimates of error rates for codes on burst-noise channels"). The simple Gilbert
 * chain delivers everything in the good state (k = 1) and nothing in the bad one (h = 0).
 *
 * <p>Where nothing or everything is lost, correlations are 0 and conditional figures of losses that
 * do not happen are NaN.
 *
 * @param p probability of going from good to bad, per packet
 * @param r probability of going from bad to good, per packet; p and r are not both 0
 * @param k probability of delivery in the good state
 * @param h probability of delivery in the bad state
 */
public record MarkovLoss(double p, double r, double k, double h) {
  static final double MAX_MEAN_BURST = 1e9;

  /** Room for the rounding of a limit that was itself computed. */
  private static final double ROUNDING = 1e-12;

  /**
   * @throws IllegalArgumentException if a probability lies outside 0 to 1, or p and r are both 0
   */
  public MarkovLoss {
    Require.inRange(p, 0, 1, "p (probability)");
    Require.inRange(r, 0, 1, "r (probability)");
    Require.inRange(k, 0, 1, "k (probability)");
    Require.inRange(h, 0, 1, "h (probability)");
    Require.positive(p + r, "p + r");
  }

  /**
   * The simple Gilbert chain: r = 1/L and p = r q/(1-q).
   *
   * @param lossRate q, 0 to L/(L+1)
   * @param meanBurst mean run of losses L, in packets, at least 1
   * @throws BadInput as {@link #of}
   */
  public static MarkovLoss simple(double lossRate, double meanBurst) {
    return of(lossRate, meanBurst, 1, 0);
  }

  /**
   * The chain with a given loss rate: r = 1/L; the share of the bad state B solves q = (1-k)(1-B) +
   * (1-h)B; p = r B/(1-B), which must not exceed 1, so B is at most L/(L+1).
   *
   * @param lossRate q, from 1-k to (1-k) + (k-h) L/(L+1)
   * @param meanBurst mean stay in the bad state L, in packets, 1 to 1e9
   * @param k probability of delivery in the good state
   * @param h probability of delivery in the bad state, below k
   * @throws BadInput if a value lies outside its range; one line that names the values and the
   *     limits
   */
  public static MarkovLoss of(double lossRate, double meanBurst, double k, double h) {
    checkParameters(meanBurst, k, h);
    double least = 1 - k;
    double limit = meanBurst / (meanBurst + 1);
    double share = (lossRate - least) / (k - h);
    if (!(share >= -ROUNDING && share <= limit + ROUNDING)) {
      throw new BadInput(
          "loss-rate is %s; accepted with mean-burst %s, delivery-good %s and delivery-bad %s: %s to %s"
              .formatted(lossRate, meanBurst, k, h, least, least + (k - h) * limit));
    }
    share = Math.max(0, Math.min(limit, share));
    double r = 1 / meanBurst;
    return new MarkovLoss(Math.min(1, r * share / (1 - share)), r, k, h);
  }

  /**
   * Checks the parameters that do not depend on a loss rate.
   *
   * @throws BadInput if one lies outside its range
   */
  static void checkParameters(double meanBurst, double k, double h) {
    SeverityChecks.inRange(meanBurst, 1, MAX_MEAN_BURST, "mean-burst");
    SeverityChecks.inRange(k, 0, 1, "delivery-good");
    SeverityChecks.inRange(h, 0, 1, "delivery-bad");
    if (h >= k) {
      throw new BadInput(
          "delivery-bad is %s; accepted: below delivery-good, which is %s".formatted(h, k));
    }
  }

  /** Long-run share of packets in the bad state, p/(p+r). */
  public double badShare() {
    return p / (p + r);
  }

  /** Long-run share of packets lost, q = (1-k) r/(p+r) + (1-h) p/(p+r). */
  public double lossRate() {
    return ((1 - k) * r + (1 - h) * p) / (p + r);
  }

  /** Correlation of the states of neighbouring packets, g = 1-p-r. */
  public double memory() {
    return 1 - p - r;
  }

  /** Autocovariance of the losses of packets {@code lag} apart, (k-h)^2 B (1-B) g^lag. */
  public double lagCovariance(int lag) {
    Require.inRange(lag, 0, Integer.MAX_VALUE, "lag (packets)");
    return lag == 0 ? lossVariance() : stateCovariance() * StrictMath.pow(memory(), lag);
  }

  /** Correlation of the losses of packets {@code lag} apart; 1 at lag 0. */
  public double lagCorrelation(int lag) {
    if (lag == 0) {
      return 1;
    }
    return lossVariance() == 0 ? 0 : lagCovariance(lag) / lossVariance();
  }

  /** Probability that the packet after a lost one is lost too. */
  public double lossGivenLoss() {
    double q = lossRate();
    return (q * q + lagCovariance(1)) / q;
  }

  /** Mean number of packets lost in a row. */
  public double meanLossRun() {
    return 1 / (1 - lossGivenLoss());
  }

  /** Mean number of packets delivered between losses. */
  public double meanGap() {
    double q = lossRate();
    return (1 - q) / (q * (1 - lossGivenLoss()));
  }

  /**
   * Variance of the number of losses among n packets: n q(1-q) + 2 c [n g/(1-g) - g(1-g^n)/(1-g)^2]
   * with c = (k-h)^2 B (1-B), the sum of the autocovariances.
   */
  public double varianceOfLosses(int n) {
    Require.inRange(n, 1, Integer.MAX_VALUE, "packets");
    double g = memory();
    double tail = g * (1 - StrictMath.pow(g, n)) / ((p + r) * (p + r));
    return n * lossVariance() + 2 * stateCovariance() * (n * g / (p + r) - tail);
  }

  /**
   * How many independent packets tell as much of the loss rate as one packet here, in the long run;
   * (1-g)/(1+g) for the simple chain.
   */
  public double effectiveShare() {
    double v = lossVariance();
    return v == 0 ? 1 : v / (v + 2 * stateCovariance() * memory() / (p + r));
  }

  /**
   * Opens one realisation. The first state is drawn from the long-run shares. Packets are drawn one
   * after the other as far as they are asked for, two uniform draws each (its loss; the next
   * state), so the fate of packet i depends on the stream alone.
   */
  public Impairment.Losses losses(UniformRandomProvider random) {
    return new Realisation(this, random);
  }

  private double lossVariance() {
    double q = lossRate();
    return q * (1 - q);
  }

  private double stateCovariance() {
    return (k - h) * (k - h) * badShare() * (1 - badShare());
  }

  private static final class Realisation implements Impairment.Losses {
    private final MarkovLoss chain;
    private final UniformRandomProvider random;
    private final BitSet lost = new BitSet();
    private int drawn;
    private boolean bad;

    Realisation(MarkovLoss chain, UniformRandomProvider random) {
      this.chain = chain;
      this.random = random;
      this.bad = random.nextDouble() < chain.badShare();
    }

    @Override
    public boolean lost(int index) {
      Require.inRange(index, 0, Integer.MAX_VALUE - 1, "packet index");
      while (drawn <= index) {
        lost.set(drawn++, random.nextDouble() >= (bad ? chain.h : chain.k));
        double change = random.nextDouble();
        bad = bad ? change >= chain.r : change < chain.p;
      }
      return lost.get(index);
    }
  }
}
