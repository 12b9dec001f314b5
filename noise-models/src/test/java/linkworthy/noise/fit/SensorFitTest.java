package linkworthy.noise.fit;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.stream.IntStream;
import linkworthy.corpus.Picture;
import linkworthy.input.BadInput;
import linkworthy.noise.GaussianNoise;
import linkworthy.noise.Impairment;
import linkworthy.noise.NoiseModel;
import linkworthy.noise.NoiseStreams;
import linkworthy.noise.Severity;
import linkworthy.noise.ShotNoise;
import linkworthy.noise.SignalStatistics;
import linkworthy.noise.Site;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

class SensorFitTest {
  private static final int WIDTH = 256;
  private static final int HEIGHT = 192;

  @TempDir private Path folder;

  /** Gentle waves from 40 to 200. */
  private static Picture scene(double phase) {
    int[] samples = new int[WIDTH * HEIGHT];
    for (int i = 0; i < samples.length; i++) {
      int x = i % WIDTH;
      int y = i / WIDTH;
      double wave = StrictMath.sin(x / 40.0 + phase) + StrictMath.cos(y / 30.0 - phase);
      samples[i] = (int) Math.rint(120 + 40 * wave);
    }
    return new Picture(WIDTH, HEIGHT, 8, samples);
  }

  private static Picture noisy(Picture clean, double gain, double read, long seed) {
    SignalStatistics signal = SignalStatistics.of(clean);
    Severity severity =
        gain > 0
            ? new Severity(ShotNoise.GAIN, gain)
            : new Severity(Severity.VARIANCE, read * read);
    Impairment impairment =
        gain > 0
            ? new ShotNoise().at(severity, Map.of(ShotNoise.READ_NOISE, read), Site.SAMPLES, signal)
            : new GaussianNoise().at(severity, Map.of(), Site.SAMPLES, signal);
    return ((Impairment.OnSamples) impairment)
        .apply(clean, NoiseStreams.open(seed, "test", "none", Site.SAMPLES, severity, 0, "sensor"));
  }

  private static List<Picture> frames(int count, double gain, double read, long seed) {
    return IntStream.range(0, count)
        .mapToObj(i -> noisy(scene(0), gain, read, 100 * seed + i))
        .toList();
  }

  /**
   * Gain .3 and read noise 2, from 2 and from 8 frames, 10 seeds each: gain and offset within 5 of
   * the stated errors, and their means over the seeds within 5 errors of a mean; false-alarm rate
   * 5.7e-7 for each normal figure.
   */
  @Test
  void gainAndReadNoiseAreRecovered() {
    for (int count : new int[] {2, 8}) {
      double gains = 0;
      double offsets = 0;
      for (long seed = 1; seed <= 10; seed++) {
        SensorFit.Line line = SensorFit.of(frames(count, 0.3, 2, seed)).line().orElseThrow();
        assertThat((line.gain() - 0.3) / line.errorOfGain()).isBetween(-5.0, 5.0);
        assertThat((line.offset() - 4) / line.errorOfOffset()).isBetween(-5.0, 5.0);
        assertThat(line.errorOfGain()).isLessThan(0.03);
        gains += (line.gain() - 0.3) / line.errorOfGain();
        offsets += (line.offset() - 4) / line.errorOfOffset();
      }
      assertThat(gains / 10).isBetween(-1.58, 1.58);
      assertThat(offsets / 10).isBetween(-1.58, 1.58);
    }
  }

  /**
   * Gaussian noise of deviation 5, 10 seeds: variance within 5 of the stated errors, and no gain
   * seen in any (each at 3 errors: false-alarm rate 1.3e-3, of 10 together 1.3e-2).
   */
  @Test
  void gaussianNoiseIsRecoveredWithoutAGain() {
    for (long seed = 1; seed <= 10; seed++) {
      SensorFit fit = SensorFit.of(frames(4, 0, 5, seed));
      assertThat((fit.variance() - 25) / fit.errorOfVariance()).isBetween(-5.0, 5.0);
      assertThat(fit.growsWithLight()).isFalse();
    }
  }

