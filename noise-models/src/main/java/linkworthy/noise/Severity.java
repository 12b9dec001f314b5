package linkworthy.noise;

import linkworthy.input.Require;

/**
 * How strongly a model is applied: a value on one of its axes, in the axis' own unit ({@code
 * snr-db} in dB, {@code variance} in grey levels squared, {@code density} and {@code loss-rate} as
 * probabilities).
 */
public record Severity(String axis, double value) {
  /** The axis that every model has: signal power over equivalent noise variance, in dB. */
  public static final String SNR_DB = "snr-db";

  /** The axis of the equivalent noise variance itself, in grey levels squared. */
  public static final String VARIANCE = "variance";

  public Severity {
    Require.notBlank(axis, "severity axis");
    Require.finite(value, axis);
  }
}
