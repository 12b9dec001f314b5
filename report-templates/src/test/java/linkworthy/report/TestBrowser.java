package linkworthy.report;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.File;
import java.io.IOException;
import java.io.InputStream;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.logging.Level;
import org.openqa.selenium.By;
import org.openqa.selenium.chrome.ChromeDriver;
import org.openqa.selenium.chrome.ChromeDriverService;
import org.openqa.selenium.chrome.ChromeOptions;
import org.openqa.selenium.logging.LogType;
import org.openqa.selenium.logging.LoggingPreferences;

/** Chromium without a window, pages shown in it, and what it says of them. */
public final class TestBrowser implements AutoCloseable {
  private static final String AXE = "META-INF/resources/webjars/axe-core/4.6.3/axe.min.js";

  private final Path folder;
  private final ChromeDriver driver;

  /**
   * @param folder of the pages; the browser writes a folder {@code profile} into it
   */
  public TestBrowser(Path folder) {
    this.folder = folder;
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
    this.driver =
        new ChromeDriver(
            new ChromeDriverService.Builder()
                .usingDriverExecutable(new File("/usr/bin/chromedriver"))
                .build(),
            options);
  }

  public ChromeDriver driver() {
    return driver;
  }

  /** Loads a page of the folder anew in a window of this width. */
  public void show(String name, int width) {
    show(folder.resolve(name), width);
  }

  /** Loads a page anew in a window of this width. */
  public void show(Path page, int width) {
    driver.executeCdpCommand(
        "Emulation.setDeviceMetricsOverride",
        Map.of("width", width, "height", 800, "deviceScaleFactor", 1, "mobile", false));
    driver.get(page.toUri().toString());
  }

  /** {@code light} or {@code dark}. */
  public void setScheme(String scheme) {
    driver.executeCdpCommand(
        "Emulation.setEmulatedMedia",
        Map.of("features", List.of(Map.of("name", "prefers-color-scheme", "value", scheme))));
  }

  /** The value of an expression as text. */
  public String text(String expression) {
    return String.valueOf(driver.executeScript("return String(" + expression + ")"));
  }

  /** The values of an expression as texts. */
  public List<String> texts(String expression) {
    if (driver.executeScript("return [..." + expression + "].map(String)") instanceof List<?> l) {
      return l.stream().map(String::valueOf).toList();
    }
    throw new AssertionError(expression + " is no list");
  }

  /** The value of an expression, rounded up. */
  public long number(String expression) {
    return Long.parseLong(text("Math.ceil(" + expression + ")"));
  }

  /** Loads a page and holds it to what every page must do in a window of any width. */
  public void requireQuiet(Path page, int width) {
    driver.get("about:blank");
    driver.manage().logs().get(LogType.PERFORMANCE);
    driver.manage().logs().get(LogType.BROWSER);
    show(page, width);
    assertThat(number("innerWidth")).isEqualTo(width);
    assertThat(number("document.documentElement.scrollWidth"))
        .as("%s at %d", page, width)
        .isLessThanOrEqualTo(width);
    assertThat(driver.findElement(By.tagName("body")).getCssValue("margin-top"))
        .as("the policy admits the style sheet")
        .isEqualTo("0px");
    assertThat(text("[...document.images].every(i => i.complete && i.naturalWidth > 0)"))
        .as("pictures of %s", page)
        .isEqualTo("true");
    assertThat(requests()).as("%s", page).hasSize(1);
    assertThat(driver.manage().logs().get(LogType.BROWSER).getAll()).as("%s", page).isEmpty();
  }

  private List<String> requests() {
    return driver.manage().logs().get(LogType.PERFORMANCE).getAll().stream()
        .map(entry -> entry.getMessage())
        .filter(message -> message.contains("\"Network.requestWillBeSent\""))
        .filter(message -> message.contains("\"documentURL\":\"file:"))
        .filter(message -> !message.contains("\"url\":\"data:"))
        .toList();
  }

  /** What breaks a rule of WCAG 2.2 AA on the page that is shown, as far as axe-core knows. */
  public List<String> violations() {
    try (InputStream in = TestBrowser.class.getClassLoader().getResourceAsStream(AXE)) {
      if (in == null) {
        throw new AssertionError(AXE + " is not on the class path");
      }
      driver.executeScript(new String(in.readAllBytes(), StandardCharsets.UTF_8));
    } catch (IOException e) {
      throw new UncheckedIOException(e);
    }
    Object found =
        driver.executeAsyncScript(
            "const done = arguments[0]; axe.run({runOnly: ['wcag2a', 'wcag2aa', 'wcag21a',"
                + " 'wcag21aa', 'wcag22aa']}).then(r => done(r.passes.length < 10"
                + " ? ['too few rules ran'] : r.violations.flatMap(v => v.nodes.slice(0, 4).map("
                + "n => v.id + ': ' + n.html.slice(0, 160) + ' ' + n.failureSummary))))");
    List<String> violations = new ArrayList<>();
    if (found instanceof List<?> list) {
      list.forEach(text -> violations.add(String.valueOf(text)));
    } else {
      violations.add("no result: " + found);
    }
    return violations;
  }

  @Override
  public void close() {
    driver.quit();
  }
}
