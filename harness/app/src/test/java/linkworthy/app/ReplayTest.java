package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.awt.image.BufferedImage;
import java.awt.image.Raster;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import javax.imageio.ImageIO;
import linkworthy.corpus.Manifest;
import linkworthy.results.TrialsCsv;
import linkworthy.trial.Trial;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.json.JsonMapper;

/** One trial alone gives what the whole run recorded. */
class ReplayTest {
  /** Every place that noise acts on, and a protected option. */
  private static final String EVERY_KIND =
      """
      name: every-kind
      seed: 7
      pictures: {select: [canyon, cat], longest-side: 32}
      impairments:
        - noise: gaussian
          snr-db: [20]
        - noise: burst-loss
          acts-on: packets
          mean-burst: 2
          loss-rate: [0.2]
        - noise: bit-errors
          bit-error-rate: [0.001]
      codecs:
        - transform: pca
          over: rows
          keep: 4
        - transform: dct
          keep: 4
        - transform: mean
          step: 16
          protect: {repeat: 2}
      replicates: 2
      """;

  @TempDir private static Path shared;
  private static Path results = Path.of("");
  @TempDir private Path folder;

  @BeforeAll
  static void run() {
    results = shared.resolve("results");
    Path study = SmallStudy.write(shared, EVERY_KIND);
    assertThat(Program.run(shared, "assess", study + "", "--quiet", "--out", results.toString()))
        .isEqualTo(new Outcome(0, "", ""));
  }

  private static List<Trial> trials(Path of) {
    List<Trial> trials = new ArrayList<>();
    assertThat(TrialsCsv.read(of.resolve("trials.csv"), trials::add)).isPositive();
    return trials;
  }

  private Outcome replay(Path of, String id) {
    return Program.run(folder, "replay", of + "", "--trial", id, "--out", folder + "/replay");
  }

  private JsonNode figures() throws IOException {
    return JsonMapper.shared().readTree(Files.readString(folder.resolve("replay/figures.json")));
  }

  private Raster image(String name) throws IOException {
    BufferedImage image = ImageIO.read(folder.resolve("replay").resolve(name).toFile());
    assertThat(image.getRaster().getNumBands()).isEqualTo(1);
    return image.getRaster();
  }

  private static double meanSquare(Raster one, Raster other) {
    double sum = 0;
    for (int y = 0; y < one.getHeight(); y++) {
      for (int x = 0; x < one.getWidth(); x++) {
        double error = one.getSample(x, y, 0) - other.getSample(x, y, 0);
        sum += error * error;
      }
    }
    return sum / one.getWidth() / one.getHeight();
  }

  @ParameterizedTest
  @ValueSource(strings = {"", "samples", "packets", "bits"})
  void everyKindOfTrialRepeats(String actsOn) throws IOException {
    List<Trial> trials =
        trials(results).stream()
            .filter(t -> t.actsOn().equals(actsOn) && t.picture().equals("cat"))
            .filter(t -> actsOn.isEmpty() || t.replicate() == 1)
            .toList();
    // Three options.
    assertThat(trials).hasSize(3);
    for (Trial trial : trials) {
      Outcome outcome = replay(results, trial.trial());
      assertThat(outcome.err()).isEmpty();
      assertThat(outcome.out()).contains("every figure equals the recorded one, bit for bit");
      assertThat(outcome.code()).isZero();
      JsonNode figures = figures();
      assertThat(figures.get("equal").asBoolean()).isTrue();
      assertThat(figures.get("mse").asDouble()).isEqualTo(trial.mse());
      assertThat(figures.get("recorded").get("mse").asDouble()).isEqualTo(trial.mse());
      assertThat(figures.get("ssim").asDouble()).isEqualTo(trial.ssim());
      assertThat(figures.get("sent_bits").asLong()).isEqualTo(trial.sentBits());
      Raster clean = image("clean.png");
      // Sums of whole numbers below 2^53, so the picture's own error is the recorded one exactly.
      assertThat(meanSquare(clean, image("decoded.png"))).isEqualTo(trial.mse());
      assertThat(meanSquare(clean, image("noisy.png")))
          .isEqualTo(actsOn.equals("samples") ? trial.realisedNoiseVariance() : 0);
      assertThat(figures.get("noisy_png").asString())
          .contains(actsOn.equals("samples") ? "what the encoder saw" : "the same as clean.png");
      assertErrorIsShown(clean, image("decoded.png"), image("error.png"), 128);
    }
  }

