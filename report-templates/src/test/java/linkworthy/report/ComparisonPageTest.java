package linkworthy.report;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;

import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import org.junit.jupiter.api.Test;

class ComparisonPageTest {
  private static final String HOSTILE = "<script>alert(1)</script>";

  private static ComparisonPage page(String text, List<ComparisonPage.Trend> trends) {
    List<ComparisonPage.Column> columns =
        List.of(new ComparisonPage.Column(text, false), new ComparisonPage.Column(text, true));
    return new ComparisonPage(
        text,
        text,
        text,
        text,
        List.of(text),
        List.of(
            new ComparisonPage.Table(text, text, columns, List.of(List.of(text, text)), trends)),
        List.of(new Fact(text, text)),
        List.of(new Fact(text, text)),
        text);
  }

  private static ComparisonPage.Trend trend(String name, int series, double... psnrDb) {
    List<ComparisonPage.Series> lines = new ArrayList<>();
    List<String> runs = new ArrayList<>();
    for (int run = 1; run <= psnrDb.length; run++) {
      runs.add(name + run);
    }
    List<Double> values = new ArrayList<>();
    for (double value : psnrDb) {
      values.add(value);
    }
    for (int i = 0; i < series; i++) {
      lines.add(new ComparisonPage.Series(name + i, values));
    }
    return new ComparisonPage.Trend(name, runs, lines);
  }

  private static RenderedPage shown(ComparisonPage page) {
    return new RenderedPage(new ReportRenderer().render(page));
  }

  @Test
  void textIsEscapedWhereverItComesFrom() {
    ComparisonPage page = page(HOSTILE, List.of(trend(HOSTILE, 1, 30, 31)));
    String html = new ReportRenderer().render(page);
    assertThat(html).doesNotContain("<script>alert").contains("&lt;script&gt;", "default-src");
    RenderedPage shown = new RenderedPage(html);
    assertThat(shown.text("//h1")).isEqualTo(HOSTILE);
    assertThat(shown.texts("//tbody/tr/*")).containsExactly(HOSTILE, HOSTILE);
    assertThat(shown.texts("//tbody/tr/td/@class")).containsExactly("n");
    assertThat(shown.texts("//thead//th")).containsExactly(HOSTILE, HOSTILE);
    assertThat(shown.texts("//figcaption")).containsExactly(HOSTILE);
    assertThat(shown.texts("//dl/div/*")).containsExactly(HOSTILE, HOSTILE, HOSTILE, HOSTILE);
    assertThat(shown.texts("//@id")).doesNotHaveDuplicates();
  }

  /** At most six lines a panel; a run without a value interrupts its line. */
  @Test
  void trendsAreDrawnRunByRun() {
    RenderedPage shown =
        shown(page("a", List.of(trend("b", 7, 30, 31, Double.NaN, 33, Double.POSITIVE_INFINITY))));
    assertThat(shown.texts("//figcaption")).containsExactly("b (1 of 2)", "b (2 of 2)");
    List<String> lines = shown.texts("//*[@class='line']/@d");
    assertThat(lines)
        .hasSize(7)
        .allMatch(line -> line.matches("M[0-9. ]+L[0-9. ]+M[0-9. ]+"))
        .allMatch(line -> line.startsWith("M50.0 "));
    assertThat(shown.texts("//*[local-name()='svg']/*[local-name()='desc']"))
        .hasSize(2)
        .noneMatch(String::isEmpty);
  }

  /**
   * Levels 0 and 100 with 4 % beyond on either side, as any linear axis has: the frame from 36 to
   * 384 is 108 levels wide, so level 0 stands at 36 + 348 * 4 / 108 = 48.9, level 50 in the middle.
   */
  @Test
  void pointsStandAtTheirPlacesAndALineHasNone() {
    ComparisonPage.Trend trend =
        new ComparisonPage.Trend(
            ComparisonPage.Kind.LEVELS,
            "levels",
            List.of(),
            List.of(0.0, 50.0, 100.0),
            List.of(
                new ComparisonPage.Series(
                    "measured",
                    ComparisonPage.Drawn.POINTS,
                    List.of(0.0, 5.0, 10.0),
                    List.of(1.0, 1.0, 1.0)),
                new ComparisonPage.Series(
                    "fitted", ComparisonPage.Drawn.LINE, List.of(0.0, 5.0, 10.0), List.of())));
    RenderedPage shown = shown(page("a", List.of(trend)));
    assertThat(shown.texts("//figure/*/*/*[@class='line']/@d"))
        .singleElement()
        .asString()
        .matches("M48\\.9 [0-9.]+L210\\.0 132\\.0L371\\.1 [0-9.]+");
    assertThat(shown.texts("//figure/*/*/*[@class='marker']")).hasSize(1);
    // a half-width of 1 is 208 / 10.8 = 19.3 high; the first and last are cut at the frame
    assertThat(shown.text("//*[@class='whisker']/@d"))
        .matches("M48\\.9 236\\.0V[0-9.]+M210\\.0 151\\.3V112\\.7M371\\.1 [0-9.]+V28\\.0");
    assertThat(shown.texts("//*[@class='tick mid']")).startsWith("0", "20").endsWith("100");
  }

  @Test
  void manyRunsHaveFewTicks() {
    RenderedPage shown = shown(page("a", List.of(trend("b", 1, new double[100]))));
    assertThat(shown.texts("//*[@class='tick mid']")).hasSize(12).startsWith("b1", "b10");
  }

  @Test
  void whatCannotBeDrawnIsLeftOut() {
    RenderedPage shown = shown(page("a", List.of(trend("b", 2, Double.NaN, Double.NaN))));
    assertThat(shown.texts("//figure")).isEmpty();
    assertThat(shown.texts("//div[@class='panels wide']")).isEmpty();
    assertThat(shown(page("a", List.of(trend("b", 1, 30)))).texts("//figure")).hasSize(1);
  }

  @Test
  void theSameUnderEveryLocale() {
    Locale before = Locale.getDefault();
    List<String> pages = new ArrayList<>();
    for (String tag : List.of("en-US", "de-DE", "tr-TR", "ar-EG")) {
      Locale.setDefault(Locale.forLanguageTag(tag));
      try {
        pages.add(new ReportRenderer().render(page("a", List.of(trend("b", 3, 30.5, 31.25)))));
      } finally {
        Locale.setDefault(before);
      }
    }
    assertThat(pages.stream().distinct()).hasSize(1);
  }

  @Test
  void everyRowHasATextForEveryColumn() {
    List<ComparisonPage.Column> one = List.of(new ComparisonPage.Column("a", false));
    assertThatIllegalArgumentException()
        .isThrownBy(
            () -> new ComparisonPage.Table("t", "", one, List.of(List.of("x"), List.of("x", "y"))))
        .withMessageContaining("'t'");
    assertThatIllegalArgumentException()
        .isThrownBy(() -> new ComparisonPage.Table("t", "", List.of(), List.of()));
  }
}
