package linkworthy.trial;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import linkworthy.corpus.Manifest;
import linkworthy.corpus.ManifestEntry;
import linkworthy.corpus.Picture;
import linkworthy.corpus.TestPattern;
import linkworthy.input.YamlNode;
import linkworthy.study.StudyReader;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** Pictures of more than 8 bits a sample, from the manifest to the rows of the record. */
class DeepPicturesTest {
  private static final String STUDY =
      """
      name: deep
      pictures: %s
      impairments:
        - {noise: gaussian, snr-db: 20}
        - {noise: burst-loss, loss-rate: 0.2}
      codecs:
        - {transform: pca, over: rows, keep: 8, step: 64}
        - {transform: pca, over: rows, noise-floor: true, step: 64}
        - {transform: dct, keep: 64, step: none, label: lossless}
        - {transform: wht, bits-per-pixel: 4, step: 64}
        - {transform: dct, keep: 64, weights: luminance, quality: 10}
        - {transform: mean, keep: 0}
      replicates: 2
      """;

  private static final List<String> CODECS =
      List.of(
          "pca rows K8 step64",
          "pca rows floor step64",
          "lossless",
          "wht blocks8 bpp4 step64",
          "dct blocks8 K64 q10",
          "mean rows K0");

  @TempDir Path folder;

  private List<Trial> run(Plan plan) {
    List<Trial> all = new ArrayList<>();
    int units = new LocalRunner(plan, 2).run(0, (unit, rows, timings) -> all.addAll(rows));
    assertThat(units).isEqualTo(plan.units());
    return all;
  }

  private Plan plan(String pictures) {
    return Plan.of(
        StudyReader.read(YamlNode.parse("deep.yaml", STUDY.formatted(pictures)), folder));
  }

  /** PSNR is 10 log10(P^2 / MSE) with the picture's own P, and SNR is relative to its own power. */
  private static void assertOnItsOwnScale(List<Trial> trials, int pictures, double peak) {
    assertThat(trials).hasSize(pictures * 5 * CODECS.size());
    assertThat(trials.subList(0, CODECS.size())).extracting(Trial::codec).isEqualTo(CODECS);
    for (Trial trial : trials) {
      assertThat(trial.outage()).isFalse();
      if (trial.mse() > 0) {
        assertThat(trial.psnrDb())
            .isCloseTo(10 * StrictMath.log10(peak * peak / trial.mse()), within(1e-9));
      }
      if (trial.codec().equals("lossless") && trial.impairment().equals("none")) {
        assertThat(trial.mse()).isZero();
        assertThat(trial.psnrDb()).isInfinite();
      }
      if (trial.impairment().equals("gaussian")) {
        assertThat(trial.snrDb()).isCloseTo(20, within(1e-9));
        assertThat(trial.realisedNoiseVariance())
            .isGreaterThan(0.3 * trial.equivalentNoiseVariance());
      }
      if (trial.codec().startsWith("wht")) {
        assertThat(trial.bitsPerPixel()).isBetween(1.0, 4.0);
      }
    }
  }

  /** The shipped set of 16 bits a sample; far from P, 65535 levels would read as 48 dB less. */
  @Test
  void theShippedDeepPictures() {
    Plan plan = plan("{select: [deep], longest-side: 96}");
    for (ManifestEntry entry : plan.pictures()) {
      assertThat(plan.planes(entry).get(0).peak()).isEqualTo(65_535);
      assertThat(plan.planes(entry).get(0).variance()).isGreaterThan(255.0 * 255.0);
    }
    assertOnItsOwnScale(run(plan), 2, 65_535);
  }

  /** A camera's 12-bit picture: PGM with maxval 4095, two bytes a sample, high byte first. */
  @Test
  void aPictureOfTwelveBitsInAManifestOfOnesOwn() throws IOException {
    Picture pattern = TestPattern.cvp(72, 64);
    ByteArrayOutputStream pgm = new ByteArrayOutputStream();
    pgm.writeBytes("P5\n72 64\n4095\n".getBytes(StandardCharsets.US_ASCII));
    for (int i = 0; i < pattern.size(); i++) {
      int sample = pattern.samples()[i] * 16 + i % 16;
      pgm.write(sample >> 8);
      pgm.write(sample & 0xFF);
    }
    Files.write(folder.resolve("camera.pgm"), pgm.toByteArray());
    ManifestEntry entry =
        new ManifestEntry(
            "camera",
            "own",
            "camera.pgm",
            72,
            64,
            1,
            12,
            "pattern",
            "CC0-1.0",
            "made for this test",
            "",
            Manifest.sha256(pgm.toByteArray()),
            "");
    Files.writeString(folder.resolve("manifest.csv"), Manifest.toCsv(List.of(entry)));

    Plan plan = plan("{manifest: manifest.csv, select: [own]}");

    Picture camera = plan.planes(plan.pictures().get(0)).get(0);
    assertThat(camera.bitDepth()).isEqualTo(12);
    assertThat(camera.samples()[17]).isEqualTo(pattern.samples()[17] * 16 + 1);
    assertOnItsOwnScale(run(plan), 1, 4095);
  }
}
