package linkworthy.codec;

/**
 * A biorthogonal wavelet of Cohen, Daubechies and Feauveau (1992), by lifting with whole-sample
 * symmetric extension as in ITU-T T.800 Annex F, on real numbers: low-pass gain 1 at frequency 0.
 */
enum Wavelet {
  /** The 5/3 of Le Gall and Tabatabai (1988). */
  CDF_5_3("cdf-5-3", 1, 2, -0.5, 0.25, 0, 0),
  CDF_9_7(
      "cdf-9-7",
      1.230174104914001,
      4,
      -1.586134342059924,
      -0.052980118572961,
      0.882911075530934,
      0.443506852043971);

  private final String id;
  private final double scale;
  private final int steps;
  private final double alpha;
  private final double beta;
  private final double gamma;
  private final double delta;

  /**
   * @param scale K of T.800: low values are divided by it, high ones multiplied
   * @param steps lifting steps, from alpha on, of high and low values in turn
   */
  Wavelet(
      String id, double scale, int steps, double alpha, double beta, double gamma, double delta) {
    this.id = id;
    this.scale = scale;
    this.steps = steps;
    this.alpha = alpha;
    this.beta = beta;
    this.gamma = gamma;
    this.delta = delta;
  }

  private double step(int s) {
    return switch (s) {
      case 0 -> alpha;
      case 1 -> beta;
      case 2 -> gamma;
      default -> delta;
    };
  }

  /** As in studies: {@code cdf-5-3}, {@code cdf-9-7}. */
  String id() {
    return id;
  }

  /**
   * Transforms a line in place: low values at even, high ones at odd places. A line of one value
   * stays as it is.
   *
   * @param reversible whether whole numbers become whole numbers; the 5/3 of T.800 alone has this
   */
  void forward(double[] line, int length, boolean reversible) {
    if (length < 2) {
      return;
    }
    for (int s = 0; s < steps; s++) {
      lift(line, length, (s + 1) % 2, step(s), reversible, 1);
    }
    for (int i = 0; i < length; i++) {
      line[i] = i % 2 == 0 ? line[i] / scale : line[i] * scale;
    }
  }

  /** The inverse of {@link #forward}. */
  void inverse(double[] line, int length, boolean reversible) {
    if (length < 2) {
      return;
    }
    for (int i = 0; i < length; i++) {
      line[i] = i % 2 == 0 ? line[i] * scale : line[i] / scale;
    }
    for (int s = steps - 1; s >= 0; s--) {
      lift(line, length, (s + 1) % 2, step(s), reversible, -1);
    }
  }

  /** Adds a step times the sum of both neighbours, or takes it away. */
  private static void lift(
      double[] line, int length, int first, double step, boolean reversible, int sign) {
    for (int i = first; i < length; i += 2) {
      double left = line[i > 0 ? i - 1 : 1];
      double right = line[i < length - 1 ? i + 1 : length - 2];
      double change = step * (left + right);
      line[i] += sign * (reversible ? Math.floor(change + 0.5) : change);
    }
  }
}
