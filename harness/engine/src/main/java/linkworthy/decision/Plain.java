package linkworthy.decision;

import java.math.BigDecimal;
import java.math.MathContext;
import java.math.RoundingMode;

/** Numbers in sentences: at most six significant digits, no trailing zeros. */
final class Plain {
  private static final MathContext SIX = new MathContext(6, RoundingMode.HALF_EVEN);

  private Plain() {}

  static String number(double value) {
    if (Double.isNaN(value)) {
      return "n/a";
    }
    if (Double.isInfinite(value)) {
      return value > 0 ? "inf" : "-inf";
    }
    return value == 0 ? "0" : new BigDecimal(value).round(SIX).stripTrailingZeros().toPlainString();
  }
}
