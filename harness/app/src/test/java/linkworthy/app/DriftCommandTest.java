package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.io.StringReader;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Clock;
import java.time.Duration;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.function.UnaryOperator;
import java.util.regex.Pattern;
import javax.xml.parsers.DocumentBuilderFactory;
import linkworthy.results.CellsCsv;
import linkworthy.results.TrialsCsv;
import linkworthy.statistics.Cells;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import org.w3c.dom.Document;
import org.w3c.dom.Element;
import org.xml.sax.InputSource;

class DriftCommandTest {
  private static final int CELLS = 25;

  @TempDir private static Path shared;
  private static Path first = Path.of("");

  @TempDir private Path folder;

  @BeforeAll
  static void runOnce() {
    first = assess(shared.resolve("first"), SmallStudy.TEXT);
  }

  private static Path assess(Path out, String study, String... more) {
    List<String> arguments =
        new ArrayList<>(
            List.of(
                "assess",
                SmallStudy.write(shared, study).toString(),
                "--out",
                out.toString(),
                "--quiet"));
    arguments.addAll(List.of(more));
    assertThat(Program.run(shared, arguments.toArray(new String[0])))
        .isEqualTo(new Outcome(0, "", ""));
    return out;
  }

  private Outcome drift(Path old, Path now, String... more) {
    List<String> arguments = new ArrayList<>(List.of("drift", old.toString(), now.toString()));
    arguments.addAll(List.of(more));
    return Program.run(folder, arguments.toArray(new String[0]));
  }

  /** A copy of the first run in which every row went through an edit; cells follow from them. */
  private Path edited(String name, UnaryOperator<List<String>> row) throws IOException {
    Path copy = Files.createDirectories(folder.resolve(name));
    for (String file : List.of("study.yaml", "run.json", "cells.csv", "trials.csv")) {
      Files.copy(first.resolve(file), copy.resolve(file));
    }
    List<String> lines = Files.readAllLines(copy.resolve("trials.csv"));
    StringBuilder text = new StringBuilder(lines.get(0)).append('\n');
    for (String line : lines.subList(1, lines.size())) {
      List<String> fields = new ArrayList<>(List.of(line.split(",", -1)));
      text.append(String.join(",", row.apply(fields))).append('\n');
    }
    Path trials = Files.writeString(copy.resolve("trials.csv"), text);
    Cells cells = new Cells();
    assertThat(TrialsCsv.read(trials, cells::add)).isPositive();
    Files.writeString(copy.resolve("cells.csv"), CellsCsv.text(cells.toList()));
    return copy;
  }

  /** The PSNR of one codec, column 17 of the row, lowered by some dB. */
  private Path lowered(String codec, double db) throws IOException {
    return edited(
        "lowered",
        fields -> {
          if (fields.get(9).equals(codec)) {
            double psnr = Double.parseDouble(fields.get(16));
            fields.set(16, Double.toString(Math.rint((psnr - db) * 1e9) / 1e9));
          }
          return fields;
        });
  }

  @Test
  void theSameRunIsIdenticalInOneLine() {
    Path again = assess(shared.resolve("again"), SmallStudy.TEXT);
    assertThat(drift(first, again))
        .isEqualTo(
            new Outcome(
                0,
                "identical: trials.csv is the same bytes in both runs (" + CELLS + " cells)\n",
                ""));
    assertThat(drift(first, again, "--all").out().lines())
        .filteredOn(line -> line.contains("same (identical)"))
        .hasSize(CELLS);
  }

  /** One codec in five cells falls by 0.5 dB everywhere; no difference has any scatter. */
  @Test
  void whatFellIsNamedAndTheAnswerIsNo() throws IOException {
    Path now = lowered("pca rows K8 step8", 0.5);
    Path junit = folder.resolve("drift.xml");
    Outcome outcome = drift(first, now, "--junit", junit.toString());
    assertThat(outcome.err()).isEmpty();
    assertThat(outcome.code()).isOne();
    assertThat(outcome.out())
        .startsWith(
            "25 cells: 5 moved (5 for the worse), 20 same, 0 undecided; tolerance 0.1 dB; bits per"
                + " pixel differ by more than 0.1 % in 0\n");
    assertThat(outcome.out().lines().filter(line -> line.contains("moved: worse")))
        .hasSize(5)
        .allMatch(line -> line.contains("pca rows K8 step8") && line.contains("-0.500"));
    assertThat(outcome.out()).doesNotContain("mean rows");
    Document xml = xml(Files.readString(junit));
    Element suite = xml.getDocumentElement();
    assertThat(suite.getAttribute("tests")).isEqualTo("25");
    assertThat(suite.getAttribute("failures")).isEqualTo("5");
    assertThat(xml.getElementsByTagName("testcase").getLength()).isEqualTo(25);
    assertThat(xml.getElementsByTagName("failure").getLength()).isEqualTo(5);
    assertThat(xml.getElementsByTagName("skipped").getLength()).isZero();
    assertThat(drift(first, now, "--tolerance-db", "0.6").code()).isZero();
    Outcome back = drift(now, first);
    assertThat(back.code()).isZero();
    assertThat(back.out()).contains("5 moved (0 for the worse)", "moved: better");
  }

