package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.io.PrintWriter;
import java.io.Writer;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Map;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import picocli.CommandLine;

class CommandsTest {
  @TempDir private Path folder;

  @Test
  void aDryRunCountsAndWritesNothing() {
    String study = SmallStudy.in(folder).toString();
    Map<String, String> before = Program.contents(folder);
    Outcome outcome =
        Program.run(folder, "assess", study, "--dry-run", "--threads", "2", "--out", folder + "/x");
    assertThat(outcome.code()).isZero();
    assertThat(outcome.err()).isEmpty();
    assertThat(outcome.out().lines())
        .contains(
            "study:    small",
            "pictures: 2",
            "codecs:   5",
            "units:    18 (picture, impairment, severity, replicate)",
            "trials:   90")
        .anyMatch(line -> line.matches("time: +about .+ on 2 threads"))
        .anyMatch(line -> line.matches("memory: +about \\d+ MiB"))
        .anyMatch(line -> line.matches("disk: +about [\\d.]+ MiB"))
        .anyMatch(
            line ->
                line.matches(
                    "measured: 10 units, run \\d+ times on this machine in .* s; nothing of it is kept"));
    assertThat(Program.contents(folder)).isEqualTo(before);
  }

  /** A protection with nothing to do is said before the run, in one line. */
  @Test
  void protectionFromNothingIsSaid() {
    String study = SmallStudy.in(folder).toString();
    String[] arguments = {"assess", study, "--dry-run", "--set", "protect={hamming: {depth: 8}}"};
    Outcome outcome = Program.run(folder, arguments);
    assertThat(outcome.err())
        .isEqualTo(
            "linkworthy: hamming gains nothing in this study: no impairment flips bits of packets"
                + " that are then used (bit-errors with frame-check: false)\n");
    String[] quietly = Arrays.copyOf(arguments, arguments.length + 1);
    quietly[arguments.length] = "--quiet";
    assertThat(Program.run(folder, quietly).err()).isEmpty();
  }

  @Test
  void theFolderOfARunIsNamedByStudyTimeAndFingerprint() throws IOException {
    Outcome outcome = Program.run(folder, "assess", SmallStudy.in(folder).toString());
    assertThat(outcome.code()).isZero();
    assertThat(outcome.err()).isEmpty();
    assertThat(outcome.out())
        .containsPattern("report: .*/results/small/20261201T101500Z-[0-9a-f]{8}/report.html\n");
    try (var runs = Files.list(folder.resolve("results/small"))) {
      Path run = runs.toList().get(0);
      assertThat(Program.contents(run).keySet())
          .containsExactly(
              "",
              "cells.csv",
              "predictions.csv",
              "report.html",
              "run.json",
              "study.yaml",
              "timings.csv",
              "trials.csv");
      Outcome again =
          Program.run(folder, "assess", run + "/study.yaml", "--out", folder + "/again");
      assertThat(again.code()).isZero();
      for (String file :
          List.of("trials.csv", "cells.csv", "predictions.csv", "study.yaml", "report.html")) {
        assertThat(folder.resolve("again").resolve(file))
            .hasSameTextualContentAs(run.resolve(file));
      }
    }
  }

  @Test
  void overwriteReplacesARecordAndLeavesOtherFiles() throws IOException {
    String study = SmallStudy.in(folder).toString();
    String out = folder.resolve("out").toString();
    assertThat(Program.run(folder, "assess", study, "--out", out, "--quiet").code()).isZero();
    Files.writeString(folder.resolve("out/notes.txt"), "mine");
    Outcome outcome =
        Program.run(
            folder, "assess", study, "--out", out, "--quiet", "--overwrite", "--set", "seed=8");
    assertThat(outcome).isEqualTo(new Outcome(0, "", ""));
    assertThat(folder.resolve("out/notes.txt")).hasContent("mine");
    assertThat(Files.readString(folder.resolve("out/run.json"))).contains("\"seed\" : 8");
  }

  @Test
  void theCorpusIsListedAndChecked() {
    assertThat(Program.run(folder, "corpus", "list").out().lines())
        .anyMatch(line -> line.startsWith("canyon ") && line.contains("O'Sullivan"))
        .hasSizeGreaterThan(12);
    Outcome check = Program.run(folder, "corpus", "check");
    assertThat(check.out()).matches("\\d+ pictures checked; all are what the manifest says\n");
    assertThat(check.code()).isZero();
  }

  @Test
  void aWrongChecksumIsTheAnswerNo() {
    byte[] pgm = OwnPictures.pgm();
    Path manifest =
        new OwnPictures(folder)
            .add("right.pgm", pgm)
            .add("wrong.pgm", pgm, 8, "0".repeat(64), "me")
            .manifest();
    Outcome check = Program.run(folder, "corpus", "check", "--manifest", manifest.toString());
    assertThat(check.out().lines().toList())
        .hasSize(2)
        .first()
        .asString()
        .contains("checksum", "wrong.pgm", "expected 0000");
    assertThat(check.out()).endsWith("1 of 2 pictures are not what the manifest says\n");
    assertThat(check.err()).isEmpty();
    assertThat(check.code()).isEqualTo(1);
  }

