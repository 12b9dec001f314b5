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
    Mean psnr =
        mean(
            interpolation,
            reference.logRates(),
            reference.psnrsDb(),
            test.logRates(),
            test.psnrsDb(),
            "rate");
    Mean rate =
        mean(
            interpolation,
            reference.psnrsDb(),
            reference.logRates(),
            test.psnrsDb(),
            test.logRates(),
            "PSNR");
    return new BjontegaardDelta(
        psnr.difference,
        100 * (StrictMath.pow(10, rate.difference) - 1),
        psnr.rising && rate.rising);
  }

  private record Mean(double difference, boolean rising) {}

  private static Mean mean(
      Interpolation interpolation,
      double[] x1,
      double[] y1,
      double[] x2,
      double[] y2,
      String axis) {
    double low = Math.max(x1[0], x2[0]);
    double high = Math.min(x1[x1.length - 1], x2[x2.length - 1]);
    if (!(high > low)) {
      throw new IllegalArgumentException(
          "the curves share no range of " + axis + "; accepted: curves that overlap");
    }
    DoubleUnaryOperator reference = interpolation.through(x1, y1);
    DoubleUnaryOperator test = interpolation.through(x2, y2);
    double difference = integral(test, x2, low, high) - integral(reference, x1, low, high);
    return new Mean(
        difference / (high - low), rises(reference, low, high) && rises(test, low, high));
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
