package linkworthy.input;

import java.math.BigDecimal;
import java.math.MathContext;
import java.math.RoundingMode;
import org.jspecify.annotations.Nullable;

/**
 * Numbers as text that does not depend on the JDK.
 *
 * <p>Before JDK 19 {@code Double.toString} sometimes gave more digits than needed (JDK-4511638:
 * {@code 2.0E23} came out as {@code 1.9999999999999998E23}), so files written with it differ
 * between machines.
 */
public final class Decimal {
  private static final int FEWEST_DIGITS = 2;
  private static final int MOST_DIGITS = 17;
  private static final double PLAIN_FROM = 1e-3;
  private static final double PLAIN_BELOW = 1e7;

  private Decimal() {}

  /**
   * The shortest decimal that reads back as exactly this number, and of those the nearest to it;
   * what {@code Double.toString} is specified to give since JDK 19, in the same layout: {@code
   * 30.0}, {@code 0.001}, {@code 1.0E7}. When one digit would do, two are tried as well and the
   * nearer is taken, hence {@code 4.9E-324}.
   *
   * @throws IllegalArgumentException if the number is infinite or NaN
   */
  public static String shortest(double number) {
    Require.finite(number, "number");
    double size = Math.abs(number);
    String sign = number < 0 || (number == 0 && 1 / number < 0) ? "-" : "";
    if (size < PLAIN_BELOW && size == Math.rint(size)) {
      return sign + (long) size + ".0";
    }
    BigDecimal digits = shortestDigits(size);
    boolean plain = size >= PLAIN_FROM && size < PLAIN_BELOW;
    return sign + (plain ? plain(digits) : scientific(digits));
  }

  private static BigDecimal shortestDigits(double size) {
    BigDecimal exact = new BigDecimal(size);
    int length = Math.max(FEWEST_DIGITS, new BigDecimal(Double.toString(size)).precision());
    BigDecimal found = nearest(exact, size, Math.min(length, MOST_DIGITS));
    while (found == null) {
      found = nearest(exact, size, ++length);
    }
    while (length > FEWEST_DIGITS) {
      BigDecimal shorter = nearest(exact, size, --length);
      if (shorter == null) {
        break;
      }
      found = shorter;
    }
    return found.stripTrailingZeros();
  }

  /** The decimal of this many digits nearest to the number, among those that read back as it. */
  private static @Nullable BigDecimal nearest(BigDecimal exact, double size, int length) {
    BigDecimal below = exact.round(new MathContext(length, RoundingMode.DOWN));
    BigDecimal above = exact.round(new MathContext(length, RoundingMode.UP));
    boolean belowReads = below.doubleValue() == size;
    boolean aboveReads = above.doubleValue() == size;
    if (belowReads && aboveReads) {
      int order = exact.subtract(below).compareTo(above.subtract(exact));
      boolean belowIsEven = !below.unscaledValue().testBit(0);
      return order < 0 || (order == 0 && belowIsEven) ? below : above;
    }
    if (belowReads) {
      return below;
    }
    return aboveReads ? above : null;
  }

  private static String plain(BigDecimal digits) {
    return digits.scale() > 0 ? digits.toPlainString() : digits.toPlainString() + ".0";
  }

  private static String scientific(BigDecimal digits) {
    String all = digits.unscaledValue().toString();
    String fraction = all.length() > 1 ? all.substring(1) : "0";
    int exponent = digits.precision() - digits.scale() - 1;
    return all.charAt(0) + "." + fraction + "E" + exponent;
  }
}
