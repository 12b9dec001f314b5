package linkworthy.codec;

import java.lang.invoke.MethodHandles;
import java.lang.invoke.VarHandle;
import java.nio.ByteOrder;

/**
 * Reads bits, most significant first. Beyond the end every bit is 0 and {@link #isExhausted()}
 * turns true; nothing throws.
 */
final class BitReader {
  private static final VarHandle LONGS =
      MethodHandles.byteArrayViewVarHandle(long[].class, ByteOrder.BIG_ENDIAN);

  private final byte[] bytes;
  private long position;

  BitReader(byte[] bytes) {
    this.bytes = bytes;
  }

  /** Whether more bits were asked for than there are. */
  boolean isExhausted() {
    return position > 8L * bytes.length;
  }

  /** Whether at least one whole byte is left. */
  boolean hasByte() {
    return position + 8 <= 8L * bytes.length;
  }

  /** The next 57 or more bits, left-aligned in a long, without consuming them. */
  long peek() {
    int at = (int) (position >>> 3);
    long window;
    if (at <= bytes.length - 8) {
      window = (long) LONGS.get(bytes, at);
    } else {
      window = 0;
      for (int i = 0; i < 8; i++) {
        window = (window << 8) | (at + i < bytes.length ? bytes[at + i] & 0xFF : 0);
      }
    }
    return window << (position & 7);
  }

  /** Consumes bits. */
  void skip(int count) {
    position = Math.min(position + count, 8L * bytes.length + 1);
  }

  /** Reads {@code count} bits (0 to 32) as an unsigned number. */
  long read(int count) {
    long value = count == 0 ? 0 : peek() >>> (64 - count);
    skip(count);
    return value;
  }

  /** Reads what {@link BitWriter#writeVarint} wrote; -1 if it is longer than 28 bits. */
  int readVarint() {
    int value = 0;
    for (int shift = 0; shift < 28; shift += 7) {
      int group = (int) read(8);
      value |= (group & 0x7F) << shift;
      if (group < 0x80) {
        return value;
      }
    }
    return -1;
  }

  /** Number of the byte that the next bit is in. */
  int byteAt() {
    return (int) (position >>> 3);
  }

  /** Moves to the next whole byte. */
  void align() {
    position = (position + 7) & ~7L;
  }
}
