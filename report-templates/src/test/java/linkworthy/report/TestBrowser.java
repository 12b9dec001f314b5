package linkworthy.report;

import java.io.File;
import java.nio.file.Path;
import java.util.List;
import java.util.Map;
import java.util.logging.Level;
import org.openqa.selenium.chrome.ChromeDriver;
import org.openqa.selenium.chrome.ChromeDriverService;
import org.openqa.selenium.chrome.ChromeOptions;
import org.openqa.selenium.logging.LogType;
import org.openqa.selenium.logging.LoggingPreferences;

/** Chromium without a window, and pages of a folder shown in it. */
final class TestBrowser implements AutoCloseable {
  private final Path folder;
  private final ChromeDriver driver;

  TestBrowser(Path folder) {
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
    ChromeDriverService service =
        new ChromeDriverService.Builder()
            .usingDriverExecutable(new File("/usr/bin/chromedriver"))
            .build();
    this.driver = new ChromeDriver(service, options);
  }

  ChromeDriver driver() {
    return driver;
  }

  /** Loads a page anew in a window of this width. */
  void show(String name, int width) {
    driver.executeCdpCommand(
        "Emulation.setDeviceMetricsOverride",
        Map.of("width", width, "height", 800, "deviceScaleFactor", 1, "mobile", false));
    driver.get(folder.resolve(name).toUri().toString());
  }

  /** {@code light} or {@code dark}. */
  void setScheme(String scheme) {
    driver.executeCdpCommand(
        "Emulation.setEmulatedMedia",
        Map.of("features", List.of(Map.of("name", "prefers-color-scheme", "value", scheme))));
  }

  /** The value of an expression, rounded up. */
  long number(String expression) {
    if (driver.executeScript("return Math.ceil(" + expression + ")") instanceof Number number) {
      return number.longValue();
    }
    throw new AssertionError(expression + " is no number");
  }

  /** The value of an expression as text. */
  String text(String expression) {
    return String.valueOf(driver.executeScript("return String(" + expression + ")"));
  }

  /** The values of an expression as texts. */
  List<String> texts(String expression) {
    if (driver.executeScript("return [..." + expression + "].map(String)") instanceof List<?> l) {
      return l.stream().map(String::valueOf).toList();
    }
    throw new AssertionError(expression + " is no list");
  }

  @Override
  public void close() {
    driver.quit();
  }
}
