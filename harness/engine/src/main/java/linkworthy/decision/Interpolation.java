package linkworthy.decision;

import java.util.function.DoubleUnaryOperator;

/** How a curve runs between its points. Both kinds are cubic between neighbouring points. */
public enum Interpolation {
  /**
   * Monotone piecewise cubic (Fritsch and Carlson 1980, SIAM Journal on Numerical Analysis
   * 17:238-246), the inner slopes by the weighted harmonic mean of Fritsch and Butland (1984, SIAM
   * Journal on Scientific and Statistical Computing 5:300-304), the end slopes by the three-point
   * formula, cut back where it would overshoot. It rises wherever the points do.
   */
  PCHIP("pchip"),
  /** The one polynomial of third order through exactly four points, as in VCEG-M33. */
  CUBIC("cubic");

  private static final int POINTS_OF_CUBIC = 4;

  private final String word;

  Interpolation(String word) {
    this.word = word;
  }

  /** Whether it can be laid through so many points. */
  boolean takes(int points) {
    return this == PCHIP || points == POINTS_OF_CUBIC;
  }

  /**
   * The curve through points with ascending x.
   *
   * @throws IllegalArgumentException if it takes another number of points
   */
  DoubleUnaryOperator through(double[] x, double[] y) {
    if (!takes(x.length)) {
      throw new IllegalArgumentException(
          "a cubic through " + x.length + " points; accepted: " + POINTS_OF_CUBIC);
    }
    return this == CUBIC ? polynomial(x, y) : piecewise(x, y);
  }

  /** Newton's form, by divided differences. */
  private static DoubleUnaryOperator polynomial(double[] x, double[] y) {
    double[] c = y.clone();
    for (int order = 1; order < c.length; order++) {
      for (int i = c.length - 1; i >= order; i--) {
        c[i] = (c[i] - c[i - 1]) / (x[i] - x[i - order]);
      }
    }
    return at -> {
      double value = c[c.length - 1];
      for (int i = c.length - 2; i >= 0; i--) {
        value = value * (at - x[i]) + c[i];
      }
      return value;
    };
  }

  private static DoubleUnaryOperator piecewise(double[] x, double[] y) {
    double[] slopes = slopes(x, y);
    return at -> {
      int i = 0;
      while (i < x.length - 2 && at > x[i + 1]) {
        i++;
      }
      double h = x[i + 1] - x[i];
      double t = (at - x[i]) / h;
      double s = 1 - t;
      return s * s * ((1 + 2 * t) * y[i] + t * h * slopes[i])
          + t * t * ((1 + 2 * s) * y[i + 1] - s * h * slopes[i + 1]);
    };
  }

  private static double[] slopes(double[] x, double[] y) {
    int last = x.length - 1;
    double[] h = new double[last];
    double[] d = new double[last];
    for (int i = 0; i < last; i++) {
      h[i] = x[i + 1] - x[i];
      d[i] = (y[i + 1] - y[i]) / h[i];
    }
    double[] slopes = new double[x.length];
    for (int i = 1; i < last; i++) {
      double w1 = 2 * h[i] + h[i - 1];
      double w2 = h[i] + 2 * h[i - 1];
      slopes[i] = d[i - 1] * d[i] > 0 ? (w1 + w2) / (w1 / d[i - 1] + w2 / d[i]) : 0;
    }
    slopes[0] = end(h[0], h[1], d[0], d[1]);
    slopes[last] = end(h[last - 1], h[last - 2], d[last - 1], d[last - 2]);
    return slopes;
  }

  private static double end(double h0, double h1, double d0, double d1) {
    double slope = ((2 * h0 + h1) * d0 - h0 * d1) / (h0 + h1);
    if (slope * d0 <= 0) {
      return 0;
    }
    return d0 * d1 <= 0 && Math.abs(slope) > 3 * Math.abs(d0) ? 3 * d0 : slope;
  }

  @Override
  public String toString() {
    return word;
  }
}
