package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.io.IOException;
import java.io.StringReader;
import java.math.BigDecimal;
import java.math.MathContext;
import java.math.RoundingMode;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import javax.xml.parsers.DocumentBuilderFactory;
import javax.xml.xpath.XPathConstants;
import javax.xml.xpath.XPathFactory;
import linkworthy.results.ResultsFolder;
import linkworthy.statistics.Cell;
import linkworthy.statistics.StudentT;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.w3c.dom.Document;
import org.w3c.dom.Element;
import org.w3c.dom.NodeList;
import org.xml.sax.InputSource;

/** The page of a run that was really made, against the record of the run. */
class ReportPageTest {
  @TempDir private static Path folder;
  private static Path out = Path.of("out");
  private static Document page = documentOf("<html></html>");

  @BeforeAll
  static void run() throws IOException {
    out = folder.resolve("out");
    String study = SmallStudy.in(folder).toString();
    assertThat(Program.run(folder, "assess", study, "--out", out.toString(), "--quiet").code())
        .isZero();
    page = documentOf(Files.readString(out.resolve("report.html")));
  }

  private static Document documentOf(String html) {
    try {
      return DocumentBuilderFactory.newInstance()
          .newDocumentBuilder()
          .parse(new InputSource(new StringReader(html)));
    } catch (Exception e) {
      throw new AssertionError("the page is not well-formed", e);
    }
  }

  private static List<Element> elements(Document document, String path) {
    try {
      NodeList nodes =
          (NodeList)
              XPathFactory.newInstance()
                  .newXPath()
                  .evaluate(path, document, XPathConstants.NODESET);
      List<Element> elements = new ArrayList<>();
      for (int i = 0; i < nodes.getLength(); i++) {
        elements.add((Element) nodes.item(i));
      }
      return elements;
    } catch (Exception e) {
      throw new AssertionError(path, e);
    }
  }

  private static String text(Element element) {
    return element.getTextContent().strip().replaceAll("\\s+", " ");
  }

  private static List<String> texts(String path) {
    return elements(page, path).stream().map(ReportPageTest::text).toList();
  }

  /** The columns of cells.csv as they stand there, and the lines. */
  private static List<Map<String, String>> cellsCsv() throws IOException {
    List<String> lines = Files.readAllLines(out.resolve("cells.csv"));
    List<String> heads = List.of(lines.get(0).split(",", -1));
    List<Map<String, String>> rows = new ArrayList<>();
    for (String line : lines.subList(1, lines.size())) {
      List<String> fields = List.of(line.split(",", -1));
      Map<String, String> row = new LinkedHashMap<>();
      for (int i = 0; i < heads.size(); i++) {
        row.put(heads.get(i), fields.get(i));
      }
      rows.add(row);
    }
    return rows;
  }

  private static String fixed(String number, int decimals) {
    return number.matches("inf|n/a")
        ? number
        : new BigDecimal(Double.parseDouble(number))
            .setScale(decimals, RoundingMode.HALF_UP)
            .toPlainString();
  }

  private static String six(String number) {
    if (number.isEmpty() || number.equals("n/a")) {
      return "n/a";
    }
    double value = number.equals("inf") ? Double.POSITIVE_INFINITY : Double.parseDouble(number);
    return Double.isInfinite(value)
        ? "inf"
        : new BigDecimal(value)
            .round(new MathContext(6, RoundingMode.HALF_EVEN))
            .stripTrailingZeros()
            .toPlainString();
  }

