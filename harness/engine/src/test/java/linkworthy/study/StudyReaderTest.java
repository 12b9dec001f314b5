package linkworthy.study;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.stream.Stream;
import linkworthy.input.BadInput;
import linkworthy.input.YamlNode;
import linkworthy.link.Link;
import linkworthy.noise.Site;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.Arguments;
import org.junit.jupiter.params.provider.MethodSource;
import org.junit.jupiter.params.provider.ValueSource;

class StudyReaderTest {
  static final String SHORT =
      """
      name: yard
      impairments:
        - noise: gaussian
          snr-db: 20
      codecs:
        - transform: mean
          step: 16
      """;

  @TempDir Path folder;

  static Study read(String text) {
    return StudyReader.read(YamlNode.parse("study.yaml", text), Path.of("").toAbsolutePath());
  }

  private static String refusal(String text) {
    String[] message = {""};
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> read(text))
        .satisfies(e -> message[0] = String.valueOf(e.getMessage()));
    assertThat(message[0].lines()).as("one line").hasSize(1);
    return message[0];
  }

  @Test
  void whatIsLeftOutHasItsDefault() {
    Study study = read(SHORT);

    assertThat(study.purpose()).isEqualTo("Not stated");
    assertThat(study.seed()).isEqualTo(1);
    assertThat(study.pictures().manifest()).isNull();
    assertThat(study.pictures().select()).containsExactly("field");
    assertThat(study.pictures().longestSide()).isEmpty();
    assertThat(study.pictures().planes()).isEqualTo("luma");
    assertThat(study.pictures().signalPower()).isEqualTo(SignalPower.VARIANCE);
    assertThat(study.link()).isEqualTo(new Link(96, 23, Link.Order.BY_COMPONENT));
    assertThat(study.replicates()).isEqualTo(5);
    assertThat(study.measures()).containsExactly("psnr", "ssim");
    ImpairmentChoice only = study.impairments().get(0);
    assertThat(only.label()).isEqualTo("gaussian");
    assertThat(only.site()).isEqualTo(Site.SAMPLES);
    assertThat(only.axis()).isEqualTo("snr-db");
    assertThat(only.severities()).containsExactly(20.0);
  }

  @Test
  void everyKeyIsRead() {
    Study study =
        read(
            """
            name: yard-cameras
            purpose: Choose a codec
            seed: 7
            pictures:
              manifest: mine/manifest.csv
              select: [field, sunset]
              longest-side: 256
              planes: luma
              signal-power: mean-square
            impairments:
              - noise: burst-loss
                label: dropouts
                acts-on: packets
                mean-burst: 2.5
                loss-rate: [0.01, 5e-2]
            codecs:
              - transform: pca
                over: rows
                keep: [4, 8]
                step: 8
            link: {payload-bytes: 64, header-bytes: 9, order: by-region}
            replicates: 10
            measures: [psnr]
            """);

    assertThat(study.seed()).isEqualTo(7);
    assertThat(study.pictures().manifest())
        .isEqualTo(
            new PictureChoice.ManifestFile(
                "mine/manifest.csv", Path.of("mine/manifest.csv").toAbsolutePath()));
    assertThat(study.pictures().select()).containsExactly("field", "sunset");
    assertThat(study.pictures().longestSide()).hasValue(256);
    assertThat(study.pictures().signalPower()).isEqualTo(SignalPower.MEAN_SQUARE);
    ImpairmentChoice only = study.impairments().get(0);
    assertThat(only.label()).isEqualTo("dropouts");
    assertThat(only.site()).isEqualTo(Site.PACKETS);
    assertThat(only.model().parameters()).containsEntry("mean-burst", 2.5);
    assertThat(only.severities()).containsExactly(0.01, 0.05);
    assertThat(study.codecs()).extracting(CodecChoice::label).hasSize(2).doesNotHaveDuplicates();
    assertThat(study.link()).isEqualTo(new Link(64, 9, Link.Order.BY_REGION));
    assertThat(study.replicates()).isEqualTo(10);
    assertThat(study.measures()).containsExactly("psnr");
  }

  static Stream<Arguments> mistakes() {
    String gaussian = "- noise: gaussian\n    snr-db: 20";
    return Stream.of(
        Arguments.of("name: yard", "nmae: yard", List.of("line 1", "'nmae'", "'name'")),
        Arguments.of("name: yard", "name: a/b", List.of("line 1", "'name'", "'a/b'", "letters")),
        Arguments.of("name: yard", "name: .yard", List.of("line 1", "'.yard'")),
        Arguments.of("name: yard", "seed: 1", List.of("missing key 'name'")),
        Arguments.of("name: yard", "name: yard\nseed: -1", List.of("line 2", "'seed'", "'-1'")),
        Arguments.of("name: yard", "name: yard\nseed: 9007199254740992", List.of("line 2")),
        Arguments.of("name: yard", "name: yard\npurpose: [a]", List.of("line 2", "a list")),
        Arguments.of(
            "name: yard", "name: yard\npurpose: \"a\\0b\"", List.of("line 2", "control character")),
        Arguments.of(
            "name: yard", "name: yard\npictures: {selct: [field]}", List.of("line 2", "'select'")),
        Arguments.of(
            "name: yard", "name: yard\npictures: {select: []}", List.of("line 2", "an empty list")),
        Arguments.of(
            "name: yard",
            "name: yard\npictures: {select: [cat, cat]}",
            List.of("line 2", "'cat' a second time")),
        Arguments.of(
            "name: yard",
            "name: yard\npictures:\n  select: [cat]\n  train: [canyon, cat]",
            List.of("line 4", "'cat', which select tests")),
        Arguments.of(
            "name: yard",
            "name: yard\npictures: {train: []}",
            List.of("line 2", "'pictures.train'", "an empty list")),
        Arguments.of(
            "- transform: mean\n    step: 16\n",
            "- transform: pca\n    bits-per-pixel: 1\npictures: {planes: all}\n",
            List.of("line 6", "which several planes share", "'planes: luma'")),
        Arguments.of(
            "step: 16",
            "step: 16\n  - transform: pca\n    basis: shared\n    keep: 4",
            List.of("line 8", "learns from other pictures", "pictures.train:")),
        Arguments.of(
            "name: yard",
            "name: yard\npictures: {longest-side: 7}",
            List.of("line 2", "'7'", "8 to 16384, or none")),
        Arguments.of(
            "name: yard",
            "name: yard\npictures: {longest-side: [7]}",
            List.of("line 2", "a list", "or none")),
        Arguments.of(
            "name: yard",
            "name: yard\npictures: {planes: al}",
            List.of("line 2", "did you mean 'all'")),
        Arguments.of(
            "name: yard",
            "name: yard\npictures: {chroma: 4:2:0}",
            List.of("line 2", "'pictures.chroma'", "belongs to 'planes: all'")),
        Arguments.of(
            "name: yard",
            "name: yard\npictures: {planes: all, chroma: 4:2:2}",
            List.of("line 2", "'4:2:2'", "4:2:0")),
        Arguments.of(
            "name: yard",
            "name: yard\npictures: {planes: all}\nlink: {payload-bytes: 32}",
            List.of("line 3", "'32'", "33 to 65535")),
        Arguments.of(
            "name: yard",
            "name: yard\npictures: {signal-power: varianse}",
            List.of("line 2", "'variance'", "mean-square")),
        Arguments.of(
            "name: yard",
            "name: yard\nlink: {payload-bytes: 8}",
            List.of("line 2", "'link.payload-bytes'", "32 to 65535")),
        Arguments.of(
            "name: yard",
            "name: yard\nlink: {order: by-regoin}",
            List.of("line 2", "'by-region'", "by-component")),
        Arguments.of(
            "name: yard", "name: yard\nreplicates: 0", List.of("line 2", "from 1 to 1000000")),
        Arguments.of("name: yard", "name: yard\nreplicates: 2.5", List.of("line 2", "'2.5'")),
        Arguments.of(
            "name: yard",
            "name: yard\nreplicates: {at-least: 1, at-most: 9, half-width-db: 1}",
            List.of("line 2", "at-least", "from 2 to")),
        Arguments.of(
            "name: yard",
            "name: yard\nreplicates: {at-least: 5, at-most: 4, half-width-db: 1}",
            List.of("line 2", "at-least", "2 to 4")),
        Arguments.of(
            "name: yard",
            "name: yard\nreplicates: {at-least: 5, at-most: 1000001, half-width-db: 1}",
            List.of("line 2", "at-most", "2 to 1000000")),
        Arguments.of(
            "name: yard",
            "name: yard\nreplicates: {at-least: 5, at-most: 9, half-width-db: 0}",
            List.of("line 2", "half-width-db", "above 0")),
        Arguments.of(
            "name: yard",
            "name: yard\nreplicates: {at-least: 5, at-most: 9, half-width-db: wide}",
            List.of("line 2", "'wide'", "above 0")),
        Arguments.of(
            "name: yard",
            "name: yard\nreplicates: {at-least: 5, at-most: 9}",
            List.of("line 2", "half-width-db")),
        Arguments.of(
            "name: yard",
            "name: yard\nreplicates: {at-least: 5, at-most: 9, half-width: 1}",
            List.of("line 2", "'half-width'", "'half-width-db'")),
        Arguments.of(
            "name: yard", "name: yard\nmeasures: [psnr, sim]", List.of("line 2", "'ssim'")),
        Arguments.of("name: yard", "name: yard\nmeasures: [ssim]", List.of("line 2", "psnr")),
        Arguments.of(gaussian, "[]", List.of("line 2", "'impairments'", "an empty list")),
        Arguments.of("noise: gaussian", "noise: gausian", List.of("line 3", "gaussian")),
        Arguments.of("snr-db: 20", "snr-bd: 20", List.of("line 4", "'snr-bd'", "'snr-db'")),
        Arguments.of(
            "snr-db: 20", "label: x", List.of("line 3", "no severity", "snr-db, variance")),
        Arguments.of(
            "snr-db: 20",
            "snr-db: 20\n    variance: 9",
            List.of("line 3", "several: snr-db, variance")),
        Arguments.of("snr-db: 20", "snr-db: []", List.of("line 4", "an empty list")),
        Arguments.of("snr-db: 20", "snr-db: loud", List.of("line 4", "'loud'")),
        Arguments.of("snr-db: 20", "snr-db: [20, 10, 20.0]", List.of("line 4", "second", "label:")),
        Arguments.of(
            "snr-db: 20",
            "snr-db: 20\n  - noise: gaussian\n    snr-db:\n      - 30\n      - 20",
            List.of("line 8", "gaussian on samples at snr-db 20.0", "label:")),
        Arguments.of(
            "snr-db: 20", "snr-db: 20\n    label: none", List.of("line 5", "kept for clean")),
        Arguments.of(
            "snr-db: 20",
            "snr-db: 20\n    acts-on: packets",
            List.of("line 5", "'packets'", "samples")),
        Arguments.of(
            "noise: gaussian\n    snr-db: 20",
            "noise: burst-loss\n    loss-rate: [0.1, 1.5]",
            List.of("line 4", "'impairments[0].loss-rate[1]'", "a number from 0 to 1")),
        Arguments.of(
            "noise: gaussian\n    snr-db: 20",
            "noise: burst-loss\n    mean-burst: 0.5\n    loss-rate: [0.1]",
            List.of("line 4", "'impairments[0].mean-burst'", "a number from 1 to")),
        Arguments.of(
            "noise: gaussian\n    snr-db: 20",
            "noise: burst-loss\n    snr-db: 20\n  - noise: burst-loss\n    mean-burst: 9\n"
                + "    snr-db: 10",
            List.of("line 5", "'burst-loss'", "second model", "label:")),
        Arguments.of(
            "noise: gaussian\n    snr-db: 20",
            "noise: bit-errors\n    frame-check: 1\n    snr-db: 20",
            List.of("line 4", "'impairments[0].frame-check' is '1'", "true or false")),
        Arguments.of(
            "noise: gaussian\n    snr-db: 20",
            "noise: radio-bpsk\n    check-bits: 24\n    snr-db: 20",
            List.of("line 4", "'impairments[0].check-bits' is '24'", "accepted: 16 or 32")),
        Arguments.of(
            "noise: gaussian\n    snr-db: 20",
            "noise: bit-errors\n    check-bits: 32\n    snr-db: 20",
            List.of("line 4", "check-bits is 32.0; accepted without frame-check: 16.0")),
        Arguments.of(
            "noise: gaussian\n    snr-db: 20",
            "noise: bit-errors\n    curve: bpsk\n    snr-db: 20",
            List.of("line 4", "unknown key 'curve'")),
        Arguments.of(
            "noise: gaussian\n    snr-db: 20",
            "noise: radio-bpsk-rayleigh\n    mean-burst: 3\n    eb-n0-db: 20",
            List.of("line 4", "'impairments[0].mean-burst'", "bpsk-rayleigh: 1.0")),
        Arguments.of(
            "noise: gaussian\n    snr-db: 20",
            "noise: trace\n    as-recorded: 0.5",
            List.of("line 4", "as-recorded' is '0.5'", "the number 1")),
        Arguments.of(
            "noise: gaussian", "noise: my/own.yaml", List.of("line 3", "own.yaml does not exist")),
        Arguments.of("step: 16", "stpe: 16", List.of("line 7", "'step'")),
        Arguments.of("transform: mean", "transform: maen", List.of("line 6", "'mean'")),
        Arguments.of(
            "step: 16",
            "step: 16\n  - transform: mean\n    step: [8, 16]",
            List.of("line 8", "step16' a second time", "label:")));
  }

  @ParameterizedTest
  @MethodSource("mistakes")
  void mistakesAreNamedWithTheirPlace(String right, String wrong, List<String> expected) {
    String text = SHORT.replace(right, wrong);
    assertThat(text).isNotEqualTo(SHORT);
    assertThat(refusal(text)).startsWith("study.yaml, line ").contains(expected);
  }

  @Test
  void aLabelTellsTwoParameterSetsApart() {
    Study study =
        read(
            SHORT.replace(
                "    snr-db: 20\n",
                """
                    snr-db: 20
                  - noise: burst-loss
                    snr-db: 20
                  - noise: burst-loss
                    mean-burst: 9
                    label: long bursts
                    snr-db: 20
                """));
    assertThat(study.impairments())
        .extracting(ImpairmentChoice::label)
        .containsExactly("gaussian", "burst-loss", "long bursts");
  }

  @Test
  void theSameModelMayBeGivenOnSeveralAxes() {
    Study study =
        read(
            SHORT.replace(
                "    snr-db: 20\n", "    snr-db: 20\n  - noise: gaussian\n    variance: 20\n"));
    assertThat(study.impairments())
        .extracting(ImpairmentChoice::axis)
        .containsExactly("snr-db", "variance");
  }

  @Test
  void aModelFileIsFoundBesideTheStudy() throws IOException {
    Files.createDirectories(folder.resolve("models"));
    Files.writeString(folder.resolve("models/radio.yaml"), StudyWriterTest.OWN_MODEL);
    Path file = folder.resolve("study.yaml");
    Files.writeString(file, SHORT.replace("gaussian", "models/radio.yaml"));

    Study study = StudyReader.read(file);

    assertThat(study.impairments().get(0).label()).isEqualTo("yard-radio");
    assertThat(study.impairments().get(0).site()).isEqualTo(Site.PACKETS);
  }

  @Test
  void valuesSetFromOutsideAreNamedByTheirOption() {
    YamlNode root = YamlNode.parse("study.yaml", SHORT).with("replicates", "0");
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> StudyReader.read(root, folder))
        .withMessageStartingWith("--set replicates: ");
  }

  @Test
  void theTemplateIsAStudy() {
    Study study = read(StudyTemplate.text());
    assertThat(study.name()).isEqualTo("my-study");
    assertThat(study.codecs()).hasSize(5);
    assertThat(study.impairments()).hasSize(2);
  }

  @ParameterizedTest
  @ValueSource(strings = {"first-look", "yard-gate", "yard-night", "yard-budget"})
  void theExamplesAreStudies(String name) {
    Study study = StudyReader.read(Path.of("../studies", name + ".yaml"));
    assertThat(study.name()).isEqualTo(name);
    assertThat(study.purpose()).isNotEqualTo("Not stated");
  }

  @Test
  void theFirstLookComparesFourteenCodecs() {
    Study study = StudyReader.read(Path.of("../studies/first-look.yaml"));
    assertThat(study.codecs())
        .hasSize(14)
        .extracting(CodecChoice::label)
        .contains("pca rows K16 step8", "dct blocks8 K16 step8", "mean rows step16");
    assertThat(study.impairments())
        .extracting(ImpairmentChoice::severities)
        .hasSize(3)
        .containsOnly(List.of(30.0, 25.0, 20.0, 15.0, 10.0));
    assertThat(study.impairments())
        .extracting(ImpairmentChoice::site)
        .containsExactly(Site.SAMPLES, Site.SAMPLES, Site.PACKETS);
  }
}
