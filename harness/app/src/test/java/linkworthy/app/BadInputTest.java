package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;
import static org.junit.jupiter.params.provider.Arguments.arguments;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Map;
import java.util.stream.Stream;
import java.util.zip.CRC32;
import linkworthy.corpus.Manifest;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.Arguments;
import org.junit.jupiter.params.provider.MethodSource;

/** Whatever is wrong is told in one line, with the right exit code, and leaves nothing behind. */
class BadInputTest {
  @TempDir private Path folder;
  private Path study = Path.of("");

  @BeforeEach
  void writeStudy() {
    study = SmallStudy.in(folder);
  }

  private void assertRefused(int code, List<String> parts, String... arguments) {
    Map<String, String> before = Program.contents(folder);
    Outcome outcome = Program.run(folder, arguments);
    assertThat(outcome.errors())
        .singleElement()
        .asString()
        .startsWith("linkworthy: ")
        .contains(parts);
    assertThat(outcome.out()).isEmpty();
    assertThat(outcome.code()).isEqualTo(code);
    assertThat(Program.contents(folder)).isEqualTo(before);
  }

  private void assertStudyRefused(int code, Path file, String... parts) {
    String out = folder.resolve("new/deeper/out").toString();
    assertRefused(code, List.of(parts), "assess", file.toString(), "--out", out);
  }

  static Stream<Arguments> wrongStudies() {
    String burst = "mean-burst: 4\n    loss-rate: [0.1]";
    return Stream.of(
        arguments("seed: 7", "sead: 7", List.of("line 3", "'sead'", "did you mean 'seed'?")),
        arguments("seed: 7", "seed: seven", List.of("line 3", "'seven'", "a whole number")),
        arguments("seed: 7", "seed: [7]", List.of("line 3", "'seed' is a list")),
        arguments("seed: 7", "seed: 99999999999999999999", List.of("line 3", "9007199254740991")),
        arguments("name: small", "name: ../small", List.of("line 1", "'../small'")),
        arguments("name: small", "name: &a [*a, *a, *a]", List.of("line 1", "anchors")),
        arguments("snr-db: [20, 10]", "variance: -3", List.of("line 7", "-3", "a number from 0")),
        arguments("[20, 10]", "[.nan]", List.of("line 7", "'.nan'", "a number from -300")),
        arguments("[20, 10]", "[]", List.of("line 7", "an empty list")),
        arguments("[20, 10]", "[20, 20]", List.of("line 7", "a second time", "label:")),
        // A mean burst of 4 packets admits loss rates up to 4 / (4 + 1): every gap has one packet.
        arguments("loss-rate: [0.1]", "loss-rate: [0.81]", List.of("line 13", "0.0 to 0.8")),
        arguments(
            burst,
            burst + "\n  - noise: burst-loss\n    mean-burst: 2\n    loss-rate: [0.1]",
            List.of("line 16", "burst-loss on packets", "label:")),
        arguments("keep: [2, 8]", "keep: []", List.of("line 17", "an empty list")),
        arguments(
            "keep: [2, 8]", "keep: [2, 2]", List.of("line 15", "pca rows K2 step8", "second")),
        arguments("keep: [4]", "keep: [65]", List.of("'canyon'", "65", "0 to 64")),
        arguments(
            "longest-side: 32", "longest-side: 8", List.of("'canyon'", "8 x 6 samples", "0 to 6")),
        arguments(
            "longest-side: 32",
            "longest-side: 12",
            List.of("'canyon'", "'ssim'", "11 x 11 window")),
        arguments("[canyon, cat]", "[canyon, cats]", List.of("'cats'", "did you mean 'cat'?")));
  }

  @ParameterizedTest
  @MethodSource("wrongStudies")
  void inAStudy(String right, String wrong, List<String> parts) {
    assertThat(SmallStudy.TEXT).contains(right);
    Path file = SmallStudy.write(folder, SmallStudy.TEXT.replace(right, wrong));
    assertStudyRefused(2, file, parts.toArray(new String[0]));
  }

  @Test
  void inTheStudyFileItself() throws IOException {
    assertStudyRefused(2, folder.resolve("none.yaml"), "none.yaml does not exist");
    assertStudyRefused(2, folder, "is a folder");
    Path binary = Files.write(folder.resolve("binary.yaml"), new byte[] {(byte) 0xff, 0, 1, 2});
    assertStudyRefused(2, binary, "is not UTF-8 text");
    Path large = Files.writeString(folder.resolve("large.yaml"), "a: b\n".repeat(400_000));
    assertStudyRefused(2, large, "larger than 1 MiB");
    Path empty = Files.writeString(folder.resolve("empty.yaml"), "");
    assertStudyRefused(2, empty, "is empty");
  }