  @Test
  void noiseModelsAndCodecsAreListed() {
    assertThat(Program.run(folder, "noise", "list").out().lines())
        .anyMatch(line -> line.startsWith("burst-loss ") && line.contains("loss-rate"))
        .anyMatch(line -> line.startsWith("gaussian ") && line.contains("snr-db"));
    assertThat(Program.run(folder, "noise", "show", "burst-loss").out())
        .contains("id:          burst-loss\n", "mean-burst", "source: ")
        .containsPattern("fingerprint: [0-9a-f]{64}\n");
    assertThat(Program.run(folder, "codecs").out())
        .contains("transform: mean | dct | ", "keep:", "step:", "protect: none | ")
        .contains("reed-solomon: {n, k, depth, corrects}", "hamming:      {depth}");
    assertThat(Program.run(folder, "noise", "fit").err())
        .startsWith("linkworthy: Missing required argument");
  }

  @Test
  void aColumnOfTheListHoldsTheLongestId() {
    assertThat(Program.run(folder, "noise", "list").out().lines().map(l -> l.indexOf(" version ")))
        .isNotEmpty()
        .containsOnly(20);
  }

  @Test
  void aModelIsShownAsFilesWriteIt() {
    assertThat(Program.run(folder, "noise", "show", "radio-bpsk").out())
        .contains(
            "curve:       bpsk\n",
            "parameters:  {check-bits=16.0, errors-bad=0.5, frame-check=true, mean-burst=1.0}\n");
    assertThat(Program.run(folder, "noise", "show", "stripes").out())
        .contains("parameters:  {columns=false}\n")
        .doesNotContain("curve:");
    assertThat(Program.run(folder, "noise", "show", "trace").out())
        .contains("trace:       2000 lines\n");
  }

  @Test
  void whatBeginWritesRuns() {
    String file = folder.resolve("mine.yaml").toString();
    Outcome begun = Program.run(folder, "begin", file);
    assertThat(begun)
        .isEqualTo(
            new Outcome(
                0, "wrote " + file + "; run it with: linkworthy assess " + file + "\n", ""));
    Outcome run =
        Program.run(
            folder,
            "assess",
            file,
            "--set",
            "replicates=1",
            "--set",
            "pictures.longest-side=64",
            "--out",
            folder + "/out");
    assertThat(run.err()).isEmpty();
    assertThat(run.code()).isZero();
  }

  @Test
  void theBuiltInStudyIsPlannedWithoutAStudyFile() {
    Outcome outcome = Program.run(folder, "assess", "--dry-run");
    assertThat(outcome.code()).isZero();
    assertThat(outcome.out()).startsWith("study:    first-look\npictures: 12\n");
  }

  @Test
  void everyCommandShowsAnExample() {
    PrintWriter nowhere = new PrintWriter(Writer.nullWriter());
    Surroundings surroundings = new Surroundings(nowhere, nowhere, false, Program.CLOCK, folder);
    List<List<String>> paths = new ArrayList<>();
    collect(new CommandLine(new Linkworthy(), new Commands(surroundings)), List.of(), paths);
    assertThat(paths).contains(List.of(), List.of("assess"), List.of("noise", "show"));
    for (List<String> path : paths) {
      List<String> arguments = new ArrayList<>(path);
      arguments.add("--help");
      Outcome help = Program.run(folder, arguments.toArray(new String[0]));
      assertThat(help.code()).isZero();
      assertThat(help.err()).isEmpty();
      assertThat(help.out())
          .describedAs("%s", path)
          .startsWith("Usage: linkworthy")
          .containsPattern("Examples?:\\s+linkworthy " + String.join(" ", path));
      assertThat(help.out().lines()).allMatch(line -> line.length() <= 100);
    }
  }

  /** The list of commands shows the first line of each description alone. */
  @Test
  void everyCommandIsListedWithAWholeSentence() {
    PrintWriter nowhere = new PrintWriter(Writer.nullWriter());
    Surroundings surroundings = new Surroundings(nowhere, nowhere, false, Program.CLOCK, folder);
    CommandLine top = new CommandLine(new Linkworthy(), new Commands(surroundings));
    assertThat(top.getSubcommands()).isNotEmpty();
    for (CommandLine group : List.of(top, top.getSubcommands().get("noise"))) {
      group
          .getSubcommands()
          .forEach(
              (name, sub) ->
                  assertThat(sub.getCommandSpec().usageMessage().description()[0])
                      .describedAs(name)
                      .endsWith("."));
    }
  }

  private static void collect(CommandLine command, List<String> path, List<List<String>> paths) {
    paths.add(path);
    command
        .getSubcommands()
        .forEach(
            (name, sub) -> {
              List<String> longer = new ArrayList<>(path);
              longer.add(name);
              collect(sub, longer, paths);
            });
  }

  @Test
  void theVersionIsOneLine() {
    assertThat(Program.run(folder, "--version"))
        .isEqualTo(new Outcome(0, "linkworthy development\n", ""));
  }
}
