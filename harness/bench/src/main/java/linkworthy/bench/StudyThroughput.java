package linkworthy.bench;

import java.nio.file.Path;
import java.util.Arrays;
import java.util.Locale;
import linkworthy.results.TrialsCsv;
import linkworthy.trial.LocalRunner;
import linkworthy.trial.Plan;

/**
 * Trials per second of a whole study, with one thread and with two, side by side: one pass of each
 * to warm up, then pairs of passes, and the median of the pairs' ratios.
 *
 * <p>A pass reads the pictures, runs every unit and writes out every row of the record in memory.
 */
public final class StudyThroughput {
  static final int REPLICATES = 2;

  private static final int PAIRS = 5;

  private final Plan plan;

  StudyThroughput(Plan plan) {
    this.plan = plan;
  }

  /** Arguments: the study file, the number of pairs and the replicates (5 and 2 unless given). */
  public static void main(String[] args) {
    int pairs = args.length > 1 ? Integer.parseInt(args[1]) : PAIRS;
    int replicates = args.length > 2 ? Integer.parseInt(args[2]) : REPLICATES;
    StudyThroughput throughput = new StudyThroughput(Scenes.plan(Path.of(args[0]), replicates));
    throughput.trialsPerSecond(1);
    throughput.trialsPerSecond(2);
    double[] ratios = new double[pairs];
    for (int i = 0; i < pairs; i++) {
      double one = throughput.trialsPerSecond(1);
      double two = throughput.trialsPerSecond(2);
      ratios[i] = two / one;
      System.out.printf(
          Locale.ROOT,
          "pair %d: 1 thread %.0f trials/s, 2 threads %.0f trials/s, ratio %.2f%n",
          i + 1,
          one,
          two,
          ratios[i]);
    }
    System.out.printf(Locale.ROOT, "thread scaling (median ratio): %.2f%n", median(ratios));
  }

  /** One pass. */
  double trialsPerSecond(int threads) {
    long[] trials = new long[1];
    long[] characters = new long[1];
    long start = System.nanoTime();
    new LocalRunner(plan, threads)
        .run(
            0,
            (unit, rows, timings) -> {
              trials[0] += rows.size();
              characters[0] += TrialsCsv.text(rows).length();
            });
    double seconds = (System.nanoTime() - start) / 1e9;
    if (trials[0] != plan.trials() || characters[0] == 0) {
      throw new IllegalStateException(trials[0] + " of " + plan.trials() + " trials were run");
    }
    return trials[0] / seconds;
  }

  /** The middle value, or the mean of the two in the middle. */
  static double median(double[] values) {
    double[] sorted = values.clone();
    Arrays.sort(sorted);
    int half = sorted.length / 2;
    return sorted.length % 2 == 1 ? sorted[half] : (sorted[half - 1] + sorted[half]) / 2;
  }
}
