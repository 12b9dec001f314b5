package linkworthy.report;

/**
 * A prediction by formula beside what was measured.
 *
 * @param condition where
 * @param codec label of the codec
 * @param predictedDb PSNR of the expected mean squared error, in dB; NaN where nothing is predicted
 * @param measuredDb PSNR of the mean squared error, in dB
 * @param noiseHalfWidthDb half-width of the noise interval of the mean squared error, in dB, or NaN
 * @param refusal why nothing is predicted, or empty
 */
public record Predicted(
    Condition condition,
    String codec,
    double predictedDb,
    double measuredDb,
    double noiseHalfWidthDb,
    String refusal) {
  /**
   * What the formulas may be wrong by before a gap counts as a finding, in dB; common practice, no
   * source.
   */
  public static final double TOLERANCE_DB = 0.1;

  /** Measured less predicted, in dB; 0 where both are the same infinity. */
  double gapDb() {
    return measuredDb == predictedDb ? 0 : measuredDb - predictedDb;
  }

  /**
   * Whether the gap is beyond the tolerance and no noise interval can judge it: there is none, as
   * with one replicate, or all replicates came out alike.
   */
  boolean isUndecided() {
    return !(noiseHalfWidthDb > 0) && Math.abs(gapDb()) > TOLERANCE_DB;
  }

  /** Whether the gap is larger than both the noise interval and the tolerance allow. */
  boolean isFinding() {
    return Math.abs(gapDb()) > Math.max(TOLERANCE_DB, noiseHalfWidthDb) && !isUndecided();
  }
}
