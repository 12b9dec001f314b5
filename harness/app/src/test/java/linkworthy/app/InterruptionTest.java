package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.TimeUnit;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/** Ctrl-C, or a kind kill, in the middle of a run. */
class InterruptionTest {
  private static final String ONE_CONDITION =
      """
      name: endless
      seed: 7
      pictures: {select: [canyon], longest-side: 32}
      impairments:
        - noise: gaussian
          snr-db: [20]
      codecs:
        - transform: mean
          step: [8, 16]
      replicates: 1000000
      """;

  private static final int CODECS = 2;
  private static final int ENOUGH_BYTES = 5000;

  @TempDir private Path folder;

  /** 128 and the signal's number, as every shell reports it. */
  @ParameterizedTest
  @CsvSource({"INT, 130", "TERM, 143"})
  void leavesWholeUnitsInOrder(String signal, int code) throws IOException, InterruptedException {
    Path study = SmallStudy.write(folder, ONE_CONDITION);
    Path out = folder.resolve("out");
    List<String> command = new ArrayList<>();
    // Undoes the deafness to Ctrl-C that a shell gives to what it starts in the background.
    if (Program.execute(List.of("sh", "-c", "env --default-signal=INT true")).code() == 0) {
      command.addAll(List.of("env", "--default-signal=INT"));
    }
    command.addAll(
        Program.command(
            Program.thisJava(),
            List.of(),
            folder,
            "assess",
            study.toString(),
            "--threads",
            "2",
            "--out",
            out.toString()));
    Path err = folder.resolve("err.txt");
    Process process = new ProcessBuilder(command).redirectError(err.toFile()).start();
    try {
      Path trials = out.resolve("trials.csv");
      for (int i = 0;
          i < 600 && (!Files.exists(trials) || Files.size(trials) < ENOUGH_BYTES);
          i++) {
        assertThat(process.waitFor(50, TimeUnit.MILLISECONDS)).describedAs("ended").isFalse();
      }
      assertThat(Program.execute(List.of("kill", "-" + signal, "" + process.pid())).code())
          .isZero();
      // Well below the ten seconds after which the program gives up on itself.
      assertThat(process.waitFor(8, TimeUnit.SECONDS)).describedAs("ended").isTrue();
    } finally {
      process.destroyForcibly();
    }
    assertThat(process.exitValue()).isEqualTo(code);

    String text = Files.readString(out.resolve("trials.csv"));
    long rows = text.lines().count() - 1;
    assertThat(rows % CODECS).isZero();
    assertThat(Files.readString(out.resolve("run.json")))
        .contains("\"complete\" : false", "\"trials_done\" : " + rows, "\"end\" : \"2026-12-01T");
    assertThat(Files.readString(out.resolve("timings.csv")).lines().count() - 1).isEqualTo(rows);
    assertThat(Files.readAllLines(err))
        .containsExactly(
            "linkworthy: stopped after "
                + rows
                + " of 2000002 trials; go on with: linkworthy assess --resume "
                + out);
    assertThat(out.resolve("cells.csv")).doesNotExist();
    assertThat(out.resolve("lock")).doesNotExist();
    assertThat(text).isEqualTo(undisturbed(study, rows / CODECS - 1));
  }

  /** The table of a run that was to have only so many replicates behind the clean unit. */
  private String undisturbed(Path study, long replicates) throws IOException {
    Path whole = folder.resolve("whole");
    assertThat(
            Program.run(
                    folder,
                    "assess",
                    study.toString(),
                    "--quiet",
                    "--set",
                    "replicates=" + replicates,
                    "--out",
                    whole.toString())
                .code())
        .isZero();
    return Files.readString(whole.resolve("trials.csv"));
  }
}
