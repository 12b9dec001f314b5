package linkworthy.report;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import org.openqa.selenium.By;

/** The pages as a browser lays them out. */
class ReportInBrowserTest {
  @TempDir private static Path folder;
  private static TestBrowser browser;

  @BeforeAll
  static void open() throws IOException {
    Files.writeString(folder.resolve("full.html"), new ReportRenderer().render(SamplePages.rich()));
    Files.writeString(folder.resolve("wide.html"), new ReportRenderer().render(wide()));
    browser = new TestBrowser(folder);
  }

  @AfterAll
  static void close() {
    browser.close();
  }

  /** Forty codecs, long labels and long texts. */
  private static ReportPage wide() {
    Condition noise = SamplePages.condition("gaussian", "samples", "snr-db", 20, 20);
    List<Figure> figures = new ArrayList<>();
    for (int i = 0; i < 40; i++) {
      String label = "a-vendor-codec-with-a-name-that-has-no-place-to-break-" + i;
      CodecColumn codec =
          i % 2 == 0
              ? new CodecColumn(label, "", "", "", "")
              : SamplePages.codec("pca", "rows", "K" + i + " step8");
      figures.add(SamplePages.bare(noise, codec, 20 + i, 0.1 + i));
    }
    return SamplePages.page(figures);
  }

  @ParameterizedTest
  @ValueSource(ints = {320, 390, 768, 1024, 1280, 1920})
  void theBodyNeverScrollsSideways(int width) {
    for (String name : List.of("full.html", "wide.html")) {
      browser.show(name, width);
      assertThat(browser.number("innerWidth")).isEqualTo(width);
      assertThat(browser.number("document.documentElement.scrollWidth"))
          .describedAs("%s at %d", name, width)
          .isLessThanOrEqualTo(width);
    }
  }

  @Test
  void fourteenCodecsFitALaptop() {
    browser.show("full.html", 1280);
    assertThat(
            browser.number(
                "Math.max(...[...document.querySelectorAll('.scroll')]"
                    + ".map(e => e.scrollWidth - e.clientWidth))"))
        .isLessThanOrEqualTo(0);
  }

  @Test
  void theFirstScreenOfALaptopHoldsTheAnswerAndTheFirstTable() {
    browser.show("full.html", 1280);
    assertThat(
            browser.number("document.querySelector('table.matrix').getBoundingClientRect().bottom"))
        .isLessThanOrEqualTo(800);
  }

  @Test
  void theFirstColumnStaysWhileATableScrollsOnAPhone() {
    browser.show("full.html", 390);
    String region = "document.querySelector('.scroll')";
    assertThat(browser.number(region + ".scrollWidth - " + region + ".clientWidth")).isPositive();
    String left = region + ".querySelector('tbody th').getBoundingClientRect().left";
    long before = browser.number(left);
    browser.driver().executeScript(region + ".scrollLeft = 300");
    assertThat(browser.number(region + ".scrollLeft")).isEqualTo(300);
    assertThat(browser.number(left)).isEqualTo(before);
    assertThat(browser.driver().findElement(By.cssSelector(".scroll")).getDomAttribute("tabindex"))
        .isEqualTo("0");
  }

  @Test
  void labelsOfThePlotsStayInsideTheirDrawing() {
    for (String name : List.of("full.html", "wide.html")) {
      browser.show(name, 1280);
      assertThat(
              browser.number(
                  "[...document.querySelectorAll('figure svg')].flatMap(s =>"
                      + " [...s.querySelectorAll('text')].filter(t => { const b = t.getBBox();"
                      + " return b.x < -1 || b.x + b.width > s.viewBox.baseVal.width + 1"
                      + " || b.y < 0 || b.y + b.height > s.viewBox.baseVal.height; })).length"))
          .describedAs(name)
          .isZero();
    }
  }

  @Test
  void thePageAsksForNothingAndComplainsOfNothing() {
    browser.requireQuiet(folder.resolve("full.html"), 1280);
    assertThat(browser.driver().getTitle()).isEqualTo("yard-cameras - Linkworthy report");
  }
}
