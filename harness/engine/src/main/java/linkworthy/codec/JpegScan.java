package linkworthy.codec;

import java.io.ByteArrayOutputStream;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.BitSet;
import java.util.List;
import linkworthy.link.Importance;
import linkworthy.link.Packetizer;
import org.jspecify.annotations.Nullable;

/**
 * The entropy-coded scan of a baseline JPEG (ITU-T T.81 Annex F.1.2) with restart intervals: as the
 * units that travel, and as the file that a receiver builds from them.
 *
 * <p>A unit is a piece of one restart interval that decodes alone. It starts with the number of the
 * block that its first code belongs to, then the length of its codes in bytes (varints). Codes that
 * start an interval follow a bit 0; others follow a bit 1, the zig-zag position of the first code
 * (6 bits) and the DC index that the decoder's prediction stands at (12 bits, two's complement).
 * The codes are the very bits of the file, without its byte stuffing, filled to a whole byte by
 * ones.
 */
final class JpegScan {
  /** Indices beyond this do not occur in an 8-bit picture. */
  static final int LARGEST = 2047;

  private static final int END_OF_BLOCK = 0x00;
  private static final int SIXTEEN_ZEROS = 0xF0;
  private static final int POSITION_BITS = 6;
  private static final int PREDICTION_BITS = 12;
  private static final int SENSIBLE_BITS = 64;

  private JpegScan() {}

  /**
   * A Huffman code and the bits that follow it.
   *
   * @param position zig-zag position of the first coefficient it speaks of
   * @param prediction DC index that the decoder's prediction stands at before it
   */
  private record Code(int block, int position, int prediction, int bits, int length) {}

  private static int category(int value) {
    return 32 - Integer.numberOfLeadingZeros(Math.abs(value));
  }

  private static Code code(
      JpegTables.Huffman table, int symbol, int value, int block, int position, int prediction) {
    int extra = symbol & 15;
    int tail = (value < 0 ? value - 1 : value) & ((1 << extra) - 1);
    return new Code(
        block,
        position,
        prediction,
        table.code(symbol) << extra | tail,
        table.size(symbol) + extra);
  }

  /** The codes of blocks {@code from} to before {@code to}, which are one restart interval. */
  private static List<Code> codesOf(int[] indices, int from, int to) {
    List<Code> codes = new ArrayList<>();
    int prediction = 0;
    for (int block = from; block < to; block++) {
      int base = block * JpegTables.BLOCK;
      int difference = indices[base] - prediction;
      codes.add(code(JpegTables.DC, category(difference), difference, block, 0, prediction));
      prediction = indices[base];
      int position = 1;
      for (int k = 1; k < JpegTables.BLOCK; k++) {
        int value = indices[base + k];
        if (value != 0) {
          for (; k - position > 15; position += 16) {
            codes.add(code(JpegTables.AC, SIXTEEN_ZEROS, 0, block, position, prediction));
          }
          int symbol = (k - position) << 4 | category(value);
          codes.add(code(JpegTables.AC, symbol, value, block, position, prediction));
          position = k + 1;
        }
      }
      if (position < JpegTables.BLOCK) {
        codes.add(code(JpegTables.AC, END_OF_BLOCK, 0, block, position, prediction));
      }
    }
    return codes;
  }

  private static byte[] bytes(List<Code> codes) {
    BitWriter out = new BitWriter();
    long bits = 0;
    for (Code code : codes) {
      out.write(code.bits(), code.length());
      bits += code.length();
    }
    int spare = (int) (-bits & 7);
    out.write((1 << spare) - 1, spare);
    return out.toByteArray();
  }

  /** The restart intervals of a scan, to be sent one after the other. */
  static List<Packetizer.Strip> strips(int[] indices, int blocksPerInterval) {
    List<Packetizer.Strip> strips = new ArrayList<>();
    int blocks = indices.length / JpegTables.BLOCK;
    for (int from = 0; from < blocks; from += blocksPerInterval) {
      strips.add(new Interval(indices, from, Math.min(blocks, from + blocksPerInterval)));
    }
    return strips;
  }

  /** A restart interval that is cut between its codes; it has them only while it is being cut. */
  private static final class Interval implements Packetizer.Strip {
    private final int[] indices;
    private final int from;
    private final int to;
    private List<Code> codes = List.of();
    private int done;
    private boolean ended;

