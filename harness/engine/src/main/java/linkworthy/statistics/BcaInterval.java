package linkworthy.statistics;

import java.util.Arrays;
import java.util.function.ToDoubleFunction;
import java.util.stream.IntStream;
import linkworthy.input.Require;
import org.apache.commons.rng.UniformRandomProvider;
import org.apache.commons.rng.core.source32.Philox4x32;
import org.apache.commons.statistics.distribution.NormalDistribution;

/**
 * A two-sided interval for a figure of a population of which some independent cases are known, by
 * the bias-corrected and accelerated bootstrap (Efron 1987, Journal of the American Statistical
 * Association 82:171-185). For figures that have no formula; means of few values are for {@link
 * StudentT}.
 *
 * <p>The figure is computed of {@link #RESAMPLES} samples of n cases drawn from the n with
 * replacement. The ends are the quantiles ({@link Percentile}) of these figures at {@code Phi(z0 +
 * (z0 + z) / (1 - a (z0 + z)))}, with the bias {@code z0 = Phi^-1(share below the figure of the
 * cases, equal ones counted half)} and the acceleration {@code a = sum d^3 / (6 (sum d^2)^(3/2))},
 * where d is the mean of the figures without one case each, minus the figure without this one. For
 * a mean, a is the skewness over {@code 6 sqrt(n)}. As resamples vary too little by {@code (n - 1)
 * / n} and t is wider than normal, z is {@code -+ t sqrt(n / (n - 1))} with n - 1 degrees of
 * freedom (Hesterberg 2015, The American Statistician 69:371-386).
 *
 * <p>Resamples come from Philox4x32 under the seed and n alone: figures of one set of pictures meet
 * the same ones, on any machine and thread.
 *
 * @param lower lower end, or NaN if there is none
 * @param upper upper end, or NaN if there is none
 */
public record BcaInterval(double lower, double upper) {
  /** Number of resamples; common practice, no source. */
  public static final int RESAMPLES = 2000;

  /** The fewest cases of which there is an interval; common practice, no source. */
  public static final int FEWEST = 20;

  /** There is no interval. */
  public static final BcaInterval NONE = new BcaInterval(Double.NaN, Double.NaN);

  private static final NormalDistribution NORMAL = NormalDistribution.of(0, 1);

  /**
   * The interval of a figure. Without width if it is the same in all resamples.
   *
   * @param cases number of cases, such as pictures
   * @param figure of these cases, by their numbers from 0; it is given n and n - 1 of them
   * @param confidence above 0 and below 1
   * @param seed of the resamples
   * @return no interval for fewer than {@link #FEWEST} cases, or if a figure is not finite
   * @throws IllegalArgumentException if the confidence is not between 0 and 1
   */
  public static BcaInterval of(
      int cases, ToDoubleFunction<int[]> figure, double confidence, long seed) {
    Require.inRange(confidence, 0, 1, "confidence");
    if (cases < FEWEST) {
      return NONE;
    }
    double t = StudentT.quantile((1 + confidence) / 2, cases - 1.0);
    return of(cases, figure, t * Math.sqrt(cases / (cases - 1.0)), seed, RESAMPLES);
  }

  /**
   * @param z normal quantile of the upper end, before it is adjusted
   */
  static BcaInterval of(
      int cases, ToDoubleFunction<int[]> figure, double z, long seed, int resamples) {
    double ofAll = figure.applyAsDouble(IntStream.range(0, cases).toArray());
    double[] figures = resampled(cases, figure, seed, resamples);
    if (!Double.isFinite(ofAll) || figures.length == 0) {
      return NONE;
    }
    double acceleration = acceleration(cases, figure);
    double bias = bias(figures, ofAll);
    double lower = adjusted(-z, bias, acceleration);
    double upper = adjusted(z, bias, acceleration);
    return Double.isNaN(lower + upper)
        ? NONE
        : new BcaInterval(Percentile.of(figures, lower), Percentile.of(figures, upper));
  }

  /** The figures of all resamples; none if one is not finite. */
  private static double[] resampled(
      int cases, ToDoubleFunction<int[]> figure, long seed, int resamples) {
    UniformRandomProvider random =
        new Philox4x32(new int[] {(int) seed, (int) (seed >>> 32), 0, 0, cases, 0});
    double[] figures = new double[resamples];
    int[] drawn = new int[cases];
    for (int i = 0; i < resamples; i++) {
      Arrays.setAll(drawn, place -> random.nextInt(cases));
      figures[i] = figure.applyAsDouble(drawn);
      if (!Double.isFinite(figures[i])) {
        return new double[0];
      }
    }
    return figures;
  }

  /** Held to half a resample from either end. */
  private static double bias(double[] figures, double ofAll) {
    double below = 0;
    for (double figure : figures) {
      below += figure < ofAll ? 1 : figure == ofAll ? 0.5 : 0;
    }
    double share = Math.max(0.5, Math.min(figures.length - 0.5, below)) / figures.length;
    return NORMAL.inverseCumulativeProbability(share);
  }

  /** 0 if it makes no difference which case is left out. */
  static double acceleration(int cases, ToDoubleFunction<int[]> figure) {
    double[] without = new double[cases];
    for (int i = 0; i < cases; i++) {
      int left = i;
      without[i] =
          figure.applyAsDouble(IntStream.range(0, cases).filter(other -> other != left).toArray());
    }
    double mean = Moments.of(without).mean();
    double squares = 0;
    double cubes = 0;
    for (double one : without) {
      double d = mean - one;
      squares += d * d;
      cubes += d * d * d;
    }
    return squares == 0 ? 0 : cubes / (6 * squares * Math.sqrt(squares));
  }

  /** The probability whose quantile is the end; NaN where the acceleration leaves none. */
  static double adjusted(double z, double bias, double acceleration) {
    double moved = bias + z;
    double room = 1 - acceleration * moved;
    return room > 0 ? NORMAL.cumulativeProbability(bias + moved / room) : Double.NaN;
  }
}
