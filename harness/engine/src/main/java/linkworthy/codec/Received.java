package linkworthy.codec;

import java.util.BitSet;
import org.jspecify.annotations.Nullable;

/**
 * What a decoder gathered from the packets that arrived. Packets may come in any order, twice,
 * damaged, cut short or from another stream; nothing here throws, and no array is larger than the
 * known picture needs.
 */
final class Received {
  private final int tag;
  private final PictureShape shape;
  private final int observations;
  private final boolean sentBasis;
  private final Quantization quantization;
  private final int[] means;
  private final BitSet gotMeans = new BitSet();
  private final double[] @Nullable [] coefficients;
  private final BitSet[] gotCoefficients;
  private final double[] @Nullable [] directions;
  private final BitSet[] gotDirections;
  private int keep;
  private boolean anything;

  /**
   * @param tag stream tag that a packet must carry
   * @param most components there can be
   */
  Received(
      int tag,
      PictureShape shape,
      int variables,
      int observations,
      int most,
      boolean sentBasis,
      Quantization quantization) {
    this.tag = tag;
    this.shape = shape;
    this.observations = observations;
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

  /** Takes what a packet holds, up to the first thing in it that cannot be. */
  void add(byte[] packet) {
    BitReader in = new BitReader(packet);
    int packetTag = (int) in.read(16);
    int width = in.readVarint();
    int height = in.readVarint();
    int announced = in.readVarint();
    if (in.isExhausted()
        || packetTag != tag
        || width != shape.width()
        || height != shape.height()
        || announced < 0
        || announced > gotCoefficients.length) {
      return;
    }
    keep = Math.max(keep, announced);
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
        ? fits(offset, count, observations) && readComponent(in, k, offset, count)
        : fits(offset, count, means.length) && readDirection(in, k, offset, count);
  }

  private static boolean fits(int offset, int count, int length) {
    return offset >= 0 && count > 0 && offset <= length - count;
  }

  private boolean readMeans(BitReader in, int offset, int count) {
    for (int i = offset; i < offset + count; i++) {
      int mean = (int) in.read(shape.bitDepth());
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
    if (!fits(first, components, gotCoefficients.length) || !fits(offset, count, observations)) {
      return false;
    }
    boolean one = in.read(1) == 1;
    int parameter = -1;
    for (int k = first; k < first + components; k++) {
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
      row = new double[observations];
      coefficients[k] = row;
    }
    return row;
  }

  /** Whether no value at all arrived. */
  boolean isNothing() {
    return !anything;
  }

  /** Whether every mean, coefficient and direction arrived. */
  boolean isComplete() {
    boolean complete = anything && gotMeans.cardinality() == means.length;
    for (int k = 0; complete && k < keep; k++) {
      complete = gotCoefficients[k].cardinality() == observations && hasDirection(k);
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
    for (int i = 0; i < filled.length; i++) {
      int before = gotMeans.previousSetBit(i);
      int after = gotMeans.nextSetBit(i);
      if (before < 0 && after < 0) {
        filled[i] = 1 << (shape.bitDepth() - 1);
      } else if (before < 0 || after < 0 || before == after) {
        filled[i] = means[Math.max(before, after)];
      } else {
        double share = (double) (i - before) / (after - before);
        filled[i] = means[before] + share * (means[after] - means[before]);
      }
    }
    return filled;
  }

  /** Coefficients of component k with 0 where missing; null if none is usable. */
  double @Nullable [] coefficients(int k) {
    return hasDirection(k) ? coefficients[k] : null;
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
