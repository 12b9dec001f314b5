package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.security.MessageDigest;
import java.security.NoSuchAlgorithmException;
import java.util.ArrayList;
import java.util.HexFormat;
import java.util.List;
import java.util.Map;
import java.util.stream.Stream;
import linkworthy.codec.Confinement;
import linkworthy.results.ResultsFolder;
import linkworthy.results.RunRecord;
import linkworthy.statistics.Cell;
import linkworthy.trial.Trial;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** Codecs from plugin jars, from the command line to the report. */
class PluginsTest {
  private static final String STUDY =
      """
      name: with-plugins
      purpose: Does a plugin take part?
      pictures: {select: [cat], longest-side: 48}
      impairments:
        - {noise: burst-loss, loss-rate: 0.2, mean-burst: 2}
      replicates: 2
      codecs:
        - {transform: mean}
      """;

  @TempDir private Path home;

  private Path folder() throws IOException {
    return Files.createDirectories(home.resolve("plugins"));
  }

  private CommandLineRun assess(String codec, String... options) throws IOException {
    Path study = Files.writeString(home.resolve("study.yaml"), STUDY + "  - " + codec + "\n");
    String[] arguments = new String[options.length + 4];
    arguments[0] = "assess";
    arguments[1] = study.toString();
    arguments[2] = "--out";
    arguments[3] = home.resolve("out").toString();
    System.arraycopy(options, 0, arguments, 4, options.length);
    return CommandLineRun.of(home, arguments);
  }

  private CommandLineRun list() throws IOException {
    return CommandLineRun.of(home, "codecs", "--plugins", folder().toString());
  }

  private void refused(String... words) throws IOException {
    CommandLineRun run = list();
    assertThat(run.exitCode()).as(run.err()).isEqualTo(Main.BAD_INPUT);
    assertThat(run.err().lines()).hasSize(1);
    assertThat(run.err()).startsWith("linkworthy: ").contains(words);
    assertThat(run.out()).isEmpty();
  }

  /** A family whose methods and codec do what is set here, and nothing wrong elsewhere. */
  private static String source(String name, Map<String, String> bodies) {
    return """
    import java.util.List;
    import java.util.Map;
    import linkworthy.codec.*;
    import linkworthy.corpus.Picture;
    import linkworthy.input.YamlNode;
    import linkworthy.link.*;

    public class NAME implements CodecFamily {
      public NAME() { CONSTRUCTOR }
      @Override public String id() { ID }
      @Override public String help() { HELP }
      @Override public List<Codec> read(YamlNode entry, Link link) { READ }
      static class TheCodec implements Codec {
        @Override public String label() { return "own"; }
        @Override public Description description() { return new Description("", "", ""); }
        @Override public Map<String, Object> settings() { return Map.of("own", 1); }
        @Override public void check(PictureShape shape) { CHECK }
        @Override public Encoding encode(Picture picture, Memo memo) { ENCODE }
        @Override public Decoding decode(PictureShape shape, List<byte[]> arrived) { DECODE }
      }
    }
    """
        .replace("NAME", name)
        .replace("CONSTRUCTOR", bodies.getOrDefault("CONSTRUCTOR", ""))
        .replace("ID", bodies.getOrDefault("ID", "return \"own\";"))
        .replace("HELP", bodies.getOrDefault("HELP", "return \"own: 1\";"))
        .replace("READ", bodies.getOrDefault("READ", "return List.of(new TheCodec());"))
        .replace("CHECK", bodies.getOrDefault("CHECK", ""))
        .replace(
            "ENCODE",
            bodies.getOrDefault(
                "ENCODE",
                "return new Encoding(List.of(new Packet(new byte[9], Importance.REST)), -1);"))
        .replace("DECODE", bodies.getOrDefault("DECODE", "return Decoding.nothing(shape);"));
  }

  private void own(String method, String body) throws IOException {
    Path unused =
        PluginJars.makeClass(
            folder().resolve("own.jar"), "Own", source("Own", Map.of(method, body)));
  }

