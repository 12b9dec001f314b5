package linkworthy.results;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;
import static org.assertj.core.api.Assertions.assertThatIllegalStateException;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.channels.WritableByteChannel;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.stream.Stream;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;
import linkworthy.input.YamlNode;
import linkworthy.statistics.Cells;
import linkworthy.study.Study;
import linkworthy.study.StudyReader;
import linkworthy.study.StudyTemplate;
import linkworthy.study.StudyWriter;
import linkworthy.trial.LocalRunner;
import linkworthy.trial.Plan;
import linkworthy.trial.Timing;
import linkworthy.trial.Trial;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

class ResultsFolderTest {
  private static final List<Trial> UNIT = List.of(Samples.CLEAN, Samples.NOISY);

  @TempDir Path temporary;
  private Path out;
  private final Study study = Samples.study();

  @BeforeEach
  void chooseFolder() {
    out = temporary.resolve("results/mine");
  }

  private void record(Path folder, boolean overwrite) {
    RunRecord run = Samples.run(study, 2);
    try (ResultsWriter writer = ResultsFolder.create(folder, overwrite)) {
      writer.begin(study, run);
      writer.append(UNIT, List.of(Samples.TIMING));
      writer.finish(Samples.CELLS, run.end(2, Samples.CLOCK));
      writer.writeReport("<!DOCTYPE html>\n");
    }
  }

  private static List<String> names(Path folder) throws IOException {
    try (Stream<Path> files = Files.list(folder)) {
      return files.map(file -> String.valueOf(file.getFileName())).sorted().toList();
    }
  }

  @Test
  void theDefaultFolderIsNamedAfterStudyTimeAndFingerprint() {
    assertThat(ResultsFolder.defaultPath(Path.of("results"), study, Samples.CLOCK))
        .isEqualTo(
            Path.of(
                "results",
                "my-study",
                "20260203T040506Z-" + StudyWriter.fingerprint(study).substring(0, 8)));
  }

  @Test
  void everyMeasureOfTheStudyIsInTheRecord() throws IOException {
    String measures = "measures: [mean-absolute-error, psnr]";
    Study measured =
        StudyReader.read(
            YamlNode.parse(
                "study.yaml",
                """
                name: measured
                pictures: {select: [cat], longest-side: 32}
                impairments: [{noise: gaussian, snr-db: 10}]
                codecs: [{transform: dct, keep: 3}]
                replicates: 2
                """
                    + measures),
            temporary);
    Plan plan = Plan.of(measured);
    RunRecord run = Samples.run(measured, plan.trials());
    Cells cells = new Cells();
    try (ResultsWriter writer = ResultsFolder.create(out, false)) {
      writer.begin(measured, run);
      new LocalRunner(plan, 1)
          .run(
              0,
              (unit, trials, timings) -> {
                writer.append(trials, timings);
                trials.forEach(cells::add);
              });
      writer.finish(cells.toList(), run.end(plan.trials(), Samples.CLOCK));
    }
    assertThat(Files.readString(out.resolve("trials.csv")))
        .contains(",outage,failure,mean_absolute_error\n");
    assertThat(Files.readString(out.resolve("cells.csv")))
        .contains(",standing,failures,mean_absolute_error_mean\n");
    ResultsFolder folder = ResultsFolder.open(out);
    List<Trial> trials = new ArrayList<>();
    assertThat(folder.trials(trials::add)).isEqualTo(3);
    assertThat(trials)
        .allSatisfy(
            trial ->
                assertThat(trial.further().get("mean_absolute_error"))
                    .isGreaterThan(0)
                    .isLessThanOrEqualTo(Math.sqrt(trial.mse())));
    assertThat(folder.cells()).isEqualTo(cells.toList());
  }

