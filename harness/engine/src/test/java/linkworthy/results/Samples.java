package linkworthy.results;

import java.nio.file.Path;
import java.time.Clock;
import java.time.Instant;
import java.time.ZoneOffset;
import java.util.List;
import java.util.Map;
import linkworthy.corpus.ManifestEntry;
import linkworthy.input.YamlNode;
import linkworthy.statistics.Cell;
import linkworthy.statistics.Standing;
import linkworthy.study.Study;
import linkworthy.study.StudyReader;
import linkworthy.study.StudyTemplate;
import linkworthy.trial.Timing;
import linkworthy.trial.Trial;

/** Values for the tests of this package. */
final class Samples {
  static final Clock CLOCK =
      Clock.fixed(Instant.parse("2026-02-03T04:05:06.789Z"), ZoneOffset.ofHours(5));

  static final Trial CLEAN =
      new Trial(
          "00ff",
          "cat",
          "none",
          "",
          "",
          Double.NaN,
          0,
          0,
          Double.NaN,
          "mean rows step16",
          "mean",
          "rows",
          -1,
          "16",
          0,
          0,
          Double.POSITIVE_INFINITY,
          Double.NaN,
          4096,
          8192,
          2.5,
          12,
          0,
          false,
          "",
          Map.of());

  static final Trial NOISY =
      new Trial(
          "1a2b",
          "cat",
          "mine, \"so\"",
          "packets",
          "loss-rate",
          0.1,
          1234.5,
          1.0E-5,
          -30,
          "pca rows K16 step8",
          "pca",
          "rows",
          16,
          "8",
          3,
          Double.parseDouble("2.0E23"),
          12.34567890123456,
          0.5,
          4096,
          8192,
          1.0E7,
          12,
          12,
          true,
          "decode-exit",
          Map.of());

  static final String TRIALS =
      """
      trial,picture,impairment,acts_on,axis,severity,equivalent_noise_variance,\
      realised_noise_variance,snr_db,codec,transform,over,keep,step,replicate,mse,psnr_db,ssim,\
      payload_bits,sent_bits,bits_per_pixel,packets_sent,packets_lost,outage,failure
      00ff,cat,none,,,,0.0,0.0,,mean rows step16,mean,rows,,16,0,0.0,inf,,4096,8192,2.5,12,0,false,
      1a2b,cat,"mine, ""so""\",packets,loss-rate,0.1,1234.5,1.0E-5,-30.0,pca rows K16 step8,pca,\
      rows,16,8,3,2.0E23,12.34567890123456,0.5,4096,8192,1.0E7,12,12,true,decode-exit
      """;

  static final List<Cell> CELLS =
      List.of(
          new Cell(
              "none",
              "",
              "",
              Double.NaN,
              0,
              Double.NaN,
              "mean rows step16",
              "mean",
              "rows",
              -1,
              "16",
              1,
              1,
              Double.POSITIVE_INFINITY,
              Double.NaN,
              Double.NaN,
              Double.POSITIVE_INFINITY,
              Double.POSITIVE_INFINITY,
              Double.NaN,
              2.5,
              0,
              0,
              Double.NaN,
              Double.NaN,
              Standing.UNTESTED,
              0,
              Map.of()),
          new Cell(
              "gaussian",
              "samples",
              "snr-db",
              20,
              30.25,
              20,
              "pca rows K16 step8",
              "pca",
              "rows",
              16,
              "8",
              12,
              60,
              31.5,
              0.25,
              1.75,
              30,
              28,
              0.875,
              1.25,
              0.0,
              30,
              0.5,
              0.03125,
              Standing.BELOW,
              2,
              Map.of()));

  static final String CELLS_TEXT =
      """
      impairment,acts_on,axis,severity,equivalent_noise_variance,snr_db,codec,transform,over,keep,\
      step,pictures,trials,psnr_mean_db,psnr_noise_half_width_db,psnr_picture_half_width_db,\
      psnr_of_mean_mse_db,psnr_p05_db,ssim_mean,bits_per_pixel_mean,outage_rate,\
      realised_noise_variance_mean,behind_best_db,behind_best_p_adjusted,standing,failures
      none,,,,0.0,,mean rows step16,mean,rows,,16,1,1,inf,n/a,n/a,inf,inf,,2.5,0.0,0.0,,n/a,untested,0
      gaussian,samples,snr-db,20.0,30.25,20.0,pca rows K16 step8,pca,rows,16,8,12,60,31.5,0.25,1.75,\
      30.0,28.0,0.875,1.25,0.0,30.0,0.5,0.03125,below,2
      """;

  static final Timing TIMING = new Timing("cat", "gaussian", 20, 0, "mean rows step16", 1.5, 0.25);

  static final ManifestEntry CAT =
      new ManifestEntry(
          "cat",
          "field",
          "field/cat.png",
          448,
          296,
          1,
          8,
          "animal",
          "CC0-1.0",
          "Photograph by Stéfan",
          "a \"source\"",
          "ab".repeat(32),
          "");

  private Samples() {}

  static Study study() {
    return study("");
  }

  static Study study(String more) {
    String text = StudyTemplate.text() + more;
    return StudyReader.read(YamlNode.parse("template.yaml", text), Path.of("").toAbsolutePath());
  }

  static RunRecord run(Study study, long planned) {
    return RunRecord.begin(study, "0.1.0", "cd".repeat(32), List.of(CAT), planned, CLOCK);
  }
}
