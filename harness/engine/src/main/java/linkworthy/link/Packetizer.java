package linkworthy.link;

import java.util.ArrayList;
import java.util.List;
import org.jspecify.annotations.Nullable;

/**
 * Fills packets in order with units that decode alone. Every packet starts with the same preamble,
 * so that any one of them can be decoded without the others.
 */
public final class Packetizer {
  private Packetizer() {}

  /** Values in sending order that can be cut into units. */
  public interface Strip {
    /** Whether all has been taken. */
    boolean isDone();

    /**
     * The next unit, at most {@code room} bytes long; null if not even the smallest sensible unit
     * fits. Never null when {@code whole} says that the room is a whole packet's.
     */
    byte @Nullable [] take(int room, boolean whole);
  }

  /**
   * Cuts strips into packets of at most {@code payloadBytes} each.
   *
   * @return the payloads, in sending order
   */
  public static List<byte[]> pack(byte[] preamble, List<? extends Strip> strips, int payloadBytes) {
    List<byte[]> packets = new ArrayList<>();
    byte[] packet = new byte[payloadBytes];
    System.arraycopy(preamble, 0, packet, 0, preamble.length);
    int used = preamble.length;
    for (Strip strip : strips) {
      while (!strip.isDone()) {
        byte[] unit = strip.take(payloadBytes - used, used == preamble.length);
        if (unit == null) {
          packets.add(java.util.Arrays.copyOf(packet, used));
          used = preamble.length;
        } else {
          System.arraycopy(unit, 0, packet, used, unit.length);
          used += unit.length;
        }
      }
    }
    if (used > preamble.length) {
      packets.add(java.util.Arrays.copyOf(packet, used));
    }
    return packets;
  }
}
