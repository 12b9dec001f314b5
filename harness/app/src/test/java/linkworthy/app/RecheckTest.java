package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.TimeZone;
import java.util.function.Consumer;
import java.util.function.UnaryOperator;
import linkworthy.results.TrialsCsv;
import linkworthy.statistics.RowSample;
import linkworthy.trial.Trial;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** A record that was altered is found out, and what was not looked at is said. */
class RecheckTest {
  private static final int ROWS = 90;

  @TempDir private static Path shared;
  private static Map<String, String> whole = Map.of();
  @TempDir private Path folder;

  @BeforeAll
  static void run() {
    Path out = shared.resolve("out");
    String study = SmallStudy.in(shared).toString();
    assertThat(Program.run(shared, "assess", study, "--quiet", "--out", out.toString()))
        .isEqualTo(new Outcome(0, "", ""));
    whole = Program.contents(out);
  }

  private Path copy() throws IOException {
    Path copy = Files.createDirectories(folder.resolve("copy"));
    for (Map.Entry<String, String> file : whole.entrySet()) {
      if (!file.getKey().isEmpty()) {
        Files.writeString(
            copy.resolve(file.getKey()), file.getValue(), StandardCharsets.ISO_8859_1);
      }
    }
    return copy;
  }

  private static void change(Path file, UnaryOperator<String> how) throws IOException {
    String before = Files.readString(file);
    String after = how.apply(before);
    assertThat(after).isNotEqualTo(before);
    Files.writeString(file, after);
  }

  /** Changes the lines of trials.csv, the header's included. */
  private static void changeRows(Path results, Consumer<List<String>> how) throws IOException {
    change(
        results.resolve("trials.csv"),
        text -> {
          List<String> lines = new ArrayList<>(text.lines().toList());
          how.accept(lines);
          return String.join("\n", lines) + "\n";
        });
  }

  private Outcome recheck(Path results, String... options) {
    List<String> arguments = new ArrayList<>(List.of("recheck", results.toString(), "--quiet"));
    arguments.addAll(List.of(options));
    Outcome outcome = Program.run(folder, arguments.toArray(new String[0]));
    assertThat(outcome.err()).isEmpty();
    return outcome;
  }

  /** Adds a byte to the payload bits, which no cell depends on, of rows from a first one on. */
  private static void alter(Path results, int first, int count) throws IOException {
    List<Trial> trials = new ArrayList<>();
    assertThat(TrialsCsv.read(results.resolve("trials.csv"), trials::add)).isEqualTo(ROWS);
    changeRows(
        results,
        lines -> {
          for (int row = first; row < first + count; row++) {
            long bits = trials.get(row).payloadBits();
            lines.set(
                row + 1, lines.get(row + 1).replaceFirst("," + bits + ",", "," + (bits + 8) + ","));
          }
        });
  }

  @Test
  void aRecordAsItWasWrittenStands() throws IOException {
    Outcome outcome = recheck(copy(), "--all", "--threads", "2");
    assertThat(outcome.out())
        .contains(
            "verified      study:",
            "verified      noise models: 3",
            "verified      program: version development",
            "verified      pictures: 2",
            "verified      corpus:",
            "verified      order: each of the 90 rows",
            "verified      cells:",
            "verified      rows: 90 of 90 trials repeated, equal bit for bit",
            "not verified  timings.csv",
            "not verified  run.json: start, end, Java and system",
            "not verified  report.html: 'report' makes it again from the record")
        .endsWith("the record stands, as far as it was verified\n")
        .doesNotContain("chance");
    assertThat(outcome.code()).isZero();
  }

