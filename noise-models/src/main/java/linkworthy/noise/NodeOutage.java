package linkworthy.noise;

import linkworthy.input.BadInput;
import org.apache.commons.rng.UniformRandomProvider;

/**
 * Nodes that fail, each with the same probability and alone: all packets of a node that failed are
 * lost. A codec over tiles loses the tiles of those nodes; any other codec is the work of one node.
 *
 * <p>With outage rate q and picture variance V the equivalent noise variance is q V (grey levels
 * squared), the mean being shown where a tile is missing; so an SNR asks for q = S / (10^(SNR/10)
 * V), which is 10^(-SNR/10) where the signal power S is the variance. A rate outside 0 to 1, given
 * or asked for, is refused with a {@link BadInput}.
 */
public final class NodeOutage extends ShareOfHits {
  /** Probability that a node fails, 0 to 1. */
  public static final String OUTAGE_RATE = "outage-rate";

  public NodeOutage() {
    super(OUTAGE_RATE, "share of nodes that fail", Site.PACKETS);
  }

  @Override
  public String id() {
    return "node-outage";
  }

  @Override
  public String summary() {
    return "all packets of a node lost, each node with the same probability q;"
        + " equivalent variance q V for picture variance V";
  }

  @Override
  double perHit(SignalStatistics signal) {
    return signal.variance();
  }

  @Override
  Impairment hitting(double share, double equivalentNoiseVariance) {
    return new Outages(equivalentNoiseVariance, share);
  }

  private record Outages(double equivalentNoiseVariance, double rate)
      implements Impairment.OnNodes {
    @Override
    public Losses failures(UniformRandomProvider random) {
      return new MarkovLoss(rate, 1 - rate, 1, 0).losses(random);
    }
  }
}
