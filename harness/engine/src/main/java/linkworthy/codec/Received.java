package linkworthy.codec;

import java.util.Arrays;
import java.util.BitSet;
import org.jspecify.annotations.Nullable;

/**
 * What a decoder gathered from the packets that arrived. Packets may come in any order, twice,
 * damaged, cut short or from another stream; nothing here throws, and no array is larger than the
 * known picture needs.
 */
final class Received {
  private final int bitDepth;
  private final int[] lengths;
  private final boolean sentBasis;
  private final boolean sparse;
  private final Quantization quantization;
  private final int[] means;
  private final BitSet gotMeans = new BitSet();
  private final double[] @Nullable [] coefficients;
  private final BitSet[] gotCoefficients;
  private final double[] @Nullable [] directions;
  private final BitSet[] gotDirections;
  private int keep;
  private boolean anything;
  private long left;

  /**
   * @param variables means there are, and entries of a direction
   * @param lengths coefficients of each component that there can be
   * @param sentBasis whether there is a direction for each component
   */
  Received(
      int bitDepth, int variables, int[] lengths, boolean sentBasis, Quantization quantization) {
    this(bitDepth, variables, lengths, sentBasis, false, quantization);
  }

  /** For streams of components of mostly zeros, without means and directions. */
  static Received ofSparse(int bitDepth, int[] lengths, Quantization quantization) {
    return new Received(bitDepth, 0, lengths, false, true, quantization);
  }

  private Received(
      int bitDepth,
      int variables,
      int[] lengths,
      boolean sentBasis,
      boolean sparse,
      Quantization quantization) {
    this.sparse = sparse;
    int most = lengths.length;
    this.bitDepth = bitDepth;
    this.lengths = lengths;
    this.sentBasis = sentBasis;
    this.quantization = quantization;
    this.means = new int[variables];
    this.coefficients = new double[most][];
    this.gotCoefficients = new BitSet[most];
    this.directions = new double[sentBasis ? most : 0][];
    this.gotDirections = new BitSet[sentBasis ? most : 0];
    for (int k = 0; k < most; k++) {
      gotCoefficients[k] = new BitSet();
      if (sentBasis) {
        gotDirections[k] = new BitSet();
      }
    }
  }

  /**
   * Takes what a packet holds after its preamble, up to the first thing in it that cannot be.
   *
   * @param announced components in force, at most as many as there can be
   */
  void addUnits(BitReader in, int announced) {
    keep = Math.max(keep, announced);
    left = Arrays.stream(lengths).asLongStream().sum();
    boolean good = true;
    while (good && in.hasByte()) {
      good = readUnit(in);
      in.align();
    }
  }

  private boolean readUnit(BitReader in) {
    int code = in.readVarint();
    if (code == Units.REGION) {
      return readRegion(in);
    }
    int offset = in.readVarint();
    int count = in.readVarint();
    if (code == Units.MEANS) {
      return fits(offset, count, means.length) && readMeans(in, offset, count);
    }
    int k = (code - 2) >> 1;
    boolean component = (code & 1) == 1;
    if (code < 0 || k >= gotCoefficients.length || (!component && !sentBasis)) {
      return false;
    }
    return component
        ? fits(offset, count, lengths[k]) && readComponent(in, k, offset, count)
        : fits(offset, count, means.length) && readDirection(in, k, offset, count);
  }

  private static boolean fits(int offset, int count, int length) {
    return offset >= 0 && count > 0 && offset <= length - count;
  }

  private boolean readMeans(BitReader in, int offset, int count) {
    for (int i = offset; i < offset + count; i++) {
      int mean = (int) in.read(bitDepth);
      if (in.isExhausted()) {
        return false;
      }
      means[i] = mean;
      gotMeans.set(i);
      anything = true;
    }
    return true;
  }

  private boolean readComponent(BitReader in, int k, int offset, int count) {
    if (sparse && !quantization.isNone()) {
      return readSparse(in, k, offset, count);
    }
    int parameter = quantization.isNone() ? -1 : (int) in.read(4);
    return readValues(
        in,
        parameter,
        quantization.component(k),
        component(k),
        gotCoefficients[k],
        offset,
        offset + count);
  }

