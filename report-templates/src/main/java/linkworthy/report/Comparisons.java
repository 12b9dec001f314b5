package linkworthy.report;

import java.util.List;

/**
 * What was derived from the figures by comparing codecs over rates and over severities.
 *
 * @param curves families of codecs, two at a time, in one condition
 * @param crossings where two leading codecs change order
 */
public record Comparisons(List<CurveGap> curves, List<Crossing> crossings) {
  /** Nothing was compared. */
  public static final Comparisons NONE = new Comparisons(List.of(), List.of());

  public Comparisons {
    curves = List.copyOf(curves);
    crossings = List.copyOf(crossings);
  }

  /**
   * How far the curve of one family lies from that of another: Bjontegaard deltas.
   *
   * @param condition where
   * @param reference name of the family compared with
   * @param family name of the family
   * @param pchip by monotone piecewise cubics
   * @param cubic by polynomials of third order
   * @param psnrDb interval of the first number by piecewise cubics, over other pictures like these
   * @param ratePercent likewise of the second
   * @param refusal why there are no numbers, or empty
   */
  public record CurveGap(
      Condition condition,
      String reference,
      String family,
      Delta pchip,
      Delta cubic,
      Interval psnrDb,
      Interval ratePercent,
      String refusal) {}

  /**
   * An interval in the unit of its number.
   *
   * @param lower lower end, or NaN where there is none
   * @param upper upper end, likewise
   */
  public record Interval(double lower, double upper) {
    /** None. */
    public static final Interval NONE = new Interval(Double.NaN, Double.NaN);
  }

  /**
   * Two numbers for the gap between two curves; NaN where not available.
   *
   * @param psnrDb mean difference in PSNR at equal rate, in dB
   * @param ratePercent mean difference in rate at equal PSNR, in per cent
   * @param rising whether the curves as drawn rise throughout
   */
  public record Delta(double psnrDb, double ratePercent, boolean rising) {
    /** No numbers. */
    public static final Delta NONE = new Delta(Double.NaN, Double.NaN, true);
  }

  /**
   * Where two codecs change order on the severities of a noise.
   *
   * @param noise any condition of the noise
   * @param below the codec that is better below the crossing, on the axis
   * @param above the codec that is better above it
   * @param at severity of the crossing
   * @param low lower end of its interval, NaN if open
   * @param high upper end of its interval, NaN if open
   */
  public record Crossing(
      Condition noise, String below, String above, double at, double low, double high) {}
}