  private static Document xml(String text) {
    try {
      return DocumentBuilderFactory.newInstance()
          .newDocumentBuilder()
          .parse(new InputSource(new StringReader(text)));
    } catch (Exception e) {
      throw new AssertionError(e);
    }
  }

  @Test
  void anotherSeedIsNamedAndItsCleanCellsAreTheSame() {
    Path now = assess(shared.resolve("seed"), SmallStudy.TEXT, "--set", "seed=8");
    Path junit = folder.resolve("drift.xml");
    Outcome outcome = drift(first, now, "--all", "--junit", junit.toString());
    assertThat(outcome.code()).isZero();
    assertThat(outcome.out()).containsPattern("(?m)^  seed  7    8$");
    assertThat(outcome.out().lines())
        .filteredOn(line -> line.startsWith("  clean "))
        .hasSize(5)
        .allMatch(line -> line.contains("same (identical)") && line.endsWith("paired by noise"));
    assertThat(outcome.out().lines())
        .filteredOn(line -> line.startsWith("  gaussian "))
        .hasSize(10)
        .allMatch(line -> line.endsWith("paired by picture"));
  }

  @Test
  void whatChangedInBetweenIsNamed() throws IOException {
    Path now =
        assess(
            shared.resolve("changed"),
            SmallStudy.TEXT
                .replace("[canyon, cat]", "[canyon, gravel]")
                .replace("mean-burst: 4", "mean-burst: 2")
                .replace(
                    "share: 0.9", "share: 0.9\n    label: pca blocks8 share0.9 step8\n    step: 4")
                .replace("step: 16", "step: 12")
                .replace("replicates: 2", "replicates: 3\nlink: {payload-bytes: 64}"));
    Path json = now.resolve("run.json");
    Files.writeString(json, Files.readString(json).replace("\"development\"", "\"<b>2</b>\""));
    Path html = folder.resolve("drift.html");
    Outcome outcome = drift(first, now, "--html", html.toString());
    assertThat(outcome.err()).isEmpty();
    assertThat(changes(outcome.out().lines().toList()))
        .contains(
            "program version|development|<b>2</b>",
            "pictures.select|canyon, cat|canyon, gravel",
            "noise burst-loss on packets by loss-rate: mean-burst|4.0|2.0",
            "codec pca blocks8 share0.9 step8: step|8.0|4.0",
            "codec mean rows step16|in the study|-",
            "codec mean rows step12|-|in the study",
            "link.payload-bytes|96|64",
            "replicates|2|3")
        .anyMatch(line -> line.startsWith("noise model burst-loss|version 1, "))
        .anyMatch(line -> line.matches("picture cat\\|SHA-256 [0-9a-f]{12}\\|-"))
        .anyMatch(line -> line.matches("picture gravel\\|-\\|SHA-256 [0-9a-f]{12}"))
        .noneMatch(line -> line.startsWith("seed") || line.startsWith("codec mean rows step12:"));
    assertThat(outcome.out())
        .contains("Cells of the old run only\n", "Cells of the new run only\n", "Welch, pictures");
    String page = Files.readString(html);
    assertThat(page)
        .contains("&lt;b&gt;2&lt;/b&gt;", "default-src &#39;none&#39;")
        .doesNotContain("<b>2</b>", "<script src");
    assertThat(xml(page.replace("<!DOCTYPE html>", "")).getElementsByTagName("table").getLength())
        .isEqualTo(4);
  }

  private static final String BUMPED =
      """
      name: bumped
      seed: 7
      pictures: {select: [field], longest-side: 48}
      impairments:
        - {noise: gaussian, snr-db: [20]}
        - {noise: burst-loss.yaml, loss-rate: [0.3]}
      codecs: [{transform: mean, step: [16, 24]}]
      link: {payload-bytes: 32, header-bytes: 4}
      replicates: 40
      """;

