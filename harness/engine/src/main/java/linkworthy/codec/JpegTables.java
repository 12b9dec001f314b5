package linkworthy.codec;

import java.util.Arrays;
import javax.imageio.plugins.jpeg.JPEGHuffmanTable;

/**
 * The tables that both ends of a JPEG link know: the typical Huffman tables for luminance of ITU-T
 * T.81 Annex K, as the Java platform has them, and {@link FrequencySteps} scaled by a quality.
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

  /** Quantiser steps in zig-zag order. */
  static int[] steps(FrequencySteps weights) {
    int[] steps = new int[BLOCK];
    Arrays.setAll(steps, i -> weights.step(ZIG_ZAG[i]));
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
          Arrays.fill(look, first, first + (1 << (LONGEST - size)), (short) entry);
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
