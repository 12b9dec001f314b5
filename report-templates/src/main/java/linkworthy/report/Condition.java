package linkworthy.report;

/**
 * What hurt the pictures, and how strongly: a row of a table.
 *
 * @param impairment name of the noise model, {@code none} for clean
 * @param actsOn {@code samples}, {@code packets}, {@code bits}, or empty for clean
 * @param axis key the severity was given by, or empty for clean
 * @param severity value on that axis; NaN for clean
 * @param equivalentNoiseVariance mean over the pictures, in grey levels squared; 0 for clean
 * @param realisedNoiseVariance mean over the trials, in grey levels squared; 0 for clean, NaN where
 *     unknown
 * @param snrDb signal power over equivalent noise variance, in dB; NaN for clean
 */
public record Condition(
    String impairment,
    String actsOn,
    String axis,
    double severity,
    double equivalentNoiseVariance,
    double realisedNoiseVariance,
    double snrDb) {
  /** The name of the impairment that is none. */
  public static final String CLEAN = "none";

  /** No impairment. */
  public static Condition clean() {
    return new Condition(CLEAN, "", "", Double.NaN, 0, 0, Double.NaN);
  }

  boolean isClean() {
    return impairment.equals(CLEAN);
  }

  Key key() {
    return isClean()
        ? new Key(CLEAN, "", "", Double.NaN)
        : new Key(impairment, actsOn, axis, severity);
  }

  /** What makes two conditions the same row; measured values have no part in it. */
  record Key(String impairment, String actsOn, String axis, double severity) {}
}
