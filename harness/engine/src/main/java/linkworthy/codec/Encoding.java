package linkworthy.codec;

import java.util.List;
import java.util.function.Supplier;
import linkworthy.corpus.Picture;
import linkworthy.link.Packet;
import org.jspecify.annotations.Nullable;

/**
 * A coded picture.
 *
 * @param packets in sending order
 * @param keep components in force (K), or the quality in force; -1 where the codec has neither
 * @param step quantiser step in force, in grey levels, where it was chosen for this picture;
 *     otherwise empty, and the codec's description has it
 * @param whole gives the picture that decoding all packets, undamaged, gives, where the encoder
 *     knows it without reading them; else null
 */
public record Encoding(
    List<Packet> packets, int keep, String step, @Nullable Supplier<Picture> whole) {
  public Encoding {
    packets = List.copyOf(packets);
  }

  /** An encoding of which only decoding tells the picture. */
  public Encoding(List<Packet> packets, int keep, String step) {
    this(packets, keep, step, null);
  }

  /** An encoding whose step, if any, is fixed in advance. */
  public Encoding(List<Packet> packets, int keep) {
    this(packets, keep, "");
  }

  /** The payloads of all packets, in sending order. */
  public List<byte[]> payloads() {
    return packets.stream().map(Packet::payload).toList();
  }

  /** Bits in all payloads. */
  public long payloadBits() {
    return packets.stream().mapToLong(p -> 8L * p.length()).sum();
  }
}
