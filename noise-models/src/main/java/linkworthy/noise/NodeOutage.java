package linkworthy.noise;

import java.util.List;
import java.util.Map;
import java.util.Set;
import linkworthy.input.BadInput;
import linkworthy.input.Key;
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
public final class NodeOutage implements NoiseProcess {
  /** Probability that a node fails, 0 to 1. */
  public static final String OUTAGE_RATE = "outage-rate";

  private static final Set<String> AXES =
      SeverityChecks.inOrder(Severity.SNR_DB, Severity.VARIANCE, OUTAGE_RATE);

  @Override
  public String id() {
    return "node-outage";
  }

  @Override
  public int revision() {
    return 1;
  }

  @Override
  public String summary() {
    return "all packets of a node lost, each node with the same probability q;"
        + " equivalent variance q V for picture variance V";
  }

  @Override
  public List<Site> sites() {
    return List.of(Site.PACKETS);
  }

  @Override
  public Map<String, Double> parameters() {
    return Map.of();
  }

  @Override
  public List<Key> keys() {
    return List.of(SeverityChecks.axis(OUTAGE_RATE, 0, 1, "share of nodes that fail"));
  }

  @Override
  public Set<String> axes() {
    return AXES;
  }

  @Override
  public void check(Severity severity, Map<String, Double> parameters, Site site) {
    SeverityChecks.common(this, severity, parameters, site);
    if (severity.axis().equals(OUTAGE_RATE)) {
      SeverityChecks.inRange(severity.value(), 0, 1, OUTAGE_RATE);
    }
  }

  @Override
  public Impairment at(
      Severity severity, Map<String, Double> parameters, Site site, SignalStatistics signal) {
    check(severity, parameters, site);
    if (severity.axis().equals(OUTAGE_RATE)) {
      return new Outages(severity.value() * signal.variance(), severity.value());
    }
    double variance = SeverityChecks.noiseVariance(severity, signal);
    double rate = variance == 0 ? 0 : variance / signal.variance();
    if (!(rate <= 1)) {
      throw new BadInput(
          "node-outage at %s %s needs an outage rate of %s on this picture; accepted: 0 to 1"
              .formatted(severity.axis(), severity.value(), rate));
    }
    return new Outages(variance, rate);
  }

  private record Outages(double equivalentNoiseVariance, double rate)
      implements Impairment.OnNodes {
    @Override
    public Losses failures(UniformRandomProvider random) {
      return new MarkovLoss(rate, 1 - rate, 1, 0).losses(random);
    }
  }
}