  static Stream<Arguments> wrongCommandLines() {
    return Stream.of(
        arguments("", List.of("no command given", "assess")),
        arguments("asess", List.of("did you mean 'assess'?")),
        arguments("assess --otu x", List.of("'--otu'", "did you mean '--out'?")),
        arguments("assess --threads 0", List.of("--threads is 0", "1 to 1024")),
        arguments("assess --threads many", List.of("'--threads'", "'many'")),
        arguments("assess --threads 2 --threads 3", List.of("'--threads'", "only once")),
        arguments("assess --set", List.of("'--set'")),
        arguments("assess --set seed", List.of("'seed'", "key.path=value")),
        arguments("assess --set =1", List.of("key.path=value")),
        arguments("assess --set seed=", List.of("--set seed is empty")),
        arguments("assess --set sead=1", List.of("--set sead", "did you mean 'seed'?")),
        arguments("assess --set codecs.99.step=1", List.of("'99'", "0 to ")),
        arguments("assess --set seed=[1", List.of("--set seed: not valid YAML")),
        arguments("assess a b", List.of("'b'")),
        arguments("corpus", List.of("accepted: ", "check, fetch, list")),
        arguments("corpus chek", List.of("did you mean 'check'?")),
        arguments("corpus list --manifest none.csv", List.of("none.csv does not exist")),
        arguments("noise", List.of("accepted: ", "fit, list, show")),
        arguments("noise show", List.of("'ID'")),
        arguments("noise show gausian", List.of("did you mean 'gaussian'?")),
        arguments("report", List.of("'RESULTS'")),
        arguments("report none", List.of("none does not exist")));
  }

  @ParameterizedTest
  @MethodSource("wrongCommandLines")
  void onTheCommandLine(String arguments, List<String> parts) {
    String[] split = arguments.isEmpty() ? new String[0] : arguments.split(" ", -1);
    assertRefused(2, parts, split);
  }

  @Test
  void inAPictureSmallerThanABlock() {
    assertRefused(
        2,
        List.of("'canyon'", "8 x 6 samples", "a block of 8 x 8"),
        "assess",
        study.toString(),
        "--set",
        "pictures.longest-side=8",
        "--set",
        "codecs.0.keep=2");
  }

  @Test
  void emptyPathsAreNoPaths() {
    String accepted = "it is empty; accepted: a path";
    assertRefused(2, List.of("STUDY", accepted), "assess", "");
    assertRefused(2, List.of("'--out'", accepted), "assess", "--out", "");
    assertRefused(2, List.of("FILE", accepted), "begin", " ");
    assertRefused(2, List.of("no path on this system"), "assess", "a\0b");
    assertRefused(2, List.of("@study.yaml does not exist"), "assess", "@study.yaml");
  }

  @Test
  void inFoldersThatCannotBeWritten() throws IOException {
    String file = study.toString();
    assertRefused(2, List.of("is a file"), "assess", file, "--out", file);
    assertRefused(3, List.of("cannot write"), "assess", file, "--out", file + "/below");
    assertRefused(3, List.of("cannot write"), "assess", file, "--out", "/dev/null/below");
    assertRefused(2, List.of("is not empty", "--overwrite"), "assess", file, "--out", folder + "");
    assertRefused(
        2, List.of("leaves it alone"), "assess", file, "--out", folder + "", "--overwrite");
    assertRefused(2, List.of("exists already"), "begin", file);
    assertRefused(3, List.of("no such file or folder"), "begin", folder + "/none/study.yaml");
  }

  @Test
  void inTheReportsPlace() {
    String results = folder.resolve("results").toString();
    assertThat(Program.run(folder, "assess", study.toString(), "--out", results, "--quiet").code())
        .isZero();
    assertRefused(2, List.of("is the folder"), "report", results, "--out", folder.toString());
    assertRefused(2, List.of("is the folder"), "report", results, "--out", "/");
    assertRefused(
        3, List.of("no such file or folder"), "report", results, "--out", folder + "/none/r.html");
    assertRefused(
        2, List.of("is not empty", "--overwrite"), "assess", study.toString(), "--out", results);
    assertRefused(2, List.of("has no run.json"), "report", folder.toString());
  }

  @Test
  void inPictures() throws IOException {
    byte[] png = OwnPictures.picture("png", OwnPictures.WIDTH, OwnPictures.HEIGHT, 8);
    OwnPictures missing = new OwnPictures(folder).add("p.png", png);
    missing.manifest();
    Files.delete(folder.resolve("p.png"));
    assertStudyRefused(2, missing.study(), "p.png does not exist");

    OwnPictures changed = new OwnPictures(folder).add("p.png", png, 8, "0".repeat(64), "the user");
    changed.manifest();
    assertStudyRefused(2, changed.study(), "p.png has SHA-256", "expected 000");

    OwnPictures cut = new OwnPictures(folder).add("p.png", Arrays.copyOf(png, png.length / 2));
    cut.manifest();
    assertStudyRefused(3, cut.study(), "p.png cannot be read", "ends too early");

    byte[] vast = vastPng();
    OwnPictures bomb =
        new OwnPictures(folder).add("p.png", vast, 16384, 16384, 8, Manifest.sha256(vast), "me");
    bomb.manifest();
    assertStudyRefused(2, bomb.study(), "60000 x 60000", "announced: 16384 x 16384");

    OwnPictures good = new OwnPictures(folder).add("p.png", png);
    good.manifest(good.csv().replace(",p.png,", ",../p.png,"));
    assertStudyRefused(2, good.study(), "manifest.csv, line 2", "'../p.png'", "below");
    good.manifest(good.csv().replace(",24,", ",60000,"));
    assertStudyRefused(2, good.study(), "manifest.csv, line 2", "60000", "16384");
    good.manifest(good.csv().replace("CC0-1.0", "mine"));
    assertStudyRefused(2, good.study(), "manifest.csv, line 2", "'mine'");
  }

