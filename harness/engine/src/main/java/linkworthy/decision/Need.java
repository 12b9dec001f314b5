package linkworthy.decision;

import java.util.List;
import linkworthy.input.Require;

/**
 * A need that a codec must meet in each of some conditions.
 *
 * @param measure name of the measure
 * @param atLeast whether the level is the lowest accepted, not the highest
 * @param level the level, in the unit of the measure
 * @param share share of pictures that must reach the level, or NaN if their mean must
 * @param conditions where
 * @param text the need as a reader would say it
 */
public record Need(
    String measure,
    boolean atLeast,
    double level,
    double share,
    List<Measurements.Condition> conditions,
    String text) {
  /**
   * @throws IllegalArgumentException if the level is not finite, the share not between 0 and 1, or
   *     there is no condition
   */
  public Need {
    Require.finite(level, "level");
    if (share <= 0 || share >= 1) {
      throw new IllegalArgumentException(
          "share of pictures is " + share + "; accepted: above 0 and below 1");
    }
    if (conditions.isEmpty()) {
      throw new IllegalArgumentException("a need has no condition; accepted: at least one");
    }
    conditions = List.copyOf(conditions);
  }

  /** Whether this is about the share of pictures that reach the level. */
  public boolean isShare() {
    return !Double.isNaN(share);
  }

  /** Whether a picture's figure reaches the level. */
  boolean reached(double figure) {
    return atLeast ? figure >= level : figure <= level;
  }
}