  @Test
  void aSampleSaysWhatItMayHaveMissed() throws IOException {
    Outcome outcome = recheck(copy(), "--sample", "30", "--seed", "5");
    // 1 % of 90 rows is 1 row: 60 / 90. 5 % are 5: C(85, 30) / C(90, 30),
    // recomputed independently in Python with scipy.stats.hypergeom.pmf(0, 90, 5, 30).
    assertThat(outcome.out())
        .contains(
            "rows: 30 of 90 trials repeated, equal bit for bit (seed 5)",
            "the figures of the other 60 trials",
            "if 1 row was altered, the chance to have missed it is 0.6667",
            "if 1 % of the rows were altered (1), the chance to have missed all of them is 0.6667",
            "if 5 % of the rows were altered (5), the chance to have missed all of them is 0.1243");
    assertThat(recheck(copy(), "--sample", "30", "--seed", "5")).isEqualTo(outcome);
  }

  /** The page says the same as the console, and under every locale and time zone the same bytes. */
  @Test
  void thePageSaysWhatWasVerifiedAndWhatMayHaveBeenMissed() throws IOException {
    Path page = folder.resolve("recheck.html");
    List<String> pages = new ArrayList<>();
    Locale locale = Locale.getDefault();
    TimeZone zone = TimeZone.getDefault();
    for (String tag : List.of("en-US UTC", "de-DE Asia/Tokyo", "tr-TR UTC")) {
      List<String> words = List.of(tag.split(" ", 2));
      Locale.setDefault(Locale.forLanguageTag(words.get(0)));
      TimeZone.setDefault(TimeZone.getTimeZone(words.get(1)));
      try {
        Outcome outcome =
            recheck(copy(), "--sample", "30", "--seed", "5", "--html", page.toString());
        assertThat(outcome.code()).isZero();
        assertThat(outcome.out()).endsWith("page: " + page + "\n");
      } finally {
        Locale.setDefault(locale);
        TimeZone.setDefault(zone);
      }
      pages.add(Files.readString(page));
    }
    assertThat(pages.stream().distinct()).hasSize(1);
    String text =
        pages
            .get(0)
            .replaceAll("(?s)<(style|script|title)\\b.*?</\\1>", "")
            .replaceAll("<[^>]*>", "|")
            .replaceAll("[|\\s]*\\|[|\\s]*", "|");
    // 1 % and less of 90 rows is 1 row: 60 / 90. 2 % are 2, 5 % are 5, 10 % are 9: recomputed
    // independently in Python with scipy.stats.hypergeom.pmf(0, 90, D, 30).
    assertThat(text)
        .contains(
            "|The record stands, as far as it was verified: 30 of 90 trials were repeated and are"
                + " equal, bit for bit.|",
            "|Rows repeated: 30 of 90, drawn at random with the seed 5. The figures of the other 60"
                + " were read, not repeated.|",
            "the chance that this check had missed all of them is 0.6667; a single altered row it"
                + " misses with the chance 0.6667.|",
            "|1 row|1|0.6667|0.1 %|1|0.6667|0.5 %|1|0.6667|1 %|1|0.6667|2 %|2|0.4419|5 %|5|0.1243|"
                + "10 %|9|0.0209|",
            "|part of the record|what was found|study|study.yaml has the fingerprint of the run|",
            "|rows|the figures of the other 60 trials|timings.csv|",
            "recheck " + folder + "/copy --sample 30 --seed 5|")
        .doesNotContain("Mismatches");
  }

  @Test
  void aPageIsWrittenOfWhatDoesNotStandEvenIfNoTrialWasRepeated() throws IOException {
    Path results = copy();
    change(results.resolve("study.yaml"), text -> text.replace("seed: 7", "seed: 8"));
    Path page = folder.resolve("recheck.html");
    assertThat(recheck(results, "--html", page.toString()).code()).isEqualTo(1);
    assertThat(Files.readString(page))
        .contains(
            "The record does not stand: ", "No trial was repeated: ", "study fingerprint recorded ")
        .doesNotContain("may have missed");
    Outcome refused = Program.run(folder, "recheck", "" + results, "--html", "" + folder);
    assertThat(refused.errors()).singleElement().asString().contains("--html is the folder");
    assertThat(refused.code()).isEqualTo(2);
  }