    Interval(int[] indices, int from, int to) {
      this.indices = indices;
      this.from = from;
      this.to = to;
    }

    @Override
    public boolean isDone() {
      return ended;
    }

    @Override
    public Importance importance() {
      return Importance.FIRST;
    }

    @Override
    public Packetizer.@Nullable Unit take(int room, boolean whole) {
      if (codes.isEmpty()) {
        codes = codesOf(indices, from, to);
      }
      Code first = codes.get(done);
      int start = done == 0 ? 1 : 1 + POSITION_BITS + PREDICTION_BITS;
      int header = BitWriter.varintBytes(first.block()) + BitWriter.varintBytes(room);
      long most = 8L * (room - header);
      long bits = start;
      int end = done;
      while (end < codes.size() && bits + codes.get(end).length() <= most) {
        bits += codes.get(end++).length();
      }
      if (end == done || (!whole && end < codes.size() && bits < start + SENSIBLE_BITS)) {
        return null;
      }
      BitWriter out = new BitWriter();
      out.writeVarint(first.block());
      out.writeVarint((int) ((bits + 7) / 8));
      out.write(done == 0 ? 0 : 1, 1);
      if (done > 0) {
        out.write(first.position(), POSITION_BITS);
        out.write(first.prediction(), PREDICTION_BITS);
      }
      codes.subList(done, end).forEach(code -> out.write(code.bits(), code.length()));
      int spare = (int) (-bits & 7);
      out.write((1 << spare) - 1, spare);
      done = end;
      if (done == codes.size()) {
        ended = true;
        codes = List.of();
      }
      return Packetizer.Unit.of(out.toByteArray());
    }
  }

  /**
   * A file in the JPEG interchange format: SOI, JFIF APP0, DQT, SOF0, two DHT, DRI, SOS, intervals
   * with RSTn between them, EOI.
   */
  static byte[] file(
      PictureShape shape, FrequencySteps weights, int[] indices, int blocksPerInterval) {
    ByteArrayOutputStream out = new ByteArrayOutputStream();
    marker(out, 0xD8);
    segment(out, 0xE0, 'J', 'F', 'I', 'F', 0, 1, 1, 0, 0, 1, 0, 1, 0, 0);
    segment(out, 0xDB, concatenated(new int[] {0}, JpegTables.steps(weights)));
    segment(
        out,
        0xC0,
        8,
        shape.height() >> 8,
        shape.height() & 0xFF,
        shape.width() >> 8,
        shape.width() & 0xFF,
        1,
        1,
        0x11,
        0);
    huffman(out, 0x00, JpegTables.DC);
    huffman(out, 0x10, JpegTables.AC);
    segment(out, 0xDD, blocksPerInterval >> 8, blocksPerInterval & 0xFF);
    segment(out, 0xDA, 1, 1, 0x00, 0, JpegTables.BLOCK - 1, 0);
    int blocks = indices.length / JpegTables.BLOCK;
    for (int from = 0, n = 0; from < blocks; from += blocksPerInterval, n++) {
      if (n > 0) {
        marker(out, 0xD0 + (n - 1) % 8);
      }
      for (byte b : bytes(codesOf(indices, from, Math.min(blocks, from + blocksPerInterval)))) {
        out.write(b);
        if (b == (byte) 0xFF) {
          out.write(0);
        }
      }
    }
    marker(out, 0xD9);
    return out.toByteArray();
  }

  private static void marker(ByteArrayOutputStream out, int code) {
    out.write(0xFF);
    out.write(code);
  }

  private static void segment(ByteArrayOutputStream out, int code, int... content) {
    marker(out, code);
    out.write((content.length + 2) >> 8);
    out.write(content.length + 2);
    for (int value : content) {
      out.write(value);
    }
  }

  private static void huffman(ByteArrayOutputStream out, int id, JpegTables.Huffman table) {
    int[] lengths = new int[16];
    for (int i = 0; i < table.lengths().length; i++) {
      lengths[i] = table.lengths()[i];
    }
    int[] values = new int[table.values().length];
    Arrays.setAll(values, i -> table.values()[i]);
    segment(out, 0xC4, concatenated(concatenated(new int[] {id}, lengths), values));
  }

  private static int[] concatenated(int[] first, int[] second) {
    int[] both = Arrays.copyOf(first, first.length + second.length);
    System.arraycopy(second, 0, both, first.length, second.length);
    return both;
  }

