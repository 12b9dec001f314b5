package linkworthy.report;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Duration;
import java.util.ArrayList;
import java.util.Base64;
import java.util.List;
import java.util.Map;
import java.util.TreeSet;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;
import org.openqa.selenium.By;
import org.openqa.selenium.Keys;
import org.openqa.selenium.WebElement;
import org.openqa.selenium.interactions.Actions;
import org.openqa.selenium.logging.LogType;
import org.openqa.selenium.print.PageSize;
import org.openqa.selenium.print.PrintOptions;

/** What the script of a page does, and what a page is without it. */
class ReportControlsTest {
  /** Everything that a reader can operate, as it is shown at the moment. */
  private static final String CONTROLS =
      "[...document.querySelectorAll('a[href], button, input, select, textarea, summary,"
          + " [tabindex=\"0\"]')].filter(e => e.checkVisibility({visibilityProperty: true,"
          + " contentVisibilityAuto: true}) && e.tabIndex >= 0)";

  private static final String HOSTILE =
      "<script>alert(1)</script> \"'{{x}} th:utext [[${page}]] [(${page})] \u202etxt.exe = 1,000";

  @TempDir private static Path folder;
  private static TestBrowser browser;

  @BeforeAll
  static void open() throws IOException {
    Files.writeString(folder.resolve("rich.html"), new ReportRenderer().render(SamplePages.rich()));
    Files.writeString(
        folder.resolve("shortlist.html"),
        new ReportRenderer().render(SamplePages.shortlist("dct blocks8 K4 step8")));
    Files.writeString(
        folder.resolve("sketch.html"), new ReportRenderer().render(SamplePages.sketch()));
    Files.writeString(
        folder.resolve("hostile.html"), new ReportRenderer().render(SamplePages.hostile(HOSTILE)));
    Files.writeString(folder.resolve("huge.html"), new ReportRenderer().render(huge()));
    browser = new TestBrowser(folder);
    browser.driver().manage().timeouts().scriptTimeout(Duration.ofMinutes(4));
  }

  @AfterAll
  static void close() {
    browser.close();
  }

  @BeforeEach
  void show() {
    browser.show("rich.html", 1280);
  }

  private static WebElement one(String css) {
    return browser.driver().findElement(By.cssSelector(css));
  }

  private static WebElement button(String name) {
    return browser.driver().findElement(By.xpath("//button[.='" + name + "']"));
  }

  private static String said() {
    return browser.text("document.querySelector('[role=status]').textContent");
  }

  @Test
  void aHeadSortsItsTableUpDownAndBack() {
    String cells = "document.querySelectorAll('.heat tbody tr')].map(r => r.cells[1].textContent";
    List<String> before = browser.texts("[..." + cells + ")");
    WebElement head = one(".heat thead th:nth-child(2) button");
    head.sendKeys(Keys.ENTER);
    List<Double> rising =
        browser.texts("[..." + cells + ")").stream()
            .map(t -> Double.parseDouble(t.strip().split("\\s", -1)[0]))
            .toList();
    assertThat(rising).hasSize(14).isSorted();
    String sort = "document.querySelector('.heat thead th:nth-child(2)').ariaSort";
    assertThat(browser.text(sort)).isEqualTo("ascending");
    assertThat(said()).isEqualTo("Sorted by gaussian on samples, ascending");
    head.sendKeys(Keys.SPACE);
    assertThat(browser.text(sort)).isEqualTo("descending");
    head.sendKeys(Keys.ENTER);
    assertThat(browser.text(sort)).isEqualTo("null");
    assertThat(browser.texts("[..." + cells + ")")).isEqualTo(before);
  }

  @Test
  void aFilterLeavesTheRowsThatHoldItsText() {
    one("#heat input[type=search]").sendKeys("K16");
    assertThat(
            browser.texts(
                "[...document.querySelectorAll('.heat tbody tr')].filter(r =>"
                    + " r.checkVisibility()).map(r => r.cells[0].textContent)"))
        .containsExactly("pca rows K16 step8", "pca blocks8 K16 step8", "dct blocks8 K16 step8");
    assertThat(said()).isEqualTo("3 of 14 rows");
  }

