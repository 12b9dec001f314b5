package linkworthy.report;

import java.util.Arrays;

/** How a codec compares with the best one of its row, by a paired test corrected over the row. */
public enum Standing {
  /** The highest mean PSNR of the row. */
  BEST("best", "\u25cf"),
  /** The test does not tell it from the best. */
  NOT_DISTINGUISHABLE("not-distinguishable", "\u25cb"),
  /** The test says that it is below the best. */
  BELOW("below", ""),
  /** There is too little evidence for a test. */
  UNTESTED("untested", "?");

  private final String id;
  private final String mark;

  Standing(String id, String mark) {
    this.id = id;
    this.mark = mark;
  }

  /** The word used in results. */
  public String id() {
    return id;
  }

  /** The symbol shown before a figure; empty for {@link #BELOW}. */
  String mark() {
    return mark;
  }

  /** The word read aloud before a figure; empty for {@link #BELOW}, which is the ordinary case. */
  String spoken() {
    return switch (this) {
      case BEST -> "best ";
      case NOT_DISTINGUISHABLE -> "not distinguishable from the best ";
      case BELOW -> "";
      case UNTESTED -> "not tested ";
    };
  }

  /**
   * @throws IllegalArgumentException if no standing has this word
   */
  public static Standing of(String id) {
    return Arrays.stream(values())
        .filter(standing -> standing.id.equals(id))
        .findFirst()
        .orElseThrow(
            () ->
                new IllegalArgumentException(
                    "standing is '"
                        + id
                        + "'; accepted: best, not-distinguishable, below, untested"));
  }
}
