package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.stream.LongStream;
import linkworthy.results.ResultsFolder;
import linkworthy.statistics.Cell;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/**
 * A large study in a small heap: planned, run, recorded, told in a report, rechecked, compared and
 * decided upon. Its codec takes next to no time, so that what is left is the harness.
 *
 * <p>{@code -Dlinkworthy.trials=10000000} makes 10^7 trials of it, in 20000 cells and 1 GiB; {@code
 * -Dlinkworthy.flat=DIR} keeps its results there, with the collector's log of each command.
 */
class FlatMemoryTest {
  private static final long TRIALS = Long.getLong("linkworthy.trials", 200_000);
  private static final long MANY = 5_000_000;
  private static final String HEAP = TRIALS > MANY ? "-Xmx1g" : "-Xmx96m";
  private static final long CODECS = TRIALS > MANY ? 50 : 10;
  private static final int PICTURES = 12;
  private static final int REPLICATES = 42;

  /** One packet, the same for every picture, which decodes to a picture kept for its shape. */
  private static final String SOURCE =
      """
      import java.util.List;
      import java.util.Map;
      import java.util.concurrent.ConcurrentHashMap;
      import linkworthy.codec.*;
      import linkworthy.corpus.Picture;
      import linkworthy.input.YamlNode;
      import linkworthy.link.*;

      public class Quick implements CodecFamily {
        @Override public String id() { return "quick"; }
        @Override public String help() { return "quick: a number"; }
        @Override public List<Codec> read(YamlNode entry, Link link) {
          return entry.get("quick").oneOrMore().stream()
              .<Codec>map(number -> new One((int) number.integer(0, 1000))).toList();
        }
        record One(int number) implements Codec {
          private static final Encoding SENT =
              new Encoding(List.of(new Packet(new byte[9], Importance.REST)), -1);
          private static final Map<PictureShape, Decoding> WHOLE = new ConcurrentHashMap<>();
          private static final Map<PictureShape, Decoding> NONE = new ConcurrentHashMap<>();
          @Override public String label() { return "quick " + number; }
          @Override public Description description() { return new Description("", "", ""); }
          @Override public Map<String, Object> settings() { return Map.of("quick", number); }
          @Override public void check(PictureShape shape) { }
          @Override public Encoding encode(Picture picture, Memo memo) { return SENT; }
          @Override public Decoding decode(PictureShape shape, List<byte[]> arrived) {
            return arrived.isEmpty()
                ? NONE.computeIfAbsent(shape, Decoding::nothing)
                : WHOLE.computeIfAbsent(shape, s -> new Decoding(
                    Decoding.nothing(s).picture(), Decoding.Completeness.COMPLETE));
          }
        }
      }
      """;

  @TempDir private Path temporary;

  private Path home() throws IOException {
    String kept = System.getProperty("linkworthy.flat");
    return kept == null ? temporary : Files.createDirectories(Path.of(kept));
  }

  private static String study(long severities) {
    List<String> rates =
        LongStream.rangeClosed(1, severities)
            .mapToObj(i -> String.valueOf(i / (2.0 * severities)))
            .toList();
    return """
    name: large
    purpose: Does a large study fit?
    pictures: {longest-side: 16}
    impairments:
      - {noise: burst-loss, mean-burst: 1.0, loss-rate: [RATES]}
    replicates: REPLICATES
    measures: [psnr]
    codecs:
      - {quick: CODECS}
    """
        .replace("RATES", String.join(", ", rates))
        .replace("REPLICATES", REPLICATES + "")
        .replace("CODECS", LongStream.range(0, CODECS).boxed().toList() + "");
  }

  private Outcome run(String... arguments) throws IOException {
    List<String> options =
        List.of(
            HEAP, "-XX:+UseSerialGC", "-Xlog:gc:file=" + home().resolve(arguments[0] + ".gc.log"));
    Outcome outcome =
        Program.execute(Program.command(Program.thisJava(), options, home(), arguments));
    assertThat(outcome.err().lines().filter(line -> !line.matches("\\w+: \\d+ of .* left")))
        .describedAs(String.join(" ", arguments))
        .isEmpty();
    return outcome;
  }

  @Test
  void aLargeStudyRunsInASmallHeap() throws IOException {
    long severities = TRIALS / (PICTURES * REPLICATES * CODECS);
    long trials = CODECS * PICTURES * (1 + severities * REPLICATES);
    Path plugins = Files.createDirectories(home().resolve("plugins"));
    Path unused = PluginJars.makeClass(plugins.resolve("quick.jar"), "Quick", SOURCE);
    Path study = Files.writeString(home().resolve("study.yaml"), study(severities));
    Path results = home().resolve("results");
    Outcome assess =
        run("assess", study + "", "--out", results + "", "--plugins", plugins + "", "--overwrite");
    assertThat(assess.code()).isZero();
    ResultsFolder folder = ResultsFolder.open(results);
    assertThat(folder.run().trialsDone()).isEqualTo(trials);
    assertThat(folder.cells()).hasSize((int) (CODECS * (1 + severities)));
    assertThat(folder.cells().stream().mapToLong(Cell::trials).sum()).isEqualTo(trials);
    assertThat(run("recheck", results + "", "--plugins", plugins + "", "--quiet").out())
        .contains("each of the " + trials + " rows", "the record stands");
    assertThat(run("drift", results + "", results + "").out())
        .startsWith("identical: trials.csv is the same bytes in both runs");
    Path need =
        Files.writeString(
            home().resolve("need.yaml"), "needs: [{measure: psnr-db, mean-at-least: 5}]");
    assertThat(run("shortlist", results + "", "--need", need + "").out()).contains("quick 0");
  }
}