  @Test
  void theMatricesShowTheMeasureThatIsPressed() {
    Figure figure = SamplePages.rich().figures().get(0);
    String cell = "document.querySelector('td[data-f=f0] .main b').textContent";
    Map<String, String> expected =
        Map.of(
            "SSIM",
            Numbers.index(figure.quality().ssimMean()),
            "PSNR of mean MSE",
            Numbers.db(figure.quality().psnrOfMeanMseDb()),
            "5th percentile",
            Numbers.db(figure.quality().psnrP05Db()),
            "PSNR",
            Numbers.db(figure.quality().psnrMeanDb()));
    for (String measure : List.of("SSIM", "PSNR of mean MSE", "5th percentile", "PSNR")) {
      button(measure).sendKeys(Keys.ENTER);
      assertThat(browser.text(cell)).describedAs(measure).isEqualTo(expected.get(measure));
      assertThat(button(measure).getDomAttribute("aria-pressed")).isEqualTo("true");
      assertThat(one("td[data-f=f0] small").isDisplayed()).isEqualTo(measure.equals("PSNR"));
      assertThat(said()).isEqualTo("Measure: " + measure);
    }
    assertThat(browser.number("document.querySelectorAll('[aria-pressed=true]').length"))
        .isEqualTo(2);
  }

  @Test
  void theIntervalThatIsPressedIsTheOneShown() {
    String picture = "td[data-f=f20] .ip";
    String noise = "td[data-f=f20] .in";
    button("picture").click();
    assertThat(one(picture).isDisplayed()).isTrue();
    assertThat(one(noise).isDisplayed()).isFalse();
    button("noise").click();
    assertThat(one(picture).isDisplayed()).isFalse();
    assertThat(one(noise).isDisplayed()).isTrue();
    assertThat(browser.text("getComputedStyle(document.querySelector('path.of-pictures')).display"))
        .isEqualTo("none");
    assertThat(browser.text("getComputedStyle(document.querySelector('path.of-noise')).display"))
        .isEqualTo("inline");
    button("both").click();
    assertThat(one(picture).isDisplayed()).isTrue();
    assertThat(one(noise).isDisplayed()).isTrue();
  }

  @Test
  void aHiddenCodecIsNowhere() {
    one(".choose summary").click();
    WebElement box =
        browser.driver().findElement(By.xpath("//label[contains(., 'pca rows K4 step8')]/input"));
    String seen =
        "[...document.querySelectorAll('[data-c=\"0\"]')]"
            + ".filter(e => e.getClientRects().length > 0).length";
    assertThat(browser.number(seen)).isGreaterThan(20);
    box.sendKeys(Keys.SPACE);
    assertThat(browser.number(seen)).isZero();
    assertThat(said()).isEqualTo("13 of 14 codecs shown");
    assertThat(browser.number("document.querySelector('.families th').colSpan")).isEqualTo(3);
    button("Hide listed").click();
    assertThat(browser.number("document.querySelectorAll('.scroll:not([hidden]) .matrix').length"))
        .isZero();
    button("Show listed").click();
    assertThat(browser.number("document.querySelector('.families th').colSpan")).isEqualTo(4);
    assertThat(browser.number(seen)).isGreaterThan(20);
  }

  @Test
  void aCellOpensToItsFiguresItsTrialAndItsPictures() {
    WebElement first = one("table.matrix td[tabindex='0']");
    first.sendKeys(Keys.ARROW_RIGHT, Keys.ARROW_DOWN, Keys.ARROW_LEFT);
    WebElement cell = browser.driver().switchTo().activeElement();
    assertThat(cell.getDomAttribute("data-f")).isEqualTo("f14");
    assertThat(one(".tip").getText()).contains("SNR 30 dB", "Mean PSNR, dB 24.39");
    cell.sendKeys(Keys.ENTER);
    assertThat(one("dialog").getText())
        .contains("pca rows K4 step8, gaussian on samples, SNR 30 dB")
        .contains("./linkworthy replay FOLDER --trial 0123456789abcdef")
        .contains("No picture of it is shown on this page.");
    new Actions(browser.driver()).sendKeys(Keys.ESCAPE).perform();
    assertThat(one("dialog").isDisplayed()).isFalse();
    assertThat(browser.text("document.activeElement.dataset.f")).isEqualTo("f14");
    String shown = browser.text("document.querySelector('.decoded').dataset.f");
    browser
        .driver()
        .executeScript("document.querySelector('#noise-1 td[data-f=" + shown + "]').click()");
    button("Go to its pictures").sendKeys(Keys.ENTER);
    assertThat(browser.text("document.activeElement.className")).isEqualTo("decoded");
  }

  @Test
  void aTableIsCopiedAsCsvOrOfferedAsSelectedText() {
    browser
        .driver()
        .executeScript(
            "Object.defineProperty(navigator, 'clipboard', {value: {writeText: t => {"
                + " window.copied = t; return Promise.resolve(); }}, configurable: true})");
    one("#heat .tools button").click();
    List<String> lines = browser.text("window.copied").lines().toList();
    assertThat(lines).hasSize(15);
    assertThat(lines.get(0))
        .isEqualTo("Codec,gaussian on samples,salt-and-pepper on samples,burst-loss on packets");
    assertThat(lines.get(1)).startsWith("pca rows K4 step8,");
    browser
        .driver()
        .executeScript(
            "Object.defineProperty(navigator, 'clipboard', {value: undefined});"
                + "document.querySelector('.heat tbody th').textContent = '=1+1, \"x\"'");
    one("#heat .tools button").click();
    assertThat(browser.text("getSelection() + ''")).isNotNull();
    assertThat(browser.text("document.querySelector('dialog textarea').value"))
        .contains("\"'=1+1, \"\"x\"\"\"");
    assertThat(
            browser.number(
                "document.activeElement.selectionEnd - document.activeElement.selectionStart"))
        .isGreaterThan(100);
  }