  @Test
  void theExampleRunsFromTheCommandLineToTheReport() throws Exception {
    Path jar = PluginJars.makeExample(folder());
    CommandLineRun run = assess("thumbnail: [4, 8]", "--plugins", folder().toString());
    assertThat(run.exitCode()).as(run.err()).isEqualTo(Main.DONE);
    assertThat(run.out()).contains("thumbnail 4", "thumbnail 8");
    ResultsFolder results = ResultsFolder.open(home.resolve("out"));
    List<Cell> cells =
        results.cells().stream().filter(c -> c.codec().startsWith("thumbnail")).toList();
    assertThat(cells).hasSize(4).allMatch(c -> c.psnrMeanDb() > 10 && c.failures() == 0);
    assertThat(results.run().plugins()).hasSize(1);
    assertThat(results.run().plugins().get(0).jar()).isEqualTo("thumbnail.jar");
    assertThat(results.run().plugins().get(0).sha256()).isEqualTo(sha256(jar));
    assertThat(Files.readString(home.resolve("out/report.html")))
        .contains("plugin thumbnail.jar", sha256(jar), "thumbnail 8");
  }

  private static String sha256(Path file) throws IOException, NoSuchAlgorithmException {
    byte[] hash = MessageDigest.getInstance("SHA-256").digest(Files.readAllBytes(file));
    return HexFormat.of().formatHex(hash);
  }

  @Test
  void theReportIsRenderedAgainWithoutThePlugin() throws IOException {
    Path unused = PluginJars.makeExample(folder());
    assertThat(assess("thumbnail: 4", "--plugins", folder().toString()).exitCode()).isZero();
    String before = Files.readString(home.resolve("out/report.html"));
    String out = home.resolve("out").toString();
    CommandLineRun without = CommandLineRun.of(home, "report", out);
    assertThat(without.exitCode()).as(without.err()).isEqualTo(Main.DONE);
    assertThat(Files.readString(home.resolve("out/report.html")))
        .contains("No picture is shown:", "thumbnail");
    CommandLineRun with = CommandLineRun.of(home, "report", out, "--plugins", folder().toString());
    assertThat(with.exitCode()).as(with.err()).isEqualTo(Main.DONE);
    assertThat(Files.readString(home.resolve("out/report.html"))).isEqualTo(before);
  }

  @Test
  void theRecordIsAStudyThatGivesTheSameRows() throws IOException {
    Path unused = PluginJars.makeExample(folder());
    String plugins = folder().toString();
    assertThat(assess("thumbnail: [4, 8]", "--plugins", plugins).exitCode()).isZero();
    Path again = home.resolve("again");
    CommandLineRun run =
        CommandLineRun.of(
            home,
            "assess",
            home.resolve("out/study.yaml").toString(),
            "--out",
            again.toString(),
            "--threads",
            "3",
            "--plugins",
            plugins);
    assertThat(run.exitCode()).as(run.err()).isEqualTo(Main.DONE);
    assertThat(again.resolve("trials.csv")).hasSameTextualContentAs(home.resolve("out/trials.csv"));
  }

  @Test
  void theHelpOfAPluginIsListed() throws IOException {
    Path unused = PluginJars.makeExample(folder());
    CommandLineRun run = list();
    assertThat(run.exitCode()).as(run.err()).isEqualTo(Main.DONE);
    assertThat(run.out()).contains("thumbnail: side of a block", "transform:", "command:");
    CommandLineRun without = assess("thumbnail: 4");
    assertThat(without.exitCode()).isEqualTo(Main.BAD_INPUT);
    assertThat(without.err()).contains("names no codec", "accepted: command, jpeg, transform");
  }

  @Test
  void theExamplesTestAndFilesAreWhole() throws IOException {
    Path example = PluginJars.example();
    Path classes = PluginJars.compile(home.resolve("c"), PluginJars.javaFiles(example));
    assertThat(classes.resolve("example/thumbnail/ThumbnailTest.class")).exists();
    assertThat(Files.readString(example.resolveSibling("adding-a-codec.md")))
        .contains("--plugins", "CodecContractTest");
    assertThat(Files.readString(example.resolve("pom.xml"))).contains("<type>test-jar</type>");
  }

  @Test
  void aFolderWithoutPluginsIsRefused() throws IOException {
    refused("has no jar");
    Files.writeString(folder().resolve("readme.txt"), "not a jar");
    refused("has no jar");
    Path unused = PluginJars.jar(folder().resolve("library.jar"), folder(), Map.of());
    refused("has no jar with a codec");
    CommandLineRun missing = CommandLineRun.of(home, "codecs", "--plugins", "no-such-folder");
    assertThat(missing.exitCode()).isEqualTo(Main.BAD_INPUT);
    assertThat(missing.err()).contains("no-such-folder does not exist");
  }