  /**
   * The levels are what the fit rests on: their mean by samples is the fitted variance, and each
   * standard error is v root(2 / (samples (frames - 1))), the variance v with its rounding (normal
   * theory). Each lies within 5 errors of .3 mean + 4: false-alarm rate 5.7e-7, of 64 together
   * 3.7e-5.
   */
  @Test
  void levelsRunFromDarkToBrightAlongTheLine() {
    SensorFit fit = SensorFit.of(frames(4, 0.3, 2, 2));
    assertThat(fit.levels()).hasSizeBetween(30, 64);
    double samples = 0;
    double sum = 0;
    double darker = 0;
    for (SensorFit.Level level : fit.levels()) {
      assertThat(level.mean()).isGreaterThan(darker);
      darker = level.mean();
      samples += level.samples();
      sum += level.samples() * level.variance();
      assertThat(level.error())
          .isCloseTo(
              (level.variance() + 1 / 12.0) * Math.sqrt(2.0 / (level.samples() * 3)), within(1e-9));
      assertThat((level.variance() - 0.3 * level.mean() - 4) / level.error()).isBetween(-5.0, 5.0);
    }
    assertThat(sum / samples).isCloseTo(fit.variance(), within(1e-9));
  }

  /** For two frames the noise variance is half the mean squared difference, less the rounding. */
  @Test
  void twoFramesGiveHalfTheSquaredDifference() {
    List<Picture> frames = frames(2, 0, 5, 3);
    double sum = 0;
    for (int i = 0; i < frames.get(0).size(); i++) {
      double d = frames.get(0).samples()[i] - frames.get(1).samples()[i];
      sum += d * d;
    }
    double expected = sum / 2 / frames.get(0).size() - 1 / 12.0;
    // Classes of fewer than 100 samples do not count: their share is small.
    assertThat(SensorFit.of(frames).variance()).isCloseTo(expected, within(0.01 * expected));
  }

  /**
   * Deviation 1, 3 and 8 on a smooth scene, 10 seeds each: within 5 of the stated errors and 1 %
   * for what the scene's slopes add; false-alarm rate below 5.7e-7 each.
   */
  @Test
  void singlePicturesGiveTheDeviation() {
    for (double deviation : new double[] {1, 3, 8}) {
      for (long seed = 1; seed <= 10; seed++) {
        SingleFrame fit = SingleFrame.of(noisy(scene(0), 0, deviation, seed));
        assertThat(fit.deviation())
            .isCloseTo(deviation, within(5 * fit.error() + 0.01 * deviation));
      }
    }
    assertThat(SingleFrame.of(scene(0)).deviation()).isLessThan(0.3);
  }

  @Test
  void framesThatTellNothingAreRefused() {
    Picture scene = scene(0);
    assertThatThrownBy(() -> SensorFit.of(List.of(scene, scene)))
        .isInstanceOf(BadInput.class)
        .hasMessageStartingWith("the frames are equal");
    assertThatThrownBy(() -> SensorFit.of(List.of(scene))).isInstanceOf(BadInput.class);
    Picture white = new Picture(64, 64, 8, IntStream.range(0, 64 * 64).map(i -> 255).toArray());
    assertThatThrownBy(() -> SensorFit.of(List.of(white, white)))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("neither black nor white");
    assertThatThrownBy(() -> SingleFrame.of(new Picture(8, 64, 8, new int[8 * 64])))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("at least 16 samples");
  }

  @Test
  void aFolderWithoutPicturesIsRefused() throws IOException {
    Files.writeString(folder.resolve("notes.txt"), "no picture");
    assertThatThrownBy(() -> PicturesFit.of(folder, PicturesFit.Kind.SINGLE))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("has no pictures");
  }

  @Test
  void aSinglePictureWithoutNoiseIsRefused() throws IOException {
    write("grey.pgm", new Picture(64, 64, 8, IntStream.range(0, 64 * 64).map(i -> 99).toArray()));
    assertThatThrownBy(() -> PicturesFit.of(folder, PicturesFit.Kind.SINGLE))
        .isInstanceOf(BadInput.class)
        .hasMessageStartingWith(folder + ": ")
        .hasMessageContaining("no noise beyond the rounding");
  }

