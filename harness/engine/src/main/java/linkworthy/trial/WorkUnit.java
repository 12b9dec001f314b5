package linkworthy.trial;

import linkworthy.corpus.ManifestEntry;
import linkworthy.noise.Impairment;
import linkworthy.noise.Severity;
import linkworthy.noise.SignalStatistics;
import linkworthy.study.ImpairmentChoice;
import org.jspecify.annotations.Nullable;

/**
 * One picture through one realisation of noise; every codec of the study meets it.
 *
 * @param index place in the plan, from 0
 * @param picture the picture's place in the plan, from 0
 * @param condition the noise; null for the clean picture
 * @param replicate from 0
 */
public record WorkUnit(
    int index, int picture, ManifestEntry entry, @Nullable Condition condition, int replicate) {
  /** A noise model at one severity. */
  public record Condition(ImpairmentChoice impairment, Severity severity) {
    /**
     * The impairment of a picture with these statistics.
     *
     * @throws linkworthy.input.BadInput if the severity cannot be reached on it
     */
    Impairment at(SignalStatistics signal) {
      return impairment.model().at(severity, impairment.site(), signal);
    }
  }

  /** Name of the noise model, {@code none} for clean. */
  public String impairment() {
    return condition == null ? ImpairmentChoice.CLEAN : condition.impairment().label();
  }

  /** Id of the site of the noise, empty for clean. */
  public String actsOn() {
    return condition == null ? "" : condition.impairment().site().id();
  }

  /** Key the severity is given by, empty for clean. */
  public String axis() {
    return condition == null ? "" : condition.severity().axis();
  }

  /** Value on that axis; NaN for clean. */
  public double severity() {
    return condition == null ? Double.NaN : condition.severity().value();
  }
}