  @Test
  void everyFigureIsThatOfTheCells() throws IOException {
    List<String> columns =
        List.of(
            "bits_per_pixel_mean",
            "psnr_mean_db",
            "psnr_picture_half_width_db",
            "psnr_noise_half_width_db",
            "psnr_of_mean_mse_db",
            "psnr_p05_db",
            "ssim_mean",
            "outage_rate",
            "behind_best_db",
            "behind_best_p_adjusted",
            "trials");
    List<Map<String, String>> cells = cellsCsv();
    // five codecs without noise and under four severities
    assertThat(cells).hasSize(25);
    for (int i = 0; i < cells.size(); i++) {
      List<String> row = texts("//tr[@id='f" + i + "']/*");
      List<String> expected = new ArrayList<>();
      for (String column : columns) {
        expected.add(six(String.valueOf(cells.get(i).get(column))));
      }
      assertThat(row.get(0)).isEqualTo(cells.get(i).get("codec"));
      assertThat(row.subList(2, 13)).describedAs("row %d", i).isEqualTo(expected);
      assertThat(row.get(13))
          .isEqualTo(String.valueOf(cells.get(i).get("standing")).replace('-', ' '));
    }
  }

  @Test
  void everyCellOfTheTablesIsThatOfTheCells() throws IOException {
    List<Map<String, String>> cells = cellsCsv();
    List<Element> shown = elements(page, "//section[@class='noise']//td[@data-f]");
    // the clean row stands in each of the three tables
    assertThat(shown).hasSize(25 + 2 * 5);
    for (Element td : shown) {
      Map<String, String> cell =
          cells.get(Integer.parseInt(td.getAttribute("data-f").substring(1)));
      String main = text((Element) td.getElementsByTagName("b").item(0));
      assertThat(main).isEqualTo(fixed(String.valueOf(cell.get("psnr_mean_db")), 2));
      assertThat(td.getAttribute("data-v").split(" ", -1))
          .containsExactly(
              fixed(String.valueOf(cell.get("ssim_mean")), 3),
              fixed(String.valueOf(cell.get("psnr_of_mean_mse_db")), 2),
              fixed(String.valueOf(cell.get("psnr_p05_db")), 2));
      assertThat(text(td))
          .contains("\u00b1" + fixed(String.valueOf(cell.get("psnr_picture_half_width_db")), 2));
    }
  }

  @Test
  void theOtherTablesAreMadeOfTheSameCells() throws IOException {
    Map<String, Map<String, String>> middle = new LinkedHashMap<>();
    for (Map<String, String> cell : cellsCsv()) {
      if (String.valueOf(cell.get("impairment")).equals("gaussian")
          && String.valueOf(cell.get("severity")).equals("20.0")) {
        middle.put(String.valueOf(cell.get("codec")), cell);
      }
    }
    List<Element> rows = elements(page, "(//section[@id='rate']//table)[1]/tbody/tr");
    assertThat(rows).hasSize(5);
    for (Element row : rows) {
      List<Element> columns = new ArrayList<>();
      for (int i = 0; i < row.getChildNodes().getLength(); i++) {
        columns.add((Element) row.getChildNodes().item(i));
      }
      Map<String, String> cell = middle.getOrDefault(text(columns.get(0)), Map.of());
      assertThat(text(columns.get(2)))
          .isEqualTo(
              fixed(String.valueOf(cell.get("psnr_mean_db")), 2)
                  + " \u00b1"
                  + fixed(String.valueOf(cell.get("psnr_picture_half_width_db")), 2));
      assertThat(text(columns.get(3)))
          .isEqualTo(fixed(String.valueOf(cell.get("behind_best_db")), 2));
      assertThat(text(columns.get(4))).isEqualTo(fixed(String.valueOf(cell.get("ssim_mean")), 3));
    }
  }

  /** Each cell names one of its own trials, and no other one is nearer to its mean. */
  @Test
  void theTypicalTrialIsNearestToTheMeanOfItsCell() {
    ResultsFolder results = ResultsFolder.open(out);
    List<Cell> cells = results.cells();
    for (int i = 0; i < cells.size(); i++) {
      Cell cell = cells.get(i);
      String typical = text(elements(page, "//tr[@id='f" + i + "']/td[last()]").get(0));
      Map<String, Double> away = new LinkedHashMap<>();
      long unused =
          results.trials(
              trial -> {
                if (ReportTrials.Place.of(trial).equals(ReportTrials.Place.of(cell))) {
                  away.put(trial.trial(), Math.abs(trial.psnrDb() - cell.psnrMeanDb()));
                }
              });
      assertThat(away).containsKey(typical);
      assertThat(away.values()).allMatch(a -> a >= away.getOrDefault(typical, Double.NaN));
    }
  }

