package linkworthy.codec;

import java.nio.ByteBuffer;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.SortedMap;
import java.util.TreeMap;
import linkworthy.link.Importance;
import linkworthy.link.Packet;

/**
 * Cuts the bytes of a codec that knows no packets into packets, and puts together what arrives.
 * Each packet begins with a stream tag (16 bits), the size of the whole (32 bits) and its own
 * offset (32 bits).
 */
final class ByteStream {
  static final int PREAMBLE = 10;

  private final int tag;
  private final int payloadBytes;

  /**
   * @param tag what both ends agree on, 16 bits
   * @param payloadBytes largest payload of a packet
   */
  ByteStream(int tag, int payloadBytes) {
    this.tag = tag & 0xFFFF;
    this.payloadBytes = payloadBytes;
  }

  /** What arrived: the bytes that are to be decoded, and whether they are all there were. */
  static final class Arrived {
    private final byte[] bytes;
    private final boolean complete;

    Arrived(byte[] bytes, boolean complete) {
      this.bytes = bytes;
      this.complete = complete;
    }

    byte[] bytes() {
      return bytes;
    }

    boolean complete() {
      return complete;
    }
  }

  private int chunk() {
    return payloadBytes - PREAMBLE;
  }

  List<Packet> cut(byte[] bytes) {
    List<Packet> packets = new ArrayList<>();
    for (int offset = 0; offset < bytes.length; offset += chunk()) {
      int length = Math.min(chunk(), bytes.length - offset);
      byte[] payload =
          ByteBuffer.allocate(PREAMBLE + length)
              .putShort((short) tag)
              .putInt(bytes.length)
              .putInt(offset)
              .put(bytes, offset, length)
              .array();
      packets.add(new Packet(payload, offset == 0 ? Importance.HEADER : Importance.REST));
    }
    return packets;
  }

  /**
   * Puts packets together, in whatever order, number and state they are. Those of another stream
   * are left out; where they disagree on the size of the whole, the one that most of them have
   * counts.
   *
   * @param most the largest size believed, in bytes
   */
  Arrived join(List<byte[]> packets, OnLoss onLoss, long most) {
    SortedMap<Integer, SortedMap<Integer, byte[]>> bySize = new TreeMap<>();
    for (byte[] packet : packets) {
      if (packet.length > PREAMBLE && packet.length <= payloadBytes) {
        ByteBuffer in = ByteBuffer.wrap(packet);
        int packetTag = in.getShort() & 0xFFFF;
        int size = in.getInt();
        int offset = in.getInt();
        if (packetTag == tag && size > 0 && size <= most && fits(offset, in.remaining(), size)) {
          bySize.computeIfAbsent(size, s -> new TreeMap<>()).putIfAbsent(offset, packet);
        }
      }
    }
    int size = 0;
    SortedMap<Integer, byte[]> parts = new TreeMap<>();
    for (var entry : bySize.entrySet()) {
      if (entry.getValue().size() > parts.size()) {
        size = entry.getKey();
        parts = entry.getValue();
      }
    }
    return join(size, parts, onLoss);
  }

  private boolean fits(int offset, int length, int size) {
    return offset >= 0
        && offset < size
        && offset % chunk() == 0
        && length == Math.min(chunk(), size - offset);
  }

  private Arrived join(int size, SortedMap<Integer, byte[]> parts, OnLoss onLoss) {
    boolean complete = size > 0 && parts.size() == (size + chunk() - 1L) / chunk();
    if (parts.isEmpty() || (!complete && onLoss == OnLoss.DROP_PICTURE)) {
      return new Arrived(new byte[0], false);
    }
    byte[] bytes = new byte[size];
    int end = 0;
    for (var part : parts.entrySet()) {
      if (onLoss == OnLoss.TRUNCATE && part.getKey() != end) {
        return new Arrived(Arrays.copyOf(bytes, end), false);
      }
      int length = part.getValue().length - PREAMBLE;
      System.arraycopy(part.getValue(), PREAMBLE, bytes, part.getKey(), length);
      end = part.getKey() + length;
    }
    return new Arrived(onLoss == OnLoss.TRUNCATE ? Arrays.copyOf(bytes, end) : bytes, complete);
  }
}