  @Test
  void everyAlteredRowIsFoundByAll() throws IOException {
    Path results = copy();
    alter(results, 40, 7);
    Outcome outcome = recheck(results, "--all");
    assertThat(outcome.code()).isEqualTo(1);
    assertThat(outcome.out())
        .contains("MISMATCH      trials.csv, line 42, trial ", "payload_bits recorded ")
        .contains("MISMATCH      and 2 more")
        .endsWith("the record does not stand: mismatches: 7\n");
  }

  /**
   * 5 of 90 rows side by side are altered, 10 are repeated: the share of 120 seeds that miss them
   * all is compared with the stated chance. The limit is 4 standard deviations of the binomial
   * distribution, which a correct program exceeds with about 1 seed set in 16 000.
   */
  @Test
  void theStatedChanceIsHowOftenASampleMisses() throws IOException {
    Path results = copy();
    alter(results, 40, 5);
    int seeds = 120;
    int missed = 0;
    for (int seed = 0; seed < seeds; seed++) {
      int code = recheck(results, "--sample", "10", "--seed", "" + seed).code();
      assertThat(code).isBetween(0, 1);
      missed += code == 0 ? 1 : 0;
    }
    double chance = RowSample.chanceMissed(ROWS, 5, 10);
    assertThat(missed - seeds * chance)
        .isBetween(
            -4 * Math.sqrt(seeds * chance * (1 - chance)),
            4 * Math.sqrt(seeds * chance * (1 - chance)));
  }

  /** One picture, clean and 31 replicates of 4 conditions, 8 codecs: 125 x 8 rows. */
  private static final String THOUSAND =
      """
      name: thousand
      seed: 7
      pictures: {select: [canyon], longest-side: 32}
      impairments: [{noise: gaussian, snr-db: [30, 20, 10, 0]}]
      codecs: [{transform: mean, step: [4, 6, 8, 12, 16, 24, 32, 48]}]
      replicates: 31
      """;

  /**
   * One digit of one row in 1000, of a figure on which no cell depends. 'missed' of 4000 samples
   * has the standard deviation sqrt(4000 * 0.9 * 0.1) = 19; the limit is 4 of them, which a correct
   * program exceeds with about 1 set of seeds in 16 000.
   */
  @Test
  void aDigitInOneRowOfAThousandIsFoundAsOftenAsStated() throws IOException {
    Path out = folder.resolve("thousand");
    Path study = SmallStudy.write(folder, THOUSAND);
    assertThat(Program.run(folder, "assess", study + "", "--quiet", "--out", out + "").code())
        .isZero();
    long row = 613;
    changeRows(
        out,
        lines -> {
          assertThat(lines).hasSize(1001);
          List<String> fields = new ArrayList<>(List.of(lines.get((int) row + 1).split(",", -1)));
          // The last digit of the payload's bits.
          String bits = fields.get(18);
          fields.set(18, bits.substring(0, bits.length() - 1) + (bits.endsWith("1") ? 2 : 1));
          lines.set((int) row + 1, String.join(",", fields));
        });
    Outcome all = recheck(out, "--all");
    assertThat(all.code()).isEqualTo(1);
    assertThat(all.out())
        .contains("trials.csv, line " + (row + 2), "payload_bits recorded ")
        .endsWith("mismatches: 1\n");
    for (long seed = 0; seed < 12; seed++) {
      boolean drawn = RowSample.draw(1000, 100, seed).contains(row);
      Outcome outcome = recheck(out, "--sample", "100", "--seed", "" + seed);
      assertThat(outcome.code()).isEqualTo(drawn ? 1 : 0);
      assertThat(outcome.out())
          .contains("if 1 row was altered, the chance to have missed it is 0.9000");
    }
    int missed = 0;
    for (long seed = 0; seed < 4000; seed++) {
      missed += RowSample.draw(1000, 100, seed).contains(row) ? 0 : 1;
    }
    assertThat(missed).isBetween(3600 - 4 * 19, 3600 + 4 * 19);
  }

