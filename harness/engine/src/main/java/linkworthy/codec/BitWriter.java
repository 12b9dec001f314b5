package linkworthy.codec;

import java.util.Arrays;

/** Writes bits, most significant first, into bytes. */
final class BitWriter {
  private byte[] bytes = new byte[128];
  private int length;
  private long pending;
  private int pendingBits;

  /** Writes the lowest {@code count} bits of a value; {@code count} is 0 to 32. */
  void write(long value, int count) {
    pending = (pending << count) | (value & ((1L << count) - 1));
    pendingBits += count;
    while (pendingBits >= 8) {
      pendingBits -= 8;
      put((byte) (pending >>> pendingBits));
    }
  }

  /** Writes a whole number from 0 in groups of seven bits, least significant first (LEB128). */
  void writeVarint(int value) {
    int rest = value;
    while (rest > 0x7F) {
      write((rest & 0x7F) | 0x80, 8);
      rest >>>= 7;
    }
    write(rest, 8);
  }

  /** Bytes that {@link #writeVarint} needs for a value. */
  static int varintBytes(int value) {
    return Math.max(1, (38 - Integer.numberOfLeadingZeros(value)) / 7);
  }

  /** All bits so far, the last byte filled with zeros. */
  byte[] toByteArray() {
    if (pendingBits > 0) {
      write(0, 8 - pendingBits);
    }
    return Arrays.copyOf(bytes, length);
  }

  private void put(byte b) {
    if (length == bytes.length) {
      bytes = Arrays.copyOf(bytes, 2 * length);
    }
    bytes[length++] = b;
  }
}
