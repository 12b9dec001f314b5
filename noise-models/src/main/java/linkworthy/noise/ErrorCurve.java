package linkworthy.noise;

import java.util.Arrays;
import java.util.List;
import java.util.Locale;
import linkworthy.input.BadInput;
import linkworthy.input.Spelling;

/**
 * Published bit-error rates of radio links in white Gaussian noise, at a ratio g of powers (not in
 * dB). A rate lies between 0 and 1/2; where it is below the smallest double it is 0.
 */
public enum ErrorCurve {
  /**
   * Coherent binary or quaternary phase-shift keying (BPSK, Gray-coded QPSK) at Eb/N0 = g: Q(sqrt(2
   * g)) = erfc(sqrt(g))/2 (Proakis, "Digital Communications").
   */
  BPSK(Ratio.EB_N0, false) {
    @Override
    double steadyRate(double g) {
      return complementaryError(Math.sqrt(g)) / 2;
    }
  },
  /** Differentially detected BPSK at Eb/N0 = g: exp(-g)/2 (Proakis). */
  DBPSK(Ratio.EB_N0, false) {
    @Override
    double steadyRate(double g) {
      return StrictMath.exp(-g) / 2;
    }
  },
  /**
   * Binary frequency-shift keying, detected without a phase, at Eb/N0 = g: exp(-g/2)/2 (Proakis).
   */
  NCFSK(Ratio.EB_N0, false) {
    @Override
    double steadyRate(double g) {
      return StrictMath.exp(-g / 2) / 2;
    }
  },
  /**
   * BPSK in flat Rayleigh fading that stands still for a packet. The packet's power gain x has the
   * density exp(-x); its rate is Q(sqrt(2 g x)); the mean rate at a mean Eb/N0 of g is (1 -
   * sqrt(g/(1+g)))/2 (Proakis).
   */
  BPSK_RAYLEIGH(Ratio.EB_N0, true) {
    @Override
    double steadyRate(double g) {
      return BPSK.steadyRate(g);
    }

    @Override
    public double meanRate(double g) {
      double t = 1 / (1 + g);
      return t / (2 * (1 + Math.sqrt(1 - t)));
    }

    @Override
    double meanRatio(double rate) {
      return (1 - 2 * rate) * (1 - 2 * rate) / (4 * rate * (1 - rate));
    }
  },
  /**
   * Offset QPSK of IEEE 802.15.4 at 2450 MHz, 16-ary orthogonal by its chips, at a
   * signal-to-interference-and-noise ratio of g: (8/15) (1/16) sum over k = 2..16 of (-1)^k C(16,k)
   * exp(20 g (1/k - 1)) (IEEE 802.15.4-2006, annex E).
   */
  OQPSK_2450(Ratio.SINR, false) {
    @Override
    double steadyRate(double g) {
      double sum = 0;
      double binomial = 16;
      for (int k = 2; k <= 16; k++) {
        binomial = binomial * (17 - k) / k;
        double term = binomial * StrictMath.exp(20 * g * (1.0 / k - 1));
        sum += k % 2 == 0 ? term : -term;
      }
      return Math.max(0, Math.min(0.5, 8.0 / 15 / 16 * sum));
    }
  };

  /** What a curve is drawn over. */
  public enum Ratio {
    /** Energy of a bit over the noise's power density. */
    EB_N0("eb-n0-db"),
    /** Signal power over the power of interference and noise. */
    SINR("sinr-db");

    private final String axis;

    Ratio(String axis) {
      this.axis = axis;
    }

    /** The severity axis of this ratio, in dB. */
    public String axis() {
      return axis;
    }
  }

  private static final double SERIES_BELOW = 2;
  private static final int SERIES_TERMS = 60;
  private static final int FRACTION_DEPTH = 120;

  private final Ratio ratio;
  private final boolean fading;

  ErrorCurve(Ratio ratio, boolean fading) {
    this.ratio = ratio;
    this.fading = fading;
  }

  /** Id in model files. */
  public String id() {
    return name().toLowerCase(Locale.ROOT).replace('_', '-');
  }

  /** What the curve is drawn over. */
  public Ratio ratio() {
    return ratio;
  }

  /** Whether every packet meets a ratio of its own, exponentially distributed about the mean. */
  public boolean isFading() {
    return fading;
  }

  /** The ids of all curves. */
  static List<String> ids() {
    return Arrays.stream(values()).map(ErrorCurve::id).toList();
  }

  /**
   * The curve with an id.
   *
   * @throws BadInput if there is none; it lists what exists and the nearest spelling
   */
  public static ErrorCurve find(String id) {
    List<String> ids = ids();
    int at = ids.indexOf(id);
    if (at < 0) {
      throw new BadInput("no curve '" + id + "'; " + Spelling.hint(id, ids));
    }
    return values()[at];
  }

  /**
   * Mean bit-error rate at a mean ratio g, at least 0.
   *
   * @param g as a ratio of powers, not in dB
   */
  public double meanRate(double g) {
    return steadyRate(g);
  }

  /** Bit-error rate while the ratio stands at g. */
  abstract double steadyRate(double g);

  /**
   * The mean ratio at which a fading curve has a mean rate, above 0 and at most 1/2; as a ratio of
   * powers.
   */
  double meanRatio(double rate) {
    throw new UnsupportedOperationException(id() + " does not fade");
  }

  /**
   * erfc(x) for x of at least 0, to a relative 2e-13, in strict arithmetic; libraries use Math.exp,
   * whose last bit may differ between machines. Below 2 by the series erf(x) = 2/sqrt(pi) exp(-x^2)
   * sum over n of 2^n x^(2n+1) / (1 3 5 ... (2n+1)); from 2 on by Laplace's continued fraction
   * erfc(x) = exp(-x^2)/sqrt(pi) / (x + (1/2)/(x + 1/(x + (3/2)/(x + ...)))) (Abramowitz and Stegun
   * 7.1.6 and 7.1.14).
   */
  static double complementaryError(double x) {
    double scale = StrictMath.exp(-x * x) / Math.sqrt(Math.PI);
    if (x < SERIES_BELOW) {
      double term = x;
      double sum = x;
      for (int n = 1; n <= SERIES_TERMS; n++) {
        term *= 2 * x * x / (2 * n + 1);
        sum += term;
      }
      return 1 - 2 * scale * sum;
    }
    double below = x;
    for (int n = FRACTION_DEPTH; n >= 1; n--) {
      below = x + n / 2.0 / below;
    }
    return scale / below;
  }
}