  /**
   * Two pictures of two replicates with squared errors a, b and c, d: the half-width of their mean
   * is t times |(a - b, c - d)| / 4, with Welch's degrees of freedom, {@code (v + w)^2 / (v^2 +
   * w^2)} for the squared differences v and w.
   */
  @Test
  void predictionsAreHeldAgainstTheNoiseOfTheMeanSquaredError() {
    ResultsFolder results = ResultsFolder.open(out);
    List<Cell> cells = results.cells();
    ReportTrials trials = ReportTrials.of(results, cells);
    int checked = 0;
    for (Cell cell : cells) {
      List<Double> errors = new ArrayList<>();
      long unused =
          results.trials(
              trial -> {
                if (ReportTrials.Place.of(trial).equals(ReportTrials.Place.of(cell))) {
                  errors.add(trial.mse());
                }
              });
      double found = trials.meanSquaredErrorHalfWidthDb(cell);
      if (errors.size() == 4 && Double.isFinite(found)) {
        double v = Math.pow(errors.get(0) - errors.get(1), 2);
        double w = Math.pow(errors.get(2) - errors.get(3), 2);
        double t = StudentT.quantile(0.975, (v + w) * (v + w) / (v * v + w * w));
        double mean = errors.stream().mapToDouble(e -> e / 4).sum();
        assertThat(found)
            .isCloseTo(10 / Math.log(10) * t * Math.sqrt(v + w) / 4 / mean, within(1e-9 * found));
        checked++;
      }
    }
    assertThat(checked).isGreaterThanOrEqualTo(2);
  }

  @Test
  void picturesAreOfRecordedTrialsWithTheirFigures() {
    Map<String, String> recorded = new LinkedHashMap<>();
    long unused =
        ResultsFolder.open(out)
            .trials(
                trial ->
                    recorded.put(
                        trial.trial(),
                        "PSNR "
                            + fixed(Double.toString(trial.psnrDb()), 2)
                            + " dB, SSIM "
                            + fixed(Double.toString(trial.ssim()), 3)));
    List<String> captions = texts("//*[@class='decoded']/*[local-name()='figcaption']");
    assertThat(captions).hasSizeGreaterThan(12);
    for (String caption : captions) {
      String trial = caption.substring(caption.length() - 16);
      assertThat(caption).contains(String.valueOf(recorded.get(trial)));
    }
    // three noises; of two pictures the lower is typical and worst, the other the best
    assertThat(texts("//details[@class='printed']/summary/b"))
        .hasSize(6)
        .containsOnly("typical, worst", "best");
    assertThat(texts("//section[@id='verify']//li"))
        .anyMatch(t -> t.contains("every figure equals the recorded one, bit for bit"));
    assertThat(texts("//section[@id='pictures']//h4"))
        .contains("SNR 20 dB", "SNR 10 dB", "density 0.05", "loss rate 0.1");
  }

  private static Path copy(String name) throws IOException {
    Path copy = Files.createDirectory(folder.resolve(name));
    for (String file : List.of("study.yaml", "run.json", "trials.csv", "cells.csv")) {
      Files.copy(out.resolve(file), copy.resolve(file));
    }
    return copy;
  }

  private static Document rendered(Path results) throws IOException {
    assertThat(Program.run(folder, "report", results.toString()).code()).isZero();
    return documentOf(Files.readString(results.resolve("report.html")));
  }

