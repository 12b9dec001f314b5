package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

/** What a dry run says against what a run takes; time is left out, as machines are busy. */
class DryRunTest {
  private static final Pattern DISK =
      Pattern.compile(
          "disk: +(?:at least about (?<least>[\\d.]+), at most )?about (?<most>[\\d.]+) MiB");

  /** The aim of the project, 10 %. */
  private static final double ACCEPTED = 0.1;

  @TempDir private Path folder;

  private Matcher foreseen(String... arguments) {
    Outcome outcome = Program.run(folder, arguments);
    assertThat(outcome.err()).isEmpty();
    Matcher disk = DISK.matcher(outcome.out());
    assertThat(disk.find()).as(outcome.out()).isTrue();
    return disk;
  }

  private double found(String... arguments) {
    Path out = folder.resolve("out");
    List<String> all = new ArrayList<>(List.of(arguments));
    all.addAll(List.of("--quiet", "--out", out.toString()));
    assertThat(Program.run(folder, all.toArray(String[]::new))).isEqualTo(new Outcome(0, "", ""));
    return Program.contents(out).values().stream().mapToLong(String::length).sum() / 1048576.0;
  }

  @ParameterizedTest
  @ValueSource(
      strings = {
        "replicates=2",
        "replicates=12",
        "pictures.select=field",
        "pictures.select=cat",
        "pictures.select=deep",
        "pictures.planes=all",
        "link.payload-bytes=48",
        "impairments.0.snr-db=[40, 35, 30, 25, 20, 15, 10, 5]",
        "codecs.3={transform: pca, over: tiles, grid: 2x2, keep: 2, step: 8}"
      })
  void theDiskIsForeseen(String setting) {
    String study = SmallStudy.in(folder).toString();
    double foreseen =
        Double.parseDouble(foreseen("assess", study, "--set", setting, "--dry-run").group("most"));
    assertThat(foreseen / found("assess", study, "--set", setting)).isCloseTo(1, within(ACCEPTED));
  }

  @Test
  void theDiskIsForeseenWhereReplicatesMayEndEarly() {
    String text =
        SmallStudy.TEXT.replace(
            "replicates: 2", "replicates: {at-least: 5, at-most: 200, half-width-db: 1}");
    String study = SmallStudy.write(folder, text).toString();
    Matcher foreseen = foreseen("assess", study, "--dry-run");
    assertThat(found("assess", study))
        .isBetween(
            Double.parseDouble(foreseen.group("least")) * (1 - ACCEPTED),
            Double.parseDouble(foreseen.group("most")) * (1 + ACCEPTED));
  }

  @Test
  void nothingIsLeftBehind() throws IOException {
    String study = SmallStudy.in(folder).toString();
    Path temporary = Files.createDirectory(folder.resolve("temporary"));
    List<String> options = List.of("-Djava.io.tmpdir=" + temporary);
    Outcome outcome =
        Program.execute(
            Program.command(Program.thisJava(), options, folder, "assess", study, "--dry-run"));
    assertThat(outcome.code()).isZero();
    assertThat(outcome.out()).contains("nothing of it is kept");
    assertThat(temporary).isEmptyDirectory();
    assertThat(folder.resolve("results")).doesNotExist();
  }
}