  /** Few bits can stand for many zeros, so a packet may not hold more values than there are. */
  private boolean readSparse(BitReader in, int k, int offset, int count) {
    left -= count;
    if (left < 0) {
      return false;
    }
    int[] symbols = new int[count];
    int there = SparseCoder.read(in, symbols, 0, count);
    double[] values = component(k);
    Quantizer step = quantization.component(k);
    for (int i = 0; i < there; i++) {
      values[offset + i] = step.value(symbols[i]);
    }
    gotCoefficients[k].set(offset, offset + there);
    anything |= there > 0;
    return there == count;
  }

  private boolean readDirection(BitReader in, int k, int offset, int count) {
    Quantizer step = Quantizer.NONE;
    if (!quantization.isNone()) {
      float sent = Float.intBitsToFloat((int) in.read(32));
      if (!(sent > 0 && sent <= Float.MAX_VALUE)) {
        return false;
      }
      step = new Quantizer(sent);
    }
    int parameter = step.isNone() ? -1 : (int) in.read(4);
    double[] row = directions[k];
    if (row == null) {
      row = new double[means.length];
      directions[k] = row;
    }
    return readValues(in, parameter, step, row, gotDirections[k], offset, offset + count);
  }

  private boolean readRegion(BitReader in) {
    int first = in.readVarint();
    int components = in.readVarint();
    int offset = in.readVarint();
    int count = in.readVarint();
    if (!fits(first, components, lengths.length)) {
      return false;
    }
    boolean one = in.read(1) == 1;
    int parameter = -1;
    for (int k = first; k < first + components; k++) {
      if (!fits(offset, count, lengths[k])) {
        return false;
      }
      if (!quantization.isNone() && (!one || k == first)) {
        parameter = (int) in.read(4);
      }
      if (!readValues(
          in,
          parameter,
          quantization.component(k),
          component(k),
          gotCoefficients[k],
          offset,
          offset + count)) {
        return false;
      }
    }
    return true;
  }

  private boolean readValues(
      BitReader in, int parameter, Quantizer step, double[] values, BitSet got, int from, int to) {
    for (int j = from; j < to; j++) {
      int symbol =
          parameter < 0 ? (int) in.read(32) : RiceCoder.unfold(RiceCoder.read(in, parameter));
      if (in.isExhausted()) {
        got.set(from, j);
        return false;
      }
      values[j] = step.value(symbol);
      anything = true;
    }
    got.set(from, to);
    return true;
  }

  private double[] component(int k) {
    double[] row = coefficients[k];
    if (row == null) {
      row = new double[lengths[k]];
      coefficients[k] = row;
    }
    return row;
  }

  /** Complete if every mean, coefficient and direction arrived. */
  Decoding.Completeness completeness() {
    return !anything
        ? Decoding.Completeness.NOTHING
        : isComplete() ? Decoding.Completeness.COMPLETE : Decoding.Completeness.PARTIAL;
  }

  private boolean isComplete() {
    boolean complete = gotMeans.cardinality() == means.length;
    for (int k = 0; complete && k < keep; k++) {
      complete = gotCoefficients[k].cardinality() == lengths[k] && hasDirection(k);
    }
    return complete;
  }

  private boolean hasDirection(int k) {
    return !sentBasis || gotDirections[k].cardinality() == means.length;
  }

  /**
   * Means in grey levels. A missing one lies on the line between the nearest ones that arrived, or
   * equals the nearest at either end; without any, all are mid-grey.
   */
  double[] means() {
    double[] filled = new double[means.length];
    Arrays.setAll(filled, i -> means[i]);
    Gaps.fill(filled, gotMeans, 1, 1 << (bitDepth - 1));
    return filled;
  }

  /** Coefficients of component k with 0 where missing; null if none is usable. */
  double @Nullable [] coefficients(int k) {
    return hasDirection(k) ? coefficients[k] : null;
  }

  /** Which coefficients of component k arrived. */
  BitSet got(int k) {
    return gotCoefficients[k];
  }

  /** Direction k, if the basis is sent and all of it arrived. */
  double @Nullable [] direction(int k) {
    return sentBasis && hasDirection(k) ? directions[k] : null;
  }

  /** Components there can be. */
  int most() {
    return coefficients.length;
  }
}
