package linkworthy.link;

import java.util.Locale;
import linkworthy.input.Require;

/**
 * The packets of a link.
 *
 * @param payloadBytes largest payload of a packet, in bytes
 * @param headerBytes overhead sent with each packet, in bytes
 * @param order which coefficients share a packet
 */
public record Link(int payloadBytes, int headerBytes, Order order) {
  /** The smallest payload that holds a packet's own description and some data, in bytes. */
  public static final int MIN_PAYLOAD = 32;

  public static final int MAX_PAYLOAD = 65_535;

  /** Which coefficients share a packet. */
  public enum Order {
    /** A loss takes one component everywhere. */
    BY_COMPONENT,
    /** A loss takes all components somewhere. */
    BY_REGION;

    /** The word used in studies. */
    public String id() {
      return name().toLowerCase(Locale.ROOT).replace('_', '-');
    }
  }

  public Link {
    Require.inRange(payloadBytes, MIN_PAYLOAD, MAX_PAYLOAD, "payload-bytes (bytes)");
    Require.inRange(headerBytes, 0, MAX_PAYLOAD, "header-bytes (bytes)");
  }

  /**
   * The same link with smaller payloads.
   *
   * @throws IllegalArgumentException if less than {@link #MIN_PAYLOAD} is left
   */
  public Link less(int bytes) {
    return new Link(payloadBytes - bytes, headerBytes + bytes, order);
  }

  /** Bits on the air for packets with these many payload bits. */
  public long sentBits(int packets, long payloadBits) {
    return payloadBits + 8L * headerBytes * packets;
  }
}