  @Test
  void cellsThatDoNotFollowFromTheRowsAreFound() throws IOException {
    Path results = copy();
    change(results.resolve("cells.csv"), text -> text.replaceFirst(",below,", ",best,"));
    Outcome outcome = recheck(results, "--sample", "1");
    assertThat(outcome.code()).isEqualTo(1);
    assertThat(outcome.out())
        .containsPattern("MISMATCH .*cells.csv, line 2: standing is 'best'; accepted: 'below'");
  }

  /** Predictions follow from the study, as the figures of nodes do. */
  @Test
  void anAlteredPredictionIsFound() throws IOException {
    Path results = copy();
    assertThat(recheck(results, "--sample", "1").out())
        .contains("verified      predictions.csv: computed again");
    change(
        results.resolve("predictions.csv"),
        text -> text.replaceFirst("(\\.\\d)(\\d)", "$1" + "0$2"));
    assertMismatch(results, "MISMATCH      predictions.csv is not what the program writes");
    Files.delete(results.resolve("predictions.csv"));
    assertMismatch(results, "MISMATCH      predictions.csv is not what the program writes");
    Files.writeString(results.resolve("nodes.csv"), "codec,node\n");
    assertMismatch(results, "MISMATCH      nodes.csv is there");
  }

  @Test
  void aDoubledRowIsFound() throws IOException {
    Path results = copy();
    change(
        results.resolve("trials.csv"),
        text -> text + text.substring(text.lastIndexOf('\n', text.length() - 2) + 1));
    assertMismatch(results, "repeats the line before, trial");
  }

  @Test
  void aRowDoubledInTheMiddleIsNamedAndTheRowsBehindItAreNot() throws IOException {
    Path results = copy();
    changeRows(results, lines -> lines.add(30, lines.get(29)));
    Outcome outcome = recheck(results, "--all");
    assertThat(outcome.code()).isEqualTo(1);
    assertThat(outcome.out())
        .contains("MISMATCH      trials.csv, line 31 repeats the line before, trial ")
        .doesNotContain("by the plan", "PSNR", "MISMATCH      trials.csv, line 32");
  }

  @Test
  void aRowBehindTheLastOfThePlanIsFound() throws IOException {
    Path results = copy();
    change(results.resolve("trials.csv"), text -> text + text.lines().toList().get(1) + "\n");
    assertMismatch(results, "by the plan none");
  }

  @Test
  void rowsOutOfPlaceAreFoundWithoutRepeatingAny() throws IOException {
    Path results = copy();
    changeRows(results, lines -> lines.add(31, lines.remove(30)));
    Outcome outcome = recheck(results, "--sample", "1", "--seed", "1");
    assertThat(outcome.code()).isEqualTo(1);
    assertThat(outcome.out()).contains("MISMATCH      trials.csv, line 31: trial recorded");
  }

  /** What a report says of seed and pictures is read from run.json. */
  @Test
  void aSeedOrACreditThatRunJsonAloneHasIsFound() throws IOException {
    Path results = copy();
    Path json = results.resolve("run.json");
    change(json, text -> text.replace("\"seed\" : 7", "\"seed\" : 8"));
    assertMismatch(results, "MISMATCH      seed in run.json is 8, in study.yaml 7");
    change(json, text -> text.replace("\"seed\" : 8", "\"seed\" : 7"));
    change(json, text -> text.replace("Photograph by", "Picture by"));
    assertMismatch(
        results,
        "MISMATCH      picture 'cat' has another size, licence or credit in run.json than in the"
            + " manifest");
  }

