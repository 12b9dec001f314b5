package linkworthy.noise;

import java.util.List;
import java.util.Map;
import java.util.Set;
import linkworthy.corpus.Picture;
import linkworthy.input.BadInput;
import linkworthy.input.Key;
import org.apache.commons.rng.UniformRandomProvider;

/**
 * Samples stuck at a level of their own: each sample, independently of the others, is replaced with
 * probability d by a level drawn uniformly from 0..P, which may be the right one by chance. The
 * equivalent noise variance is d (P(2P+1)/6 - P E[x] + E[x^2]), in grey levels squared.
 *
 * <p>Density 0 leaves the picture as it is, density 1 leaves nothing of it. An SNR or a variance
 * that would need a density above 1 is refused with a {@link BadInput}.
 */
public final class StuckPixels implements NoiseProcess {
  /** Share of samples stuck, 0 to 1. */
  public static final String DENSITY = "density";

  private static final Set<String> AXES =
      SeverityChecks.inOrder(Severity.SNR_DB, Severity.VARIANCE, DENSITY);

  @Override
  public String id() {
    return "stuck-pixels";
  }

  @Override
  public int revision() {
    return 1;
  }

  @Override
  public String summary() {
    return "a share d of the samples stuck at random levels;"
        + " equivalent variance d (P(2P+1)/6 - P E[x] + E[x^2])";
  }

  @Override
  public List<Site> sites() {
    return List.of(Site.SAMPLES);
  }

  @Override
  public Map<String, Double> parameters() {
    return Map.of();
  }

  @Override
  public List<Key> keys() {
    return List.of(SeverityChecks.axis(DENSITY, 0, 1, "share of samples"));
  }

  @Override
  public Set<String> axes() {
    return AXES;
  }

  @Override
  public void check(Severity severity, Map<String, Double> parameters, Site site) {
    SeverityChecks.common(this, severity, parameters, site);
    if (severity.axis().equals(DENSITY)) {
      SeverityChecks.inRange(severity.value(), 0, 1, DENSITY);
    }
  }

  @Override
  public Impairment at(
      Severity severity, Map<String, Double> parameters, Site site, SignalStatistics signal) {
    check(severity, parameters, site);
    double peak = signal.peak();
    double perHit = peak * (2 * peak + 1) / 6 - peak * signal.mean() + signal.meanSquare();
    if (severity.axis().equals(DENSITY)) {
      return new Stuck(severity.value() * perHit, severity.value());
    }
    double variance = SeverityChecks.noiseVariance(severity, signal);
    double density = variance / perHit;
    if (!(density <= 1)) {
      throw new BadInput(
          "stuck-pixels at %s %s needs a density of %s on this picture; accepted: a noise variance of 0.0 to %s grey levels squared (density 1)"
              .formatted(severity.axis(), severity.value(), density, perHit));
    }
    return new Stuck(variance, density);
  }

  private record Stuck(double equivalentNoiseVariance, double density)
      implements Impairment.OnSamples {
    @Override
    public Picture apply(Picture clean, UniformRandomProvider random) {
      int[] noisy = clean.samples().clone();
      for (int i = 0; i < noisy.length; i++) {
        if (random.nextDouble() < density) {
          noisy[i] = random.nextInt(clean.peak() + 1);
        }
      }
      return new Picture(clean.width(), clean.height(), clean.bitDepth(), noisy);
    }
  }
}