  /** A study that is no longer that of the run cannot be repeated; its figures are shown. */
  @Test
  void whatCannotBeRepeatedIsSaidInALine() throws IOException {
    Path changed = copy("changed");
    Path study = changed.resolve("study.yaml");
    Files.writeString(study, Files.readString(study).replace("seed: 7", "seed: 8"));
    Document without = rendered(changed);
    assertThat(text(elements(without, "//section[@id='pictures']").get(0)))
        .startsWith("Seeing it No picture is shown:");
    assertThat(elements(without, "//*[local-name()='img' or local-name()='image']")).isEmpty();
    assertThat(elements(without, "//section[@class='noise']//td[@data-f]")).hasSize(25 + 2 * 5);
  }

  /** One bit more in the column {@code payload_bits}, of which no cell knows. */
  private static String withOtherPayload(String line) {
    List<String> fields = new ArrayList<>(List.of(line.split(",", -1)));
    int payload = 18;
    fields.set(payload, Long.toString(Long.parseLong(fields.get(payload)) + 1));
    return String.join(",", fields);
  }

  @Test
  void aTrialThatIsNotAsRecordedIsNotShown() throws IOException {
    String caption = texts("//*[@class='decoded']/*[local-name()='figcaption']").get(0);
    String id = caption.substring(caption.length() - 16);
    Path altered = copy("altered");
    Path trials = altered.resolve("trials.csv");
    List<String> lines = new ArrayList<>();
    for (String line : Files.readAllLines(trials)) {
      lines.add(line.startsWith(id + ",") ? withOtherPayload(line) : line);
    }
    Files.writeString(trials, String.join("\n", lines) + "\n");
    Document shown = rendered(altered);
    assertThat(
            elements(shown, "//*[@class='decoded']/*[local-name()='figcaption']").stream()
                .map(ReportPageTest::text))
        .noneMatch(t -> t.endsWith(id))
        .hasSizeGreaterThan(10);
    assertThat(text(elements(shown, "//section[@id='verify']").get(0)))
        .contains("differ from the record and are not shown");
  }

  /** The number of replicates has no part in the size of the pictures. */
  @Test
  void thePageOfTheBuiltInStudyIsBelowFiveMegabytes() throws IOException {
    Path first = folder.resolve("first");
    String home = Path.of("../..").toAbsolutePath().normalize().toString();
    assertThat(
            Program.run(
                    Path.of(home),
                    "assess",
                    "--set",
                    "replicates=1",
                    "--out",
                    first.toString(),
                    "--quiet")
                .code())
        .isZero();
    assertThat(Files.size(first.resolve("report.html"))).isBetween(1_000_000L, 5_000_000L);
  }

  @Test
  void statedNeedsAreAnsweredFirst() throws IOException {
    Path needs = folder.resolve("needs.yaml");
    Files.writeString(
        needs,
        """
        confidence: 0.9
        needs:
          - {measure: bits-per-pixel, mean-at-most: 1000}
          - {measure: psnr-db, mean-at-least: -1000}
        """);
    Path file = folder.resolve("needs.html");
    Outcome outcome =
        Program.run(
            folder, "report", out.toString(), "--need", needs.toString(), "--out", file.toString());
    assertThat(outcome).isEqualTo(new Outcome(0, "report: " + file + "\n", ""));
    Document answered = documentOf(Files.readString(file));
    assertThat(text(elements(answered, "//p[@class='sentence']").get(0)))
        .contains("is the cheapest codec shown to meet all needs");
    assertThat(text(elements(answered, "//div[@class='why']").get(0)))
        .startsWith("Needs mean bits-per-pixel at most 1000")
        .contains("meets with", "margin", "(bound");
    assertThat(elements(answered, "//section[@id='codecs']//tbody/tr")).hasSize(5);
    Set<String> ids = new LinkedHashSet<>();
    elements(answered, "//*[@id]").forEach(e -> assertThat(ids.add(e.getAttribute("id"))).isTrue());
  }
}