  @Test
  void aJarThatIsNoneIsRefused() throws IOException {
    Files.writeString(folder().resolve("own.jar"), "not a jar at all");
    refused("plugin own.jar is no jar");
    Files.write(folder().resolve("own.jar"), new byte[0]);
    refused("plugin own.jar is no jar");
    Path another = Files.createDirectory(folder().resolve("a-folder.jar"));
    refused("plugin " + another.getFileName() + " is no jar: it is no file");
  }

  @Test
  void aClassThatIsMissingIsRefused() throws IOException {
    Path unused =
        PluginJars.jar(
            folder().resolve("own.jar"),
            Files.createDirectories(home.resolve("none")),
            Map.of(PluginJars.SERVICE, "# ours\nexample.Missing # soon\n"));
    refused("plugin own.jar, class example.Missing is named in", "is not in the jar");
  }

  /** Bytes 6 and 7 of a class file are its major version; 99 is beyond every Java there is. */
  @Test
  void aClassOfANewerJavaIsRefused() throws IOException {
    own("ID", "return \"own\";");
    Path classes = folder().resolve("own.jar.d/classes");
    Path file = classes.resolve("Own.class");
    byte[] bytes = Files.readAllBytes(file);
    bytes[7] = 99;
    Files.write(file, bytes);
    Path unused =
        PluginJars.jar(folder().resolve("own.jar"), classes, Map.of(PluginJars.SERVICE, "Own"));
    refused("plugin own.jar, class Own is compiled for a newer Java than this one");
  }

  @Test
  void aConstructorThatThrowsIsRefused() throws IOException {
    own("CONSTRUCTOR", "throw new IllegalStateException(\"no licence\");");
    refused("plugin own.jar, class Own failed in its constructor", "no licence");
  }

  @Test
  void aClassThatIsNoCodecFamilyIsRefused() throws IOException {
    Path unused = PluginJars.makeClass(folder().resolve("own.jar"), "Own", "public class Own {}");
    refused("plugin own.jar, class Own is no codec");
    unused =
        PluginJars.makeClass(
            folder().resolve("own.jar"), "Own", "public class Own { private Own() {} }");
    refused("plugin own.jar, class Own cannot be made", "public constructor");
  }

  @Test
  void anIdThatIsTakenIsRefused() throws IOException {
    own("ID", "return \"transform\";");
    refused(
        "plugin own.jar, class Own has the id 'transform', which class"
            + " linkworthy.codec.TransformCodecFamily has as well");
    own("ID", "return \"own\";");
    Path unused = PluginJars.makeClass(folder().resolve("too.jar"), "Too", source("Too", Map.of()));
    refused("plugin too.jar, class Too has the id 'own', which plugin own.jar, class Own has");
  }

  @Test
  void anImproperIdIsRefused() throws IOException {
    own("ID", "return \"My Codec\";");
    refused("plugin own.jar, class Own has the id 'My Codec'; accepted: small letters");
    own("ID", "return null;");
    refused("plugin own.jar, class Own failed in id()", "returned null");
  }

  @Test
  void noiseAndMeasuresAreRefusedBecauseTheyWouldBeIgnored() throws IOException {
    Path unused =
        PluginJars.jar(
            folder().resolve("own.jar"),
            Files.createDirectories(home.resolve("none")),
            Map.of("META-INF/services/linkworthy.quality.QualityMeasure", "example.Mine"));
    refused("plugin own.jar names a linkworthy.quality.QualityMeasure", "codecs alone");
  }

  @Test
  void helpReadAndCheckThatThrowAreOneLine() throws IOException {
    own("HELP", "throw new NullPointerException(\"nothing\\nto say\");");
    refused("plugin own.jar, class Own failed in help()");
    for (String method : List.of("READ", "CHECK")) {
      own(method, "throw new IllegalArgumentException(\"broken\");");
      CommandLineRun run = assess("own: 1", "--plugins", folder().toString());
      assertThat(run.exitCode()).as(run.err()).isEqualTo(Main.BAD_INPUT);
      assertThat(run.err().lines()).hasSize(1);
      assertThat(run.err()).contains("broken", "own");
      assertThat(home.resolve("out")).doesNotExist();
    }
  }

