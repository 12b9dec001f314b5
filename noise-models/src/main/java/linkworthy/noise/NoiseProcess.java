package linkworthy.noise;

import java.util.List;
import java.util.Map;
import java.util.Set;
import linkworthy.input.BadInput;

/**
 * A kind of noise, found by its id through {@link java.util.ServiceLoader}. A process has no state;
 * parameters come from a model file or a study.
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

  /** Severity axes, {@code snr-db} and {@code variance} among them. */
  Set<String> axes();

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
