package linkworthy.report;

import java.math.BigDecimal;
import java.math.MathContext;
import java.math.RoundingMode;

/**
 * Numbers as a reader sees them, the same under every locale and Java release: decimal point, no
 * grouping sign but a narrow no-break space in counts. NaN is {@code n/a}, infinity is {@code inf}.
 */
final class Numbers {
  private static final String NOT_AVAILABLE = "n/a";

  private Numbers() {}

  /** Decibels: two decimals. */
  static String db(double value) {
    return fixed(value, 2);
  }

  /** A share of one as per cent, one decimal. */
  static String percent(double share) {
    String text = fixed(share * 100, 1);
    return Double.isFinite(share) ? text + " %" : text;
  }

  /** An index without unit, such as SSIM: three decimals. */
  static String index(double value) {
    return fixed(value, 3);
  }

  /** A measure that spans decades, such as a variance or a rate: three significant digits. */
  static String significant(double value) {
    if (!Double.isFinite(value) || value == 0) {
      return special(value);
    }
    BigDecimal rounded = new BigDecimal(value).round(new MathContext(3, RoundingMode.HALF_EVEN));
    int integerDigits = rounded.precision() - rounded.scale();
    return rounded.setScale(Math.max(0, 3 - integerDigits), RoundingMode.HALF_EVEN).toPlainString();
  }

  /** Bits per pixel in a narrow column: two decimals, three below 0.1. */
  static String narrowBits(double value) {
    return fixed(value, value < 0.0995 ? 3 : 2);
  }

  /** A value that a person typed: at most six significant digits, no trailing zeros. */
  static String typed(double value) {
    if (!Double.isFinite(value) || value == 0) {
      return special(value);
    }
    return new BigDecimal(value)
        .round(new MathContext(6, RoundingMode.HALF_EVEN))
        .stripTrailingZeros()
        .toPlainString();
  }

  /** A number rounded to a whole one, with its thousands apart. */
  static String whole(double value) {
    return Double.isFinite(value) ? count(Math.round(value)) : special(value);
  }

  /** A count, in groups of three from five digits on. */
  static String count(long value) {
    String digits = Long.toString(value);
    if (digits.replace("-", "").length() < 5) {
      return digits;
    }
    return digits.replaceAll("(?<=\\d)(?=(\\d{3})+$)", "\u202f");
  }

  /** A count and its noun. */
  static String count(long value, String singular, String plural) {
    return count(value) + " " + (value == 1 ? singular : plural);
  }

  /** A coordinate of a drawing: one decimal. */
  static String coordinate(double value) {
    return fixed(value, 1);
  }

  private static String fixed(double value, int decimals) {
    if (!Double.isFinite(value)) {
      return special(value);
    }
    return new BigDecimal(value).setScale(decimals, RoundingMode.HALF_UP).toPlainString();
  }

  private static String special(double value) {
    if (Double.isNaN(value)) {
      return NOT_AVAILABLE;
    }
    return value == 0 ? "0" : value > 0 ? "inf" : "-inf";
  }
}
