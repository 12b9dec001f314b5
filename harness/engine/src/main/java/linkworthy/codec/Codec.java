package linkworthy.codec;

import java.util.List;
import java.util.Map;
import linkworthy.corpus.Picture;
import linkworthy.input.BadInput;
import linkworthy.input.Key;
import linkworthy.input.Kind;

/**
 * One option compared: all its parameters are fixed. A codec has no state and may be used by
 * several threads at once.
 */
public interface Codec {
  /** The longest label a study may give, in characters. */
  int MAX_LABEL = 64;

  /** The key {@code label}, which every family takes. */
  Key LABEL =
      Key.optional(
          "label", Kind.Text.line(MAX_LABEL), "made from the parameters", "name in tables");

  /** How the codec is named in tables; derived from its parameters unless the study gives one. */
  String label();

  /** The descriptive columns of the results. */
  Description description();

  /** The parameters as a study file writes them, every default included, in a fixed order. */
  Map<String, Object> settings();

  /**
   * Checks that pictures of this shape can be coded.
   *
   * @throws BadInput if not; one line that says why and what is accepted
   */
  void check(PictureShape shape);

  /** Whether the codec must be {@link #trainedOn trained} before anything else is asked of it. */
  default boolean needsTraining() {
    return false;
  }

  /**
   * The same codec after its training; itself if it needs none.
   *
   * @throws BadInput if it cannot be trained on these pictures; one line that says why
   */
  default Codec trainedOn(Training training) {
    return this;
  }

  /** Fingerprint of what a training installed at both ends, a part of the trial's key; or empty. */
  default String training() {
    return "";
  }

  /**
   * The codec as it codes the colour planes of a picture; itself if it treats all planes alike.
   * What it is called and what it asks of a node stay the same.
   */
  default Codec forChroma() {
    return this;
  }

  /**
   * Names of the programs outside this one that the codec runs. Where there are any, the same study
   * may give other numbers on another machine or day, and the report says so.
   */
  default List<String> programs() {
    return List.of();
  }

  /**
   * Encodes a picture into packets.
   *
   * @param picture what the encoder sees, noise on the samples included
   * @param memo work on this very picture that several codecs share
   * @throws CodecFailure if it cannot; the trial is recorded as an outage with the failure's word,
   *     and so is one whose codec throws anything else
   */
  Encoding encode(Picture picture, Memo memo);

  /**
   * Decodes what arrived, in any order, damaged or not. Never throws, whatever the bytes are, and
   * allocates nothing by a number read from them.
   */
  Decoding decode(PictureShape shape, List<byte[]> arrived);

  /** Whether raw samples travel to helper nodes, which do the coding. */
  default boolean hasHelpers() {
    return false;
  }

  /**
   * What coding a picture asks of each node: the camera first, then its helpers, if any. Empty
   * where nobody said.
   *
   * @param keep components in force, as in {@link Encoding#keep}
   */
  default List<Workload> workloads(PictureShape shape, int keep) {
    return List.of();
  }

  /**
   * The columns that describe a codec; empty text where a column does not apply.
   *
   * @param transform for the transform codec the basis: {@code mean}, {@code dct}, {@code pca};
   *     {@code jpeg}; the wavelet, {@code cdf-9-7} or {@code cdf-5-3}
   * @param over {@code rows}, {@code blocks8}, {@code levels5}, ...
   * @param step quantiser step in grey levels, or {@code none}; empty where the encoder chooses it
   *     for each picture
   */
  record Description(String transform, String over, String step) {}
}
