package linkworthy.noise;

import java.util.Collections;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.TreeMap;
import linkworthy.corpus.Picture;
import linkworthy.input.BadInput;
import linkworthy.input.Key;
import org.apache.commons.rng.UniformRandomProvider;

/**
 * Losses in bursts, of packets or of samples in raster order, by the chain of {@link MarkovLoss}.
 * Lost samples show the picture mean, rounded half up. With loss rate q and picture variance V the
 * equivalent noise variance is q V (grey levels squared; the rounding of the mean, at most q/4, is
 * left out), so an SNR asks for q = S / (10^(SNR/10) V), which is 10^(-SNR/10) where the signal
 * power S is the variance.
 *
 * <p>Parameters: {@code mean-burst}, the mean stay in the bad state, in packets or samples (default
 * 4, at least 1); {@code delivery-good} k (default 1) and {@code delivery-bad} h (default 0, below
 * k). A loss rate outside the limits of {@link MarkovLoss#of}, given or asked for by an SNR or a
 * variance, is refused with a {@link BadInput}.
 */
public final class BurstLoss implements NoiseProcess {
  /** Share of packets or samples lost, 0 to 1. */
  public static final String LOSS_RATE = "loss-rate";

  /** Mean stay in the bad state, in packets or samples. */
  public static final String MEAN_BURST = "mean-burst";

  /** Probability of delivery in the good state. */
  public static final String DELIVERY_GOOD = "delivery-good";

  /** Probability of delivery in the bad state. */
  public static final String DELIVERY_BAD = "delivery-bad";

  private static final Set<String> AXES =
      SeverityChecks.inOrder(Severity.SNR_DB, Severity.VARIANCE, LOSS_RATE);

  private static final Map<String, Double> PARAMETERS =
      Collections.unmodifiableMap(
          new TreeMap<>(Map.of(MEAN_BURST, 4.0, DELIVERY_GOOD, 1.0, DELIVERY_BAD, 0.0)));

  @Override
  public String id() {
    return "burst-loss";
  }

  @Override
  public int revision() {
    return 1;
  }

  @Override
  public String summary() {
    return "packets or runs of samples lost in bursts (Gilbert-Elliott);"
        + " equivalent variance q V for loss rate q and picture variance V";
  }

  @Override
  public List<Site> sites() {
    return List.of(Site.PACKETS, Site.SAMPLES);
  }

  @Override
  public Map<String, Double> parameters() {
    return PARAMETERS;
  }

  @Override
  public List<Key> keys() {
    return List.of(
        SeverityChecks.parameter(
            MEAN_BURST,
            1,
            MarkovLoss.MAX_MEAN_BURST,
            "mean stay in the bad state, packets or samples"),
        SeverityChecks.parameter(
            DELIVERY_GOOD, 0, 1, "chance of delivery in the good state, above delivery-bad"),
        SeverityChecks.parameter(
            DELIVERY_BAD, 0, 1, "chance of delivery in the bad state, below delivery-good"),
        SeverityChecks.axis(LOSS_RATE, 0, 1, "share lost; up to what the burst allows"));
  }

  @Override
  public Set<String> axes() {
    return AXES;
  }

  @Override
  public void check(Severity severity, Map<String, Double> parameters, Site site) {
    SeverityChecks.common(this, severity, parameters, site);
    MarkovLoss.checkParameters(
        SeverityChecks.parameter(this, parameters, MEAN_BURST),
        SeverityChecks.parameter(this, parameters, DELIVERY_GOOD),
        SeverityChecks.parameter(this, parameters, DELIVERY_BAD));
    if (severity.axis().equals(LOSS_RATE)) {
      SeverityChecks.inRange(severity.value(), 0, 1, LOSS_RATE);
      chain(severity.value(), parameters);
    }
  }

  @Override
  public Impairment at(
      Severity severity, Map<String, Double> parameters, Site site, SignalStatistics signal) {
    check(severity, parameters, site);
    double lossRate = lossRate(severity, signal);
    MarkovLoss chain;
    try {
      chain = chain(lossRate, parameters);
    } catch (BadInput e) {
      throw new BadInput(
          "burst-loss at %s %s on this picture: %s"
              .formatted(severity.axis(), severity.value(), e.getMessage()),
          e);
    }
    double variance =
        severity.axis().equals(LOSS_RATE)
            ? lossRate * signal.variance()
            : SeverityChecks.noiseVariance(severity, signal);
    return site == Site.PACKETS ? new PacketLoss(variance, chain) : new SampleLoss(variance, chain);
  }

  private static double lossRate(Severity severity, SignalStatistics signal) {
    if (severity.axis().equals(LOSS_RATE)) {
      return severity.value();
    }
    double variance = SeverityChecks.noiseVariance(severity, signal);
    if (variance > 0 && signal.variance() == 0) {
      throw new BadInput(
          "burst-loss at %s %s cannot be set: the picture's variance is 0 grey levels squared, so no loss changes it; accepted: a picture with variance above 0, or loss-rate"
              .formatted(severity.axis(), severity.value()));
    }
    return variance == 0 ? 0 : variance / signal.variance();
  }

  private MarkovLoss chain(double lossRate, Map<String, Double> parameters) {
    return MarkovLoss.of(
        lossRate,
        SeverityChecks.parameter(this, parameters, MEAN_BURST),
        SeverityChecks.parameter(this, parameters, DELIVERY_GOOD),
        SeverityChecks.parameter(this, parameters, DELIVERY_BAD));
  }

  private record PacketLoss(double equivalentNoiseVariance, MarkovLoss chain)
      implements Impairment.OnPackets {
    @Override
    public Losses losses(UniformRandomProvider random) {
      return chain.losses(random);
    }
  }

  private record SampleLoss(double equivalentNoiseVariance, MarkovLoss chain)
      implements Impairment.OnSamples {
    @Override
    public Picture apply(Picture clean, UniformRandomProvider random) {
      Impairment.Losses losses = chain.losses(random);
      int fill = (int) Math.floor(clean.mean() + 0.5);
      int[] shown = clean.samples().clone();
      for (int i = 0; i < shown.length; i++) {
        if (losses.lost(i)) {
          shown[i] = fill;
        }
      }
      return new Picture(clean.width(), clean.height(), clean.bitDepth(), shown);
    }
  }
}
