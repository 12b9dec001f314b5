package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.File;
import java.nio.file.Path;
import java.util.List;
import java.util.Map;
import java.util.logging.Level;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import org.openqa.selenium.By;
import org.openqa.selenium.chrome.ChromeDriver;
import org.openqa.selenium.chrome.ChromeDriverService;
import org.openqa.selenium.chrome.ChromeOptions;
import org.openqa.selenium.logging.LogType;
import org.openqa.selenium.logging.LoggingPreferences;

/** The report of a study that was really run, as a browser lays it out. */
class RealReportInBrowserTest {
  @TempDir private static Path folder;
  private static ChromeDriver browser;

  @BeforeAll
  static void open() {
    String study = SmallStudy.in(folder).toString();
    assertThat(Program.run(folder, "assess", study, "--out", folder + "/out", "--quiet").code())
        .isZero();
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

  @ParameterizedTest
  @ValueSource(ints = {390, 1280})
  void fitsItsWindowAsksForNothingAndComplainsOfNothing(int width) {
    browser.get("about:blank");
    browser.manage().logs().get(LogType.PERFORMANCE);
    browser.manage().logs().get(LogType.BROWSER);
    browser.executeCdpCommand(
        "Emulation.setDeviceMetricsOverride",
        Map.of("width", width, "height", 800, "deviceScaleFactor", 1, "mobile", false));
    browser.get(folder.resolve("out/report.html").toUri().toString());
    assertThat(browser.executeScript("return innerWidth")).isEqualTo((long) width);
    assertThat(browser.executeScript("return document.documentElement.scrollWidth <= innerWidth"))
        .isEqualTo(true);
    assertThat(browser.getTitle()).isEqualTo("small - Linkworthy report");
    assertThat(browser.findElement(By.tagName("h1")).getText()).isNotBlank();
    assertThat(browser.findElements(By.cssSelector("table.matrix"))).hasSizeGreaterThan(2);
    assertThat(browser.findElement(By.tagName("body")).getText())
        .contains("What does a small study show?", "K2");
    assertThat(requests()).singleElement().asString().contains("report.html");
    assertThat(browser.manage().logs().get(LogType.BROWSER).getAll()).isEmpty();
  }

  private static List<String> requests() {
    return browser.manage().logs().get(LogType.PERFORMANCE).getAll().stream()
        .map(entry -> entry.getMessage())
        .filter(message -> message.contains("\"Network.requestWillBeSent\""))
        .filter(message -> message.contains("\"documentURL\":\"file:"))
        .filter(message -> !message.contains("\"url\":\"data:"))
        .toList();
  }
}