  @Test
  void aRecordReadsBack() throws IOException {
    record(out, false);

    assertThat(names(out))
        .containsExactly(
            "cells.csv", "report.html", "run.json", "study.yaml", "timings.csv", "trials.csv");
    assertThat(Files.readString(out.resolve("trials.csv"))).isEqualTo(Samples.TRIALS);
    ResultsFolder folder = ResultsFolder.open(out);
    assertThat(folder.run().complete()).isTrue();
    assertThat(folder.cells()).isEqualTo(Samples.CELLS);
    List<Trial> trials = new ArrayList<>();
    assertThat(folder.rows(trials::add)).isEqualTo(2);
    assertThat(trials).isEqualTo(UNIT);
    List<Timing> timings = new ArrayList<>();
    assertThat(folder.timings(timings::add)).isEqualTo(1);
    assertThat(timings).containsExactly(Samples.TIMING);
    assertThat(StudyWriter.canonical(folder.unchangedStudy()))
        .isEqualTo(StudyWriter.canonical(study));
  }

  @Test
  void everyUnitIsThereBeforeTheNext() throws IOException {
    try (ResultsWriter writer = ResultsFolder.create(out, false)) {
      writer.begin(study, Samples.run(study, 4));
      writer.append(UNIT, List.of());
      assertThat(Files.readString(out.resolve("trials.csv"))).isEqualTo(Samples.TRIALS);
      writer.append(UNIT, List.of());
      assertThat(ResultsFolder.open(out).rows(trial -> {})).isEqualTo(4);
      assertThat(ResultsFolder.open(out).run().complete()).isFalse();
      assertThatExceptionOfType(BadInput.class)
          .isThrownBy(() -> ResultsFolder.open(out).cells())
          .withMessageContaining("not complete")
          .withMessageContaining("'assess --resume " + out + "' makes it");
    }
    assertThat(names(out)).doesNotContain("lock");
  }

  @Test
  void aModelOfOnesOwnTravelsWithTheRecord() throws IOException {
    Path home = Files.createDirectories(temporary.resolve("home"));
    Path model = home.resolve("radio.yaml");
    Files.writeString(
        model,
        """
        id: yard-radio
        version: 2
        process: burst-loss
        acts-on: [packets]
        parameters: {mean-burst: 3}
        severity: [snr-db, loss-rate]
        source: measured
        """);
    Path file = home.resolve("study.yaml");
    Files.writeString(
        file, StudyTemplate.text().replace("noise: burst-loss ", "noise: ./radio.yaml "));
    Study own = StudyReader.read(file);
    try (ResultsWriter writer = ResultsFolder.create(out, false)) {
      writer.begin(own, Samples.run(own, 2));
    }
    Files.delete(model);

    Study back = ResultsFolder.open(out).unchangedStudy();
    assertThat(back.impairments()).isEqualTo(own.impairments());
    assertThat(Files.readString(out.resolve("study.yaml"))).doesNotContain(temporary.toString());
    assertThat(names(out.resolve("models"))).hasSize(1);

    record(out, true);
    assertThat(names(out)).doesNotContain("models");
  }

