package linkworthy.noise;

import java.util.List;
import java.util.Map;
import java.util.Set;
import linkworthy.corpus.Picture;
import linkworthy.input.BadInput;
import linkworthy.input.Key;
import org.apache.commons.rng.UniformRandomProvider;

/**
 * Photon noise and read noise of a sensor (Poisson-Gaussian; Foi, Trimeche, Katkovnik and
 * Egiazarian 2008, "Practical Poissonian-Gaussian noise modeling and fitting for single-image
 * raw-data"): a sample x becomes g N + r n, N drawn from the Poisson distribution of mean x/g and n
 * from N(0, 1), rounded half up and clipped to 0..P. Its mean stays x and its variance is g x +
 * r^2, so bright samples are noisier. The equivalent noise variance is g E[x] + r^2; the mean
 * squared error measured is that plus 1/12 from rounding (where the noise deviates by 1 or more)
 * and less near white.
 *
 * <p>Gain 0 leaves the read noise alone. Parameter {@code read-noise}: r, in grey levels (default
 * 0, at most 65535). An SNR or a variance below what the read noise alone causes is refused with a
 * {@link BadInput}, as is one above it on a black picture.
 */
public final class ShotNoise implements NoiseProcess {
  /** Grey levels for each photon counted, 0 to 65535. */
  public static final String GAIN = "gain";

  /** Standard deviation of the noise that does not depend on the light, in grey levels. */
  public static final String READ_NOISE = "read-noise";

  private static final double MAX_LEVELS = 65_535;

  private static final Set<String> AXES =
      SeverityChecks.inOrder(Severity.SNR_DB, Severity.VARIANCE, GAIN);

  private static final Map<String, Double> PARAMETERS = Map.of(READ_NOISE, 0.0);

  @Override
  public String id() {
    return "shot-noise";
  }

  @Override
  public int revision() {
    return 1;
  }

  @Override
  public String summary() {
    return "photon and read noise of a sensor (Poisson-Gaussian), stronger where it is brighter;"
        + " equivalent variance g E[x] + r^2 for gain g and read noise r";
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
  public List<Key> keys() {
    return List.of(
        SeverityChecks.parameter(
            READ_NOISE, 0, MAX_LEVELS, "noise without light, standard deviation in grey levels"),
        SeverityChecks.axis(GAIN, 0, MAX_LEVELS, "grey levels for each photon"));
  }

  @Override
  public Set<String> axes() {
    return AXES;
  }

  @Override
  public void check(Severity severity, Map<String, Double> parameters, Site site) {
    SeverityChecks.common(this, severity, parameters, site);
    double read = SeverityChecks.parameter(this, parameters, READ_NOISE);
    SeverityChecks.inRange(read, 0, MAX_LEVELS, READ_NOISE);
    if (severity.axis().equals(GAIN)) {
      SeverityChecks.inRange(severity.value(), 0, MAX_LEVELS, GAIN);
    }
  }

  @Override
  public Impairment at(
      Severity severity, Map<String, Double> parameters, Site site, SignalStatistics signal) {
    check(severity, parameters, site);
    double read = SeverityChecks.parameter(this, parameters, READ_NOISE);
    if (severity.axis().equals(GAIN)) {
      double gain = severity.value();
      return new Counted(gain * signal.mean() + read * read, gain, read);
    }
    double variance = SeverityChecks.noiseVariance(severity, signal);
    double shot = variance - read * read;
    double most = MAX_LEVELS * signal.mean();
    if (!(shot >= 0 && shot <= most)) {
      throw new BadInput(
          "shot-noise at %s %s is a variance of %s; accepted with read-noise %s on this picture: %s to %s grey levels squared"
              .formatted(
                  severity.axis(),
                  severity.value(),
                  variance,
                  read,
                  read * read,
                  read * read + most));
    }
    return new Counted(variance, shot == 0 ? 0 : shot / signal.mean(), read);
  }

  private record Counted(double equivalentNoiseVariance, double gain, double read)
      implements Impairment.OnSamples {
    @Override
    public Picture apply(Picture clean, UniformRandomProvider random) {
      int[] noisy = clean.samples().clone();
      for (int i = 0; i < noisy.length; i++) {
        double level = noisy[i];
        if (level / gain <= Double.MAX_VALUE) {
          level = gain * PoissonDraws.next(level / gain, random);
        }
        if (read > 0) {
          level += read * GaussianDraws.next(random);
        }
        noisy[i] = Levels.of(level, clean.peak());
      }
      return new Picture(clean.width(), clean.height(), clean.bitDepth(), noisy);
    }
  }
}
