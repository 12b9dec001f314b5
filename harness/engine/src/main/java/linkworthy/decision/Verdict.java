package linkworthy.decision;

/** What the evidence says of a need. Written as in {@link #toString()}. */
public enum Verdict {
  /** Shown to be met. */
  MEETS("meets"),
  /** Shown not to be met. */
  FAILS("fails"),
  /** The bound does not reach the level in either direction. */
  UNDECIDED("undecided");

  private final String word;

  Verdict(String word) {
    this.word = word;
  }

  /** The verdict on several needs that must all be met. */
  static Verdict all(Iterable<Verdict> verdicts) {
    Verdict all = MEETS;
    for (Verdict verdict : verdicts) {
      if (verdict == FAILS) {
        return FAILS;
      }
      all = verdict == UNDECIDED ? UNDECIDED : all;
    }
    return all;
  }

  @Override
  public String toString() {
    return word;
  }
}
