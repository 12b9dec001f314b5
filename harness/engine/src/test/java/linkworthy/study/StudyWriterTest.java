package linkworthy.study;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Locale;
import java.util.Map;
import linkworthy.input.YamlNode;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class StudyWriterTest {
  static final String OWN_MODEL =
      """
      id: yard-radio
      version: 1
      process: burst-loss
      acts-on: [packets]
      parameters: {mean-burst: 3}
      severity: [snr-db, loss-rate]
      source: "Measured: between the gate and the shed"
      notes: One day in autumn
      """;

  @TempDir Path folder;

  @Test
  void everyDefaultIsWrittenOut() {
    String text = StudyWriter.canonical(StudyReaderTest.read(StudyReaderTest.SHORT));

    assertThat(text)
        .startsWith(
            """
            name: "yard"
            purpose: "Not stated"
            seed: 1
            pictures:
              manifest: "shipped"
              select:
              - "field"
              longest-side: "none"
              planes: "luma"
              signal-power: "variance"
            impairments:
            - noise: "gaussian"
              label: "gaussian"
              acts-on: "samples"
              snr-db:
              - 20.0
            codecs:
            - transform: "mean"
            """)
        .endsWith(
            """
            link:
              payload-bytes: 96
              header-bytes: 23
              order: "by-component"
            replicates: 5
            measures:
            - "psnr"
            - "ssim"
            """);
  }

  @ParameterizedTest
  @ValueSource(strings = {"en-US", "de-DE", "tr-TR"})
  void theTextIsTheSameInEveryLocale(String tag) {
    Study study = StudyReaderTest.read(StudyTemplate.text());
    String text = StudyWriter.canonical(study);
    Locale before = Locale.getDefault();
    try {
      Locale.setDefault(Locale.forLanguageTag(tag));
      assertThat(StudyWriter.canonical(StudyReaderTest.read(StudyTemplate.text()))).isEqualTo(text);
    } finally {
      Locale.setDefault(before);
    }
  }

  @ParameterizedTest
  @ValueSource(strings = {"first-look", "yard-gate", "yard-night", "yard-budget"})
  void readingItBackGivesAnEqualStudy(String name) {
    assertSame(StudyReader.read(Path.of("../studies", name + ".yaml")), Path.of(""));
  }

  @Test
  void oddTextsAndNumbersSurvive() {
    Study study =
        StudyReaderTest.read(
            StudyReaderTest.SHORT
                .replace(
                    "name: yard",
                    "name: yard\npurpose: \"a: 'b' #c\\nyes \\\\ \\u00e9\"\npictures: {manifest:"
                        + " \"no: 1/m.csv\", longest-side: 8}\nseed: 9007199254740991")
                .replace(
                    "snr-db: 20",
                    "variance: [1e-7, 12345678.5, 0.30000000000000004]\n    label: \"007\""));
    assertThat(study.impairments().get(0).label()).isEqualTo("007");
    assertSame(study, Path.of("").toAbsolutePath());
  }

  @ParameterizedTest
  @ValueSource(
      strings = {"planes: all", "planes: all, chroma: 4:2:0", "planes: all, chroma: 4:4:4"})
  void chromaIsWrittenWhereAllPlanesAreCoded(String planes) {
    Study study =
        StudyReaderTest.read(
            StudyReaderTest.SHORT.replace("name: yard", "name: yard\npictures: {" + planes + "}"));
    assertThat(StudyWriter.canonical(study))
        .contains("  planes: \"all\"\n  chroma: \"4:" + (planes.endsWith("4:4") ? "4:4" : "2:0"));
    assertSame(study, Path.of("").toAbsolutePath());
  }

  @Test
  void trainingPicturesAreWrittenWhereThereAreSome() {
    Study study =
        StudyReaderTest.read(
            StudyReaderTest.SHORT.replace(
                    "name: yard",
                    "name: yard\npictures: {select: cat, train: [canyon, colour], longest-side: 64}")
                + "  - {transform: pca, basis: shared, over: blocks, keep: 4}\n");
    assertThat(StudyWriter.canonical(study))
        .contains("- \"cat\"\n  train:\n  - \"canyon\"\n  - \"colour\"\n  longest-side: 64\n")
        .contains("- transform: \"pca\"\n  basis: \"shared\"\n  over: \"blocks\"\n");
    assertSame(study, Path.of("").toAbsolutePath());
  }

  private static void assertSame(Study study, Path base) {
    String text = StudyWriter.canonical(study);
    Study back = StudyReader.read(YamlNode.parse("study.yaml", text), base);
    assertThat(StudyWriter.canonical(back)).isEqualTo(text);
    assertThat(StudyWriter.fingerprint(back)).isEqualTo(StudyWriter.fingerprint(study));
    assertThat(back.codecs())
        .extracting(CodecChoice::label)
        .isEqualTo(study.codecs().stream().map(CodecChoice::label).toList());
    assertThat(back.codecs())
        .extracting(CodecChoice::settings)
        .isEqualTo(study.codecs().stream().map(CodecChoice::settings).toList());
    assertThat(back).usingRecursiveComparison().ignoringFields("codecs").isEqualTo(study);
  }

  @Test
  void aModelOfOnesOwnTravelsWithTheStudy() throws IOException {
    Path home = Files.createDirectories(folder.resolve("home/my-models"));
    Files.writeString(home.resolve("radio.yaml"), OWN_MODEL);
    Path file = home.resolveSibling("study.yaml");
    Files.writeString(
        file,
        StudyReaderTest.SHORT
            .replace("gaussian", "my-models/radio.yaml")
            .replace("snr-db: 20", "snr-db: 20\n    mean-burst: 7"));
    Study study = StudyReader.read(file);

    Map<String, String> models = StudyWriter.modelFiles(study);
    assertThat(models).hasSize(1);
    Path away = Files.createDirectories(folder.resolve("away/models"));
    for (Map.Entry<String, String> model : models.entrySet()) {
      assertThat(model.getKey()).matches("models/yard-radio-[0-9a-f]{8}\\.yaml");
      Files.writeString(away.resolveSibling(model.getKey()), model.getValue());
    }
    Files.writeString(away.resolveSibling("study.yaml"), StudyWriter.canonical(study));
    Files.delete(home.resolve("radio.yaml"));

    Study back = StudyReader.read(away.resolveSibling("study.yaml"));
    assertThat(back.impairments()).isEqualTo(study.impairments());
    assertThat(StudyWriter.canonical(back)).isEqualTo(StudyWriter.canonical(study));
    assertThat(StudyWriter.fingerprint(back)).isEqualTo(StudyWriter.fingerprint(study));
  }

  /** A trace and a curve of the user's own model go with the record; a flag is written as one. */
  @Test
  void settingsOfOwnModelsAreWrittenBesideTheStudy() throws IOException {
    Path home = Files.createDirectories(folder.resolve("home"));
    Files.writeString(home.resolve("day.csv"), "0\n1\n0\n");
    Files.writeString(
        home.resolve("day.yaml"),
        """
        id: day
        version: 1
        process: trace
        acts-on: packets
        trace: day.csv
        severity: as-recorded
        source: invented
        """);
    Files.writeString(
        home.resolve("radio.yaml"),
        """
        id: own-radio
        version: 1
        process: bit-errors
        acts-on: bits
        curve: dbpsk
        severity: [eb-n0-db]
        source: invented
        """);
    Path file =
        Files.writeString(
            home.resolve("study.yaml"),
            StudyReaderTest.SHORT.replace(
                "noise: gaussian\n    snr-db: 20",
                """
                noise: ./day.yaml
                    as-recorded: 1
                  - noise: ./radio.yaml
                    eb-n0-db: 6
                    frame-check: true
                  - noise: radio-oqpsk-2450
                    sinr-db: 0
                    check-bits: 32
                  - noise: stripes
                    columns: true
                    snr-db: 20
                  - noise: trace
                    as-recorded: 1"""));
    Study study = StudyReader.read(file);
    String text = StudyWriter.canonical(study);
    assertThat(text)
        .contains("frame-check: true\n  mean-burst: 1.0\n  eb-n0-db:\n  - 6.0\n")
        .contains("  check-bits: 32.0\n  errors-bad: 0.5\n  frame-check: true\n")
        .contains("  columns: true\n")
        .contains("- noise: \"trace\"\n");

    Map<String, String> files = StudyWriter.modelFiles(study);
    assertThat(text.split("check-bits", -1)).as("once, where it is not 16").hasSize(2);
    assertThat(files.values()).noneMatch(content -> content.contains("check-bits"));
    assertThat(files).hasSize(3).containsValue("0\n1\n0\n");
    Path away = Files.createDirectories(folder.resolve("away/models"));
    for (Map.Entry<String, String> entry : files.entrySet()) {
      assertThat(entry.getKey())
          .matches("models/(day|own-radio)-[0-9a-f]{8}(-trace\\.csv|\\.yaml)");
      Files.writeString(away.resolveSibling(entry.getKey()), entry.getValue());
    }
    Files.writeString(away.resolveSibling("study.yaml"), text);
    Study back = StudyReader.read(away.resolveSibling("study.yaml"));
    assertThat(back.impairments()).isEqualTo(study.impairments());
    assertThat(StudyWriter.canonical(back)).isEqualTo(text);
    assertThat(StudyWriter.fingerprint(back)).isEqualTo(StudyWriter.fingerprint(study));
    assertThat(StudyWriter.modelFiles(back)).isEqualTo(files);
  }

  @Test
  void replicatesThatEndEarlyAreWrittenWithTheirRule() {
    Study study =
        StudyReaderTest.read(
            StudyReaderTest.SHORT
                + "replicates: {half-width-db: 1e-1, at-most: 100, at-least: 5}\n");
    assertThat(study.earlyStop()).isEqualTo(new EarlyStop(5, 100, 0.1));
    assertThat(study.replicates()).isEqualTo(100);
    assertThat(StudyWriter.canonical(study))
        .contains("replicates:\n  at-least: 5\n  at-most: 100\n  half-width-db: 0.1\n");
    assertSame(study, Path.of("").toAbsolutePath());
  }

  @Test
  void shippedModelsNeedNoFile() {
    assertThat(StudyWriter.modelFiles(StudyReaderTest.read(StudyTemplate.text()))).isEmpty();
  }

  @Test
  void theFingerprintLeavesOutWhatChangesNoRow() {
    String plain = StudyWriter.fingerprint(StudyReaderTest.read(StudyReaderTest.SHORT));
    assertThat(plain).matches("[0-9a-f]{64}");
    for (String extra :
        new String[] {
          "purpose: Something else", "pictures: {manifest: elsewhere.csv}", "replicates: 5"
        }) {
      Study study = StudyReaderTest.read(StudyReaderTest.SHORT + extra + "\n");
      assertThat(StudyWriter.fingerprint(study)).as(extra).isEqualTo(plain);
    }
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "snr-db: 20 | snr-db: 21",
        "snr-db: 20 | variance: 20",
        "snr-db: 20 | {snr-db: 20, label: other}",
        "step: 16 | step: 8",
        "name: yard | seed: 2",
        "name: yard | replicates: 6",
        "name: yard | replicates: {at-least: 5, at-most: 5, half-width-db: 1}",
        "name: yard | measures: [psnr]",
        "name: yard | pictures: {select: [cat]}",
        "name: yard | pictures: {train: [cat]}",
        "name: yard | pictures: {planes: all}",
        "name: yard | pictures: {longest-side: 64}",
        "name: yard | pictures: {signal-power: mean-square}",
        "name: yard | link: {order: by-region}"
      })
  void theFingerprintSeesWhatChangesARow(String before, String after) {
    String changed =
        before.startsWith("name")
            ? before + "\n" + after
            : after.replaceAll("[{}]", "").replace(", ", "\n    ");
    String other = StudyReaderTest.SHORT.replace(before, changed);
    assertThat(other).isNotEqualTo(StudyReaderTest.SHORT);
    assertThat(StudyWriter.fingerprint(StudyReaderTest.read(other)))
        .isNotEqualTo(StudyWriter.fingerprint(StudyReaderTest.read(StudyReaderTest.SHORT)));
  }
}
