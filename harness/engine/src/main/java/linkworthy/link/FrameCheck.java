package linkworthy.link;

import java.util.Arrays;

/**
 * The frame check sequence of IEEE 802.15.4: the ITU-T CRC of 16 bits, x^16 + x^12 + x^5 + 1, start
 * value 0, bits of each octet taken and sent lowest first (known as CRC-16/KERMIT). Any single
 * burst of up to 16 flipped bits is found; other damage goes unnoticed once in 65536 times.
 */
public final class FrameCheck {
  /** Length of the sequence, in bytes. */
  public static final int BYTES = 2;

  /** The polynomial with its bits reversed. */
  private static final int POLYNOMIAL = 0x8408;

  private static final int[] TABLE = new int[256];

  static {
    for (int octet = 0; octet < TABLE.length; octet++) {
      int crc = octet;
      for (int bit = 0; bit < 8; bit++) {
        crc = (crc & 1) == 1 ? (crc >>> 1) ^ POLYNOMIAL : crc >>> 1;
      }
      TABLE[octet] = crc;
    }
  }

  private FrameCheck() {}

  /**
   * A frame as it is sent: header, payload and check sequence, lower byte first.
   *
   * @param headerBytes length of the header, whose bytes are taken as 0
   */
  public static byte[] frame(int headerBytes, byte[] payload) {
    byte[] frame = new byte[headerBytes + payload.length + BYTES];
    System.arraycopy(payload, 0, frame, headerBytes, payload.length);
    int crc = crc(frame, frame.length - BYTES);
    frame[frame.length - 2] = (byte) crc;
    frame[frame.length - 1] = (byte) (crc >>> 8);
    return frame;
  }

  /** The payload of a frame that arrived; empty where it is shorter than header and sequence. */
  public static byte[] payload(int headerBytes, byte[] frame) {
    int end = Math.max(0, frame.length - BYTES);
    return Arrays.copyOfRange(frame, Math.min(headerBytes, end), end);
  }

  /** Whether a frame agrees with its check sequence. */
  public static boolean passes(byte[] frame) {
    return crc(frame, frame.length) == 0;
  }

  private static int crc(byte[] bytes, int length) {
    int crc = 0;
    for (int i = 0; i < length; i++) {
      crc = (crc >>> 8) ^ TABLE[(crc ^ bytes[i]) & 0xFF];
    }
    return crc;
  }
}
