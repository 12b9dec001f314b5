package linkworthy.codec;

import java.util.List;
import linkworthy.link.Packet;

/**
 * A coded picture.
 *
 * @param packets in sending order
 * @param keep components in force (K), or the quality in force; -1 where the codec has neither
 * @param step quantiser step in force, in grey levels, where it was chosen for this picture;
 *     otherwise empty, and the codec's description has it
 */
public record Encoding(List<Packet> packets, int keep, String step) {
  public Encoding {
    packets = List.copyOf(packets);
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
