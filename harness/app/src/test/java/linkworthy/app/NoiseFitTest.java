package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Map;
import linkworthy.corpus.Manifest;
import linkworthy.corpus.Picture;
import linkworthy.noise.Impairment;
import linkworthy.noise.MarkovLoss;
import linkworthy.noise.NoiseModel;
import linkworthy.noise.NoiseStreams;
import linkworthy.noise.Severity;
import linkworthy.noise.ShotNoise;
import linkworthy.noise.SignalStatistics;
import linkworthy.noise.Site;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class NoiseFitTest {
  @TempDir private Path folder;

  private Path trace(int packets) throws IOException {
    Impairment.Losses losses =
        MarkovLoss.simple(0.1, 4)
            .losses(
                NoiseStreams.open(1, "t", "t", Site.PACKETS, new Severity("variance", 0), 0, "t"));
    StringBuilder text = new StringBuilder("lost\n");
    for (int i = 0; i < packets; i++) {
      text.append(losses.lost(i) ? "1\n" : "0\n");
    }
    return Files.writeString(folder.resolve("trace.csv"), text);
  }

  @Test
  void aFittedModelRunsInAStudy() throws IOException {
    Path model = folder.resolve("my-link.yaml");
    Outcome fit =
        Program.run(folder, "noise", "fit", trace(5000).toString(), "--out", model.toString());
    assertThat(fit.err()).isEmpty();
    assertThat(fit.code()).isZero();
    assertThat(fit.out())
        .contains("chosen: simple two-state chain", "(s.e. ", "wrote " + model + "; in a study:");
    assertThat(NoiseModel.read(model).process()).isEqualTo("burst-loss");
    Path study =
        SmallStudy.write(
            folder,
            SmallStudy.TEXT.replace(
                "noise: burst-loss\n    acts-on: packets\n    mean-burst: 4",
                "noise: my-link.yaml"));
    assertThat(Files.readString(study)).contains("my-link.yaml");
    Outcome run = Program.run(folder, "assess", study.toString(), "--out", folder + "/out");
    assertThat(run.err()).isEmpty();
    assertThat(run.code()).isZero();
    Outcome again =
        Program.run(folder, "noise", "fit", folder + "/trace.csv", "--out", model.toString());
    assertThat(again.errors()).singleElement().asString().contains("exists already");
    assertThat(again.code()).isEqualTo(2);
  }

  @Test
  void aPageShowsTheBurstsBesideThoseOfEachForm() throws IOException {
    Path page = folder.resolve("fit.html");
    Outcome fit =
        Program.run(folder, "noise", "fit", trace(5000).toString(), "--html", page.toString());
    assertThat(fit.err()).isEmpty();
    assertThat(fit.out()).endsWith("page: " + page + "\n");
    String html = Files.readString(page);
    assertThat(html.substring(0, html.indexOf("<script>")))
        .contains(
            "What kind of losses does this link have?",
            "simple two-state chain (chosen)",
            "Observed and fitted",
            "how often",
            "packets lost in a row",
            ">&gt;12</th>")
        .doesNotContain("Mean PSNR", "NaN");
    List<String> wrong =
        List.of("noise", "fit", folder + "/trace.csv", "--html", folder.toString());
    Outcome refused = Program.run(folder, wrong.toArray(new String[0]));
    assertThat(refused.errors()).singleElement().asString().contains("accepted: a file");
    assertThat(refused.code()).isEqualTo(2);
  }

  @Test
  void aTraceWithoutLossesIsTheAnswerNo() throws IOException {
    Path trace = Files.writeString(folder.resolve("t.csv"), "0\n".repeat(300));
    Path out = folder.resolve("m.yaml");
    Outcome fit = Program.run(folder, "noise", "fit", trace.toString(), "--out", out.toString());
    assertThat(fit.out().lines())
        .singleElement()
        .asString()
        .startsWith("none of 300 packets was lost: the loss rate is below 0.009936 with 95 %");
    assertThat(fit.err()).isEmpty();
    assertThat(fit.code()).isEqualTo(1);
    assertThat(out).doesNotExist();
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {"''|is empty", "0\\n-1\\n|line 2: '-1'", "0\\nlost\\n|line 2: 'lost'"})
  void wrongTracesAreRefusedInOneLine(String text, String part) throws IOException {
    Path trace = Files.writeString(folder.resolve("t.csv"), text.replace("\\n", "\n"));
    Outcome fit = Program.run(folder, "noise", "fit", trace.toString());
    assertThat(fit.errors()).singleElement().asString().contains(part);
    assertThat(fit.out()).isEmpty();
    assertThat(fit.code()).isEqualTo(2);
  }

  @Test
  void sensorNoiseIsFittedToPictures() throws IOException {
    Path frames = frames(folder.resolve("frames"), 2);
    Path model = folder.resolve("sensor.yaml");
    Outcome fit =
        Program.run(
            folder, "noise", "fit", "--pictures", frames.toString(), "--out", model.toString());
    assertThat(fit.err()).isEmpty();
    assertThat(fit.code()).isZero();
    assertThat(fit.out()).contains("2 frames of one scene", "chosen: shot-noise");
    assertThat(NoiseModel.read(model).process()).isEqualTo("shot-noise");
    Outcome single =
        Program.run(folder, "noise", "fit", "--pictures", frames.toString(), "--single");
    assertThat(single.out()).contains("0.pgm: noise deviation", "chosen: gaussian");
  }

  /** Frames of a scene with shot noise. */
  static Path frames(Path frames, int count) throws IOException {
    Files.createDirectories(frames);
    Manifest shipped = Manifest.shipped();
    Picture canyon = shipped.load(shipped.select(List.of("canyon")).get(0));
    Severity severity = new Severity(ShotNoise.GAIN, 0.5);
    for (int i = 0; i < count; i++) {
      Impairment.OnSamples noise =
          (Impairment.OnSamples)
              new ShotNoise().at(severity, Map.of(), Site.SAMPLES, SignalStatistics.of(canyon));
      Picture noisy =
          noise.apply(canyon, NoiseStreams.open(i, "t", "t", Site.SAMPLES, severity, 0, "t"));
      Files.write(frames.resolve(i + ".pgm"), pgm(noisy));
    }
    return frames;
  }

  private static byte[] pgm(Picture picture) {
    ByteArrayOutputStream out = new ByteArrayOutputStream();
    out.writeBytes(
        ("P5\n" + picture.width() + " " + picture.height() + "\n255\n")
            .getBytes(StandardCharsets.US_ASCII));
    for (int sample : picture.samples()) {
      out.write(sample);
    }
    return out.toByteArray();
  }

  @Test
  void optionsThatDoNotGoTogetherAreRefused() throws IOException {
    String trace = trace(100).toString();
    for (List<String> wrong :
        List.of(
            List.of("noise", "fit"),
            List.of("noise", "fit", trace, "--pictures", folder.toString()),
            List.of("noise", "fit", trace, "--single"),
            List.of("noise", "fit", "--pictures", folder.toString(), "--html", folder.toString()),
            List.of("noise", "fit", "--pictures", folder.toString(), "--column", "x"),
            List.of("noise", "fit", "--pictures", folder.toString(), "--single", "--repeated"),
            List.of("noise", "fit", "--pictures", folder + "/nowhere"))) {
      Outcome outcome = Program.run(folder, wrong.toArray(new String[0]));
      assertThat(outcome.errors()).as("%s", wrong).hasSize(1);
      assertThat(outcome.code()).isEqualTo(2);
    }
  }
}
