package linkworthy.codec;

import java.util.List;
import linkworthy.link.Packet;

/**
 * A coded picture.
 *
 * @param packets in sending order
 * @param keep components in force (K), or -1 where the codec has none
 */
public record Encoding(List<Packet> packets, int keep) {
  public Encoding {
    packets = List.copyOf(packets);
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