  /** A PNG whose header says 60000 x 60000 samples and whose checksum of that is right. */
  private static byte[] vastPng() {
    byte[] png = OwnPictures.picture("png", OwnPictures.WIDTH, OwnPictures.HEIGHT, 8);
    for (int at : new int[] {16, 20}) {
      png[at + 2] = (byte) (60_000 >> 8);
      png[at + 3] = (byte) 60_000;
    }
    CRC32 crc = new CRC32();
    crc.update(png, 12, 17);
    for (int i = 0; i < 4; i++) {
      png[29 + i] = (byte) (crc.getValue() >> (24 - 8 * i));
    }
    return png;
  }

  @Test
  void aPictureWithoutSignalHasNoSnr() {
    byte[] black = ("P5\n24 20\n255\n" + "\0".repeat(480)).getBytes(StandardCharsets.US_ASCII);
    OwnPictures pictures = new OwnPictures(folder).add("black.pgm", black);
    pictures.manifest();
    assertStudyRefused(2, pictures.study(), "'black.pgm'", "signal power is 0", "snr-db 20.0");
  }

  @Test
  void aPictureTooLargeForTheMemoryIsToldAsThat() throws IOException {
    int side = 2500;
    byte[] large = OwnPictures.picture("png", side, side, 8);
    OwnPictures pictures =
        new OwnPictures(folder).add("l.png", large, side, side, 8, Manifest.sha256(large), "me");
    pictures.manifest();
    String out = folder.resolve("out").toString();
    for (String memory : List.of("-Xmx48m", "-Xmx88m")) {
      Outcome outcome =
          Program.execute(
              Program.command(
                  Program.thisJava(),
                  List.of(memory),
                  folder,
                  "assess",
                  pictures.study().toString(),
                  "--threads",
                  "1",
                  "--out",
                  out,
                  "--overwrite"));
      assertThat(outcome.errors()).singleElement().asString().contains("memory", " MiB");
      assertThat(outcome.code()).isEqualTo(3);
    }
  }

  @Test
  void aFullDiskLeavesWholeRowsOnly() throws IOException {
    Path out = folder.resolve("out");
    List<String> limited = new ArrayList<>(List.of("sh", "-c", "ulimit -f 64; exec \"$@\"", "sh"));
    limited.addAll(
        Program.command(
            Program.thisJava(),
            List.of("-XX:-UsePerfData"),
            folder,
            "assess",
            study.toString(),
            "--out",
            out.toString(),
            "--set",
            "replicates=40"));
    Outcome outcome = Program.execute(limited);
    assertThat(outcome.errors()).singleElement().asString().contains("cannot write", ".csv");
    assertThat(outcome.code()).isEqualTo(3);
    List<String> rows = Files.readAllLines(out.resolve("trials.csv"));
    assertThat(Files.readString(out.resolve("trials.csv"))).endsWith("\n");
    assertThat((rows.size() - 1) % 5).describedAs("whole units of five codecs").isZero();
    assertThat(Files.readString(out.resolve("run.json"))).contains("\"complete\" : false");
    assertThat(out.resolve("cells.csv")).doesNotExist();
    Path whole = folder.resolve("whole");
    assertThat(
            Program.run(
                    folder,
                    "assess",
                    study.toString(),
                    "--out",
                    whole.toString(),
                    "--quiet",
                    "--set",
                    "replicates=40")
                .code())
        .isZero();
    List<String> all = Files.readAllLines(whole.resolve("trials.csv"));
    assertThat(rows.size()).isBetween(6, all.size() - 1);
    assertThat(all).startsWith(rows.toArray(new String[0]));
  }

  @Test
  void traceShowsWhereItHappened() {
    Outcome outcome = Program.run(folder, "assess", folder + "/none.yaml", "--trace");
    assertThat(outcome.code()).isEqualTo(2);
    assertThat(outcome.err()).contains("\tat linkworthy.input.YamlNode.read(");
    assertThat(outcome.errors().get(outcome.errors().size() - 1))
        .startsWith("linkworthy: ")
        .endsWith("none.yaml does not exist");
  }
}
