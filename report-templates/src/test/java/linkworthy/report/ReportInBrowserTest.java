package linkworthy.report;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.File;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.logging.Level;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import org.openqa.selenium.By;
import org.openqa.selenium.chrome.ChromeDriver;
import org.openqa.selenium.chrome.ChromeDriverService;
import org.openqa.selenium.chrome.ChromeOptions;
import org.openqa.selenium.logging.LogType;
import org.openqa.selenium.logging.LoggingPreferences;

/** The pages as a browser lays them out. */
class ReportInBrowserTest {
  @TempDir private static Path folder;
  private static ChromeDriver browser;

  @BeforeAll
  static void open() throws IOException {
    Files.writeString(folder.resolve("full.html"), new ReportRenderer().render(SamplePages.full()));
    Files.writeString(folder.resolve("wide.html"), new ReportRenderer().render(wide()));
    LoggingPreferences logs = new LoggingPreferences();
    logs.enable(LogType.BROWSER, Level.ALL);
    logs.enable(LogType.PERFORMANCE, Level.ALL);
    ChromeOptions options = new ChromeOptions();
    options.setBinary("/usr/bin/chromium");
    options.setCapability("goog:loggingPrefs", logs);
    options.addArguments(
        "--headless",
        "--no-sandbox",
        "--disable-gpu",
        "--disable-quic",
        "--no-first-run",
        "--disable-background-networking",
        "--disable-component-update",
        "--disable-sync",
        "--user-data-dir=" + folder.resolve("profile"));
    ChromeDriverService service =
        new ChromeDriverService.Builder()
            .usingDriverExecutable(new File("/usr/bin/chromedriver"))
            .build();
    browser = new ChromeDriver(service, options);
  }

  @AfterAll
  static void close() {
    browser.quit();
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

  private static void show(String name, int width) {
    browser.executeCdpCommand(
        "Emulation.setDeviceMetricsOverride",
        Map.of("width", width, "height", 800, "deviceScaleFactor", 1, "mobile", false));
    browser.get(folder.resolve(name).toUri().toString());
  }

  private static long number(String script) {
    if (browser.executeScript("return Math.ceil(" + script + ")") instanceof Number number) {
      return number.longValue();
    }
    throw new AssertionError(script + " is no number");
  }

  @ParameterizedTest
  @ValueSource(ints = {320, 390, 768, 1024, 1280, 1920})
  void theBodyNeverScrollsSideways(int width) {
    for (String name : List.of("full.html", "wide.html")) {
      show(name, width);
      assertThat(number("innerWidth")).isEqualTo(width);
      assertThat(number("document.documentElement.scrollWidth"))
          .describedAs("%s at %d", name, width)
          .isLessThanOrEqualTo(width);
    }
  }

  @Test
  void fourteenCodecsFitALaptop() {
    show("full.html", 1280);
    assertThat(
            number(
                "Math.max(...[...document.querySelectorAll('.scroll')]"
                    + ".map(e => e.scrollWidth - e.clientWidth))"))
        .isLessThanOrEqualTo(0);
  }

  @Test
  void theFirstScreenOfALaptopHoldsTheAnswerAndTheFirstTable() {
    show("full.html", 1280);
    assertThat(number("document.querySelector('table.matrix').getBoundingClientRect().bottom"))
        .isLessThanOrEqualTo(800);
  }

  @Test
  void theFirstColumnStaysWhileATableScrollsOnAPhone() {
    show("full.html", 390);
    String region = "document.querySelector('.scroll')";
    assertThat(number(region + ".scrollWidth - " + region + ".clientWidth")).isPositive();
    String left = region + ".querySelector('tbody th').getBoundingClientRect().left";
    long before = number(left);
    browser.executeScript(region + ".scrollLeft = 300");
    assertThat(number(region + ".scrollLeft")).isEqualTo(300);
    assertThat(number(left)).isEqualTo(before);
    assertThat(browser.findElement(By.cssSelector(".scroll")).getDomAttribute("tabindex"))
        .isEqualTo("0");
  }

  @Test
  void labelsOfThePlotsStayInsideTheirDrawing() {
    for (String name : List.of("full.html", "wide.html")) {
      show(name, 1280);
      assertThat(
              number(
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
    browser.get("about:blank");
    browser.manage().logs().get(LogType.PERFORMANCE);
    browser.manage().logs().get(LogType.BROWSER);
    show("full.html", 1280);
    List<String> requests =
        browser.manage().logs().get(LogType.PERFORMANCE).getAll().stream()
            .map(entry -> entry.getMessage())
            .filter(message -> message.contains("\"Network.requestWillBeSent\""))
            .filter(message -> message.contains("\"documentURL\":\"file:"))
            .filter(message -> !message.contains("\"url\":\"data:,\""))
            .toList();
    assertThat(requests).singleElement().asString().contains("full.html");
    assertThat(browser.manage().logs().get(LogType.BROWSER).getAll()).isEmpty();
    assertThat(browser.getTitle()).isEqualTo("yard-cameras - Linkworthy report");
    assertThat(browser.findElement(By.tagName("body")).getCssValue("margin-left"))
        .describedAs("the policy admits the style sheet")
        .isEqualTo("0px");
  }
}
