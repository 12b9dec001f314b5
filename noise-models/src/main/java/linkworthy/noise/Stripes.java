package linkworthy.noise;

import java.util.List;
import java.util.Map;
import java.util.Set;
import linkworthy.corpus.Picture;
import linkworthy.input.Key;
import linkworthy.input.Kind;
import org.apache.commons.rng.UniformRandomProvider;

/**
 * Fixed-pattern noise of a sensor's row or column amplifiers: all samples of a row (or of a column,
 * where {@code columns} is on) are shifted by the same s n, n from N(0, 1), then rounded half up
 * and clipped to 0..P. The equivalent noise variance is s^2; the mean squared error measured is s^2
 * + 1/12 from rounding (s at least 1) where no sample is clipped.
 *
 * <p>Variance 0 leaves the picture as it is.
 */
public final class Stripes implements NoiseProcess {
  /** Whether columns are shifted instead of rows. */
  public static final String COLUMNS = "columns";

  private static final Set<String> AXES =
      SeverityChecks.inOrder(Severity.SNR_DB, Severity.VARIANCE);

  private static final Map<String, Double> PARAMETERS = Map.of(COLUMNS, 0.0);

  @Override
  public String id() {
    return "stripes";
  }

  @Override
  public int revision() {
    return 1;
  }

  @Override
  public String summary() {
    return "rows, or columns, each shifted as a whole by a Gaussian offset; equivalent variance s^2"
        + " for offsets of standard deviation s";
  }

  @Override
  public List<Site> sites() {
    return List.of(Site.SAMPLES);
  }

  @Override
  public Map<String, Double> parameters() {
    return PARAMETERS;
  }

  @Override
  public Set<String> flags() {
    return Set.of(COLUMNS);
  }

  @Override
  public List<Key> keys() {
    return List.of(
        Key.optional(
            COLUMNS, new Kind.Flag(), "the model's", "whether columns are shifted, not rows"));
  }

  @Override
  public Set<String> axes() {
    return AXES;
  }

  @Override
  public void check(Severity severity, Map<String, Double> parameters, Site site) {
    SeverityChecks.common(this, severity, parameters, site);
    SeverityChecks.flag(this, parameters, COLUMNS);
  }

  @Override
  public Impairment at(
      Severity severity, Map<String, Double> parameters, Site site, SignalStatistics signal) {
    check(severity, parameters, site);
    return new Offsets(
        SeverityChecks.noiseVariance(severity, signal),
        SeverityChecks.flag(this, parameters, COLUMNS));
  }

  private record Offsets(double equivalentNoiseVariance, boolean columns)
      implements Impairment.OnSamples {
    @Override
    public Picture apply(Picture clean, UniformRandomProvider random) {
      double deviation = Math.sqrt(equivalentNoiseVariance);
      double[] offsets = new double[columns ? clean.width() : clean.height()];
      for (int i = 0; i < offsets.length; i++) {
        offsets[i] = deviation * GaussianDraws.next(random);
      }
      int[] noisy = clean.samples().clone();
      for (int i = 0; i < noisy.length; i++) {
        double offset = offsets[columns ? i % clean.width() : i / clean.width()];
        noisy[i] = Levels.of(noisy[i] + offset, clean.peak());
      }
      return new Picture(clean.width(), clean.height(), clean.bitDepth(), noisy);
    }
  }
}
