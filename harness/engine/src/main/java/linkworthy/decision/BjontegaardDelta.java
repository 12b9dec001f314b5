package linkworthy.decision;

import java.util.Arrays;
import java.util.function.DoubleUnaryOperator;
import java.util.stream.DoubleStream;

/**
 * How far one rate-quality curve lies from another, in two numbers (Bjontegaard 2001, document
 * VCEG-M33 of ITU-T SG16). Both are means over the range that the curves share, nothing is
 * extrapolated; rate is on a logarithmic scale.
 *
 * @param psnrDb mean difference in PSNR at equal rate, test minus reference, in dB
 * @param ratePercent mean difference in rate at equal PSNR, in per cent of the reference: {@code
 *     100 (10^m - 1)} with m the mean difference of log10 rate
 * @param rising whether all curves drawn rise over the shared range; a cubic may swing between its
 *     points, and then its numbers mean nothing
 */
public record BjontegaardDelta(double psnrDb, double ratePercent, boolean rising) {
  private static final double GAUSS_POINT = Math.sqrt(1 / 3.0);
  private static final int LOOKS = 1000;

  /**
   * Compares two curves.
   *
   * @throws IllegalArgumentException if they share no range of rate or none of PSNR, or the
   *     interpolation takes another number of points
   */
  public static BjontegaardDelta of(
      RateCurve reference, RateCurve test, Interpolation interpolation) {
    Pair psnr = atEqualRate(reference, test, interpolation);
    Pair rate = atEqualPsnr(reference, test, interpolation);
    return new BjontegaardDelta(
        psnr.difference(), percent(rate.difference()), psnr.rises() && rate.rises());
  }

  /** The first of the two numbers alone, without a look at whether the curves rise. */
  static double psnrDb(RateCurve reference, RateCurve test, Interpolation interpolation) {
    return atEqualRate(reference, test, interpolation).difference();
  }

  /** The second alone. */
  static double ratePercent(RateCurve reference, RateCurve test, Interpolation interpolation) {
    return percent(atEqualPsnr(reference, test, interpolation).difference());
  }

  private static double percent(double logRate) {
    return 100 * (StrictMath.pow(10, logRate) - 1);
  }

  private static Pair atEqualRate(RateCurve a, RateCurve b, Interpolation interpolation) {
    return new Pair(
        new Curve(a.logRates(), a.psnrsDb(), interpolation),
        new Curve(b.logRates(), b.psnrsDb(), interpolation),
        "rate");
  }

  private static Pair atEqualPsnr(RateCurve a, RateCurve b, Interpolation interpolation) {
    return new Pair(
        new Curve(a.psnrsDb(), a.logRates(), interpolation),
        new Curve(b.psnrsDb(), b.logRates(), interpolation),
        "PSNR");
  }

  private static final class Curve {
    private final double[] knots;
    private final DoubleUnaryOperator at;

    Curve(double[] x, double[] y, Interpolation interpolation) {
      knots = x;
      at = interpolation.through(x, y);
    }

    double first() {
      return knots[0];
    }

    double last() {
      return knots[knots.length - 1];
    }
  }

  /** Two curves over the range that they share. */
  private static final class Pair {
    private final Curve reference;
    private final Curve test;
    private final double low;
    private final double high;

    Pair(Curve reference, Curve test, String axis) {
      this.reference = reference;
      this.test = test;
      low = Math.max(reference.first(), test.first());
      high = Math.min(reference.last(), test.last());
      if (!(high > low)) {
        throw new IllegalArgumentException(
            "the curves share no range of " + axis + "; accepted: curves that overlap");
      }
    }

    double difference() {
      return (integral(test.at, test.knots, low, high)
              - integral(reference.at, reference.knots, low, high))
          / (high - low);
    }

    boolean rises() {
      return BjontegaardDelta.rises(reference.at, low, high)
          && BjontegaardDelta.rises(test.at, low, high);
    }
  }

  /** Exact for what is cubic between the knots: Gauss-Legendre with two points each. */
  private static double integral(
      DoubleUnaryOperator curve, double[] knots, double low, double high) {
    double[] ends =
        DoubleStream.concat(
                DoubleStream.of(low, high), Arrays.stream(knots).filter(k -> k > low && k < high))
            .sorted()
            .toArray();
    double sum = 0;
    for (int i = 1; i < ends.length; i++) {
      double half = (ends[i] - ends[i - 1]) / 2;
      double middle = ends[i - 1] + half;
      sum +=
          half
              * (curve.applyAsDouble(middle - half * GAUSS_POINT)
                  + curve.applyAsDouble(middle + half * GAUSS_POINT));
    }
    return sum;
  }

  private static boolean rises(DoubleUnaryOperator curve, double low, double high) {
    double before = curve.applyAsDouble(low);
    for (int i = 1; i <= LOOKS; i++) {
      double here = curve.applyAsDouble(low + (high - low) * i / LOOKS);
      if (!(here > before)) {
        return false;
      }
      before = here;
    }
    return true;
  }
}
