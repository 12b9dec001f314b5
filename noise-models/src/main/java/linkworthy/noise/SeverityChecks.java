package linkworthy.noise;

import java.util.Collection;
import java.util.Collections;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import linkworthy.input.BadInput;
import linkworthy.input.Decimal;
import linkworthy.input.Key;
import linkworthy.input.Kind;
import linkworthy.input.Spelling;

/** What every process checks alike. Each complaint is one line: the value and its range. */
final class SeverityChecks {
  /** The farthest SNR from 0 dB that is accepted; beyond it powers leave the range of a double. */
  private static final double MAX_SNR_DB = 300;

  private static final String GIVEN_ALONE = "one severity must be given";

  /** The axes that every process has, unless it has but one severity. */
  static final List<Key> COMMON_AXES =
      List.of(
          axis(
              Severity.SNR_DB,
              -MAX_SNR_DB,
              MAX_SNR_DB,
              "signal over noise in dB; what the model can reach on the picture"),
          axis(
              Severity.VARIANCE,
              0,
              Double.MAX_VALUE,
              "grey levels squared; what the model can reach on the picture"));

  private SeverityChecks() {}

  /** A key by which a severity, or a list of them, is given. */
  static Key axis(String name, double min, double max, String what) {
    return Key.optional(name, new Kind.OneOrMore(number(min, max)), GIVEN_ALONE, what);
  }

  /** A key by which a severity in dB is given. */
  static Key decibelAxis(String name, String what) {
    return axis(name, -MAX_SNR_DB, MAX_SNR_DB, what);
  }

  /** A key for a parameter. */
  static Key parameter(String name, double min, double max, String what) {
    return Key.optional(name, number(min, max), "the model's", what);
  }

  private static Kind.Real number(double min, double max) {
    return Kind.Real.from(
        min,
        max,
        min == max
            ? "the number " + plain(min)
            : max == Double.MAX_VALUE
                ? "a number from " + plain(min)
                : "a number from " + plain(min) + " to " + plain(max));
  }

  private static String plain(double value) {
    return value == Math.rint(value) && Math.abs(value) < 1e15
        ? Long.toString((long) value)
        : Decimal.shortest(value);
  }

  /** A set that keeps the order it was written in. */
  static Set<String> inOrder(String... words) {
    return Collections.unmodifiableSet(new LinkedHashSet<>(List.of(words)));
  }

  /**
   * Checks that the process has the site, the parameters and the axis, and the range of the two
   * axes that every process has.
   *
   * @throws BadInput if not
   */
  static void common(
      NoiseProcess process, Severity severity, Map<String, Double> parameters, Site site) {
    known(process, "site", site.id(), process.sites().stream().map(Site::id).toList());
    for (String name : parameters.keySet()) {
      known(process, "parameter", name, process.parameters().keySet());
    }
    axis(process, severity.axis());
    if (severity.axis().equals(Severity.SNR_DB)) {
      decibels(severity);
    }
    if (severity.axis().equals(Severity.VARIANCE)) {
      notNegative(severity.value(), Severity.VARIANCE);
    }
  }

  /**
   * The ratio that a severity in dB stands for.
   *
   * @throws BadInput if it is farther than 300 dB from 0
   */
  static double decibels(Severity severity) {
    inRange(severity.value(), -MAX_SNR_DB, MAX_SNR_DB, severity.axis());
    return StrictMath.pow(10, severity.value() / 10);
  }

  /**
   * Whether a parameter of two states is on.
   *
   * @throws BadInput if it is neither 0 nor 1
   */
  static boolean flag(NoiseProcess process, Map<String, Double> parameters, String name) {
    double value = parameter(process, parameters, name);
    if (value != 0 && value != 1) {
      throw new BadInput("%s is %s; accepted: 0.0 (off) or 1.0 (on)".formatted(name, value));
    }
    return value == 1;
  }

  /**
   * @throws BadInput if the process has no such axis
   */
  static void axis(NoiseProcess process, String axis) {
    known(process, "severity axis", axis, process.axes());
  }

  /** A parameter as given, or else its default. */
  static double parameter(NoiseProcess process, Map<String, Double> parameters, String name) {
    Double given = parameters.get(name);
    if (given != null) {
      return given;
    }
    Double standard = process.parameters().get(name);
    if (standard == null) {
      throw new IllegalArgumentException(process.id() + " has no parameter " + name);
    }
    return standard;
  }

  /**
   * The equivalent noise variance that snr-db or variance asks for: S/10^(snr/10), or the value
   * itself; grey levels squared.
   *
   * @throws BadInput if an SNR is asked of a picture without signal power
   */
  static double noiseVariance(Severity severity, SignalStatistics signal) {
    if (severity.axis().equals(Severity.VARIANCE)) {
      return severity.value();
    }
    if (!severity.axis().equals(Severity.SNR_DB)) {
      throw new IllegalArgumentException(severity.axis() + " is no axis of noise variance");
    }
    if (signal.power() == 0) {
      throw new BadInput(
          "snr-db %s cannot be set: the picture's signal power is 0 grey levels squared; accepted: a picture with signal power above 0, or another severity axis"
              .formatted(severity.value()));
    }
    return signal.power() / StrictMath.pow(10, severity.value() / 10);
  }

  /**
   * @throws BadInput unless {@code min <= value <= max}; NaN is refused
   */
  static double inRange(double value, double min, double max, String name) {
    if (!(value >= min && value <= max)) {
      throw new BadInput("%s is %s; accepted: %s to %s".formatted(name, value, min, max));
    }
    return value;
  }

  /**
   * @throws BadInput unless the value is at least 0 and finite
   */
  static double notNegative(double value, String name) {
    if (!(value >= 0 && value <= Double.MAX_VALUE)) {
      throw new BadInput(
          "%s is %s; accepted: a finite number of at least 0".formatted(name, value));
    }
    return value;
  }

  private static void known(
      NoiseProcess process, String what, String found, Collection<String> accepted) {
    if (!accepted.contains(found)) {
      String hint = accepted.isEmpty() ? "it has none" : Spelling.hint(found, accepted);
      throw new BadInput("%s has no %s '%s'; %s".formatted(process.id(), what, found, hint));
    }
  }
}
