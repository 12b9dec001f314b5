package linkworthy.trial;

/**
 * What a formula says of a codec under a severity.
 *
 * @param impairment name of the noise model
 * @param actsOn {@code samples} or {@code packets}
 * @param axis key the severity was given by
 * @param severity value on that axis
 * @param codec label of the codec
 * @param psnrOfMeanMseDb PSNR of the mean over the pictures of the expected squared error, each
 *     over its squared peak, in dB; NaN where nothing is predicted
 * @param refusal why nothing is predicted, or empty
 */
public record Prediction(
    String impairment,
    String actsOn,
    String axis,
    double severity,
    String codec,
    double psnrOfMeanMseDb,
    String refusal) {
  /**
   * @throws IllegalArgumentException if there is both a number and a refusal, or neither
   */
  public Prediction {
    if (Double.isNaN(psnrOfMeanMseDb) == refusal.isEmpty()) {
      throw new IllegalArgumentException(
          "prediction is "
              + psnrOfMeanMseDb
              + " with the refusal '"
              + refusal
              + "'; accepted: one of the two");
    }
  }

  /** Whether there is a number. */
  public boolean isMade() {
    return refusal.isEmpty();
  }
}
