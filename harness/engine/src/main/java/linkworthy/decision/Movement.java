package linkworthy.decision;

/** What may be said of a cell in two runs. Written as in {@link #toString()}. */
public enum Movement {
  /** The means differ, and by more than the tolerance. */
  MOVED("moved"),
  /** The means are equal within the tolerance, or every figure is. */
  SAME("same"),
  /** Neither is established. */
  UNDECIDED("undecided");

  private final String word;

  Movement(String word) {
    this.word = word;
  }

  @Override
  public String toString() {
    return word;
  }
}