  @Test
  void aFolderWithSomethingInItIsLeftAlone() throws IOException {
    Files.createDirectories(out);
    Files.writeString(out.resolve("study.yaml"), "mine");
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> ResultsFolder.create(out, false))
        .withMessageContaining("is not empty")
        .withMessageContaining("--overwrite");
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> ResultsFolder.create(out, true))
        .withMessageContaining("no results folder");
    Files.writeString(out.resolve("run.json"), "{\"program\": \"another\"}");
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> ResultsFolder.create(out, true))
        .withMessageContaining("run.json");
    assertThat(names(out)).containsExactly("run.json", "study.yaml");
    assertThat(Files.readString(out.resolve("study.yaml"))).isEqualTo("mine");
  }

  @Test
  void overwritingRemovesWhatTheProgramWroteAndNoMore() throws IOException {
    record(out, false);
    Files.writeString(out.resolve("notes.txt"), "mine");
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> ResultsFolder.create(out, false))
        .withMessageContaining("--overwrite");

    ResultsFolder.create(out, true).close();
    assertThat(names(out)).containsExactly("notes.txt");
  }

  @Test
  void anEmptyFolderAndAStaleLockAreAccepted() throws IOException {
    Files.createDirectories(out);
    Files.createFile(out.resolve("lock"));
    record(out, false);
    assertThat(ResultsFolder.open(out).run().trialsDone()).isEqualTo(2);
  }

  @Test
  void aLockFileOfSomebodyElseIsLeftAlone() throws IOException {
    Files.createDirectories(out);
    Files.writeString(out.resolve("lock"), "mine");
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> ResultsFolder.create(out, false))
        .withMessageContaining("is not empty");
    assertThat(Files.readString(out.resolve("lock"))).isEqualTo("mine");
  }

  @ParameterizedTest
  @ValueSource(booleans = {false, true})
  void twoWritersDoNotShareAFolder(boolean overwrite) {
    ResultsWriter first = ResultsFolder.create(out, false);
    try {
      first.begin(study, Samples.run(study, 2));
      assertThatExceptionOfType(BadInput.class)
          .isThrownBy(() -> ResultsFolder.create(out, overwrite))
          .withMessageContaining("being written by another run");
    } finally {
      first.close();
    }
    record(out, true);
    assertThat(ResultsFolder.open(out).run().complete()).isTrue();
  }

  @Test
  void aFileIsNoFolder() throws IOException {
    Path file = temporary.resolve("file");
    Files.writeString(file, "mine");
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> ResultsFolder.create(file, true))
        .withMessageContaining("is a file");
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> ResultsFolder.open(file))
        .withMessageContaining("is no folder");
    assertThatExceptionOfType(Unavailable.class)
        .isThrownBy(() -> ResultsFolder.create(file.resolve("below"), false))
        .withMessageStartingWith("cannot write ");
  }

  @Test
  void aFileThatCannotBeReplacedIsReportedInOneLine() throws IOException {
    try (ResultsWriter writer = ResultsFolder.create(out, false)) {
      writer.begin(study, Samples.run(study, 2));
      Files.createDirectories(out.resolve("report.html/in-the-way"));
      assertThatExceptionOfType(Unavailable.class)
          .isThrownBy(() -> writer.writeReport("text"))
          .withMessageStartingWith("cannot write " + out.resolve("report.html") + ": ")
          .satisfies(e -> assertThat(String.valueOf(e.getMessage()).lines()).hasSize(1));
      assertThat(names(out)).noneMatch(name -> name.endsWith(".part"));
    }
  }

  @Test
  void aFullDiskIsNamedAsSuch() {
    WritableByteChannel full =
        new WritableByteChannel() {
          @Override
          public int write(ByteBuffer source) throws IOException {
            if (source.remaining() > 1) {
              source.get();
              return 1;
            }
            throw new IOException("No space left on device");
          }

          @Override
          public boolean isOpen() {
            return true;
          }

          @Override
          public void close() {}
        };
    assertThatExceptionOfType(IOException.class)
        .isThrownBy(() -> FolderFiles.writeFully(full, "some text"))
        .satisfies(
            e ->
                assertThat(FolderFiles.unavailable("write", Path.of("trials.csv"), e))
                    .hasMessage("cannot write trials.csv: No space left on device"));
  }

  @Test
  void aWriterThatIsClosedTakesNoMoreRows() {
    ResultsWriter writer = ResultsFolder.create(out, false);
    assertThatIllegalStateException().isThrownBy(() -> writer.append(UNIT, List.of()));
    writer.begin(study, Samples.run(study, 2));
    writer.close();
    assertThatIllegalStateException().isThrownBy(() -> writer.append(UNIT, List.of()));
  }

  @ParameterizedTest
  @ValueSource(strings = {"study.yaml", "run.json", "trials.csv", "cells.csv"})
  void aRecordThatLacksAFileIsRefused(String name) throws IOException {
    record(out, false);
    Files.delete(out.resolve(name));
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> ResultsFolder.open(out))
        .withMessageContaining("has no " + name);
  }

  @Test
  void aStudyThatWasChangedIsToldFromTheOneThatRan() throws IOException {
    record(out, false);
    Path file = out.resolve("study.yaml");
    Files.writeString(file, Files.readString(file).replace("seed: 1", "seed: 2"));
    assertThat(ResultsFolder.open(out).study().seed()).isEqualTo(2);
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> ResultsFolder.open(out).unchangedStudy())
        .withMessageContaining("fingerprint");
  }
}
