package linkworthy.bench;

import java.lang.management.ManagementFactory;
import java.lang.management.ThreadMXBean;
import java.util.Locale;
import java.util.function.DoubleSupplier;
import linkworthy.codec.EigenStage;
import linkworthy.corpus.Picture;
import linkworthy.quality.QualityMeasure;
import linkworthy.quality.QualityMeasures;

/**
 * SSIM and the eigendecomposition alone, on the picture 'photographer' (512 x 512 samples), for the
 * comparison with others in {@code peer/stages.py}. Each line has a stage, the median processor
 * time of a call in milliseconds, and a figure that must be the same there.
 */
public final class StagesAlone {
  private static final int WARM_UP_MS = 3000;
  private static final int ROUND_MS = 150;
  private static final int ROUNDS = 11;

  private static final ThreadMXBean THREADS = ManagementFactory.getThreadMXBean();

  private StagesAlone() {}

  /** No arguments. */
  public static void main(String[] args) {
    Picture clean = Scenes.photographer();
    Picture shown = damaged(clean);
    QualityMeasure.Judge judge = QualityMeasures.get("ssim").against(clean);
    EigenStage eigen = new EigenStage(clean);
    print("ssim", () -> judge.of(shown));
    print("eigen-leading", eigen::leading);
    print("eigen-all", eigen::all);
  }

  private static void print(String stage, DoubleSupplier work) {
    double unused = milliseconds(work, WARM_UP_MS);
    double[] rounds = new double[ROUNDS];
    for (int i = 0; i < rounds.length; i++) {
      rounds[i] = milliseconds(work, ROUND_MS);
    }
    System.out.println(
        String.format(
            Locale.ROOT,
            "%s %.5f %.9e",
            stage,
            StudyThroughput.median(rounds),
            work.getAsDouble()));
  }

  /** Mean processor time of a call, of as many as fit a time. */
  static double milliseconds(DoubleSupplier work, int atLeastMs) {
    long start = THREADS.getCurrentThreadCpuTime();
    long time;
    int calls = 0;
    double sum = 0;
    do {
      sum += work.getAsDouble();
      calls++;
      time = THREADS.getCurrentThreadCpuTime() - start;
    } while (time < atLeastMs * 1_000_000L);
    if (Double.isNaN(sum)) {
      throw new IllegalStateException("a stage gave no number");
    }
    return time / 1e6 / calls;
  }

  /** Sample i changed by (7919 i mod 41) - 20 grey levels, and clipped. */
  static Picture damaged(Picture clean) {
    int[] samples = clean.samples().clone();
    for (int i = 0; i < samples.length; i++) {
      int changed = samples[i] + (int) (7919L * i % 41) - 20;
      samples[i] = Math.max(0, Math.min(clean.peak(), changed));
    }
    return new Picture(clean.width(), clean.height(), clean.bitDepth(), samples);
  }
}
