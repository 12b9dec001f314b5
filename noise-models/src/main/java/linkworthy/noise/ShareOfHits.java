package linkworthy.noise;

import java.util.List;
import java.util.Map;
import java.util.Set;
import linkworthy.input.BadInput;
import linkworthy.input.Key;

/**
 * Noise that hits a share of the samples or nodes, 0 to 1, each with the same probability and
 * alone. With m the mean squared error of a hit, in grey levels squared, a share q has the
 * equivalent noise variance q m; so an SNR or a variance v asks for q = v / m. A share outside 0 to
 * 1, given or asked for, is refused with a {@link BadInput}.
 */
abstract class ShareOfHits implements NoiseProcess {
  private final String axis;
  private final String what;
  private final Set<String> axes;
  private final Site site;

  /**
   * @param axis key by which a study gives the share itself
   * @param what the share is of, for readers
   */
  ShareOfHits(String axis, String what, Site site) {
    this.axis = axis;
    this.what = what;
    this.axes = SeverityChecks.inOrder(Severity.SNR_DB, Severity.VARIANCE, axis);
    this.site = site;
  }

  /** Expected squared error of a hit, in grey levels squared. */
  abstract double perHit(SignalStatistics signal);

  /** The noise of a share. */
  abstract Impairment hitting(double share, double equivalentNoiseVariance);

  @Override
  public int revision() {
    return 1;
  }

  @Override
  public List<Site> sites() {
    return List.of(site);
  }

  @Override
  public Map<String, Double> parameters() {
    return Map.of();
  }

  @Override
  public List<Key> keys() {
    return List.of(SeverityChecks.axis(axis, 0, 1, what));
  }

  @Override
  public Set<String> axes() {
    return axes;
  }

  @Override
  public void check(Severity severity, Map<String, Double> parameters, Site place) {
    SeverityChecks.common(this, severity, parameters, place);
    if (severity.axis().equals(axis)) {
      SeverityChecks.inRange(severity.value(), 0, 1, axis);
    }
  }

  @Override
  public Impairment at(
      Severity severity, Map<String, Double> parameters, Site place, SignalStatistics signal) {
    check(severity, parameters, place);
    double perHit = perHit(signal);
    if (severity.axis().equals(axis)) {
      return hitting(severity.value(), severity.value() * perHit);
    }
    double variance = SeverityChecks.noiseVariance(severity, signal);
    double share = variance == 0 ? 0 : variance / perHit;
    if (!(share <= 1)) {
      throw new BadInput(
          "%s at %s %s needs %s %s of %s on this picture; accepted: a noise variance of 0.0 to %s grey levels squared (%s 1)"
              .formatted(
                  id(),
                  severity.axis(),
                  severity.value(),
                  "aeiou".indexOf(axis.charAt(0)) < 0 ? "a" : "an",
                  share(),
                  share,
                  perHit,
                  share()));
    }
    return hitting(share, variance);
  }

  /** The axis in words. */
  private String share() {
    return axis.replace('-', ' ');
  }
}
