package linkworthy.codec;

import java.util.Arrays;
import java.util.Set;
import linkworthy.corpus.Picture;
import org.jspecify.annotations.Nullable;

/**
 * A picture and how much of the stream it rests on.
 *
 * @param picture of the size that was asked for; mid-grey where nothing arrived
 * @param failure why there is no picture although something arrived, or null
 */
public record Decoding(Picture picture, Completeness completeness, @Nullable Failure failure) {
  /** How much of the stream was there. */
  public enum Completeness {
    COMPLETE,
    PARTIAL,
    /** An outage: nothing usable arrived. */
    NOTHING;

    /** Of a picture in parts: what all of them are, or partial if they differ. */
    public static Completeness ofParts(Set<Completeness> parts) {
      return parts.size() == 1 ? parts.iterator().next() : PARTIAL;
    }
  }

  /** A picture that was decoded. */
  public Decoding(Picture picture, Completeness completeness) {
    this(picture, completeness, null);
  }

  /** An outage: mid-grey, {@code 2^(B-1)} for B bits a sample. */
  public static Decoding nothing(PictureShape shape) {
    return outage(shape, null);
  }

  /** An outage because the decoder failed. */
  public static Decoding failed(PictureShape shape, Failure failure) {
    return outage(shape, failure);
  }

  private static Decoding outage(PictureShape shape, @Nullable Failure failure) {
    int[] samples = new int[shape.size()];
    Arrays.fill(samples, 1 << (shape.bitDepth() - 1));
    Picture grey = new Picture(shape.width(), shape.height(), shape.bitDepth(), samples);
    return new Decoding(grey, Completeness.NOTHING, failure);
  }
}