  /** The library's model, copied, and run again with another version and mean burst. */
  @Test
  void aNewVersionOfAModelIsTheCauseOfWhatItMoved() throws IOException {
    Path model = shared.resolve("burst-loss.yaml");
    String text = Files.readString(Path.of("../../noise-models/library/burst-loss.yaml"));
    Files.writeString(model, text);
    Path old = assess(folder.resolve("old"), BUMPED);
    String bumped =
        text.replace("version: 1", "version: 2").replace("mean-burst: 4 ", "mean-burst: 64 ");
    assertThat(bumped).contains("version: 2", "mean-burst: 64 ");
    Files.writeString(model, bumped);
    Outcome outcome = drift(old, assess(folder.resolve("new"), BUMPED), "--all");
    assertThat(outcome.err()).isEmpty();
    List<String> lines = outcome.out().lines().toList();
    assertThat(lines.get(0)).startsWith("6 cells: 2 moved ");
    assertThat(changes(lines))
        .satisfiesExactly(
            line ->
                assertThat(line)
                    .matches(
                        "noise model burst-loss\\|version 1, [0-9a-f]{12}\\|version 2,"
                            + " [0-9a-f]{12}"),
            line ->
                assertThat(line)
                    .isEqualTo("noise burst-loss on packets by loss-rate: mean-burst|4.0|64.0"));
    assertThat(lines)
        .filteredOn(line -> line.contains(" moved: "))
        .hasSize(2)
        .allMatch(line -> line.startsWith("  burst-loss on packets"));
    assertThat(lines).filteredOn(line -> line.contains("same (identical)")).hasSize(4);
  }

  /** The table of what changed, columns parted by bars. */
  private static List<String> changes(List<String> lines) {
    return lines.stream()
        .dropWhile(line -> !line.equals("What changed in between"))
        .skip(2)
        .takeWhile(line -> !line.isEmpty())
        .map(line -> line.strip().replaceAll("  +", "|"))
        .toList();
  }

  @ParameterizedTest
  @ValueSource(strings = {"de-DE", "tr-TR", "ar-EG"})
  void theSameBytesUnderAnyLocale(String tag) throws IOException {
    Path now = lowered("mean rows step16", 0.25);
    List<String> pages = new ArrayList<>();
    List<Outcome> outcomes = new ArrayList<>();
    Locale before = Locale.getDefault();
    for (Locale locale : List.of(Locale.US, Locale.forLanguageTag(tag))) {
      Locale.setDefault(locale);
      try {
        Path html = folder.resolve("drift.html");
        Path junit = folder.resolve("drift.xml");
        outcomes.add(
            drift(first, now, "--all", "--html", html.toString(), "--junit", junit.toString()));
        pages.add(Files.readString(html) + Files.readString(junit));
      } finally {
        Locale.setDefault(before);
      }
    }
    assertThat(outcomes.get(0).code()).isOne();
    assertThat(outcomes.get(1)).isEqualTo(outcomes.get(0));
    assertThat(pages.get(1)).isEqualTo(pages.get(0));
  }

  @Test
  void theHistoryHasARunAColumnOldestFirst() throws IOException {
    Path runs = folder.resolve("runs");
    for (int i = 0; i < 3; i++) {
      Clock clock = Clock.offset(Program.CLOCK, Duration.ofDays(-i));
      Outcome run =
          Program.run(
              folder,
              clock,
              false,
              "assess",
              SmallStudy.in(folder).toString(),
              "--out",
              runs.resolve("run" + i).toString(),
              "--quiet",
              "--set",
              "codecs.3.step=" + (16 + 4 * i),
              "--set",
              "codecs.3.label=mean");
      assertThat(run).isEqualTo(new Outcome(0, "", ""));
    }
    Path broken = Files.createDirectory(runs.resolve("broken"));
    Files.writeString(broken.resolve("run.json"), "{");
    Path html = folder.resolve("history.html");
    Outcome outcome =
        Program.run(folder, "drift", "--over", runs.toString(), "--html", html.toString());
    assertThat(outcome.err()).isEmpty();
    assertThat(outcome.code()).isZero();
    assertThat(outcome.out())
        .startsWith("3 complete runs of small\n")
        .containsPattern("(?m)^    1  2026-11-29T10:15:00Z .*  run2  ")
        .containsPattern("(?m)^    3  2026-12-01T10:15:00Z .*  run0  .* cells: ")
        .containsPattern("(?m)^  snr-db 20  mean( +[0-9.]+){3} +\\+[0-9.]+$")
        .containsPattern(
            "(?m)^left out: " + Pattern.quote(broken.toString()) + " has no study\\.yaml");
    String page = Files.readString(html);
    Document parsed = xml(page.replace("<!DOCTYPE html>", ""));
    // clean, gaussian, salt-and-pepper and burst-loss
    assertThat(parsed.getElementsByTagName("figure").getLength()).isEqualTo(4);
    assertThat(parsed.getElementsByTagName("table").getLength()).isEqualTo(5);
    assertThat(page.substring(0, page.indexOf("<script>"))).doesNotContain("NaN");
  }

