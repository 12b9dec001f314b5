package linkworthy.decision;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Optional;
import java.util.Set;

/**
 * Which codecs meet the needs, how surely, and at what price.
 *
 * <p>A need holds in each of its conditions (impairment and severity). A picture's figure is the
 * mean over its replicates; pictures are the sample, replicates are not. With {@code alpha} one
 * minus the confidence, C codecs, N needs and k conditions of a need:
 *
 * <ul>
 *   <li>share of pictures: the pictures whose figure reaches the level are counted, and the share
 *       is bounded by {@link Bounds#ofShare}.
 *   <li>mean: {@link Bounds#ofMean} over the pictures' figures.
 *   <li>outage rate: the wider of the bounds over pictures and {@link Bounds#ofShare} over trials,
 *       so that no outage in all trials does not pass for certainty.
 *   <li><i>meets</i> if in every condition the bound on the near side, wrong with chance {@code
 *       alpha / (C N)}, is on the right side of the target. Conditions need no correction here: all
 *       of them must be shown to hold (Berger 1982, Technometrics 24:295-300).
 *   <li><i>fails</i> if in some condition the bound on the far side, wrong with chance {@code alpha
 *       / (C N k)}, is on the wrong side.
 *   <li><i>undecided</i> otherwise, and where a codec was not measured, one picture was, or a
 *       figure is infinite.
 * </ul>
 *
 * <p>By Bonferroni's inequality the chance that any word <i>meets</i> or <i>fails</i> of the whole
 * table is wrong is at most alpha, as far as the pictures are a random sample of those that matter
 * and, for means, their figures are not skewed beyond what {@link linkworthy.statistics.SkewedMean}
 * allows for.
 *
 * @param needs what was asked
 * @param conditions conditions of all needs together, over which price and PSNR are averaged
 * @param candidates the codecs, cheapest first
 */
public record Shortlist(
    Needs needs, List<Measurements.Condition> conditions, List<Candidate> candidates) {
  /**
   * A codec.
   *
   * @param codec its label
   * @param bitsPerPixel mean over pictures, then over the conditions; NaN if one is missing
   * @param psnrDb likewise
   * @param dominated whether another codec is at least as good in both and better in one
   * @param judgements one for each need
   * @param verdict on all needs
   */
  public record Candidate(
      String codec,
      double bitsPerPixel,
      double psnrDb,
      boolean dominated,
      List<Judgement> judgements,
      Verdict verdict) {
    public Candidate {
      judgements = List.copyOf(judgements);
    }

    private boolean dominates(Candidate other) {
      return bitsPerPixel <= other.bitsPerPixel
          && psnrDb >= other.psnrDb
          && (bitsPerPixel < other.bitsPerPixel || psnrDb > other.psnrDb);
    }
  }

  public Shortlist {
    conditions = List.copyOf(conditions);
    candidates = List.copyOf(candidates);
  }

  /** Judges all codecs. */
  public static Shortlist of(Measurements measured, Needs needs) {
    Set<Measurements.Condition> conditions = new LinkedHashSet<>();
    needs.needs().forEach(need -> conditions.addAll(need.conditions()));
    double error = error(measured.codecs().size(), needs);
    List<Judge> judges =
        needs.needs().stream().map(need -> new Judge(measured, need, error)).toList();
    List<Candidate> candidates = new ArrayList<>();
    for (String codec : measured.codecs()) {
      List<Judgement> judgements = judges.stream().map(judge -> judge.judge(codec)).toList();
      candidates.add(
          new Candidate(
              codec,
              mean(measured, conditions, codec, Measurements.BITS),
              mean(measured, conditions, codec, Measurements.PSNR),
              false,
              judgements,
              Verdict.all(judgements.stream().map(Judgement::verdict).toList())));
    }
    List<Candidate> marked =
        candidates.stream()
            .map(c -> marked(c, candidates.stream().anyMatch(other -> other.dominates(c))))
            .sorted(Comparator.comparingDouble(Candidate::bitsPerPixel))
            .toList();
    return new Shortlist(needs, List.copyOf(conditions), marked);
  }

  private static double error(int codecs, Needs needs) {
    return (1 - needs.confidence()) / (codecs * (double) needs.needs().size());
  }

  private static Candidate marked(Candidate c, boolean dominated) {
    return new Candidate(
        c.codec(), c.bitsPerPixel(), c.psnrDb(), dominated, c.judgements(), c.verdict());
  }

  private static double mean(
      Measurements measured, Set<Measurements.Condition> conditions, String codec, String measure) {
    return conditions.stream()
        .mapToDouble(
            condition ->
                measured
                    .find(condition, codec)
                    .map(sample -> sample.overPictures(measure).mean())
                    .orElse(Double.NaN))
        .average()
        .orElse(Double.NaN);
  }

  /** The chance of error that a word of the table on one codec and one need is given. */
  public double errorOfOne() {
    return error(candidates.size(), needs);
  }

  /** The cheapest codec that is shown to meet all needs. */
  public Optional<Candidate> cheapest() {
    return candidates.stream().filter(c -> c.verdict() == Verdict.MEETS).findFirst();
  }
}
