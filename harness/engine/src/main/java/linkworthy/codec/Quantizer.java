package linkworthy.codec;

import linkworthy.input.Decimal;
import linkworthy.input.Kind;
import linkworthy.input.Require;
import linkworthy.input.YamlNode;

/**
 * Uniform mid-tread quantiser: index = value / step, rounded half away from zero after snapping to
 * 9 decimals (so that exact ties do not depend on the order of summation).
 *
 * @param step in the unit of the values; infinity means 32-bit floats instead of indices
 */
public record Quantizer(double step) implements Quantization {
  /** No quantisation: values travel as 32-bit floats. */
  public static final Quantizer NONE = new Quantizer(Double.POSITIVE_INFINITY);

  private static final Kind.Real STEP =
      Kind.Real.from(0.001, 65_536, "a step in grey levels from 0.001 to 65536");

  /** What a study may write for a step. */
  static final Kind.WordOr KIND = new Kind.WordOr("none", STEP, STEP.accepted() + ", or none");

  private static final int LARGEST = 1 << 29;

  public Quantizer {
    if (!(step > 0)) {
      Require.positive(step, "step (grey levels)");
    }
  }

  @Override
  public Quantizer component(int k) {
    return this;
  }

  @Override
  public boolean isNone() {
    return step == Double.POSITIVE_INFINITY;
  }

  /** The index of a value, within plus or minus 2^29. */
  public int index(double value) {
    double snapped = Math.rint(value / step * 1e9) / 1e9;
    int magnitude = (int) Math.min(LARGEST, Math.abs(snapped) + 0.5);
    return snapped < 0 ? -magnitude : magnitude;
  }

  /** Indices of values, or the bits of the values as floats if there is no step. */
  int[] symbols(double[] values) {
    int[] symbols = new int[values.length];
    for (int i = 0; i < symbols.length; i++) {
      symbols[i] = isNone() ? Float.floatToRawIntBits((float) values[i]) : index(values[i]);
    }
    return symbols;
  }

  /** The values that symbols stand for. */
  double[] values(int[] symbols) {
    double[] values = new double[symbols.length];
    for (int i = 0; i < values.length; i++) {
      values[i] = value(symbols[i]);
    }
    return values;
  }

  /** The value that a symbol stands for; 0 where a float is not finite. */
  double value(int symbol) {
    if (!isNone()) {
      return symbol * step;
    }
    float value = Float.intBitsToFloat(symbol);
    return Float.isFinite(value) ? value : 0;
  }

  @Override
  public String label() {
    return "step" + (isNone() ? "none" : plain(step));
  }

  @Override
  public String column() {
    return isNone() ? "none" : Decimal.shortest(step);
  }

  /** A number without a trailing {@code .0}. */
  static String plain(double number) {
    return number == Math.rint(number) && Math.abs(number) < 1e15
        ? Long.toString((long) number)
        : Decimal.shortest(number);
  }

  /** Reads a step, or the word for no quantisation. */
  static Quantizer read(YamlNode node) {
    KIND.check(node);
    return KIND.isWord(node) ? NONE : new Quantizer(STEP.read(node));
  }
}