  @Test
  void aSliderMovesTheBorderBetweenTwoPictures() {
    button("Compare two with a slider").click();
    WebElement range = one("dialog input[type=range]");
    range.sendKeys(Keys.HOME);
    assertThat(one(".wipe .over").getCssValue("clip-path"))
        .isIn("inset(0px)", "inset(0px 0px 0px 0%)");
    range.sendKeys(Keys.END);
    assertThat(one(".wipe .over").getCssValue("clip-path")).isEqualTo("inset(0px 0px 0px 100%)");
    assertThat(browser.texts("[...document.querySelectorAll('dialog option')].map(o => o.text)"))
        .startsWith("clean", "received", "dct blocks8 K4 step8", "mean rows step16");
    assertThat(browser.number("document.querySelector('.wipe img').width")).isEqualTo(384);
  }

  @Test
  void theTabKeyReachesEveryControlAndShowsWhereItIs() {
    List<String> unseen = new ArrayList<>();
    TreeSet<Long> reached = new TreeSet<>();
    browser.driver().executeScript("window.controls = " + CONTROLS);
    long controls = browser.number("controls.length");
    assertThat(controls).isGreaterThan(100);
    for (int i = 0; i < controls + 5; i++) {
      new Actions(browser.driver()).sendKeys(Keys.TAB).perform();
      long at = browser.number("controls.indexOf(document.activeElement)");
      if (at >= 0 && reached.add(at) && !hasVisibleFocus()) {
        unseen.add(browser.text("document.activeElement.outerHTML.slice(0, 200)"));
      }
    }
    assertThat(unseen).isEmpty();
    assertThat(reached).hasSize((int) controls);
  }

  private static boolean hasVisibleFocus() {
    return browser
        .text(
            "(s => s.outlineStyle !== 'none' && parseFloat(s.outlineWidth) > 0"
                + " || document.activeElement.matches('.spot') && parseFloat(s.strokeWidth) > 2)"
                + "(getComputedStyle(document.activeElement))")
        .equals("true");
  }

  @ParameterizedTest
  @CsvSource({
    "sketch.html, light, 1280",
    "sketch.html, dark, 1280",
    "sketch.html, light, 390",
    "sketch.html, dark, 768",
    "shortlist.html, light, 1280",
    "shortlist.html, dark, 390",
  })
  void noAccessibilityRuleIsBroken(String page, String scheme, int width) {
    browser.setScheme(scheme);
    browser.show(page, width);
    browser
        .driver()
        .executeScript("document.querySelectorAll('details').forEach(d => d.open = true)");
    assertThat(browser.violations()).isEmpty();
    if (page.equals("sketch.html")) {
      browser.driver().executeScript("document.querySelector('td[data-f]').click()");
      assertThat(browser.violations()).isEmpty();
    }
  }

  /** Script is kept from running by the page's own policy, with no hash for it. */
  @Test
  void withoutScriptThePageIsCompleteAndHasNoControl() throws IOException {
    String html = Files.readString(folder.resolve("rich.html"));
    Files.writeString(
        folder.resolve("bare.html"),
        html.replaceFirst("script-src &#39;sha256-[^&]+&#39;", "script-src &#39;none&#39;"));
    List<String> full =
        browser.texts("[...document.querySelectorAll('main td')].map(c => c.innerText)");
    browser.show("bare.html", 1280);
    assertThat(browser.number("document.querySelectorAll('button, input, select').length"))
        .isZero();
    assertThat(browser.texts("[...document.querySelectorAll('main td')].map(c => c.innerText)"))
        .hasSameSizeAs(full);
    assertThat(browser.number("document.querySelectorAll('.figures tbody tr').length"))
        .isEqualTo(SamplePages.rich().figures().size());
    assertThat(browser.number("document.querySelectorAll('img, image').length")).isEqualTo(7);
    browser.driver().manage().logs().get(LogType.BROWSER);
  }

