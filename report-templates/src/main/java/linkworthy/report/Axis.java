package linkworthy.report;

import java.util.ArrayList;
import java.util.List;

/**
 * Maps values to coordinates of a drawing, on a linear or a logarithmic (base 10) scale, with ticks
 * at round values.
 */
final class Axis {
  private final boolean logarithmic;
  private final double low;
  private final double high;
  private final double from;
  private final double to;

  private Axis(boolean logarithmic, double low, double high, double from, double to) {
    this.logarithmic = logarithmic;
    this.low = low;
    this.high = high;
    this.from = from;
    this.to = to;
  }

  /** From finite values; a range of zero is widened by 1 on either side. */
  static Axis linear(double min, double max, double from, double to) {
    double pad = max > min ? (max - min) * 0.04 : 1;
    return new Axis(false, min - pad, max + pad, from, to);
  }

  /** From finite values above 0; a range of zero is widened by half a decade on either side. */
  static Axis log(double min, double max, double from, double to) {
    double low = StrictMath.log10(min);
    double high = StrictMath.log10(max);
    double pad = high > low ? (high - low) * 0.04 : 0.5;
    return new Axis(true, low - pad, high + pad, from, to);
  }

  /** The coordinate of a value. */
  double at(double value) {
    double place = logarithmic ? StrictMath.log10(value) : value;
    return from + (place - low) / (high - low) * (to - from);
  }

  /** Round values inside the range, ascending. */
  List<Double> ticks() {
    return logarithmic ? logTicks() : linearTicks();
  }

  private List<Double> linearTicks() {
    double step = 1e-3;
    for (double next : new double[] {0.01, 0.05, 0.1, 0.2, 0.5, 1, 2, 5, 10, 20, 50, 100}) {
      if ((high - low) / step > 7) {
        step = next;
      }
    }
    List<Double> ticks = new ArrayList<>();
    for (long i = (long) Math.ceil(low / step); i * step <= high; i++) {
      ticks.add(i * step);
    }
    return ticks;
  }

  private List<Double> logTicks() {
    double[] factors = high - low > 2.2 ? new double[] {1} : new double[] {1, 2, 5};
    List<Double> ticks = new ArrayList<>();
    for (int decade = (int) Math.floor(low); decade <= high; decade++) {
      for (double factor : factors) {
        double value = factor * StrictMath.pow(10, decade);
        double place = StrictMath.log10(value);
        if (place >= low && place <= high) {
          ticks.add(value);
        }
      }
    }
    return ticks;
  }
}
