package linkworthy.noise;

import java.util.List;
import java.util.Map;
import java.util.Set;
import linkworthy.input.BadInput;
import linkworthy.input.Key;

/**
 * A kind of noise, found by its id through {@link java.util.ServiceLoader}. A process has no state;
 * parameters come from a model file or a study, settings from a model file alone. Processes of the
 * same class with the same settings are equal.
 */
public interface NoiseProcess {
  /** Stable id, as written in model files. */
  String id();

  /** Counts up whenever the same parameters give other numbers; part of every fingerprint. */
  int revision();

  /** One line of help: what it does and its formula. */
  String summary();

  /** Where it can act, the usual place first. */
  List<Site> sites();

  /**
   * Parameters by name with their defaults; a study or a model file may set these and no others.
   */
  Map<String, Double> parameters();

  /**
   * What may be written for each parameter, each setting and each severity axis of the process's
   * own.
   */
  List<Key> keys();

  /** Parameters that are on or off: {@code true} or {@code false} in files, 1 or 0 here. */
  default Set<String> flags() {
    return Set.of();
  }

  /**
   * Parameters that came after there were records, which must stay as they are: at their default
   * these are left out of fingerprints and of what a run writes.
   */
  default Set<String> laterParameters() {
    return Set.of();
  }

  /** Keys, besides the common ones, that a model file may have and a study may not set. */
  default Set<String> settingKeys() {
    return Set.of();
  }

  /** Those of the {@link #settingKeys} that name a file beside the model; its content counts. */
  default Set<String> fileKeys() {
    return Set.of();
  }

  /** Settings in force, by key: a word, or the content of a file. */
  default Map<String, String> settings() {
    return Map.of();
  }

  /**
   * This process as a model file sets it up.
   *
   * @param settings words and contents of files, by key
   * @throws BadInput if one cannot be used
   */
  default NoiseProcess with(Map<String, String> settings) {
    for (String key : settings.keySet()) {
      throw new BadInput(id() + " has no setting '" + key + "'");
    }
    return this;
  }

  /**
   * Severity axes: {@code snr-db} and {@code variance} among them, unless the process has but one
   * severity.
   */
  Set<String> axes();

  /**
   * Checks the parameters alone.
   *
   * @throws BadInput if one lies outside its range
   */
  default void checkParameters(Map<String, Double> parameters, Site site) {
    check(new Severity(Severity.VARIANCE, 0), parameters, site);
  }

  /**
   * Checks what can be checked without a picture.
   *
   * @throws BadInput if a parameter or the severity lies outside its range; one line that names the
   *     value and the range
   */
  void check(Severity severity, Map<String, Double> parameters, Site site);

  /**
   * Resolves a severity for one picture.
   *
   * @throws BadInput if the severity cannot be reached on this picture
   */
  Impairment at(
      Severity severity, Map<String, Double> parameters, Site site, SignalStatistics signal);
}
