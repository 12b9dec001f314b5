package linkworthy.corpus;

import java.io.ByteArrayOutputStream;
import java.nio.charset.StandardCharsets;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;

/**
 * A file's bytes as they are given to a reader, such that it returns the samples as stored. The PNM
 * reader stretches samples to the full 8 or 16 bits and the JPEG reader converts colour by an
 * embedded profile; neither is wanted, so the header says 8 or 16 bits, and the profile and other
 * notes are left out.
 */
final class StoredBytes {
  private static final int SOI = 0xD8;
  private static final int SOS = 0xDA;
  private static final int COMMENT = 0xFE;
  private static final int APP0_JFIF = 0xE0;
  private static final int APP14_ADOBE = 0xEE;
  private static final int APP15 = 0xEF;

  private final byte[] bytes;
  private final int bitDepth;

  private StoredBytes(byte[] bytes, int bitDepth) {
    this.bytes = bytes;
    this.bitDepth = bitDepth;
  }

  /** What the reader gets. */
  byte[] bytes() {
    return bytes;
  }

  /** The depth of a PNM file's samples, 0 for the other formats. */
  int bitDepth() {
    return bitDepth;
  }

  static StoredBytes of(PictureFormat format, String name, byte[] bytes) {
    return switch (format) {
      case PNM -> pnm(name, bytes);
      case JPEG -> new StoredBytes(withoutNotes(bytes), 0);
      default -> new StoredBytes(bytes, 0);
    };
  }

  /** Leaves out the application segments, except the two that say how colour is coded. */
  private static byte[] withoutNotes(byte[] bytes) {
    ByteArrayOutputStream out = new ByteArrayOutputStream(bytes.length);
    out.write(0xFF);
    out.write(SOI);
    int at = 2;
    while (at + 4 <= bytes.length && (bytes[at] & 0xFF) == 0xFF) {
      int marker = bytes[at + 1] & 0xFF;
      int next = at + 2 + ((bytes[at + 2] & 0xFF) << 8) + (bytes[at + 3] & 0xFF);
      if (marker == SOS || marker < 0xC0 || marker == 0xFF || next > bytes.length) {
        break;
      }
      boolean note = marker > APP0_JFIF && marker <= APP15 && marker != APP14_ADOBE;
      if (!note && marker != COMMENT) {
        out.write(bytes, at, next - at);
      }
      at = next;
    }
    out.write(bytes, at, bytes.length - at);
    return out.toByteArray();
  }

  /**
   * Reads a PNM header (netpbm's pgm(5), ppm(5) and pbm(5): numbers between white space, comments
   * from # to the end of the line) and writes it again for 8 or 16 bits.
   *
   * @throws BadInput if the largest value is not 2^bits - 1
   * @throws Unavailable if there are no such numbers
   */
  private static StoredBytes pnm(String name, byte[] bytes) {
    boolean bitmap = bytes[1] == '1' || bytes[1] == '4';
    PnmHeader header = new PnmHeader(bytes);
    long width = header.number();
    long height = header.number();
    long max = bitmap ? 1 : header.number();
    if (width < 1 || height < 1 || max < 1 || header.at >= bytes.length) {
      throw new Unavailable(
          "picture " + name + " cannot be read: damaged PNM, no size in its header");
    }
    int bits = Long.SIZE - Long.numberOfLeadingZeros(max);
    if (max != (1L << bits) - 1 || bits > 16) {
      throw new BadInput(
          "picture "
              + name
              + " has samples up to "
              + max
              + "; accepted: 1, 3, 7, ... 65535, that is 2^bits - 1");
    }
    String text = "P" + (char) bytes[1] + "\n" + width + " " + height + "\n";
    if (!bitmap) {
      text += (bits > 8 ? 65535 : 255) + "\n";
    }
    ByteArrayOutputStream out = new ByteArrayOutputStream(bytes.length + text.length());
    out.writeBytes(text.getBytes(StandardCharsets.US_ASCII));
    int from = PnmHeader.isSpace(bytes[header.at]) ? header.at + 1 : header.at;
    out.write(bytes, from, bytes.length - from);
    return new StoredBytes(out.toByteArray(), bits);
  }

  private static final class PnmHeader {
    private final byte[] bytes;
    private int at = 2;

    PnmHeader(byte[] bytes) {
      this.bytes = bytes;
    }

    /** The next number, or -1; {@link #at} is then behind its last digit. */
    long number() {
      skipSpaceAndComments();
      long number = -1;
      for (int digits = 0; at < bytes.length && isDigit(bytes[at]); at++) {
        if (++digits > 9) {
          return -1;
        }
        number = Math.max(0, number) * 10 + bytes[at] - '0';
      }
      return number;
    }

    private void skipSpaceAndComments() {
      boolean comment = false;
      while (at < bytes.length && (comment || bytes[at] == '#' || isSpace(bytes[at]))) {
        comment = bytes[at] == '#' || (comment && bytes[at] != '\n' && bytes[at] != '\r');
        at++;
      }
    }

    private static boolean isDigit(byte b) {
      return b >= '0' && b <= '9';
    }

    private static boolean isSpace(byte b) {
      return b == ' ' || (b >= '\t' && b <= '\r');
    }
  }
}
