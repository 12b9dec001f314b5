package linkworthy.noise.fit;

import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import linkworthy.noise.MarkovLoss;
import linkworthy.noise.fit.ChainEstimate.Form;

/** A fit of a loss trace in plain words. */
public final class LossFitText {
  private static final int BAR = 40;
  private static final int FEW_RUNS = 10;
  private static final double LEAST_CHANCE = 1e-4;
  private static final String LEAST_CHANCE_TEXT = "0.0001";

  private LossFitText() {}

  /** What is chosen, and whether the lengths of runs speak against it, in a sentence each. */
  public static List<String> answer(LossFit fit) {
    List<String> lines = new ArrayList<>();
    choice(lines, fit);
    goodness(lines, fit);
    return lines;
  }

  /** What was measured, what was fitted, what is chosen and why, and how well it fits. */
  public static List<String> lines(LossFit fit) {
    List<String> lines = new ArrayList<>();
    measured(lines, fit.trace());
    lines.add("");
    fitted(lines, fit.independent());
    fitted(lines, fit.simple());
    fit.threeParameter().ifPresent(three -> fitted(lines, three));
    lines.add("");
    choice(lines, fit);
    goodness(lines, fit);
    lines.add("");
    plot(lines, fit);
    return lines;
  }

  private static void measured(List<String> lines, LossTrace trace) {
    int runs = trace.runs(true, false).size();
    add(
        lines,
        "%d packets, %d lost: loss ratio %s; %d runs of losses, %s packets long on average",
        trace.packets(),
        trace.losses(),
        number(trace.lossRatio()),
        runs,
        number((double) trace.losses() / runs));
    add(
        lines,
        "burst ratio %s (1: independent losses, above 1: bursts)",
        number(trace.burstRatio()));
    BurstGap gaps = BurstGap.of(trace);
    add(
        lines,
        "RFC 3611 with Gmin %d: %d bursts of %d packets in all; %s of the packets lost in bursts, %s outside",
        BurstGap.GMIN,
        gaps.bursts(),
        gaps.burstPackets(),
        gaps.bursts() == 0 ? "n/a" : number(gaps.burstDensity()),
        gaps.gapPackets() == 0 ? "n/a" : number(gaps.gapDensity()));
    if (runs < FEW_RUNS) {
      add(
          lines,
          "caution: only %d runs of losses; the standard errors below are rough at best",
          runs);
    }
  }

  private static void fitted(List<String> lines, ChainEstimate estimate) {
    MarkovLoss chain = estimate.chain();
    add(lines, "%s, log-likelihood %.2f", estimate.form().label(), estimate.logLikelihood());
    add(
        lines,
        "  loss rate %s (s.e. %s)",
        number(chain.lossRate()),
        number(estimate.errorOfLossRate()));
    if (estimate.form() != Form.INDEPENDENT) {
      add(lines, "  p good to bad %s (s.e. %s)", number(chain.p()), number(estimate.errorOfP()));
      add(lines, "  r bad to good %s (s.e. %s)", number(chain.r()), number(estimate.errorOfR()));
      add(
          lines,
          "  mean burst 1/r %s packets (s.e. %s)",
          number(estimate.meanBurst()),
          number(estimate.errorOfMeanBurst()));
    }
    if (estimate.form() == Form.THREE_PARAMETER) {
      add(
          lines,
          "  h delivered in the bad state %s (s.e. %s)",
          number(chain.h()),
          number(estimate.errorOfH()));
    }
  }

  private static void choice(List<String> lines, LossFit fit) {
    add(
        lines,
        "independent or simple chain? A chain fits so much better by chance: p %s",
        chance(fit.simpleByChance()));
    if (fit.threeParameter().isPresent()) {
      add(
          lines,
          "simple or three-parameter chain? The third fits so much better by chance: p %s",
          chance(fit.threeParameterByChance()));
      lines.add("  (likelihood ratio; h = 0 is the limit of its range, so half a tail of 1 df)");
    } else {
      add(lines, "three parameters are not fitted to fewer than %d losses", LossFit.LEAST_LOSSES);
    }
    add(
        lines,
        "chosen: %s, the simplest that is not rejected at p < %.2f",
        fit.chosen().form().label(),
        LossFit.LEVEL);
  }

  private static void goodness(List<String> lines, LossFit fit) {
    RunLengths test = fit.runLengths();
    if (!test.tested()) {
      lines.add("run lengths: too few runs to test the fit");
      return;
    }
    add(
        lines,
        "run lengths: chi-square %.2f with %d degrees of freedom, p %s: %s",
        test.statistic(),
        test.degreesOfFreedom(),
        chance(test.pValue()),
        test.pValue() < LossFit.LEVEL
            ? "the fit does not describe the runs; replay the trace itself (process trace)"
            : "the runs do not speak against the fit");
  }

  private static void plot(List<String> lines, LossFit fit) {
    RunTable table = RunTable.of(fit);
    int chosen = table.forms().indexOf(fit.chosen());
    int most = table.rows().stream().mapToInt(RunTable.Row::observed).max().orElse(1);
    lines.add("packets lost in a row, how often, and as fitted:");
    for (RunTable.Row row : table.rows()) {
      String bar = "#".repeat((row.observed() * BAR + most - 1) / most);
      add(
          lines,
          "%4s %7d %9.1f  %s",
          row.length(),
          row.observed(),
          row.expected().get(chosen),
          bar);
    }
  }

  private static void add(List<String> lines, String format, Object... values) {
    lines.add(String.format(Locale.ROOT, format, values).stripTrailing());
  }

  private static String chance(double p) {
    return p < LEAST_CHANCE ? "< " + LEAST_CHANCE_TEXT : "= " + number(p);
  }

  private static String number(double value) {
    return LossFit.format(value);
  }
}
