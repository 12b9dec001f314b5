package linkworthy.report;

import static java.lang.Double.NaN;
import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.nio.charset.StandardCharsets;
import java.security.MessageDigest;
import java.security.NoSuchAlgorithmException;
import java.util.ArrayList;
import java.util.Base64;
import java.util.List;
import java.util.Locale;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class ReportRendererTest {
  private static final String HOSTILE = "<script>alert(1)</script>";
  private static final Condition GAUSSIAN =
      SamplePages.condition("gaussian", "samples", "snr-db", 20, 20);

  @Test
  void everyFigureIsInItsCell() {
    ReportPage page = SamplePages.full();
    RenderedPage shown = RenderedPage.of(page);
    FigureGrid grid = new FigureGrid(page.figures());
    List<CodecFamily> families = CodecFamily.of(grid.codecs());
    List<String> expected = new ArrayList<>();
    List<String> intervals = new ArrayList<>();
    for (FigureGrid.Noise noise : grid.noises()) {
      List<Condition> rows = new ArrayList<>(grid.clean().stream().toList());
      rows.addAll(noise.conditions());
      for (Condition row : rows) {
        for (CodecFamily family : families) {
          for (CodecFamily.Member member : family.members()) {
            Figure.Quality quality = grid.find(row, member.codec()).orElseThrow().quality();
            expected.add(Numbers.db(quality.psnrMeanDb()));
            intervals.add(
                "\u00b1"
                    + Numbers.db(quality.pictureHalfWidthDb())
                    + (row.isClean() ? "" : " (" + Numbers.db(quality.noiseHalfWidthDb()) + ")"));
          }
        }
      }
    }
    String cells = "//section[@class='noise']//table//tbody//td";
    assertThat(expected).hasSize(3 * 7 * 14);
    assertThat(shown.texts(cells + "//b")).isEqualTo(expected);
    assertThat(shown.texts(cells + "/small")).isEqualTo(intervals);
  }

  @Test
  void rowsAndColumnsAreNamed() {
    RenderedPage shown = RenderedPage.of(SamplePages.full());
    String table = "//section[@id='noise-1']//table";
    assertThat(shown.texts(table + "//tbody//th/span"))
        .containsExactly(
            "clean", "SNR 30 dB", "SNR 25 dB", "SNR 20 dB", "SNR 15 dB", "SNR 10 dB", "SNR 5 dB");
    // 2400 * 10^(-SNR/10) grey levels squared, worked out by hand
    assertThat(shown.texts(table + "//tbody//th/small"))
        .containsExactly(
            "var. 0", "var. 2.40", "var. 7.59", "var. 24.0", "var. 75.9", "var. 240", "var. 759");
    assertThat(shown.texts(table + "//tr[@class='families']/th"))
        .containsExactly("pca rows step8", "pca blocks8 step8", "dct blocks8 step8", "mean rows");
    assertThat(shown.texts(table + "//tr[@class='codecs']/th[position()>1]"))
        .containsExactly(
            "K4", "K8", "K16", "K32", "K4", "K8", "K16", "K32", "K4", "K8", "K16", "K32", "step16",
            "step32");
  }

  @Test
  void standingIsShownByMarkWordAndClass() {
    ReportPage page = SamplePages.full();
    RenderedPage shown = RenderedPage.of(page);
    long clean = count(page, Standing.BEST, true);
    long noisy = count(page, Standing.BEST, false);
    String best = "//section[@class='noise']//td[contains(@class, 'best')]";
    // the clean row stands in each of the three tables
    assertThat(shown.texts(best))
        .hasSize((int) (3 * clean + noisy))
        .allMatch(t -> t.contains("\u25cf"));
    assertThat(shown.texts(best + "//span[@class='spoken']")).allMatch(t -> t.equals("best"));
    assertThat(shown.texts("//section[@class='noise']//td[contains(@class, 'not-dist')]"))
        .hasSize(
            (int)
                (3 * count(page, Standing.NOT_DISTINGUISHABLE, true)
                    + count(page, Standing.NOT_DISTINGUISHABLE, false)))
        .allMatch(t -> t.startsWith("\u25cb"));
  }

  private static long count(ReportPage page, Standing standing, boolean clean) {
    return page.figures().stream()
        .filter(f -> f.condition().isClean() == clean)
        .filter(f -> f.comparison().standing() == standing)
        .count();
  }

  @Test
  void questionAnswerAndConfidenceComeFirst() {
    ReportPage page = SamplePages.full();
    RenderedPage shown = RenderedPage.of(page);
    assertThat(shown.text("//h1")).isEqualTo(page.question());
    assertThat(shown.text("//main/*[1]//p[@class='sentence']")).isEqualTo(page.answer().sentence());
    assertThat(shown.text("//main/*[1]//p[@class='confidence']/span"))
        .isEqualTo(page.answer().confidence());
    assertThat(shown.text("//main/*[2]/@id")).isEqualTo("tables");
  }

  @Test
  void everyLinkOfTheHeadLeadsToASectionOfItsOwn() {
    for (ReportPage page : List.of(SamplePages.full(), SamplePages.rich(), SamplePages.sketch())) {
      RenderedPage shown = RenderedPage.of(page);
      List<String> links =
          shown.texts("//nav[@id='links']/a/@href").stream().map(a -> a.substring(1)).toList();
      assertThat(links).doesNotHaveDuplicates();
      assertThat(shown.texts("//section/@id"))
          .filteredOn(links::contains)
          .containsExactlyInAnyOrderElementsOf(links);
    }
  }

  @Test
  void provenanceCreditsAndModelsAreListed() {
    RenderedPage shown = RenderedPage.of(SamplePages.full());
    String provenance = shown.text("//section[@id='provenance']");
    Provenance given = SamplePages.provenance();
    assertThat(provenance)
        .contains(given.program().version(), given.program().java())
        .contains(given.program().operatingSystem(), given.run().start(), given.run().end())
        .contains(given.fingerprints().study(), given.fingerprints().corpus())
        .contains("30\u202f408 of 30\u202f408 planned");
    given.noiseModels().forEach(m -> assertThat(provenance).contains(m.name(), m.fingerprint()));
    given.settings().forEach(s -> assertThat(provenance).contains(s.name(), s.value()));
    String severities = "//caption[@id='severities-caption']/../tbody/tr";
    assertThat(shown.texts(severities)).hasSize(18);
    // 2400 / 10^2 grey levels squared, and 97 % of it as the sample has it
    assertThat(shown.texts(severities + "[3]/*"))
        .containsExactly("gaussian on samples", "SNR 20 dB", "20.00", "24.0", "23.3");
    assertThat(provenance).contains("field-12", "256 \u00d7 192", "CC BY 4.0");
    assertThat(shown.texts("//section[@id='provenance']//a/@href")).hasSize(12);
  }

  @Test
  void everyPlotHasATitleADescriptionAndAFamily() {
    RenderedPage shown = RenderedPage.of(SamplePages.full());
    // three noises of four families, and a rate plot for each noise
    assertThat(shown.texts("//*[local-name()='svg'][@role='img']")).hasSize(15);
    assertThat(shown.texts("//*[local-name()='svg']/*[local-name()='title']"))
        .hasSize(15)
        .doesNotHaveDuplicates();
    assertThat(shown.texts("//*[local-name()='svg']/*[local-name()='desc']"))
        .hasSize(15)
        .noneMatch(String::isEmpty);
    assertThat(shown.texts("//@id")).doesNotHaveDuplicates();
  }

  @Test
  void theRingsAreTheNonDominatedSet() {
    List<Figure> figures =
        List.of(
            SamplePages.bare(GAUSSIAN, SamplePages.codec("dct", "rows", "K4"), 25, 0.5),
            SamplePages.bare(GAUSSIAN, SamplePages.codec("dct", "rows", "K8"), 24, 0.7),
            SamplePages.bare(GAUSSIAN, SamplePages.codec("dct", "rows", "K16"), 28, 0.9));
    RenderedPage shown = RenderedPage.of(SamplePages.page(figures));
    assertThat(shown.texts("//*[@class='ring']")).hasSize(2);
    assertThat(shown.texts("//section[@id='rate']//tbody/tr/td[last()]"))
        .containsExactly("\u25ce no", "yes", "\u25ce no");
  }

  /** A codec that aims at a rate has other parameters in force under noise than without. */
  @Test
  void parametersInForceDoNotMakeAnotherCodec() {
    CodecColumn quiet = new CodecColumn("jpeg 1bpp", "jpeg", "blocks8", "40", "");
    CodecColumn noisy = new CodecColumn("jpeg 1bpp", "jpeg", "blocks8", "34", "");
    RenderedPage shown =
        RenderedPage.of(
            SamplePages.page(
                List.of(
                    SamplePages.bare(Condition.clean(), quiet, 35, 1),
                    SamplePages.bare(GAUSSIAN, noisy, 30, 1))));
    assertThat(shown.texts("//section[@id='rate']//tbody/tr/td[last()]"))
        .containsExactly("\u25ce no");
  }

  /** The place of "clean" is left of an axis that starts at a power of ten. */
  @Test
  void noTickLabelTouchesTheOneOfClean() {
    CodecColumn codec = SamplePages.codec("dct", "rows", "K4");
    List<Figure> figures = new ArrayList<>();
    figures.add(SamplePages.bare(Condition.clean(), codec, 35, 1));
    // variances 0.00998, 0.24 and 2.4 of a signal power of 2400
    for (double snr : List.of(53.81, 40.0, 30.0)) {
      figures.add(
          SamplePages.bare(
              SamplePages.condition("gaussian", "samples", "snr-db", snr, snr), codec, 30, 1));
    }
    RenderedPage shown = RenderedPage.of(SamplePages.page(figures));
    assertThat(shown.texts("//section[@class='noise']//*[local-name()='svg']//*[.='clean']"))
        .isNotEmpty();
    assertThat(shown.texts("//section[@class='noise']//*[local-name()='svg']//*[.='0.01']"))
        .isEmpty();
    assertThat(shown.texts("//section[@class='noise']//*[local-name()='svg']//*[.='0.1']"))
        .isNotEmpty();
  }

  /** Each of these would be more than text somewhere, or fill the page. */
  @ParameterizedTest
  @ValueSource(
      strings = {
        "<script>x</script>",
        "a\"b'c",
        "{{x}}",
        "th:utext=\"x\"",
        "[[${page}]] [(${page})] ${page} *{page} #{page} @{page} ~{page} __${page}__",
        "]]> <![CDATA[ <!-- --> </style></script>",
        "&lt; &amp; &#x202e;"
      })
  void hostileTextIsPlainTextInEveryPlace(String text) {
    RenderedPage shown = RenderedPage.of(SamplePages.hostile(text));
    assertThat(shown.text("//h1")).isEqualTo(text);
    assertThat(shown.texts("//table[@class='list figures']/tbody/tr/*[1]")).containsExactly(text);
    assertThat(shown.texts("//pre")).containsExactly(text);
    for (String section :
        List.of(
            "tables",
            "heat",
            "codecs",
            "rate",
            "curves",
            "spread",
            "losses",
            "pictures",
            "predictions",
            "costs",
            "figures",
            "provenance",
            "verify")) {
      assertThat(shown.text("//section[@id='" + section + "']"))
          .describedAs(section)
          .contains(text);
    }
    assertThat(shown.texts("//script")).hasSize(1);
    assertThat(shown.texts("//style")).hasSize(1);
    assertThat(shown.texts("//@onload")).isEmpty();
  }

  @Test
  void tenThousandCharactersAndTurnedTextStayText() {
    String text = "\u202e" + "wide ".repeat(2000);
    RenderedPage shown = RenderedPage.of(SamplePages.hostile(text));
    String plain = text.replace('\u202e', '\ufffd').strip();
    assertThat(shown.text("//h1")).isEqualTo(plain);
    assertThat(shown.texts("//table[@class='list figures']/tbody/tr/*[1]")).containsExactly(plain);
    assertThat(shown.text("//style").codePoints().filter(c -> c == 0x202E)).isEmpty();
    assertThat(shown.text("//style")).hasSizeLessThan(30_000);
  }

  /** What stands in the margins of a printed page comes from outside and cannot end its string. */
  @Test
  void thePageHeadOnPaperIsAStringOfTheStyleSheet() {
    ReportPage page = SamplePages.hostile("a\"; } body { display: none } \\</style>");
    assertThat(RenderedPage.of(page).text("//style"))
        .contains("@top-left { content: \"a\\22 \\3b \\20 \\7d \\20 body\\20 \\7b ")
        .doesNotContain("display: none } \\");
  }

  @Test
  void textIsEscapedWhereverItComesFrom() {
    String html = new ReportRenderer().render(SamplePages.hostile(HOSTILE));
    assertThat(html.split("<script", -1)).describedAs("the page's own").hasSize(2);
    assertThat(html).contains("&lt;script&gt;");
    RenderedPage shown = new RenderedPage(html);
    assertThat(shown.text("//h1")).isEqualTo(HOSTILE);
    assertThat(shown.texts("//@onload")).isEmpty();
  }

  @Test
  void costsNameWhatDoesNotFit() {
    ReportPage plain = SamplePages.page(List.of());
    assertThat(RenderedPage.of(plain).texts("//section[@id='costs']")).isEmpty();
    Costs costs =
        new Costs(
            HOSTILE,
            64,
            List.of(
                new Costs.CodecCost("dct", 1_234_567, 63.99, 1.5, 1.5, 20, 4321.9),
                new Costs.CodecCost("pca", 2e9, 64.01, 250, 125, 20, 99),
                new Costs.CodecCost("own", NaN, NaN, NaN, NaN, NaN, NaN)),
            List.of(
                new Costs.NodeShare("tiles", "camera", 0, 4, 500, 0, 0, 40, 115),
                new Costs.NodeShare(
                    "tiles", "helper 1", 716_000, 38.5, 0, 31_044, 5788.4, 0, 9.235)));
    RenderedPage shown = RenderedPage.of(new PageBuilder(plain).costs(costs).build());
    assertThat(shown.texts("(//section[@id='costs']//table)[1]/tbody/tr/td[3]"))
        .containsExactly("fits", "too much", "unknown");
    assertThat(shown.texts("//section[@id='costs']//table//td/b")).containsExactly("too much");
    assertThat(shown.texts("(//section[@id='costs']//table)[1]/tbody/tr/td[last()]"))
        .containsExactly("4321", "99", "n/a");
    assertThat(shown.texts("(//section[@id='costs']//table)[2]/tbody/tr[2]/td"))
        .startsWith("helper 1")
        .endsWith("9.23")
        .hasSize(8);
    assertThat(shown.texts("(//section[@id='costs']//table)[2]/tbody/tr[3]/td"))
        .containsExactly(
            "worst node", "716\u202f000", "38.5", "500", "31\u202f044", "5788", "40", "115");
    assertThat(shown.texts("(//section[@id='costs']//table)[2]/tbody/tr[4]/td"))
        .startsWith("total", "716\u202f000", "42.5", "500")
        .endsWith("40", "124");
  }

  /** Gaps against the larger of 0.1 dB and the noise interval; without an interval 0.1 dB. */
  @Test
  void predictionsStandBesideMeasurements() {
    ReportPage plain = SamplePages.full();
    assertThat(RenderedPage.of(plain).texts("//section[@id='predictions']")).isEmpty();
    RenderedPage shown =
        RenderedPage.of(
            new PageBuilder(plain)
                .predictions(
                    new Predicted(GAUSSIAN, "a", 30, 30.09, 0.01, ""),
                    new Predicted(GAUSSIAN, "b", 30, 30.5, 0.6, ""),
                    new Predicted(GAUSSIAN, "c", 30, 30.5, NaN, ""),
                    new Predicted(GAUSSIAN, "d", 30, 29.5, 0.2, ""),
                    new Predicted(GAUSSIAN, "f", 30, 30.5, 0, ""),
                    new Predicted(GAUSSIAN, "e", NaN, 30, 0.2, HOSTILE))
                .build());
    assertThat(shown.texts("(//section[@id='predictions']//table)[1]/tbody/tr/td[last()]"))
        .containsExactly(
            "as predicted",
            "as predicted",
            "undecided: there is no noise interval",
            "finding: measured is worse than predicted",
            "undecided: all replicates came out alike");
    assertThat(shown.texts("(//section[@id='predictions']//table)[1]/tbody/tr/td[5]"))
        .containsExactly("0.09", "0.50", "0.50", "-0.50", "0.50");
    assertThat(shown.text("//section[@id='predictions']/p")).contains("1 gap is larger", "of 5");
    assertThat(shown.texts("(//section[@id='predictions']//table)[2]/tbody/tr/td"))
        .containsExactly("e");
  }

  @Test
  void onlyWebAddressesBecomeLinks() {
    for (String source : List.of("javascript:alert(1)", "data:text/html,x", "own picture")) {
      PictureCredit picture = new PictureCredit("a", 1, 1, "CC0", "me", source);
      RenderedPage shown =
          RenderedPage.of(new PageBuilder(SamplePages.page(List.of())).pictures(picture).build());
      assertThat(shown.texts("//section[@id='provenance']//a")).isEmpty();
      assertThat(shown.text("//section[@id='provenance']")).contains(source);
    }
  }

  @Test
  void charactersThatNoPageMayHoldAreReplaced() {
    String label = "a\u0000b\u0008c\ud800d\uffff";
    Figure figure = SamplePages.bare(GAUSSIAN, new CodecColumn(label, "", "", "", ""), 30, 1);
    RenderedPage shown = RenderedPage.of(SamplePages.page(List.of(figure)));
    assertThat(shown.texts("//section[@id='rate']//tbody//th"))
        .containsExactly("a\ufffdb\ufffdc\ufffdd\ufffd");
  }

  @Test
  void whatIsNotAvailableIsNotZero() {
    CodecColumn codec = SamplePages.codec("dct", "rows", "K4");
    CodecColumn missing = SamplePages.codec("dct", "rows", "K8");
    Figure none =
        new Figure(
            GAUSSIAN,
            codec,
            new Figure.Evidence(1, 1),
            new Figure.Quality(
                Double.NaN, Double.NaN, Double.NaN, Double.NaN, Double.NaN, Double.NaN),
            Double.NaN,
            Double.NaN,
            new Figure.Comparison(Double.NaN, Double.NaN, Standing.UNTESTED));
    Figure lossless = SamplePages.bare(Condition.clean(), codec, Double.POSITIVE_INFINITY, 8);
    Figure clean = SamplePages.bare(Condition.clean(), missing, 40, 2);
    RenderedPage shown = RenderedPage.of(SamplePages.page(List.of(lossless, clean, none)));
    assertThat(shown.texts("//section[@class='noise']//tbody//td//b"))
        .containsExactly("inf", "40.00", "n/a", "n/a");
    assertThat(shown.texts("//section[@class='noise']//tbody//td/small"))
        .containsExactly("not measured");
    assertThat(shown.texts("//section[@id='losses']//tbody//td"))
        .containsExactly("n/a", "n/a", "n/a", "n/a", "n/a");
  }

  @Test
  void failuresOfCodecsAreCountedWhereThereAreAny() {
    CodecColumn codec = SamplePages.codec("dct", "rows", "K4");
    List<Figure> figures = new ArrayList<>();
    for (Condition condition : List.of(Condition.clean(), GAUSSIAN)) {
      Figure figure = SamplePages.bare(condition, codec, 6, 0);
      figures.add(
          new Figure(
              condition,
              codec,
              new Figure.Evidence(1, 10, condition.isClean() ? 1 : 7),
              figure.quality(),
              figure.bitsPerPixel(),
              0.8,
              figure.comparison()));
    }
    RenderedPage shown = RenderedPage.of(SamplePages.page(figures));
    assertThat(shown.text("//section[@id='losses']"))
        .contains("A codec failed in 8 trials, the clean ones included (dct rows K4)");
    assertThat(shown.texts("//section[@id='losses']//table[@class='list']//tbody//td"))
        .hasSize(6)
        .endsWith("80.0 %", "7");
    assertThat(RenderedPage.of(SamplePages.full()).text("//section[@id='losses']"))
        .doesNotContain("failed", "failures");
  }

  @ParameterizedTest
  @ValueSource(strings = {"de-DE", "tr-TR", "ar-EG", "hi-IN"})
  void noLocaleChangesAByte(String tag) {
    String reference = under(Locale.US);
    assertThat(under(Locale.forLanguageTag(tag))).isEqualTo(reference);
  }

  private static String under(Locale locale) {
    Locale before = Locale.getDefault();
    try {
      Locale.setDefault(locale);
      return new ReportRenderer().render(SamplePages.full());
    } finally {
      Locale.setDefault(before);
    }
  }

  @Test
  void thePolicyAdmitsTheStyleSheetAndTheScriptAndNothingElse() throws Exception {
    RenderedPage shown = RenderedPage.of(SamplePages.full());
    String html = new ReportRenderer().render(SamplePages.full());
    String style = html.substring(html.indexOf("<style>") + 7, html.indexOf("</style>"));
    String script = html.substring(html.indexOf("<script>") + 8, html.indexOf("</script>"));
    assertThat(shown.text("//meta[@http-equiv='Content-Security-Policy']/@content"))
        .isEqualTo(
            "default-src 'none'; style-src 'sha256-"
                + (sha256(style) + "'; script-src 'sha256-" + sha256(script))
                + "'; img-src data:; base-uri 'none'; form-action 'none'");
    assertThat(shown.texts("//@style | //@src | //iframe | //object | //form")).isEmpty();
    assertThat(shown.texts("//@*[starts-with(name(), 'on')]")).isEmpty();
    assertThat(shown.texts("//*[local-name()='button' or local-name()='input']"))
        .describedAs("controls are made by the script")
        .isEmpty();
    assertThat(script).doesNotContain("fetch(", "XMLHttpRequest", "import(", "eval(", "innerHTML");
    assertThat(style).doesNotContain("url(", "@import");
    assertThat(html).doesNotContain(" th:", "\r");
  }

  private static String sha256(String text) throws NoSuchAlgorithmException {
    return Base64.getEncoder()
        .encodeToString(
            MessageDigest.getInstance("SHA-256").digest(text.getBytes(StandardCharsets.UTF_8)));
  }

  @Test
  void fortyCodecsAreSharedOutAmongTables() {
    List<Figure> figures = new ArrayList<>();
    for (Condition condition : List.of(Condition.clean(), GAUSSIAN)) {
      for (int i = 0; i < 40; i++) {
        CodecColumn codec = SamplePages.codec("pca", "rows", "K" + (i + 1) + " step8");
        figures.add(SamplePages.bare(condition, codec, 20 + i / 4.0, 0.1 + i / 10.0));
      }
    }
    RenderedPage shown = RenderedPage.of(SamplePages.page(figures));
    assertThat(shown.texts("//section[@class='noise']//table")).hasSize(3);
    assertThat(shown.texts("//section[@class='noise']//tr[@class='codecs']/th[position()>1]"))
        .hasSize(40)
        .doesNotHaveDuplicates();
    // at most six lines a panel: seven panels
    assertThat(shown.texts("//section[@class='noise']//figure")).hasSize(7);
  }

  @Test
  void longLabelsGetLettersInThePlotsAndAKey() {
    String label = "our present vendor's codec, ".repeat(8).strip();
    List<Figure> figures =
        List.of(
            SamplePages.bare(GAUSSIAN, new CodecColumn(label + " A", "", "", "", ""), 30, 1),
            SamplePages.bare(GAUSSIAN, new CodecColumn(label + " B", "", "", "", ""), 31, 2));
    RenderedPage shown = RenderedPage.of(SamplePages.page(figures));
    assertThat(shown.texts("//section[@class='noise']//p[@class='key']/span/b"))
        .containsExactly("A", "B");
    assertThat(shown.texts("//section[@id='rate']//tbody//th"))
        .containsExactly(label + " A", label + " B");
  }

  @Test
  void oneCodecInOneConditionIsAPage() {
    Figure figure = SamplePages.bare(GAUSSIAN, SamplePages.codec("dct", "rows", "K4"), 30, 1);
    RenderedPage shown = RenderedPage.of(SamplePages.page(List.of(figure)));
    assertThat(shown.texts("//section[@class='noise']//tbody//td//b")).containsExactly("30.00");
    assertThat(shown.text("//section[@class='noise']//td//i")).isEqualTo("?");
    assertThat(shown.texts("//section[@class='noise']//figure")).hasSize(1);
  }

  @Test
  void withoutNoiseTheCleanRowStandsAlone() {
    Figure figure =
        SamplePages.bare(Condition.clean(), SamplePages.codec("dct", "rows", "K4"), 30, 1);
    RenderedPage shown = RenderedPage.of(SamplePages.page(List.of(figure)));
    assertThat(shown.texts("//section[@class='noise']/h3")).containsExactly("no noise");
    assertThat(shown.texts("//section[@class='noise']//figure")).isEmpty();
  }

  @Test
  void withoutFiguresThePageSaysSo() {
    RenderedPage shown = RenderedPage.of(SamplePages.page(List.of()));
    assertThat(shown.text("//section[@id='tables']")).contains("No condition was measured.");
    assertThat(shown.text("//section[@id='losses']")).contains("Outage rates are not available.");
  }

  @Test
  void outagesAreTabledWhereThereAreAny() {
    RenderedPage shown = RenderedPage.of(SamplePages.full());
    assertThat(shown.texts("//section[@id='losses']//table[@class='matrix']/caption"))
        .hasSize(1)
        .allMatch(caption -> caption.startsWith("Outage rate under burst-loss on packets"));
    assertThat(shown.texts("//section[@id='losses']//table[@class='matrix']//td/small"))
        .contains("1.0\u20138.3");
    Figure none = SamplePages.bare(GAUSSIAN, SamplePages.codec("dct", "rows", "K4"), 30, 1);
    assertThat(RenderedPage.of(SamplePages.page(List.of(none))).text("//section[@id='losses']/p"))
        .startsWith("No outage was seen in 1 trial;");
  }

  @Test
  void refusesAConfidenceLevelOutOfRange() {
    PageBuilder page = new PageBuilder(SamplePages.full());
    for (double level : new double[] {0, 1, -0.1, Double.NaN}) {
      assertThatThrownBy(page.confidenceLevel(level)::build)
          .isInstanceOf(IllegalArgumentException.class)
          .hasMessageContaining("confidence level");
    }
  }

  @ParameterizedTest
  @CsvSource({
    "snr-db, 20, SNR 20 dB",
    "sinr-db, 2, SINR 2 dB",
    "eb-n0-db, 7.5, Eb/N0 7.5 dB",
    "own-measure-db, 3, own measure 3 dB",
    "loss-rate, 0.05, loss rate 0.05",
  })
  void severitiesAreNamedAsPeopleSayThem(String axis, double severity, String named) {
    assertThat(MatrixTable.given(SamplePages.condition("x", "samples", axis, severity, 1)))
        .isEqualTo(named);
  }

  /** Means over the severities of a noise; distances from the best of its column. */
  @Test
  void theHeatMapHasTheMeansOfTheTables() {
    ReportPage page = SamplePages.full();
    RenderedPage shown = RenderedPage.of(page);
    FigureGrid grid = new FigureGrid(page.figures());
    List<String> means = new ArrayList<>();
    for (CodecColumn codec : grid.codecs()) {
      for (FigureGrid.Noise noise : grid.noises()) {
        means.add(
            Numbers.db(
                noise.conditions().stream()
                    .mapToDouble(c -> grid.psnr(c, codec))
                    .average()
                    .orElseThrow()));
      }
    }
    assertThat(shown.texts("//section[@id='heat']//td/b")).hasSize(3 * 14).isEqualTo(means);
    assertThat(shown.texts("//section[@id='heat']//td[contains(@class, 'h0')]/small"))
        .containsExactly("best", "best", "best");
  }

  @Test
  void theShadesOfTheHeatMapFollowTheDistance() {
    List<Figure> figures = new ArrayList<>();
    double[] psnr = {30, 29.6, 29.1, 28.2, 25.5, 20};
    for (int i = 0; i < psnr.length; i++) {
      figures.add(
          SamplePages.bare(GAUSSIAN, SamplePages.codec("dct", "rows", "K" + i), psnr[i], 1));
    }
    assertThat(RenderedPage.of(SamplePages.page(figures)).texts("//section[@id='heat']//td/@class"))
        .containsExactly("n h0", "n h1", "n h2", "n h3", "n h4", "n h5");
  }

  @Test
  void everyPictureIsADot() {
    RenderedPage shown = RenderedPage.of(SamplePages.rich());
    assertThat(shown.texts("//section[@id='spread']//*[@class='dots']/@d"))
        .hasSize(3 * 14)
        .allMatch(d -> d.split("M", -1).length == 1 + 12);
    // the means of twelve values half a dB to either side, 5.5 below and 5.5 above
    Figure middle =
        SamplePages.rich().figures().stream()
            .filter(f -> f.condition().impairment().equals("gaussian"))
            .filter(f -> f.condition().severity() == 20)
            .findFirst()
            .orElseThrow();
    double mean = middle.quality().psnrMeanDb();
    assertThat(shown.text("(//section[@id='spread']//*[local-name()='svg'])[1]"))
        .contains(Numbers.db(mean - 5.5) + " to " + Numbers.db(mean + 5.5));
  }

  @Test
  void picturesCarryTheirCaptionsAndStandInThePage() {
    RenderedPage shown = RenderedPage.of(SamplePages.rich());
    assertThat(shown.texts("//section[@id='pictures']//*[local-name()='figcaption']"))
        .contains(
            "dct blocks8 K4 step8 reference0.500 bits per pixel, PSNR 28.00 dB, SSIM 0.800"
                + "trial 0123456789abcdef");
    assertThat(shown.texts("//img/@src | //*[local-name()='image']/@href"))
        .hasSize(7)
        .allMatch(address -> address.startsWith("data:image/png;base64,"));
    assertThat(shown.texts("//img/@alt")).hasSize(6).noneMatch(String::isEmpty);
    // 32 samples, each drawn as 2 by 2
    assertThat(shown.texts("//img/@width")).containsOnly("64");
  }
}
