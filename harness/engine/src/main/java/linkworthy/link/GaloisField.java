package linkworthy.link;

import linkworthy.input.Require;

/**
 * The field of 256 elements: bytes as polynomials over GF(2), modulo a polynomial of degree 8.
 * Addition is exclusive or.
 */
final class GaloisField {
  /** x^8 + x^4 + x^3 + x^2 + 1, with the generator x; the field of QR codes (ISO/IEC 18004). */
  static final GaloisField X11D = new GaloisField(0x11D, 2);

  /** Elements other than zero. */
  static final int ORDER = 255;

  private final byte[] powers = new byte[2 * ORDER];
  private final int[] logarithms = new int[ORDER + 1];

  /**
   * @param polynomial the modulus, from 0x100 to 0x1FF
   * @param generator element whose powers are all elements other than zero
   * @throws IllegalArgumentException if they are not
   */
  GaloisField(int polynomial, int generator) {
    Require.inRange(polynomial, 0x100, 0x1FF, "polynomial");
    Require.inRange(generator, 2, ORDER, "generator");
    int element = 1;
    for (int i = 0; i < ORDER; i++) {
      if (i > 0 && element <= 1) {
        throw new IllegalArgumentException(
            generator + " generates only " + i + " elements modulo " + polynomial);
      }
      powers[i] = (byte) element;
      powers[i + ORDER] = (byte) element;
      logarithms[element] = i;
      element = slowProduct(element, generator, polynomial);
    }
  }

  private static int slowProduct(int a, int b, int polynomial) {
    int product = 0;
    for (int bit = 7; bit >= 0; bit--) {
      product <<= 1;
      product ^= product > ORDER ? polynomial : 0;
      product ^= ((b >> bit) & 1) * a;
    }
    return product;
  }

  /** The generator to a power from 0. */
  int power(int exponent) {
    return powers[exponent % ORDER] & 0xFF;
  }

  int product(int a, int b) {
    return a == 0 || b == 0 ? 0 : powers[logarithms[a] + logarithms[b]] & 0xFF;
  }

  /**
   * @throws ArithmeticException for 0
   */
  int inverse(int a) {
    if (a == 0) {
      throw new ArithmeticException("0 has no inverse");
    }
    return power(ORDER - logarithms[a]);
  }

  /** Adds a multiple of one row to another that is at least as long. */
  void addMultiple(byte[] to, byte[] from, int factor) {
    if (factor == 0) {
      return;
    }
    int log = logarithms[factor];
    for (int i = 0; i < from.length; i++) {
      if (from[i] != 0) {
        to[i] ^= powers[log + logarithms[from[i] & 0xFF]];
      }
    }
  }

  /** Multiplies a row in place. */
  void scale(byte[] row, int factor) {
    for (int i = 0; i < row.length; i++) {
      row[i] = (byte) product(row[i] & 0xFF, factor);
    }
  }
}
