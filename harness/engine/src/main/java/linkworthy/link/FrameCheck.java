package linkworthy.link;

import java.util.Arrays;

/**
 * A check sequence of a frame: a cyclic redundancy check of 16 or 32 bits, described as catalogues
 * of parametrised CRC algorithms do. It finds every burst of flipped bits that is not longer than
 * itself; other damage goes unnoticed once in 2^width times.
 */
public final class FrameCheck {
  /**
   * The sequence of IEEE 802.15.4 of 2 bytes: the ITU-T CRC, x^16 + x^12 + x^5 + 1 (known as
   * CRC-16/KERMIT).
   */
  public static final FrameCheck BITS_16 = new FrameCheck(16, 0x1021, 0, true, 0);

  /**
   * The sequence of 4 bytes of IEEE 802.3 and of IEEE 802.15.4g (known as CRC-32/ISO-HDLC; that the
   * latter fills payloads below 4 bytes up with zeros is left out).
   */
  public static final FrameCheck BITS_32 = new FrameCheck(32, 0x04C11DB7, ~0, true, ~0);

  private final int width;
  private final boolean reflected;
  private final int start;
  private final int mask;
  private final int[] table = new int[256];

  /**
   * @param width 16 or 32 bits
   * @param polynomial without its highest power, that of x^0 lowest
   * @param initial of the register before the first bit
   * @param reflected whether bits of each byte are taken, and bytes of the sequence sent, lowest
   *     first
   * @param mask what the last register is XORed with
   * @throws IllegalArgumentException if the width is neither 16 nor 32
   */
  public FrameCheck(int width, int polynomial, int initial, boolean reflected, int mask) {
    if (width != 16 && width != 32) {
      throw new IllegalArgumentException("width of a CRC is " + width + "; accepted: 16, 32");
    }
    this.width = width;
    this.reflected = reflected;
    this.mask = mask;
    this.start = inPlace(initial);
    int divisor = inPlace(polynomial);
    for (int octet = 0; octet < table.length; octet++) {
      int register = reflected ? octet : octet << 24;
      for (int bit = 0; bit < 8; bit++) {
        boolean divides = reflected ? (register & 1) == 1 : register < 0;
        register = (reflected ? register >>> 1 : register << 1) ^ (divides ? divisor : 0);
      }
      table[octet] = register;
    }
  }

  /**
   * The bits of x^0 to x^(width - 1) where the register has them: its first bit lies at one end.
   */
  private int inPlace(int bits) {
    int high = bits << (32 - width);
    return reflected ? Integer.reverse(high) : high;
  }

  /**
   * The sequence of a length that a noise model gives.
   *
   * @throws IllegalArgumentException unless that is 16 or 32 bits
   */
  public static FrameCheck of(int bits) {
    return switch (bits) {
      case 16 -> BITS_16;
      case 32 -> BITS_32;
      default ->
          throw new IllegalArgumentException("frame check has " + bits + " bits; accepted: 16, 32");
    };
  }

  /** Length of the sequence, in bytes. */
  public int bytes() {
    return width / 8;
  }

  /** A frame as it is sent: header, whose bytes are taken as 0, payload and check sequence. */
  public byte[] frame(int headerBytes, byte[] payload) {
    byte[] frame = new byte[headerBytes + payload.length + bytes()];
    System.arraycopy(payload, 0, frame, headerBytes, payload.length);
    int end = frame.length - bytes();
    int crc = crc(frame, end);
    for (int i = 0; i < bytes(); i++) {
      frame[end + i] = sent(crc, i);
    }
    return frame;
  }

  /** The payload of a frame that arrived; empty where it is shorter than header and sequence. */
  public byte[] payload(int headerBytes, byte[] frame) {
    int end = Math.max(0, frame.length - bytes());
    return Arrays.copyOfRange(frame, Math.min(headerBytes, end), end);
  }

  /** Whether a frame agrees with its check sequence; not if it is shorter than that. */
  public boolean passes(byte[] frame) {
    int end = frame.length - bytes();
    boolean agrees = end >= 0;
    int crc = crc(frame, Math.max(0, end));
    for (int i = 0; agrees && i < bytes(); i++) {
      agrees = frame[end + i] == sent(crc, i);
    }
    return agrees;
  }

  private byte sent(int crc, int index) {
    return (byte) (crc >>> (reflected ? 8 * index : width - 8 - 8 * index));
  }

  /** The CRC of the first bytes; where the width is 16, in the lower half. */
  int crc(byte[] bytes, int length) {
    int register = start;
    if (reflected) {
      for (int i = 0; i < length; i++) {
        register = (register >>> 8) ^ table[(register ^ bytes[i]) & 0xFF];
      }
      return register ^ mask;
    }
    for (int i = 0; i < length; i++) {
      register = (register << 8) ^ table[((register >>> 24) ^ bytes[i]) & 0xFF];
    }
    return (register >>> (32 - width)) ^ mask;
  }
}
