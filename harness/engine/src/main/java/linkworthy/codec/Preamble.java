package linkworthy.codec;

import java.nio.charset.StandardCharsets;
import java.util.List;
import java.util.zip.CRC32C;

/**
 * What every packet starts with: a stream tag in 16 bits, the picture's width and height, and one
 * number in force that the encoder chose (components, quality, ...), the last three as varints.
 *
 * @param tag what the two ends agree on besides the picture's size
 */
record Preamble(int tag, PictureShape shape) {
  /**
   * @param agreed all that the two ends agree on besides the picture's size, as text
   */
  static Preamble of(String agreed, PictureShape shape) {
    CRC32C crc = new CRC32C();
    crc.update(agreed.getBytes(StandardCharsets.UTF_8));
    return new Preamble((int) crc.getValue() & 0xFFFF, shape);
  }

  byte[] bytes(int inForce) {
    BitWriter out = new BitWriter();
    out.write(tag, 16);
    out.writeVarint(shape.width());
    out.writeVarint(shape.height());
    out.writeVarint(inForce);
    return out.toByteArray();
  }

  /** The number in force of a packet of this stream; -1 if the packet is of another. */
  int read(BitReader in) {
    int packetTag = (int) in.read(16);
    int width = in.readVarint();
    int height = in.readVarint();
    int inForce = in.readVarint();
    return in.isExhausted()
            || packetTag != tag
            || width != shape.width()
            || height != shape.height()
        ? -1
        : inForce;
  }

  /**
   * The number in force that most packets carry, the smallest on ties; -1 if none carries one from
   * {@code least} to {@code most}.
   */
  int mostCommon(List<byte[]> packets, int least, int most) {
    int[] votes = new int[most - least + 1];
    int best = -1;
    for (byte[] packet : packets) {
      int inForce = read(new BitReader(packet));
      if (inForce >= least && inForce <= most) {
        votes[inForce - least]++;
      }
    }
    for (int i = 0; i < votes.length; i++) {
      if (votes[i] > (best < 0 ? 0 : votes[best])) {
        best = i;
      }
    }
    return best < 0 ? -1 : best + least;
  }
}
