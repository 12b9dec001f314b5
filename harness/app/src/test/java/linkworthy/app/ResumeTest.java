package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.io.RandomAccessFile;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardCopyOption;
import java.nio.file.StandardOpenOption;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Map;
import java.util.SplittableRandom;
import java.util.TreeMap;
import java.util.concurrent.TimeUnit;
import java.util.stream.Stream;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.Arguments;
import org.junit.jupiter.params.provider.MethodSource;
import org.junit.jupiter.params.provider.ValueSource;

/** A run that was stopped is completed to the bytes of an undisturbed one. */
class ResumeTest {
  private static final List<String> SAME =
      List.of("trials.csv", "cells.csv", "predictions.csv", "study.yaml");
  private static final List<String> LAST =
      List.of("predictions.csv.part", "cells.csv.part", "cells.csv");
  private static final int ROWS = 90;
  private static final int KILLS = Integer.getInteger("linkworthy.kills", 5);
  private static final long KILL_SEED = Long.getLong("linkworthy.seed", 20261201);

  /** Long enough to be killed in: 2 pictures, 1 + 4 x 60 units each, 5 codecs. */
  private static final String LONGER =
      SmallStudy.TEXT
          .replace("replicates: 2", "replicates: 60")
          .replace("name: small", "name: long");

  @TempDir private static Path shared;
  private static Map<String, String> whole = Map.of();

  @TempDir private Path folder;

  @BeforeAll
  static void runUndisturbed() {
    Path out = shared.resolve("whole");
    assertThat(
            Program.run(
                shared, "assess", SmallStudy.in(shared) + "", "--quiet", "--out", out.toString()))
        .isEqualTo(new Outcome(0, "", ""));
    whole = Program.contents(out);
  }

  /** A folder as a run leaves it that is killed after so many bytes of its two tables. */
  private Path stopped(long trialBytes, long timingBytes) {
    Path out = folder.resolve("out");
    try {
      Files.createDirectories(out);
      for (String file : List.of("study.yaml", "trials.csv", "timings.csv")) {
        write(out, file, text(file));
      }
      write(
          out,
          "run.json",
          text("run.json")
              .replace("\"complete\" : true", "\"complete\" : false")
              .replaceAll("\"end\" : \"[^\"]*\"", "\"end\" : null")
              .replaceAll("\"trials_done\" : \\d+", "\"trials_done\" : 0"));
      cut(out.resolve("trials.csv"), trialBytes);
      cut(out.resolve("timings.csv"), timingBytes);
    } catch (IOException e) {
      throw new AssertionError(e);
    }
    return out;
  }

  private static String text(String file) {
    return String.valueOf(whole.get(file));
  }

  private static void write(Path out, String file, String text) throws IOException {
    Files.writeString(out.resolve(file), text, StandardCharsets.ISO_8859_1);
  }

  private static void cut(Path file, long bytes) throws IOException {
    try (RandomAccessFile open = new RandomAccessFile(file.toFile(), "rw")) {
      open.setLength(bytes);
    }
  }

  /** Bytes of the header and of so many rows. */
  private static long bytes(String file, int rows) {
    String text = text(file);
    int end = 0;
    for (int line = 0; line <= rows; line++) {
      end = text.indexOf('\n', end) + 1;
    }
    return end;
  }

  private Outcome resume(Path out) {
    return Program.run(folder, "assess", "--quiet", "--resume", out.toString());
  }

  private static void assertWhole(Path out) {
    Map<String, String> found = Program.contents(out);
    assertThat(found.keySet()).isEqualTo(whole.keySet());
    for (String file : SAME) {
      assertThat(found.get(file)).describedAs(file).isEqualTo(whole.get(file));
    }
    assertThat(keys(found)).isEqualTo(keys(whole));
    assertThat(found.get("run.json")).isEqualTo(whole.get("run.json"));
    assertThat(found.get("report.html")).isEqualTo(whole.get("report.html"));
  }

  /** The rows of the timings without the times. */
  private static List<String> keys(Map<String, String> contents) {
    return String.valueOf(contents.get("timings.csv"))
        .lines()
        .map(line -> line.replaceAll(",[^,]*,[^,]*$", ""))
        .toList();
  }

