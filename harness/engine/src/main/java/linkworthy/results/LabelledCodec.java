package linkworthy.results;

import java.util.List;
import java.util.Map;
import linkworthy.codec.Codec;
import linkworthy.codec.CodecReader;
import linkworthy.codec.Decoding;
import linkworthy.codec.Encoding;
import linkworthy.codec.Memo;
import linkworthy.codec.PictureShape;
import linkworthy.corpus.Picture;

/** A codec of a recorded study, of which the label is known and nothing else; it cannot be used. */
record LabelledCodec(String label) implements Codec {
  /** Reads the entries of a study as the record writes it, each with a label. */
  static final CodecReader READER =
      (entry, link) -> List.of(new LabelledCodec(entry.get("label").text()));

  @Override
  public Description description() {
    throw unusable();
  }

  @Override
  public Map<String, Object> settings() {
    throw unusable();
  }

  @Override
  public void check(PictureShape shape) {
    throw unusable();
  }

  @Override
  public Encoding encode(Picture picture, Memo memo) {
    throw unusable();
  }

  @Override
  public Decoding decode(PictureShape shape, List<byte[]> arrived) {
    throw unusable();
  }

  private IllegalStateException unusable() {
    return new IllegalStateException("of the codec '" + label + "' the label alone was read");
  }
}
