package linkworthy.link;

import java.util.Arrays;

/**
 * A data symbol of a code word: the length of a payload in two bytes, the payload, and zeros up to
 * the longest of its word.
 */
final class DataSymbol {
  /** Bytes before the payload. */
  static final int OVERHEAD = 2;

  private DataSymbol() {}

  static byte[] of(byte[] payload, int length) {
    byte[] symbol = new byte[length];
    symbol[0] = (byte) (payload.length >> 8);
    symbol[1] = (byte) payload.length;
    System.arraycopy(payload, 0, symbol, OVERHEAD, payload.length);
    return symbol;
  }

  static byte[] payload(byte[] symbol) {
    return Arrays.copyOfRange(symbol, OVERHEAD, end(symbol));
  }

  /** Where the padding begins. */
  static int end(byte[] symbol) {
    return OVERHEAD + ((symbol[0] & 0xFF) << 8 | (symbol[1] & 0xFF));
  }

  /** Whether length and padding are possible; damage elsewhere in the word may break them. */
  static boolean isSound(byte[] symbol) {
    int end = end(symbol);
    boolean sound = end <= symbol.length;
    for (int i = end; sound && i < symbol.length; i++) {
      sound = symbol[i] == 0;
    }
    return sound;
  }
}