  /** All rows were written; the last two are cut at every 37th of their bytes. */
  @Test
  void whereverTheLastRowsAreTorn() {
    int rows = ROWS;
    for (long at = bytes("trials.csv", rows - 2); at <= bytes("trials.csv", rows); at += 37) {
      Path out = stopped(at, bytes("timings.csv", rows));
      assertThat(resume(out)).describedAs("%d bytes", at).isEqualTo(new Outcome(0, "", ""));
      assertWhole(out);
    }
  }

  static Stream<Arguments> lengths() {
    return Stream.of(
        Arguments.of(0L, 0L),
        Arguments.of(10L, 0L),
        Arguments.of(bytes("trials.csv", 0), 0L),
        Arguments.of(bytes("trials.csv", 0), 3L),
        Arguments.of(bytes("trials.csv", 0), bytes("timings.csv", 0)),
        Arguments.of(bytes("trials.csv", 15), bytes("timings.csv", 10)),
        Arguments.of(bytes("trials.csv", 15), bytes("timings.csv", 12) + 7),
        Arguments.of(bytes("trials.csv", 10), bytes("timings.csv", 15)),
        Arguments.of(bytes("trials.csv", 90), bytes("timings.csv", 85)),
        Arguments.of(bytes("trials.csv", 90), bytes("timings.csv", 90)));
  }

  @ParameterizedTest
  @MethodSource("lengths")
  void whateverEachTableHas(long trialBytes, long timingBytes) {
    Path out = stopped(trialBytes, timingBytes);
    assertThat(resume(out)).isEqualTo(new Outcome(0, "", ""));
    assertWhole(out);
  }

  @Test
  void aTornUnitWithoutATornLineIsRedone() throws IOException {
    Path out = stopped(bytes("trials.csv", 15), bytes("timings.csv", 15));
    Files.write(out.resolve("trials.csv"), new byte[] {0, 0, '\n', 0}, StandardOpenOption.APPEND);
    assertThat(resume(out)).isEqualTo(new Outcome(0, "", ""));
    assertWhole(out);
  }

  @Test
  void unfinishedFilesAreRemovedAndOthersLeft() throws IOException {
    Path out = stopped(bytes("trials.csv", 15), bytes("timings.csv", 15));
    write(out, "run.json.part", "{");
    write(out, "lock", "");
    assertThat(resume(out)).isEqualTo(new Outcome(0, "", ""));
    assertWhole(out);
  }

  @Test
  void aCompleteFolderIsLeftAsItIs() throws IOException {
    Path out = folder.resolve("out");
    Files.createDirectories(out);
    for (Map.Entry<String, String> file : whole.entrySet()) {
      if (!file.getKey().isEmpty() && !file.getKey().equals("report.html")) {
        write(out, file.getKey(), file.getValue());
      }
    }
    assertThat(resume(out))
        .isEqualTo(
            new Outcome(
                0,
                out
                    + " is complete; there is nothing to go on with\nreport: "
                    + out
                    + "/report.html\n",
                ""));
    assertThat(Program.contents(out)).isEqualTo(whole);
    assertThat(resume(out))
        .isEqualTo(new Outcome(0, out + " is complete; there is nothing to go on with\n", ""));
  }

  @Test
  void aCompleteFolderWithLostRowsIsCompletedAgain() throws IOException {
    Path out = stopped(bytes("trials.csv", 42), bytes("timings.csv", 90));
    write(out, "run.json", text("run.json"));
    write(out, "cells.csv", text("cells.csv"));
    assertThat(resume(out)).isEqualTo(new Outcome(0, "", ""));
    assertWhole(out);
  }

  private void assertRefused(Path out, String... parts) {
    Map<String, String> before = Program.contents(out);
    Outcome outcome = resume(out);
    assertThat(outcome.errors()).singleElement().asString().contains(parts);
    assertThat(outcome.code()).isEqualTo(2);
    assertThat(Program.contents(out)).isEqualTo(before);
  }

  @Test
  void rowsOfAnotherStudyAreRefused() throws IOException {
    Path other = folder.resolve("other");
    String study = SmallStudy.in(folder).toString();
    assertThat(
            Program.run(folder, "assess", study, "--set", "seed=8", "--out", other + "", "--quiet")
                .code())
        .isZero();
    Path out = stopped(bytes("trials.csv", 15), bytes("timings.csv", 15));
    Files.copy(
        other.resolve("trials.csv"),
        out.resolve("trials.csv"),
        StandardCopyOption.REPLACE_EXISTING);
    assertRefused(out, "trials.csv, line 2", "of another study");
  }

