package linkworthy.codec;

import linkworthy.corpus.Picture;

/**
 * A picture and how much of the stream it rests on.
 *
 * @param picture of the size that was asked for; mid-grey where nothing arrived
 */
public record Decoding(Picture picture, Completeness completeness) {
  /** How much of the stream was there. */
  public enum Completeness {
    COMPLETE,
    PARTIAL,
    /** An outage: nothing usable arrived. */
    NOTHING
  }
}