  private void write(String name, Picture picture) throws IOException {
    byte[] head =
        ("P5\n" + picture.width() + " " + picture.height() + "\n255\n")
            .getBytes(StandardCharsets.US_ASCII);
    byte[] all = new byte[head.length + picture.size()];
    System.arraycopy(head, 0, all, 0, head.length);
    for (int i = 0; i < picture.size(); i++) {
      all[head.length + i] = (byte) picture.samples()[i];
    }
    Files.write(folder.resolve(name), all);
  }

  /** They are one scene, not different ones, though they have no variance to compare with. */
  @Test
  void equalFlatFramesAreNotTakenForDifferentScenes() throws IOException {
    Picture flat = new Picture(16, 16, 8, IntStream.range(0, 256).map(i -> 99).toArray());
    write("a.pgm", flat);
    write("b.pgm", flat);
    assertThatThrownBy(() -> PicturesFit.of(folder, PicturesFit.Kind.TOLD_BY_PICTURES))
        .isInstanceOf(BadInput.class)
        .hasMessageEndingWith(
            "the frames are equal, sample by sample; accepted: frames with noise");
  }

  @Test
  void oneFrameIsNotRepeated() {
    assertThatThrownBy(() -> SensorFit.of(List.of(new Picture(16, 16, 8, new int[256]))))
        .isInstanceOf(BadInput.class)
        .hasMessage("a single frame; accepted: two or more of equal size and depth");
  }

  @Test
  void repeatedFramesAreToldFromDifferentScenes() throws IOException {
    List<Picture> frames = new ArrayList<>(frames(3, 0.3, 2, 1));
    for (int i = 0; i < frames.size(); i++) {
      write(i + ".pgm", frames.get(i));
    }
    Files.writeString(folder.resolve("manifest.csv"), "no picture");
    PicturesFit fit = PicturesFit.of(folder, PicturesFit.Kind.TOLD_BY_PICTURES);
    assertThat(fit.repeated()).isPresent();
    assertThat(fit.lines())
        .contains("3 frames of one scene", "chosen: shot-noise, as the gain is clearly above 0")
        .noneMatch(line -> line.startsWith("caution"));
    Path file = folder.resolve("model/sensor.yaml");
    Files.createDirectories(folder.resolve("model"));
    ModelFile.write(file, fit.model("sensor"));
    NoiseModel model = NoiseModel.read(file);
    assertThat(model.process()).isEqualTo("shot-noise");
    assertThat(model.parameters().get("read-noise")).isCloseTo(2, within(0.5));
    assertThat(model.notes()).containsPattern("measured: gain 0\\.\\d+ \\(s\\.e\\. 0\\.00");
    assertThat(model.source()).contains(", 3 pictures of 256 x 192, sha256 ");
    write("3.pgm", noisy(scene(2), 0.3, 2, 77));
    assertThatThrownBy(() -> PicturesFit.of(folder, PicturesFit.Kind.TOLD_BY_PICTURES))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("--repeated (flat or very noisy frames) or --single");
    PicturesFit single = PicturesFit.of(folder, PicturesFit.Kind.SINGLE);
    assertThat(single.singles()).hasSize(4);
    Path gaussian = folder.resolve("model/g.yaml");
    ModelFile.write(gaussian, single.model("g"));
    assertThat(NoiseModel.read(gaussian).process()).isEqualTo("gaussian");
  }

  /** Flat frames: one scene of one level, told by the option. */
  @Test
  void flatFramesGiveAVarianceAlone() throws IOException {
    Picture flat =
        new Picture(
            WIDTH, HEIGHT, 8, IntStream.generate(() -> 120).limit(WIDTH * HEIGHT).toArray());
    write("a.pgm", noisy(flat, 0, 4, 1));
    write("b.pgm", noisy(flat, 0, 4, 2));
    PicturesFit fit = PicturesFit.of(folder, PicturesFit.Kind.REPEATED);
    assertThat(fit.repeated().orElseThrow().variance()).isCloseTo(16, within(0.8));
    assertThat(fit.lines()).anyMatch(line -> line.startsWith("chosen: gaussian"));
  }
}
