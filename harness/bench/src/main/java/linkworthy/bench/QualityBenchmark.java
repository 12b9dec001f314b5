package linkworthy.bench;

import linkworthy.corpus.Picture;
import linkworthy.noise.Impairment;
import linkworthy.noise.NoiseStreams;
import linkworthy.noise.Severity;
import linkworthy.noise.Site;
import linkworthy.quality.QualityMeasure;
import linkworthy.quality.QualityMeasures;
import org.openjdk.jmh.annotations.Benchmark;
import org.openjdk.jmh.annotations.Param;
import org.openjdk.jmh.annotations.Scope;
import org.openjdk.jmh.annotations.Setup;
import org.openjdk.jmh.annotations.State;

/** Comparing a noisy picture of 512 x 512 samples with its clean one. */
@State(Scope.Benchmark)
public class QualityBenchmark {
  private final Picture clean = Scenes.photographer();
  private final Picture noisy =
      ((Impairment.OnSamples) Scenes.noise("gaussian", Site.SAMPLES, clean))
          .apply(
              clean,
              NoiseStreams.open(
                  1,
                  "photographer",
                  "bench",
                  Site.SAMPLES,
                  new Severity(Severity.SNR_DB, 20),
                  0,
                  "bench"));

  /** Id of the measure. */
  @Param({"psnr", "ssim"})
  public String measure = "psnr";

  private QualityMeasure.Judge judge = decoded -> Double.NaN;

  /** Prepares the judge, as a study does once for each picture. */
  @Setup
  public void prepare() {
    judge = QualityMeasures.get(measure).against(clean);
  }

  @Benchmark
  public double compare() {
    return judge.of(noisy);
  }
}
