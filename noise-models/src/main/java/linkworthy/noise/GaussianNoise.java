package linkworthy.noise;

import java.util.List;
import java.util.Map;
import java.util.Set;
import linkworthy.corpus.Picture;
import linkworthy.input.BadInput;
import linkworthy.input.Key;
import org.apache.commons.rng.UniformRandomProvider;

/**
 * Additive white Gaussian noise of a sensor: each sample x becomes floor(x + s n + 0.5), n from
 * N(0, 1), clipped to 0..P. The equivalent noise variance is s^2; the mean squared error measured
 * is s^2 + 1/12 from rounding (Sheppard's correction, s at least 1) where no sample is clipped, and
 * less near black and white.
 *
 * <p>Variance 0 leaves the picture as it is. An SNR on a picture without signal power is refused
 * with a {@link BadInput}.
 */
public final class GaussianNoise implements NoiseProcess {
  private static final Set<String> AXES =
      SeverityChecks.inOrder(Severity.SNR_DB, Severity.VARIANCE);

  @Override
  public String id() {
    return "gaussian";
  }

  @Override
  public int revision() {
    return 1;
  }

  @Override
  public String summary() {
    return "additive Gaussian noise, rounded and clipped as a sensor does;"
        + " equivalent variance s^2";
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
    return List.of();
  }

  @Override
  public Set<String> axes() {
    return AXES;
  }

  @Override
  public void check(Severity severity, Map<String, Double> parameters, Site site) {
    SeverityChecks.common(this, severity, parameters, site);
  }

  @Override
  public Impairment at(
      Severity severity, Map<String, Double> parameters, Site site, SignalStatistics signal) {
    check(severity, parameters, site);
    return new Additive(SeverityChecks.noiseVariance(severity, signal));
  }

  private record Additive(double equivalentNoiseVariance) implements Impairment.OnSamples {
    @Override
    public Picture apply(Picture clean, UniformRandomProvider random) {
      double deviation = Math.sqrt(equivalentNoiseVariance);
      int[] samples = clean.samples();
      int[] noisy = new int[samples.length];
      for (int i = 0; i < noisy.length; i++) {
        noisy[i] = Levels.of(samples[i] + deviation * GaussianDraws.next(random), clean.peak());
      }
      return new Picture(clean.width(), clean.height(), clean.bitDepth(), noisy);
    }
  }
}
