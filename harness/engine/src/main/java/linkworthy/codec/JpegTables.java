package linkworthy.codec;

import javax.imageio.plugins.jpeg.JPEGHuffmanTable;
import javax.imageio.plugins.jpeg.JPEGQTable;

/**
 * The tables that both ends of a JPEG link know: the typical luminance tables of ITU-T T.81 Annex
 * K, as the Java platform has them, and table K.1 scaled by a quality.
 */
final class JpegTables {
  /** Coefficients of a block, and samples of its side. */
  static final int BLOCK = 64;

  static final int SIDE = 8;

  /** Table K.3. */
  static final Huffman DC = new Huffman(JPEGHuffmanTable.StdDCLuminance);

  /** Table K.5. */
  static final Huffman AC = new Huffman(JPEGHuffmanTable.StdACLuminance);

  private static final int[] ZIG_ZAG = DctBasis.zigZag(SIDE);

  private JpegTables() {}

  /** Natural index ({@code 8 * vertical + horizontal frequency}) of a zig-zag position. */
  static int natural(int position) {
    return ZIG_ZAG[position];
  }

  /**
   * Quantiser steps in zig-zag order: table K.1 times s / 100, rounded half up, within 1 to 255,
   * where s is 5000 / quality (whole division) below quality 50 and 200 - 2 quality from there on.
   * The rule is not in T.81; it is the convention of the library of the Independent JPEG Group.
   *
   * @param quality 1 to 100
   */
  static int[] steps(int quality) {
    int scale = quality < 50 ? 5000 / quality : 200 - 2 * quality;
    int[] typical = JPEGQTable.K1Luminance.getTable();
    int[] steps = new int[BLOCK];
    for (int i = 0; i < BLOCK; i++) {
      steps[i] = Math.max(1, Math.min(255, (scale * typical[ZIG_ZAG[i]] + 50) / 100));
    }
    return steps;
  }

  /** A Huffman table of T.81 Annex C. */
  static final class Huffman {
    private static final int LONGEST = 16;

    private final short[] lengths;
    private final short[] values;
    private final int[] codes = new int[256];
    private final int[] sizes = new int[256];
    private final short[] look = new short[1 << LONGEST];

    private Huffman(JPEGHuffmanTable table) {
      lengths = table.getLengths();
      values = table.getValues();
      int code = 0;
      int next = 0;
      for (int size = 1; size <= lengths.length; size++) {
        for (int i = 0; i < lengths[size - 1]; i++, next++, code++) {
          int value = values[next];
          codes[value] = code;
          sizes[value] = size;
          int first = code << (LONGEST - size);
          int entry = value << 5 | size;
          java.util.Arrays.fill(look, first, first + (1 << (LONGEST - size)), (short) entry);
        }
        code <<= 1;
      }
    }

    /** How many codes there are of each length from 1. */
    short[] lengths() {
      return lengths;
    }

    /** Values in the order of their codes. */
    short[] values() {
      return values;
    }

    /** Length of a value's code, in bits. */
    int size(int value) {
      return sizes[value];
    }

    int code(int value) {
      return codes[value];
    }

    /** Reads a value; -1 if the next bits are no code. */
    int read(BitReader in) {
      int entry = look[(int) (in.peek() >>> (64 - LONGEST))];
      in.skip(entry & 31);
      return entry == 0 ? -1 : entry >> 5;
    }
  }
}