  @Test
  void aChangedStudyIsRefused() throws IOException {
    Path out = stopped(bytes("trials.csv", 15), bytes("timings.csv", 15));
    write(out, "study.yaml", text("study.yaml").replace("seed: 7", "seed: 8"));
    assertRefused(out, "study.yaml", "fingerprint");
  }

  @Test
  void anotherVersionOfTheProgramIsRefused() throws IOException {
    Path out = stopped(bytes("trials.csv", 15), bytes("timings.csv", 15));
    String run = Files.readString(out.resolve("run.json"));
    write(out, "run.json", run.replace("\"development\"", "\"0.0.9\""));
    assertRefused(out, "another program version", "0.0.9");
  }

  @Test
  void damageThatNoStopExplainsIsRefused() throws IOException {
    Path out = stopped(bytes("trials.csv", 40), bytes("timings.csv", 40));
    String rows = Files.readString(out.resolve("trials.csv"));
    int second = (int) bytes("trials.csv", 1);
    write(out, "trials.csv", rows.substring(0, second) + "x" + rows.substring(second + 20));
    assertRefused(out, "trials.csv, line 3", "fields");
    write(out, "trials.csv", rows.replaceFirst(",outage,", ",outages,"));
    assertRefused(out, "trials.csv, line 1");
    write(out, "trials.csv", rows);
    Files.delete(out.resolve("timings.csv"));
    assertRefused(out, "no timings.csv");
  }

  @Test
  void aFolderWithoutAStudyIsRefused() throws IOException {
    Path out = stopped(0, 0);
    Files.delete(out.resolve("study.yaml"));
    assertRefused(out, "no study.yaml", "--overwrite");
    Files.delete(out.resolve("run.json"));
    assertRefused(out, "no run.json");
  }

  @ParameterizedTest
  @ValueSource(strings = {"study.yaml", "--set seed=1", "--out x", "--overwrite", "--dry-run"})
  void nothingElseDecidesTheStudy(String other) {
    Path out = stopped(bytes("trials.csv", 15), bytes("timings.csv", 15));
    Map<String, String> before = Program.contents(folder);
    List<String> arguments = new ArrayList<>(List.of("assess", "--resume", out.toString()));
    arguments.addAll(Arrays.asList(other.split(" ", -1)));
    Outcome outcome = Program.run(folder, arguments.toArray(new String[0]));
    assertThat(outcome.errors()).singleElement().asString().contains("--resume alone");
    assertThat(outcome.code()).isEqualTo(2);
    assertThat(Program.contents(folder)).isEqualTo(before);
  }

  private List<String> command(Path out, String... words) {
    List<String> arguments = new ArrayList<>(List.of("assess", "--quiet", "--threads", "2"));
    arguments.addAll(List.of(words));
    arguments.add(out.toString());
    return Program.command(Program.thisJava(), List.of(), folder, arguments.toArray(new String[0]));
  }

  /**
   * Killed and taken up again until it is complete; -Dlinkworthy.kills=N kills N times. Every third
   * time it is killed while the last files are written.
   */
  @Test
  void killedAtAnyInstant() throws IOException, InterruptedException {
    Path study = SmallStudy.write(folder, LONGER);
    Path expected = folder.resolve("expected");
    long start = System.nanoTime();
    assertThat(Program.execute(command(expected, study.toString(), "--out")).code()).isZero();
    long took = TimeUnit.NANOSECONDS.toMillis(System.nanoTime() - start);
    SplittableRandom random = new SplittableRandom(KILL_SEED);
    Path out = folder.resolve("killed");
    Map<String, Integer> endings = new TreeMap<>();
    for (int kill = 0; kill < KILLS; kill++) {
      boolean begun = Files.exists(out.resolve("study.yaml"));
      List<String> command =
          begun ? command(out, "--resume") : command(out, study.toString(), "--overwrite", "--out");
      Path err = folder.resolve("err.txt");
      Process process = new ProcessBuilder(command).redirectError(err.toFile()).start();
      boolean late = kill % 3 == 2;
      boolean ended =
          late
              ? endsBeforeItsLastFiles(process, out, random)
              : process.waitFor(random.nextLong(took), TimeUnit.MILLISECONDS);
      process.destroyForcibly().waitFor();
      endings.merge(ended ? "ended" : late ? "killed late" : "killed", 1, Integer::sum);
      assertThat(Files.readString(err)).isEmpty();
      if (ended) {
        assertThat(process.exitValue()).isZero();
        assertSameRows(out, expected);
        Program.contents(out).keySet().stream()
            .filter(name -> !name.isEmpty())
            .forEach(name -> assertThat(out.resolve(name).toFile().delete()).isTrue());
      }
    }
    assertThat(endings).containsKeys("killed", "killed late");
    boolean begun = Files.exists(out.resolve("study.yaml"));
    Outcome last =
        Program.execute(
            begun
                ? command(out, "--resume")
                : command(out, study.toString(), "--overwrite", "--out"));
    assertThat(last.err()).isEmpty();
    assertThat(last.code()).isZero();
    assertSameRows(out, expected);
  }