  /** Reads units, damaged or not, into the indices of a picture. */
  static final class Reader {
    private final int[] indices;
    private final BitSet got = new BitSet();
    private final int across;
    private final int blocksPerInterval;

    Reader(JpegBlocks blocks, int blocksPerInterval) {
      this.indices = new int[blocks.count() * JpegTables.BLOCK];
      this.across = blocks.across();
      this.blocksPerInterval = blocksPerInterval;
    }

    /** Takes the units of a packet after its preamble, up to the first thing that cannot be. */
    void addUnits(byte[] packet, BitReader in) {
      while (in.hasByte()) {
        int block = in.readVarint();
        int length = in.readVarint();
        int from = in.byteAt();
        if (block < 0
            || length <= 0
            || length > packet.length - from
            || block >= indices.length / JpegTables.BLOCK) {
          return;
        }
        in.skip(8 * length);
        readCodes(new BitReader(Arrays.copyOfRange(packet, from, from + length)), block);
      }
    }

    private void readCodes(BitReader in, int first) {
      int block = first;
      int position = 0;
      int prediction = 0;
      if (in.read(1) == 1) {
        position = (int) in.read(POSITION_BITS);
        prediction = (int) in.read(PREDICTION_BITS) << (32 - PREDICTION_BITS);
        prediction >>= 32 - PREDICTION_BITS;
      } else if (block % blocksPerInterval != 0) {
        return;
      }
      int end =
          Math.min(
              indices.length / JpegTables.BLOCK,
              block - block % blocksPerInterval + blocksPerInterval);
      if (position > 0 && !in.isExhausted()) {
        set(block * JpegTables.BLOCK, prediction);
      }
      while (block < end) {
        if (position == 0) {
          int difference = readDifference(in);
          prediction += difference;
          if (in.isExhausted() || Math.abs(prediction) > LARGEST) {
            return;
          }
          set(block * JpegTables.BLOCK, prediction);
          position = 1;
        } else {
          position = readCoefficient(in, block * JpegTables.BLOCK, position);
          if (position < 0) {
            return;
          }
        }
        if (position == JpegTables.BLOCK) {
          position = 0;
          block++;
        }
      }
    }

    private void set(int place, int index) {
      indices[place] = index;
      got.set(place);
    }

    /** A DC difference; beyond any that can be if the bits are no code. */
    private static int readDifference(BitReader in) {
      int category = JpegTables.DC.read(in);
      return category < 0 ? 3 * LARGEST : extended(in, category);
    }

    /** The position after the next code's coefficients, or -1. */
    private int readCoefficient(BitReader in, int base, int position) {
      int symbol = JpegTables.AC.read(in);
      if (symbol < 0) {
        return -1;
      }
      int value = extended(in, symbol & 15);
      int at = symbol == END_OF_BLOCK ? JpegTables.BLOCK - 1 : position + (symbol >> 4);
      if (in.isExhausted() || at >= JpegTables.BLOCK) {
        return -1;
      }
      for (int k = position; k <= at; k++) {
        set(base + k, 0);
      }
      indices[base + at] = value;
      return at + 1;
    }

    /** Additional bits as a signed number (T.81 figure F.12). */
    private static int extended(BitReader in, int category) {
      int value = (int) in.read(category);
      return category > 0 && value < 1 << (category - 1) ? value - (1 << category) + 1 : value;
    }

    Decoding.Completeness completeness() {
      int there = got.cardinality();
      return there == 0
          ? Decoding.Completeness.NOTHING
          : there == indices.length
              ? Decoding.Completeness.COMPLETE
              : Decoding.Completeness.PARTIAL;
    }

    /**
     * All indices. Missing AC indices are 0; a missing DC index lies between those above and below
     * that arrived, as {@link Gaps#fill} has it, and is 0 (mid-grey) if none did.
     */
    int[] filled() {
      int blocks = indices.length / JpegTables.BLOCK;
      double[] means = new double[blocks];
      BitSet gotMeans = new BitSet();
      for (int block = 0; block < blocks; block++) {
        means[block] = indices[block * JpegTables.BLOCK];
        gotMeans.set(block, got.get(block * JpegTables.BLOCK));
      }
      Gaps.fill(means, gotMeans, across, 0);
      int[] filled = indices.clone();
      for (int block = 0; block < blocks; block++) {
        filled[block * JpegTables.BLOCK] = (int) Math.rint(means[block]);
      }
      return filled;
    }
  }
}
