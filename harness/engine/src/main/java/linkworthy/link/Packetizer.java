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
    @Nullable Unit take(int room, boolean whole);
  }

  /** A part of a packet whose length is known before it is written. */
  public interface Unit {
    /** In bytes. */
    int length();

    /** The unit, {@link #length} bytes long and the same every time. */
    byte[] bytes();

    /** A unit that is written already. */
    static Unit of(byte[] bytes) {
      return new Unit() {
        @Override
        public int length() {
          return bytes.length;
        }

        @Override
        public byte[] bytes() {
          return bytes;
        }
      };
    }
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
        Unit unit = strip.take(filling.room(), filling.isFresh());
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
    private final int payloadBytes;
    private List<Unit> units = new ArrayList<>();
    private Importance importance = Importance.REST;
    private int used;

    Filling(byte[] preamble, int payloadBytes) {
      this.preamble = preamble;
      this.payloadBytes = payloadBytes;
      this.used = preamble.length;
    }

    int room() {
      return payloadBytes - used;
    }

    boolean isFresh() {
      return units.isEmpty();
    }

    void add(Unit unit, Importance unitImportance) {
      units.add(unit);
      used += unit.length();
      if (unitImportance.compareTo(importance) < 0) {
        importance = unitImportance;
      }
    }

    void send() {
      int length = used;
      List<Unit> content = units;
      packets.add(new Packet(length, () -> write(length, content), importance, 0));
      units = new ArrayList<>();
      used = preamble.length;
      importance = Importance.REST;
    }

    private byte[] write(int length, List<Unit> content) {
      byte[] bytes = Arrays.copyOf(preamble, length);
      int at = preamble.length;
      for (Unit unit : content) {
        System.arraycopy(unit.bytes(), 0, bytes, at, unit.length());
        at += unit.length();
      }
      return bytes;
    }
  }
}