  @Test
  void anEntryWithoutACodecIsRefused() throws IOException {
    own("READ", "return List.of();");
    CommandLineRun run = assess("own: 1", "--plugins", folder().toString());
    assertThat(run.exitCode()).as(run.err()).isEqualTo(Main.BAD_INPUT);
    assertThat(run.err()).contains("failed in read()", "no codec for an entry");
    assertThat(home.resolve("out")).doesNotExist();
  }

  @Test
  void failuresInTrialsAreRowsAndTheRunGoesOn() throws IOException {
    Map<String, Map.Entry<String, String>> faults =
        Map.of(
            "threw", Map.entry("ENCODE", "throw new IllegalStateException(\"broken\");"),
            "no-result", Map.entry("DECODE", "return null;"),
            "decode-size",
                Map.entry(
                    "DECODE",
                    "return Decoding.nothing(new PictureShape(3, 3, shape.bitDepth()));"));
    for (Map.Entry<String, Map.Entry<String, String>> fault : faults.entrySet()) {
      own(fault.getValue().getKey(), fault.getValue().getValue());
      CommandLineRun run = assess("own: 1", "--overwrite", "--plugins", folder().toString());
      assertThat(run.exitCode()).as(run.err()).isEqualTo(Main.DONE);
      assertThat(run.err())
          .contains(
              "codec 'own' failed in 3 trials (" + fault.getKey() + "), first on picture 'cat'");
      ResultsFolder results = ResultsFolder.open(home.resolve("out"));
      long rows =
          results.trials(
              (Trial trial) ->
                  assertThat(trial.failure())
                      .isEqualTo(trial.codec().equals("own") ? fault.getKey() : ""));
      assertThat(rows).isEqualTo(6);
      assertThat(results.cells())
          .allMatch(c -> c.failures() == (c.codec().equals("own") ? c.trials() : 0));
      assertThat(Files.readString(home.resolve("out/report.html")))
          .contains("A codec failed in 3 trials", "Codec failures");
    }
  }

  @Test
  void commandsRunWhenAllowedAndAreNamedInTheReport() throws IOException {
    String copy =
        "command: {encode: [cp, '{input}', '{output}'], decode: [cp, '{input}', '{output}']}";
    CommandLineRun refused = assess(copy);
    assertThat(refused.exitCode()).isEqualTo(Main.BAD_INPUT);
    assertThat(refused.err().lines()).hasSize(1);
    assertThat(refused.err()).contains("study.yaml, line 9", "only with --allow-commands");
    CommandLineRun run = assess(copy, "--allow-commands");
    assertThat(run.exitCode()).as(run.err()).isEqualTo(Main.DONE);
    ResultsFolder results = ResultsFolder.open(home.resolve("out"));
    results.trials(
        trial -> {
          if (trial.codec().equals("command cp truncate")) {
            boolean whole = trial.packetsLost() == 0;
            assertThat(trial.psnrDb() == Double.POSITIVE_INFINITY).isEqualTo(whole);
            assertThat(trial.outage()).isEqualTo(!whole);
          }
        });
    String confinement = Confinement.ofThisMachine().id();
    assertThat(results.run().programs())
        .containsExactly(new RunRecord.ProgramUsed("command cp truncate", "cp", confinement));
    assertThat(run.err().lines().filter(line -> line.startsWith("linkworthy: commands run ")))
        .containsExactly("linkworthy: " + Confinement.ofThisMachine().sentence());
    assertThat(Files.readString(home.resolve("out/run.json")))
        .contains("\"confinement\" : \"" + confinement + "\"");
    assertThat(Files.readString(home.resolve("out/report.html")))
        .contains("codec command cp truncate", "runs an external program, cp");
    assertThat(CommandLineRun.of(home, "report", home.resolve("out").toString()).exitCode())
        .isEqualTo(Main.DONE);
  }

  private static final String[] COLOUR = {
    "--set",
    "pictures.select=fig",
    "--set",
    "pictures.planes=all",
    "--set",
    "pictures.chroma=\"4:4:4\""
  };

  private static String[] inColour(String... options) {
    return Stream.concat(Stream.of(options), Stream.of(COLOUR)).toArray(String[]::new);
  }

  private List<Trial> trials(String codec) {
    List<Trial> found = new ArrayList<>();
    ResultsFolder.open(home.resolve("out"))
        .trials(
            trial -> {
              if (trial.codec().equals(codec)) {
                found.add(trial);
              }
            });
    return found;
  }