  /** Waits until the last files are begun, and then up to a twentieth of a second. */
  private static boolean endsBeforeItsLastFiles(Process process, Path out, SplittableRandom random)
      throws InterruptedException {
    boolean ended = false;
    while (!ended && LAST.stream().noneMatch(name -> Files.exists(out.resolve(name)))) {
      ended = process.waitFor(1, TimeUnit.MILLISECONDS);
    }
    return ended || process.waitFor(random.nextLong(50), TimeUnit.MILLISECONDS);
  }

  private static void assertSameRows(Path out, Path expected) {
    Map<String, String> found = Program.contents(out);
    Map<String, String> wanted = Program.contents(expected);
    assertThat(found.keySet()).isEqualTo(wanted.keySet());
    for (String file : SAME) {
      assertThat(found.get(file)).describedAs(file).isEqualTo(wanted.get(file));
    }
    assertThat(keys(found)).isEqualTo(keys(wanted));
    assertThat(found.get("run.json")).contains("\"complete\" : true");
  }

  @Test
  void twoProcessesAtOnceAreRefused() throws IOException, InterruptedException {
    Path study = SmallStudy.write(folder, LONGER.replace("replicates: 60", "replicates: 100000"));
    Path out = folder.resolve("busy");
    Process process =
        new ProcessBuilder(command(out, study.toString(), "--out"))
            .redirectError(ProcessBuilder.Redirect.DISCARD)
            .start();
    try {
      Path trials = out.resolve("trials.csv");
      for (int i = 0; i < 600 && (!Files.exists(trials) || Files.size(trials) < 5000); i++) {
        assertThat(process.waitFor(50, TimeUnit.MILLISECONDS)).describedAs("ended").isFalse();
      }
      Outcome second = resume(out);
      assertThat(second.errors())
          .singleElement()
          .asString()
          .contains("is being written by another run");
      assertThat(second.code()).isEqualTo(2);
    } finally {
      process.destroyForcibly().waitFor();
    }
  }

  /** A limit on the size of files, in 512 bytes, stands for a disk that fills up. */
  private Outcome onSmallDisk(int blocks, List<String> command) {
    List<String> limited =
        new ArrayList<>(List.of("sh", "-c", "ulimit -f " + blocks + "; exec \"$@\"", "sh"));
    limited.add(command.get(0));
    // Its file of counters for other tools would be too large as well.
    limited.add("-XX:-UsePerfData");
    limited.addAll(command.subList(1, command.size()));
    return Program.execute(limited);
  }

  @Test
  void aDiskThatFillsUpCostsNoWholeUnit() throws IOException {
    Path study = SmallStudy.write(folder, LONGER);
    Path expected = folder.resolve("expected");
    assertThat(Program.execute(command(expected, study.toString(), "--out")).code()).isZero();
    Path out = folder.resolve("full");
    Outcome first = onSmallDisk(200, command(out, study.toString(), "--out"));
    assertThat(first.errors()).singleElement().asString().contains("cannot write", "trials.csv");
    assertThat(first.code()).isEqualTo(3);
    long rows = Files.readString(out.resolve("trials.csv")).lines().count();
    assertThat(rows).isGreaterThan(100);
    Outcome second = onSmallDisk(400, command(out, "--resume"));
    assertThat(second.code()).isEqualTo(3);
    assertThat(Files.readString(out.resolve("trials.csv")).lines().count())
        .isGreaterThan(rows + 100);
    assertThat(Program.execute(command(out, "--resume"))).isEqualTo(new Outcome(0, "", ""));
    assertSameRows(out, expected);
  }
}
