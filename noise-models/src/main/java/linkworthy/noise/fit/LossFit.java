package linkworthy.noise.fit;

import java.util.Locale;
import java.util.Optional;
import linkworthy.input.BadInput;
import linkworthy.noise.MarkovLoss;
import org.apache.commons.statistics.distribution.ChiSquaredDistribution;

/**
 * Loss processes fitted to a trace, and the simplest that the trace does not speak against.
 *
 * <p>Independent losses against the simple chain: twice the gain in log-likelihood is chi-square
 * with one degree of freedom if losses are independent. The simple chain against the
 * three-parameter one: h = 0 lies at the limit of its range, so half of the chance of one degree of
 * freedom counts (Self and Liang 1987, quoted from memory). A richer form is taken if the p value
 * is below {@link #LEVEL}.
 *
 * @param trace what was measured
 * @param independent fit of independent losses
 * @param simple fit of the simple chain: p = n01/(n00 + n01) and r = n10/(n10 + n11) with the
 *     binomial standard errors (Anderson and Goodman 1957)
 * @param threeParameter fit of the three-parameter chain; none with fewer than {@value
 *     #LEAST_LOSSES} losses
 */
public record LossFit(
    LossTrace trace,
    ChainEstimate independent,
    ChainEstimate simple,
    Optional<ChainEstimate> threeParameter) {
  /** A richer form must be this unlikely to fit better by chance alone. */
  public static final double LEVEL = 0.01;

  /** Losses needed to fit three parameters. */
  public static final int LEAST_LOSSES = 20;

  /** Packets needed to fit anything. */
  public static final int LEAST_PACKETS = 20;

  /**
   * Why nothing can be fitted to a trace, and what can be said all the same; nothing if a fit is
   * possible. Bounds are exact binomial ones (Clopper and Pearson 1934) for independent packets.
   */
  public static Optional<String> obstacle(LossTrace trace) {
    int n = trace.packets();
    int losses = trace.losses();
    String bound = format(1 - StrictMath.pow(0.05, 1.0 / n));
    if (losses == 0) {
      return Optional.of(
          "none of %d packets was lost: the loss rate is below %s with 95 %% confidence if losses are independent; nothing can be said of bursts"
              .formatted(n, bound));
    }
    if (losses == n) {
      return Optional.of(
          "all of %d packets were lost: the loss rate is above %s with 95 %% confidence if losses are independent; nothing can be said of bursts"
              .formatted(n, format(StrictMath.pow(0.05, 1.0 / n))));
    }
    if (n < LEAST_PACKETS) {
      return Optional.of(
          "%d packets are too few: %d lost, a share of %s; a fit needs at least %d packets, and hundreds of losses to tell the forms of bursts apart"
              .formatted(n, losses, format(trace.lossRatio()), LEAST_PACKETS));
    }
    if (trace.transitions(1, 0) == 0) {
      return Optional.of(
          "%d of %d packets were lost, all at the end: a share of %s, but no burst was seen to end, so nothing can be said of its length"
              .formatted(losses, n, format(trace.lossRatio())));
    }
    if (trace.transitions(0, 1) == 0) {
      return Optional.of(
          "%d of %d packets were lost, all at the beginning: a share of %s, but no burst was seen to begin, so nothing can be said of how often one does"
              .formatted(losses, n, format(trace.lossRatio())));
    }
    return Optional.empty();
  }

  /**
   * Fits all forms.
   *
   * @throws BadInput if there is an {@link #obstacle}
   */
  public static LossFit of(LossTrace trace) {
    obstacle(trace)
        .ifPresent(
            why -> {
              throw new BadInput(trace.name() + ": " + why);
            });
    Gaps gaps = Gaps.of(trace);
    ChainEstimate simple = simple(trace, gaps);
    Optional<ChainEstimate> three =
        trace.losses() < LEAST_LOSSES
            ? Optional.empty()
            : Optional.of(GilbertFit.of(trace, gaps, simple.chain()));
    return new LossFit(trace, independent(trace, gaps), simple, three);
  }

  private static ChainEstimate independent(LossTrace trace, Gaps gaps) {
    int n = trace.packets() - 1;
    double q = (double) (trace.losses() - (trace.lost(0) ? 1 : 0)) / n;
    MarkovLoss chain = new MarkovLoss(q, 1 - q, 1, 0);
    double error = Math.sqrt(q * (1 - q) / n);
    return new ChainEstimate(
        ChainEstimate.Form.INDEPENDENT,
        chain,
        gaps.logLikelihood(chain),
        error,
        error,
        Double.NaN,
        error);
  }

  private static ChainEstimate simple(LossTrace trace, Gaps gaps) {
    double fromGood = trace.transitions(0, 0) + trace.transitions(0, 1);
    double fromBad = trace.transitions(1, 0) + trace.transitions(1, 1);
    double p = trace.transitions(0, 1) / fromGood;
    double r = trace.transitions(1, 0) / fromBad;
    MarkovLoss chain = new MarkovLoss(p, r, 1, 0);
    return new ChainEstimate(
        ChainEstimate.Form.SIMPLE,
        chain,
        gaps.logLikelihood(chain),
        Math.sqrt(p * (1 - p) / fromGood),
        Math.sqrt(r * (1 - r) / fromBad),
        Double.NaN,
        Math.sqrt(Math.max(0, chain.varianceOfLosses(trace.packets()))) / trace.packets());
  }

  /** Chance that the simple chain fits so much better than independent losses if they are true. */
  public double simpleByChance() {
    return byChance(2 * (simple.logLikelihood() - independent.logLikelihood()));
  }

  /**
   * Chance that the three-parameter chain fits so much better than the simple one if that is true;
   * 1 without a fit.
   */
  public double threeParameterByChance() {
    return threeParameter
        .map(three -> byChance(2 * (three.logLikelihood() - simple.logLikelihood())) / 2)
        .orElse(1.0);
  }

  private static double byChance(double ratio) {
    return ChiSquaredDistribution.of(1).survivalProbability(Math.max(0, ratio));
  }

  /** The simplest form that the trace does not speak against. */
  public ChainEstimate chosen() {
    if (threeParameter.isPresent() && threeParameterByChance() < LEVEL) {
      return threeParameter.get();
    }
    return simpleByChance() < LEVEL ? simple : independent;
  }

  /** Whether the trace's runs have the lengths that the chosen form gives them. */
  public RunLengths runLengths() {
    return RunLengths.of(trace, chosen());
  }

  static String format(double number) {
    return Double.isNaN(number) ? "n/a" : String.format(Locale.ROOT, "%.4g", number);
  }
}