  private void assertRefused(int code, List<String> parts, String... arguments) {
    Map<String, String> before = Program.contents(folder);
    Outcome outcome = Program.run(folder, arguments);
    assertThat(outcome.errors()).singleElement().asString().contains(parts);
    assertThat(outcome.code()).isEqualTo(code);
    assertThat(Program.contents(folder)).isEqualTo(before);
  }

  @Test
  void aHistoryOfOneRunSaysSo() {
    assertThat(Program.run(folder, "drift", "--over", first.toString()).out())
        .startsWith("1 complete run of small\n");
  }

  @Test
  void whatIsNoRecordIsRefused() throws IOException {
    String old = first.toString();
    Path empty = Files.createDirectory(folder.resolve("empty"));
    assertRefused(2, List.of("does not exist", "results folder"), "drift", old, old + "/no");
    assertRefused(2, List.of("has no run.json"), "drift", old, empty.toString());
    assertRefused(2, List.of("is no folder"), "drift", old + "/run.json", old);
    assertRefused(2, List.of("1 folder;", "OLD and NEW"), "drift", old);
    assertRefused(2, List.of("0 folders", "--over FOLDER"), "drift");
    assertRefused(2, List.of("--over goes with"), "drift", old, old, "--over", old);
    assertRefused(2, List.of("no sound and complete run"), "drift", "--over", empty.toString());
    assertRefused(2, List.of("does not exist"), "drift", "--over", empty + "/no");
    for (String tolerance : List.of("-1", "NaN", "1e9")) {
      assertRefused(
          2, List.of("--tolerance-db", "0 to 100"), "drift", old, old, "--tolerance-db", tolerance);
    }
    assertRefused(2, List.of("--tolerance-db"), "drift", old, old, "--tolerance-db", "0,1");
  }

  @Test
  void aRunThatIsNotCompleteIsRefused() throws IOException {
    Path cut = edited("cut", fields -> fields);
    Path json = cut.resolve("run.json");
    String text = Files.readString(json);
    Files.writeString(json, text.replace("\"complete\" : true", "\"complete\" : false"));
    assertRefused(
        2, List.of("not complete", "90 of 90"), "drift", first.toString(), cut.toString());
    assertRefused(
        2, List.of("no sound and complete run in it ("), "drift", "--over", cut.toString());
    Files.writeString(json, text);
    Path trials = cut.resolve("trials.csv");
    List<String> lines = Files.readAllLines(trials);
    Files.write(trials, lines.subList(0, 80));
    assertRefused(
        2, List.of("has 79 rows", "90, as run.json"), "drift", first.toString(), cut.toString());
    List<String> twice = new ArrayList<>(lines.subList(0, 90));
    twice.add(lines.get(1));
    Files.write(trials, twice);
    assertRefused(
        2,
        List.of("trials.csv, line 91", "the trials of each picture together"),
        "drift",
        first.toString(),
        cut.toString());
  }

  @Test
  void runsWithNothingInCommonAreRefused() {
    Path other =
        assess(
            shared.resolve("other"),
            SmallStudy.TEXT
                .replace("name: small", "name: other")
                .replaceAll("(?s)codecs:.*", "codecs: [{transform: mean, step: 9}]"));
    assertRefused(
        2,
        List.of(
            "no cell in common", "study 'small', 'other'; ", "codec pca rows K2", " and 4 more"),
        "drift",
        first.toString(),
        other.toString());
    assertRefused(2, List.of("several studies (other, small)"), "drift", "--over", shared + "");
  }

  @Test
  void aPageThatCannotBeWrittenIsToldInOneLine() {
    for (String option : List.of("--html", "--junit")) {
      String old = first.toString();
      Outcome outcome = drift(first, first, option, folder.resolve("no/such/file").toString());
      assertThat(outcome.errors()).singleElement().asString().contains("cannot write");
      assertThat(outcome.code()).isEqualTo(3);
      assertRefused(2, List.of(option + " is the folder"), "drift", old, old, option, old);
    }
  }
}
