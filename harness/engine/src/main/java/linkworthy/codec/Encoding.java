package linkworthy.codec;

import java.util.List;

/**
 * A coded picture.
 *
 * @param packets payload of each packet, in sending order, without the link's header
 * @param keep components in force (K), or -1 where the codec has none
 */
public record Encoding(List<byte[]> packets, int keep) {
  public Encoding {
    packets = List.copyOf(packets);
  }

  /** Bits in all payloads. */
  public long payloadBits() {
    return packets.stream().mapToLong(p -> 8L * p.length).sum();
  }
}