  @Test
  void aChangedStudyIsFound() throws IOException {
    Path results = copy();
    change(results.resolve("study.yaml"), text -> text.replace("seed: 7", "seed: 8"));
    Outcome outcome = recheck(results);
    assertThat(outcome.code()).isEqualTo(1);
    assertThat(outcome.out())
        .contains("MISMATCH      study fingerprint recorded ", "no trial was repeated");
  }

  @Test
  void anotherVersionIsNamedAndNotFatal() throws IOException {
    Path results = copy();
    change(results.resolve("run.json"), text -> text.replace("\"development\"", "\"0.0.9\""));
    Outcome outcome = recheck(results, "--sample", "5");
    assertThat(outcome.code()).isZero();
    assertThat(outcome.out())
        .contains("program: version development repeats what version 0.0.9 recorded");
  }

  @Test
  void anAlteredPictureIsFound() throws IOException {
    byte[] pgm = OwnPictures.pgm();
    OwnPictures pictures = new OwnPictures(folder).add("yard.pgm", pgm);
    Path study = pictures.study();
    Path manifest = pictures.manifest();
    Path out = folder.resolve("out");
    assertThat(Program.run(folder, "assess", study + "", "--quiet", "--out", out + "").err())
        .isEmpty();
    assertThat(recheck(out, "--sample", "5").code()).isZero();
    pgm[pgm.length - 1] ^= 1;
    Files.write(folder.resolve("yard.pgm"), pgm);
    Outcome altered = recheck(out);
    assertThat(altered.code()).isEqualTo(1);
    assertThat(altered.out()).contains("MISMATCH ", "yard.pgm has SHA-256");
    // The manifest is made to fit; the record still knows the old checksum.
    Path again = new OwnPictures(folder).add("yard.pgm", pgm).manifest();
    assertThat(again).isEqualTo(manifest);
    Outcome fitted = recheck(out);
    assertThat(fitted.code()).isEqualTo(1);
    assertThat(fitted.out()).contains("MISMATCH      picture 'yard.pgm' recorded with SHA-256");
  }

  @Test
  void anAlteredModelFileIsFound() throws IOException {
    Path model = folder.resolve("mine.yaml");
    Files.writeString(
        model,
        """
        id: mine
        version: 1
        process: gaussian
        acts-on: [samples]
        severity: [snr-db]
        source: own measurement
        """);
    Path study =
        SmallStudy.write(folder, SmallStudy.TEXT.replace("noise: gaussian", "noise: mine.yaml"));
    Path out = folder.resolve("out");
    assertThat(Program.run(folder, "assess", study + "", "--quiet", "--out", out + ""))
        .isEqualTo(new Outcome(0, "", ""));
    assertThat(recheck(out, "--sample", "5").code()).isZero();
    Path recorded;
    try (var files = Files.list(out.resolve("models"))) {
      recorded = files.toList().get(0);
    }
    String original = Files.readString(recorded);
    change(recorded, text -> text + "# harmless\n");
    assertMismatch(out, "models/mine-", "is not what the program writes");
    Files.writeString(recorded, original);
    change(recorded, text -> text.replace("version: 1", "version: 2"));
    assertMismatch(out, "study fingerprint recorded ", "noise model mine version 1 recorded");
  }

  private void assertMismatch(Path results, String... parts) {
    Outcome altered = recheck(results);
    assertThat(altered.code()).isEqualTo(1);
    assertThat(altered.out()).contains(parts);
  }

  @Test
  void whatDoesNotGoTogetherIsRefused() throws IOException {
    for (String options : List.of("--all --sample 5", "--sample 0", "--seed -1", "--threads 0")) {
      List<String> arguments = new ArrayList<>(List.of("recheck", copy().toString()));
      arguments.addAll(List.of(options.split(" ", -1)));
      Outcome outcome = Program.run(folder, arguments.toArray(new String[0]));
      assertThat(outcome.errors()).singleElement().asString().contains("accepted: ");
      assertThat(outcome.code()).isEqualTo(2);
    }
  }
}