  /** Each plane is a file of its own to the program; packets have one byte more for its number. */
  @Test
  void aCommandCodesAllPlanes() throws IOException {
    String copy =
        "command: {encode: [cp, '{input}', '{output}'], decode: [cp, '{input}', '{output}']}";
    CommandLineRun run = assess(copy, inColour("--allow-commands"));
    assertThat(run.exitCode()).as(run.err()).isEqualTo(Main.DONE);
    List<Trial> trials = trials("command cp truncate");
    assertThat(trials).hasSize(3);
    Trial clean = trials.get(0);
    assertThat(clean.psnrDb()).isEqualTo(Double.POSITIVE_INFINITY);
    int file = "P5\n48 32\n255\n".length() + 48 * 32;
    int packets = 3 * ((file + 84) / 85);
    assertThat(clean.packetsSent()).isEqualTo(packets);
    assertThat(clean.payloadBits()).isEqualTo(8L * (3 * file + 11 * packets));
    assertThat(clean.bitsPerPixel()).isEqualTo(clean.sentBits() / (48.0 * 32));
    assertThat(clean.failure()).isEmpty();
    assertThat(trials.subList(1, 3))
        .as("part of a PGM file is no picture")
        .allMatch(trial -> trial.packetsLost() > 0)
        .allMatch(trial -> trial.failure().equals("decode-unreadable"));
  }

  @Test
  void aPluginCodesAllPlanes() throws Exception {
    Path unused = PluginJars.makeExample(folder());
    CommandLineRun run = assess("thumbnail: 4", inColour("--plugins", folder().toString()));
    assertThat(run.exitCode()).as(run.err()).isEqualTo(Main.DONE);
    List<Trial> colour = trials("thumbnail 4");
    assertThat(colour).hasSize(3).allMatch(trial -> trial.failure().isEmpty());
    assertThat(colour.get(0).psnrDb()).isBetween(15.0, 50.0);
    assertThat(Files.readString(home.resolve("out/report.html"))).contains("thumbnail 4");
    CommandLineRun luma =
        assess(
            "thumbnail: 4",
            "--overwrite",
            "--plugins",
            folder().toString(),
            "--set",
            "pictures.select=fig");
    assertThat(luma.exitCode()).as(luma.err()).isEqualTo(Main.DONE);
    Trial alone = trials("thumbnail 4").get(0);
    assertThat(colour.get(0).ssim()).as("of luma").isEqualTo(alone.ssim());
    assertThat((double) colour.get(0).sentBits() / alone.sentBits()).isBetween(2.8, 3.3);
  }

  /** A plane whose program fails makes the trial an outage with its reason, not the run. */
  @Test
  void aCommandThatFailsOnAPlaneIsAnOutageOfTheTrial() throws IOException {
    String fails = "[sh, -c, 'exit 1', sh, '{input}', '{output}']";
    CommandLineRun run =
        assess(
            "command: {encode: [cp, '{input}', '{output}'], decode: " + fails + "}",
            inColour("--allow-commands"));
    assertThat(run.exitCode()).as(run.err()).isEqualTo(Main.DONE);
    List<Trial> trials = trials("command cp truncate");
    assertThat(trials).hasSize(3);
    assertThat(trials.get(0).failure()).isEqualTo("decode-exit");
    assertThat(trials.get(0).outage()).isTrue();
  }

  @Test
  void aDryRunStartsNoProgramAndMissesNone() throws IOException {
    Path mark = home.resolve("mark");
    String touch = "[touch, '" + mark + "', '{input}', '{output}']";
    String codec = "command: {encode: " + touch + ", decode: " + touch + "}";
    assertThat(assess(codec, "--dry-run").exitCode()).isEqualTo(Main.BAD_INPUT);
    CommandLineRun run = assess(codec, "--allow-commands", "--dry-run");
    assertThat(run.exitCode()).as(run.err()).isEqualTo(Main.DONE);
    assertThat(run.out()).contains("which a dry run does not start");
    assertThat(mark).doesNotExist();
    assertThat(home.resolve("results")).doesNotExist();
    CommandLineRun missing =
        assess(codec.replace("touch", "no-such-program"), "--allow-commands", "--dry-run");
    assertThat(missing.exitCode()).isEqualTo(Main.BAD_INPUT);
    assertThat(missing.err()).contains("'no-such-program', which is not there");
  }
}
