package linkworthy.statistics;

/** Where a codec stands among the codecs of its row. Written as in {@link #toString()}. */
public enum Standing {
  /** Its mean PSNR is the highest; the first in order where several are equal. */
  BEST("best"),
  /** Its difference from the best is not established: adjusted p of at least 0.05. */
  NOT_DISTINGUISHABLE("not-distinguishable"),
  /** Its difference from the best is established: adjusted p below 0.05. */
  BELOW("below"),
  /** Too little evidence for a test. */
  UNTESTED("untested");

  private final String word;

  Standing(String word) {
    this.word = word;
  }

  @Override
  public String toString() {
    return word;
  }
}
