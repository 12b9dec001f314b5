package linkworthy.study;

import linkworthy.input.Require;
import linkworthy.link.NodeProfile;

/**
 * The nodes of a study, all alike, and how often they take a picture.
 *
 * @param profile what their work costs them
 * @param intervalSeconds time from one picture to the next, in seconds
 */
public record NodeChoice(NodeProfile profile, double intervalSeconds) {
  /**
   * @throws IllegalArgumentException if the interval is not above 0
   */
  public NodeChoice {
    Require.positive(intervalSeconds, "interval-s (seconds)");
  }
}
