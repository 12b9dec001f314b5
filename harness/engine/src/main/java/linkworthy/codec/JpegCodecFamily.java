package linkworthy.codec;

import java.util.List;
import java.util.Optional;
import linkworthy.input.Key;
import linkworthy.input.KeyGroup;
import linkworthy.input.Kind;
import linkworthy.input.YamlNode;
import linkworthy.link.Link;

/** Reads JPEG codecs from a study: {@code jpeg: baseline} and so on. */
public final class JpegCodecFamily implements CodecFamily {
  private static final int DEFAULT_RESTART = 1;
  private static final Kind.Whole QUALITY = new Kind.Whole(1, 100);
  private static final Kind.Whole RESTART = new Kind.Whole(1, 2048);
  private static final KeyGroup KEYS =
      KeyGroup.of(
          "jpeg",
          Key.required("jpeg", Kind.Words.of("baseline"), "8-bit pictures"),
          Key.optional(
              "quality",
              new Kind.OneOrMore(QUALITY),
              "one of this and the next must be given",
              "coarse to fine"),
          RateTarget.KEY,
          Key.optional(
              "restart-every",
              RESTART,
              Integer.toString(DEFAULT_RESTART),
              "rows of blocks in a restart interval"),
          Codec.LABEL);

  @Override
  public String id() {
    return "jpeg";
  }

  @Override
  public Optional<KeyGroup> keys() {
    return Optional.of(KEYS);
  }

  @Override
  public String help() {
    return """
        jpeg: baseline (8-bit pictures)
          quality:        1 to 100, by the rule of the library of the Independent JPEG Group; a
                          list means one codec for each
          bits-per-pixel: instead of quality, the sent bits that the highest quality may reach; each
                          packet counts once, protection's copies, parity and tries come on top
          restart-every:  rows of 8 x 8 blocks in a restart interval (1)
          label:          name in tables (derived from the above)
        Sent, and counted: the Huffman codes of the restart intervals, cut into packets that decode
        alone. The header and its tables are known to both ends. The order of packets is that of
        the picture, whatever the link's order. At the node, for pictures of W x H samples padded
        to whole blocks, 17 W H multiply-accumulates (16 for the transform, 1 to quantise) and
        8 W bytes of samples, with 1 KiB for tables and a block; bits-per-pixel quantises up to 8
        times and so keeps the coefficients, 2 W H bytes.""";
  }

  @Override
  public List<Codec> read(YamlNode entry, Link link) {
    KEYS.check(entry);
    int restart = entry.find("restart-every").map(RESTART::read).orElse(DEFAULT_RESTART);
    String label = entry.find("label").map(node -> node.line(Codec.MAX_LABEL)).orElse("");
    List<Codec> codecs =
        RateTarget.readEither(
            entry,
            "quality",
            node -> JpegCodec.of(label, QUALITY.read(node), restart, link),
            rate -> JpegCodec.of(label, rate, restart, link));
    if (codecs.isEmpty()) {
      throw entry.refuse("has neither 'quality' nor 'bits-per-pixel'; accepted: one of the two");
    }
    return codecs;
  }
}
