package linkworthy.decision;

import linkworthy.statistics.MeanDifference;

/**
 * A cell in two runs.
 *
 * @param key of the cell
 * @param test how the means were compared
 * @param oldMeanDb mean PSNR of the old run, in dB
 * @param newMeanDb mean PSNR of the new run, in dB
 * @param difference of the means as the test sees it, new minus old, in dB; where only some
 *     pictures are in both runs, theirs
 * @param pAdjusted p value of no difference, adjusted over the table, or NaN
 * @param equivalenceP p value of a difference of the tolerance or more, or NaN
 * @param identical whether every figure of every trial is the same
 * @param verdict what may be said
 * @param oldBits mean sent bits per sample of the old run
 * @param newBits mean sent bits per sample of the new run
 */
public record CellDrift(
    CellKey key,
    Test test,
    double oldMeanDb,
    double newMeanDb,
    MeanDifference difference,
    double pAdjusted,
    double equivalenceP,
    boolean identical,
    Movement verdict,
    double oldBits,
    double newBits) {
  /** Bits per pixel have moved when their means differ by more than this share. */
  public static final double BITS_TOLERANCE = 0.001;

  /** How two means were compared. */
  public enum Test {
    /** Differences on the same noise, their means for each picture; t over pictures. */
    SAME_NOISE("paired by noise"),
    /** Differences of the picture means of the same pictures; t over pictures. */
    SAME_PICTURES("paired by picture"),
    /** One picture: differences on the same noise; t over replicates. */
    SAME_NOISE_OF_ONE_PICTURE("paired by replicate"),
    /** One picture under other noise: Welch's test over replicates. */
    REPLICATES("Welch, replicates"),
    /** Other pictures: Welch's test over picture means. */
    PICTURES("Welch, pictures");

    private final String word;

    Test(String word) {
      this.word = word;
    }

    boolean isOfSameNoise() {
      return this == SAME_NOISE || this == SAME_NOISE_OF_ONE_PICTURE;
    }

    @Override
    public String toString() {
      return word;
    }
  }

  /** Whether the mean PSNR fell, as far as anything may be said. */
  public boolean isWorse() {
    return verdict == Movement.MOVED && difference.estimate() < 0;
  }

  /**
   * Whether a reader should see it: it is not the same, or its bits per pixel moved although the
   * noise did not.
   */
  public boolean isOfNote() {
    return verdict != Movement.SAME || (test.isOfSameNoise() && bitsMoved());
  }

  /** New mean of bits per pixel over the old one, less 1; NaN where both are 0. */
  public double bitsChange() {
    return oldBits == newBits && oldBits != 0 ? 0 : newBits / oldBits - 1;
  }

  /** Whether the mean of bits per pixel changed by more than {@link #BITS_TOLERANCE}. */
  public boolean bitsMoved() {
    return Math.abs(bitsChange()) > BITS_TOLERANCE;
  }
}