  @ParameterizedTest
  @ValueSource(strings = {"rich.html", "shortlist.html"})
  void printsWithHeadsRepeatedAndNothingBeyondThePaper(String page) {
    browser.show(page, 1280);
    PrintOptions options = new PrintOptions();
    options.setPageSize(new PageSize(21.0, 29.7));
    byte[] pdf = Base64.getDecoder().decode(browser.driver().print(options).getContent());
    assertThat(new String(pdf, 0, 5, StandardCharsets.ISO_8859_1)).isEqualTo("%PDF-");
    browser.driver().executeCdpCommand("Emulation.setEmulatedMedia", Map.of("media", "print"));
    // A4 landscape less the margins is 275 mm, 1039 pixels
    browser.show(page, 1039);
    assertThat(browser.number("document.documentElement.scrollWidth")).isLessThanOrEqualTo(1039);
    assertThat(browser.text("getComputedStyle(document.querySelector('thead')).display"))
        .isEqualTo("table-header-group");
    // Chromium repeats no head that holds the box of a button
    assertThat(browser.text("getComputedStyle(document.querySelector('.sort')).display"))
        .isEqualTo("contents");
    assertThat(browser.text("getComputedStyle(document.querySelector('tr')).breakInside"))
        .isEqualTo("avoid");
    assertThat(browser.number("document.querySelectorAll('.tools').length")).isPositive();
    assertThat(
            browser.number(
                "[...document.querySelectorAll('.tools, nav')].filter(e => e.checkVisibility()).length"))
        .isZero();
    browser.driver().executeCdpCommand("Emulation.setEmulatedMedia", Map.of("media", ""));
  }

  @Test
  void hostileNamesAreTextInEveryWindow() {
    String shown = HOSTILE.replace('\u202e', '\ufffd');
    browser.show("hostile.html", 1280);
    assertThat(one("h1").getText()).isEqualTo(shown);
    assertThat(browser.driver().getTitle()).isEqualTo(shown + " - Linkworthy report");
    browser.driver().executeScript("document.querySelector('td[data-f]').click()");
    assertThat(one("dialog h2").getText()).contains(shown);
    assertThat(one("dialog code").getText()).endsWith("--trial " + shown);
    button("Close").click();
    one("td[data-f]").sendKeys(Keys.ARROW_UP);
    assertThat(one(".tip").getDomProperty("textContent")).contains(shown);
    button("Compare two with a slider").click();
    assertThat(browser.texts("[...document.querySelectorAll('dialog option')].map(o => o.text)"))
        .contains(shown);
    assertThat(browser.number("document.querySelectorAll('script').length")).isEqualTo(1);
    assertThat(browser.driver().manage().logs().get(LogType.BROWSER).getAll()).isEmpty();
  }

  /** 200 codecs of five families, one noise of 40 severities, 60 pictures. */
  private static ReportPage huge() {
    List<Figure> figures = new ArrayList<>();
    List<Particulars.Spread> spreads = new ArrayList<>();
    for (int severity = 40; severity > 0; severity--) {
      Condition noise = SamplePages.condition("gaussian", "samples", "snr-db", severity, severity);
      for (int i = 0; i < 200; i++) {
        CodecColumn codec =
            SamplePages.codec(
                List.of("pca", "dct", "wht", "jpeg", "mean").get(i / 40),
                "rows",
                "K" + i + " step8");
        double psnr = 20 + (i % 40) / 4.0 + severity / 10.0 + i / 1000.0;
        figures.add(SamplePages.bare(noise, codec, psnr, 0.1 + i % 40));
        List<Double> pictures = new ArrayList<>();
        for (int picture = 0; picture < 60; picture++) {
          pictures.add(psnr + picture / 20.0);
        }
        spreads.add(new Particulars.Spread(noise, codec.label(), pictures));
      }
    }
    return SamplePages.with(SamplePages.page(figures), spreads);
  }

  @Test
  void manyCodecsAndSeveritiesStayUsable() throws IOException {
    assertThat(Files.size(folder.resolve("huge.html"))).isLessThan(15_000_000);
    browser.show("huge.html", 1280);
    // 200 codecs in tables of at most 14 columns
    assertThat(browser.number("document.querySelectorAll('.noise table.matrix').length"))
        .isEqualTo(15);
    assertThat(browser.number("document.querySelectorAll('.figures tbody tr').length"))
        .isEqualTo(8000);
    // five families share the 42 codecs that are drawn, six lines a panel at most
    assertThat(browser.number("document.querySelectorAll('.noise svg g[data-c]').length"))
        .isEqualTo(42);
    assertThat(browser.number("document.querySelectorAll('.strip-plot g[data-c]').length"))
        .isEqualTo(42);
    assertThat(one("#rate > p").getText()).contains("Plots show 42 of 200 codecs");
    one(".choose summary").click();
    one(".choose input[type=search]").sendKeys("jpeg");
    button("Hide listed").click();
    assertThat(said()).isEqualTo("160 of 200 codecs shown");
    assertThat(browser.number("document.documentElement.scrollWidth")).isLessThanOrEqualTo(1280);
  }
}
