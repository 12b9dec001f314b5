package linkworthy.report;

/**
 * What was measured of one codec in one condition: a cell of a table. NaN means not available, and
 * a PSNR of positive infinity that every decoded picture equals its original.
 */
public record Figure(
    Condition condition,
    CodecColumn codec,
    Evidence evidence,
    Quality quality,
    double bitsPerPixel,
    double outageRate,
    Comparison comparison) {

  /**
   * What a figure rests on.
   *
   * @param pictures number of pictures
   * @param trials number of trials on all of them
   * @param failures number of trials in which the codec itself failed
   * @param outageLow lower end of the outage rate's interval, or NaN
   * @param outageHigh upper end of it, or NaN
   */
  public record Evidence(
      int pictures, int trials, int failures, double outageLow, double outageHigh) {
    /**
     * @throws IllegalArgumentException if a number is negative, or failures are more than trials
     */
    public Evidence {
      if (pictures < 0 || trials < 0 || failures < 0) {
        throw new IllegalArgumentException(
            pictures
                + " pictures, "
                + trials
                + " trials and "
                + failures
                + " failures; accepted: at least 0");
      }
      if (failures > trials) {
        throw new IllegalArgumentException(
            failures + " failures; accepted: up to the number of trials, " + trials);
      }
    }

    /** Trials without an interval of the outage rate. */
    public Evidence(int pictures, int trials, int failures) {
      this(pictures, trials, failures, Double.NaN, Double.NaN);
    }

    /** Trials without failure. */
    public Evidence(int pictures, int trials) {
      this(pictures, trials, 0);
    }
  }

  /**
   * Decoded pictures against clean originals.
   *
   * @param psnrMeanDb mean of the trials' PSNR, in dB
   * @param noiseHalfWidthDb half the width of its noise interval, in dB
   * @param pictureHalfWidthDb half the width of its picture interval, in dB
   * @param psnrOfMeanMseDb PSNR of the mean MSE, in dB
   * @param psnrP05Db 5th percentile of the trials' PSNR, in dB
   * @param ssimMean mean structural similarity
   */
  public record Quality(
      double psnrMeanDb,
      double noiseHalfWidthDb,
      double pictureHalfWidthDb,
      double psnrOfMeanMseDb,
      double psnrP05Db,
      double ssimMean) {}

  /**
   * Against the best codec of the same condition.
   *
   * @param behindBestDb mean paired difference in dB, 0 for the best
   * @param adjustedP p value after correction over the condition's codecs
   * @param standing what may be concluded
   */
  public record Comparison(double behindBestDb, double adjustedP, Standing standing) {}
}
