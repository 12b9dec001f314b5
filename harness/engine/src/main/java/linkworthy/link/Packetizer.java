package linkworthy.link;

import java.util.ArrayList;
import java.util.Arrays;
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

    /** How much hangs on the units of this strip. */
    Importance importance();

    /**
     * The next unit, at most {@code room} bytes long; null if not even the smallest sensible unit
     * fits. Never null when {@code whole} says that the room is a whole packet's.
     */
    byte @Nullable [] take(int room, boolean whole);
  }

  /**
   * Cuts strips into packets of at most {@code payloadBytes} each.
   *
   * @return the packets, in sending order
   */
  public static List<Packet> pack(byte[] preamble, List<? extends Strip> strips, int payloadBytes) {
    Filling filling = new Filling(preamble, payloadBytes);
    for (Strip strip : strips) {
      while (!strip.isDone()) {
        byte[] unit = strip.take(filling.room(), filling.isFresh());
        if (unit == null) {
          filling.send();
        } else {
          filling.add(unit, strip.importance());
        }
      }
    }
    if (!filling.isFresh()) {
      filling.send();
    }
    return filling.packets;
  }

  /** The packet at hand and those before it. */
  private static final class Filling {
    private final List<Packet> packets = new ArrayList<>();
    private final byte[] preamble;
    private final byte[] bytes;
    private Importance importance = Importance.REST;
    private int used;

    Filling(byte[] preamble, int payloadBytes) {
      this.preamble = preamble;
      this.bytes = Arrays.copyOf(preamble, payloadBytes);
      this.used = preamble.length;
    }

    int room() {
      return bytes.length - used;
    }

    boolean isFresh() {
      return used == preamble.length;
    }

    void add(byte[] unit, Importance unitImportance) {
      System.arraycopy(unit, 0, bytes, used, unit.length);
      used += unit.length;
      if (unitImportance.compareTo(importance) < 0) {
        importance = unitImportance;
      }
    }

    void send() {
      packets.add(new Packet(Arrays.copyOf(bytes, used), importance));
      used = preamble.length;
      importance = Importance.REST;
    }
  }
}
