package example.thumbnail;

import java.nio.ByteBuffer;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import linkworthy.codec.Codec;
import linkworthy.codec.CodecFamily;
import linkworthy.codec.Decoding;
import linkworthy.codec.Encoding;
import linkworthy.codec.Memo;
import linkworthy.codec.PictureShape;
import linkworthy.corpus.Picture;
import linkworthy.input.BadInput;
import linkworthy.input.Key;
import linkworthy.input.KeyGroup;
import linkworthy.input.Kind;
import linkworthy.input.YamlNode;
import linkworthy.link.Importance;
import linkworthy.link.Link;
import linkworthy.link.Packet;

/** The codec {@code thumbnail: SIDE}: sends the mean of each block of SIDE x SIDE samples. */
public final class ThumbnailFamily implements CodecFamily {
  private static final Kind.Whole SIDE = new Kind.Whole(2, 64);
  private static final KeyGroup KEYS =
      KeyGroup.of(
          "thumbnail",
          Key.required("thumbnail", new Kind.OneOrMore(SIDE), "side of a block in samples"),
          Codec.LABEL);

  @Override
  public String id() {
    return "thumbnail";
  }

  @Override
  public Optional<KeyGroup> keys() {
    return Optional.of(KEYS);
  }

  @Override
  public String help() {
    return """
        thumbnail: side of a block in samples, 2 to 64; a list means one codec for each
          label: name in tables (thumbnail SIDE)
        Sent, and counted: the mean of each block in 8 or 16 bits, and 6 bytes a packet. At the
        node, one addition a sample.""";
  }

  @Override
  public List<Codec> read(YamlNode entry, Link link) {
    KEYS.check(entry);
    List<YamlNode> sides = entry.get("thumbnail").oneOrMore();
    String label = entry.find("label").map(YamlNode::text).orElse("");
    if (!label.isEmpty() && sides.size() > 1) {
      throw entry.get("label").refuse("names several codecs; accepted: one side with a label");
    }
    List<Codec> codecs = new ArrayList<>();
    for (YamlNode node : sides) {
      int side = SIDE.read(node);
      codecs.add(
          new Thumbnail(label.isEmpty() ? "thumbnail " + side : label, side, link.payloadBytes()));
    }
    return codecs;
  }

  /**
   * Blocks row by row, those at the right and lower edge cut off by it. A packet holds a mark (16
   * bits), the number of its first block (32 bits) and the means of the blocks that follow, so it
   * can be decoded without the others. Blocks that are missing show mid-grey.
   */
  private record Thumbnail(String label, int side, int payloadBytes) implements Codec {
    private static final int PREAMBLE = 6;

    @Override
    public Description description() {
      return new Description("thumbnail", "blocks" + side, "");
    }

    @Override
    public Map<String, Object> settings() {
      Map<String, Object> settings = new LinkedHashMap<>();
      settings.put("thumbnail", side);
      return settings;
    }

    @Override
    public void check(PictureShape shape) {
      if (shape.width() < side || shape.height() < side) {
        throw new BadInput(
            label + " needs pictures of at least " + side + " x " + side + " samples");
      }
    }

    @Override
    public Encoding encode(Picture picture, Memo memo) {
      PictureShape shape = PictureShape.of(picture);
      int[] means = means(picture);
      int perPacket = (payloadBytes - PREAMBLE) / bytesPerMean(shape);
      List<Packet> packets = new ArrayList<>();
      for (int first = 0; first < means.length; first += perPacket) {
        int count = Math.min(perPacket, means.length - first);
        ByteBuffer out = ByteBuffer.allocate(PREAMBLE + count * bytesPerMean(shape));
        out.putShort((short) mark(shape)).putInt(first);
        for (int i = first; i < first + count; i++) {
          if (bytesPerMean(shape) == 2) {
            out.putShort((short) means[i]);
          } else {
            out.put((byte) means[i]);
          }
        }
        packets.add(new Packet(out.array(), Importance.REST));
      }
      return new Encoding(packets, -1);
    }

    private int[] means(Picture picture) {
      PictureShape shape = PictureShape.of(picture);
      long[] sums = new long[across(shape) * down(shape)];
      int[] counts = new int[sums.length];
      for (int at = 0; at < picture.size(); at++) {
        int block = block(shape, at);
        sums[block] += picture.samples()[at];
        counts[block]++;
      }
      int[] means = new int[sums.length];
      for (int block = 0; block < means.length; block++) {
        means[block] = (int) ((sums[block] + counts[block] / 2) / counts[block]);
      }
      return means;
    }

    @Override
    public Decoding decode(PictureShape shape, List<byte[]> arrived) {
      int[] means = new int[across(shape) * down(shape)];
      boolean[] known = new boolean[means.length];
      for (byte[] packet : arrived) {
        take(shape, packet, means, known);
      }
      int count = 0;
      for (boolean one : known) {
        count += one ? 1 : 0;
      }
      if (count == 0) {
        return Decoding.nothing(shape);
      }
      int[] samples = new int[shape.size()];
      for (int at = 0; at < samples.length; at++) {
        int block = block(shape, at);
        samples[at] = known[block] ? means[block] : 1 << (shape.bitDepth() - 1);
      }
      return new Decoding(
          new Picture(shape.width(), shape.height(), shape.bitDepth(), samples),
          count == known.length
              ? Decoding.Completeness.COMPLETE
              : Decoding.Completeness.PARTIAL);
    }

    /** Takes what a packet says, whatever it is: numbers read from it are checked before use. */
    private void take(PictureShape shape, byte[] packet, int[] means, boolean[] known) {
      if (packet.length < PREAMBLE) {
        return;
      }
      ByteBuffer in = ByteBuffer.wrap(packet);
      int found = in.getShort() & 0xFFFF;
      int first = in.getInt();
      if (found != mark(shape) || first < 0) {
        return;
      }
      int peak = (1 << shape.bitDepth()) - 1;
      for (int i = first; i < means.length && in.remaining() >= bytesPerMean(shape); i++) {
        int mean = bytesPerMean(shape) == 2 ? in.getShort() & 0xFFFF : in.get() & 0xFF;
        means[i] = Math.min(mean, peak);
        known[i] = true;
      }
    }

    private int mark(PictureShape shape) {
      return 0x7400 + (side << 1) + bytesPerMean(shape) - 1;
    }

    private static int bytesPerMean(PictureShape shape) {
      return shape.bitDepth() > 8 ? 2 : 1;
    }

    private int across(PictureShape shape) {
      return (shape.width() + side - 1) / side;
    }

    private int down(PictureShape shape) {
      return (shape.height() + side - 1) / side;
    }

    /** Number of the block that a sample lies in. */
    private int block(PictureShape shape, int at) {
      return at / shape.width() / side * across(shape) + at % shape.width() / side;
    }
  }
}