  private static void assertErrorIsShown(Raster clean, Raster decoded, Raster error, int middle) {
    for (int y = 0; y < clean.getHeight(); y++) {
      for (int x = 0; x < clean.getWidth(); x++) {
        int expected = middle + decoded.getSample(x, y, 0) - clean.getSample(x, y, 0);
        assertThat(error.getSample(x, y, 0))
            .isEqualTo(Math.max(0, Math.min(2 * middle - 1, expected)));
      }
    }
  }

  @Test
  void theSameFilesEachTime() throws IOException {
    String id = trials(results).get(4).trial();
    assertThat(replay(results, id).code()).isZero();
    Map<String, String> first = Program.contents(folder.resolve("replay"));
    assertThat(first.keySet())
        .containsExactly("", "clean.png", "decoded.png", "error.png", "figures.json", "noisy.png");
    assertThat(replay(results, id).code()).isZero();
    assertThat(Program.contents(folder.resolve("replay"))).isEqualTo(first);
    assertThat(Program.run(folder, "replay", results.toString(), "--trial", id).code()).isZero();
    assertThat(Program.contents(results.resolve("replay").resolve(id))).isEqualTo(first);
  }

  @Test
  void sixteenBitsAreKept() throws IOException {
    byte[] deep = OwnPictures.picture("png", OwnPictures.WIDTH, OwnPictures.HEIGHT, 16);
    OwnPictures pictures =
        new OwnPictures(folder).add("deep.png", deep, 16, Manifest.sha256(deep), "me");
    Path own = pictures.study();
    assertThat(pictures.manifest()).exists();
    Path out = folder.resolve("deep");
    assertThat(Program.run(folder, "assess", own + "", "--quiet", "--out", out + "").err())
        .isEmpty();
    Trial trial = trials(out).get(7);
    assertThat(replay(out, trial.trial()).code()).isZero();
    Raster clean = image("clean.png");
    assertThat(clean.getSampleModel().getSampleSize(0)).isEqualTo(16);
    assertThat(meanSquare(clean, image("decoded.png"))).isEqualTo(trial.mse());
    assertErrorIsShown(clean, image("decoded.png"), image("error.png"), 32768);
  }

  @Test
  void anAlteredRowIsTheAnswerNo() throws IOException {
    Path altered = copy();
    Trial trial = trials(altered).get(5);
    String rows = Files.readString(altered.resolve("trials.csv"));
    String old = "," + trial.payloadBits() + "," + trial.sentBits() + ",";
    String row = rows.lines().filter(line -> line.startsWith(trial.trial())).findFirst().get();
    assertThat(row).contains(old);
    String changed =
        row.replace(old, "," + (trial.payloadBits() + 8) + "," + trial.sentBits() + ",");
    Files.writeString(altered.resolve("trials.csv"), rows.replace(row, changed));
    Outcome outcome = replay(altered, trial.trial());
    assertThat(outcome.code()).isEqualTo(1);
    assertThat(outcome.out())
        .contains(
            "differs: payload_bits recorded "
                + (trial.payloadBits() + 8)
                + ", repeated "
                + trial.payloadBits());
    assertThat(figures().get("equal").asBoolean()).isFalse();
  }

  private Path copy() throws IOException {
    Path copy = folder.resolve("copy");
    for (Map.Entry<String, String> file : Program.contents(results).entrySet()) {
      if (!file.getKey().isEmpty() && !file.getKey().startsWith("replay")) {
        Files.createDirectories(copy);
        Files.writeString(
            copy.resolve(file.getKey()), file.getValue(), StandardCharsets.ISO_8859_1);
      }
    }
    return copy;
  }

  @Test
  void whatCannotBeRepeatedIsRefused() throws IOException {
    assertRefused(results, "0000000000000000", "none of the 42 trials");
    assertRefused(results, "cat", "16 hexadecimal digits");
    Path changed = copy();
    Path study = changed.resolve("study.yaml");
    Files.writeString(study, Files.readString(study).replace("seed: 7", "seed: 8"));
    assertRefused(changed, trials(changed).get(0).trial(), "fingerprint");
    Path moved = copy();
    Path table = moved.resolve("trials.csv");
    String id = trials(moved).get(20).trial();
    Files.writeString(table, Files.readString(table).replace(id + ",canyon", id + ",cat"));
    assertRefused(moved, id, "has the id");
  }

  private void assertRefused(Path of, String id, String part) {
    Outcome outcome = replay(of, id);
    assertThat(outcome.errors()).singleElement().asString().contains(part);
    assertThat(outcome.code()).isEqualTo(2);
    assertThat(folder.resolve("replay")).doesNotExist();
  }
}
