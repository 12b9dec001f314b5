package linkworthy.trial;

import linkworthy.corpus.ManifestEntry;
import linkworthy.noise.Site;

/**
 * What a plan will roughly take, from closed formulas; nothing is run. Where replicates may end
 * early, what it takes at most.
 *
 * @param seconds of wall-clock time on the threads that were asked for; {@link Rehearsal} knows it
 *     better
 * @param memoryBytes of working memory
 */
public record Estimate(double seconds, double memoryBytes) {
  /** Seconds for one sample of one trial: transform, code, decode, compare. */
  private static final double SECONDS_PER_SAMPLE = 25e-9;

  /** Seconds for one of the d^3 steps of an eigendecomposition of order d. */
  private static final double SECONDS_PER_EIGEN_STEP = 1.4e-9;

  /** Seconds to start two programs, look after them and clean up. */
  private static final double SECONDS_PER_COMMAND_TRIAL = 0.03;

  private static final double BYTES_PER_SAMPLE = 200;
  private static final double BYTES_PER_TRIAL = 12;
  private static final double BYTES_PER_CELL = 8000;
  private static final double BYTES_OF_PROGRAM = 100e6;

  /** The estimate for a plan on a number of threads. */
  public static Estimate of(Plan plan, int threads) {
    double work = 0;
    double largest = 0;
    for (ManifestEntry entry : plan.pictures()) {
      double scale =
          plan.study().pictures().longestSide().isPresent()
              ? Math.min(
                  1,
                  plan.study().pictures().longestSide().getAsInt()
                      / (double) Math.max(entry.width(), entry.height()))
              : 1;
      double samples = scale * entry.width() * scale * entry.height();
      double coded = samples * plan.study().pictures().codedSamples(entry);
      double order = scale * entry.height();
      largest = Math.max(largest, coded);
      work +=
          SECONDS_PER_SAMPLE * coded * plan.trials() / plan.pictures().size()
              + SECONDS_PER_EIGEN_STEP * order * order * order * eigendecompositions(plan);
    }
    long commands =
        plan.study().codecs().stream()
            .filter(choice -> !choice.codec().programs().isEmpty())
            .count();
    work += SECONDS_PER_COMMAND_TRIAL * commands * plan.units();
    return new Estimate(
        work / threads,
        BYTES_OF_PROGRAM
            + BYTES_PER_SAMPLE * largest * threads
            + BYTES_PER_CELL * (1.0 + plan.conditions().size()) * plan.study().codecs().size()
            + BYTES_PER_TRIAL * plan.trials());
  }

  /** How often the principal components of one picture's rows are found. */
  private static long eigendecompositions(Plan plan) {
    boolean rows =
        plan.study().codecs().stream()
            .map(choice -> choice.codec().description())
            .anyMatch(d -> d.transform().equals("pca") && d.over().equals("rows"));
    long noisy =
        plan.study().impairments().stream()
            .filter(i -> i.site() == Site.SAMPLES)
            .mapToLong(i -> i.severities().size())
            .sum();
    return rows ? 1 + noisy * plan.study().replicates() : 0;
  }

  /** Bytes as whole mebibytes, at least 1. */
  public static long mebibytes(double bytes) {
    return Math.max(1, Math.round(bytes / (1 << 20)));
  }
}
