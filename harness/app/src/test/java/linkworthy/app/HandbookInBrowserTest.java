package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.File;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.logging.Level;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import java.util.stream.Stream;
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

/** The handbook and the start page over runs, as a browser lays them out. */
class HandbookInBrowserTest {
  @TempDir private static Path folder;
  private static ChromeDriver browser;

  @BeforeAll
  static void open() {
    assertThat(Program.run(folder, "handbook", "--out", folder + "/book").code()).isZero();
    String study = SmallStudy.in(folder).toString();
    assertThat(Program.run(folder, "assess", study, "--out", folder + "/runs/a", "--quiet").code())
        .isZero();
    assertThat(Program.run(folder, "report", "--index", folder + "/runs").code()).isZero();
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

  private static List<Path> pages() throws IOException {
    List<Path> pages = new ArrayList<>(List.of(folder.resolve("runs/index.html")));
    try (Stream<Path> files = Files.list(folder.resolve("book"))) {
      files.sorted().forEach(pages::add);
    }
    assertThat(pages).hasSizeGreaterThan(10);
    return pages;
  }

  @ParameterizedTest
  @ValueSource(ints = {390, 768, 1280})
  void everyPageFitsItsWindowAsksForNothingAndComplainsOfNothing(int width) throws IOException {
    browser.executeCdpCommand(
        "Emulation.setDeviceMetricsOverride",
        Map.of("width", width, "height", 800, "deviceScaleFactor", 1, "mobile", false));
    for (Path page : pages()) {
      browser.get("about:blank");
      browser.manage().logs().get(LogType.PERFORMANCE);
      browser.manage().logs().get(LogType.BROWSER);
      browser.get(page.toUri().toString());
      assertThat(browser.executeScript("return document.documentElement.scrollWidth <= innerWidth"))
          .as("%s at %d", page, width)
          .isEqualTo(true);
      assertThat(browser.findElement(By.tagName("body")).getCssValue("margin-top"))
          .as("the policy admits the style sheet")
          .isEqualTo("0px");
      assertThat(
              browser.executeScript(
                  "return [...document.images].every(i => i.complete && i.naturalWidth > 0)"))
          .as("pictures of %s", page)
          .isEqualTo(true);
      assertThat(requests()).as("%s", page).hasSize(1);
      assertThat(browser.manage().logs().get(LogType.BROWSER).getAll()).as("%s", page).isEmpty();
    }
  }

  private static List<String> requests() {
    return browser.manage().logs().get(LogType.PERFORMANCE).getAll().stream()
        .map(entry -> entry.getMessage())
        .filter(message -> message.contains("\"Network.requestWillBeSent\""))
        .filter(message -> message.contains("\"documentURL\":\"file:"))
        .filter(message -> !message.contains("\"url\":\"data:"))
        .toList();
  }

  @Test
  void everyLinkLeadsToAPageAndToAPlaceInIt() throws IOException {
    int anchors = 0;
    for (Path page : pages()) {
      String html = Files.readString(page);
      assertThat(html)
          .contains("default-src &#39;none&#39;")
          .doesNotContain("<script", "src=\"http");
      Matcher link = Pattern.compile("href=\"([^\"#]*)(?:#([^\"]*))?\"").matcher(html);
      while (link.find()) {
        if (link.group(1).matches("(data:|https://).*")) {
          continue;
        }
        Path to = link.group(1).isEmpty() ? page : page.resolveSibling(link.group(1));
        assertThat(to).as("%s links to it", page).isRegularFile();
        if (link.group(2) != null) {
          assertThat(Files.readString(to)).as("from %s", page).contains("id=\"" + link.group(2));
          anchors++;
        }
      }
    }
    assertThat(anchors).isGreaterThan(12);
  }

  @Test
  void everyPageIsInTheNavigationOfEveryPage() throws IOException {
    for (Path page : pages().subList(1, pages().size())) {
      browser.get(page.toUri().toString());
      assertThat(browser.findElements(By.cssSelector("nav a"))).hasSize(pages().size() - 1);
      assertThat(browser.findElements(By.cssSelector("nav a[aria-current=page]"))).hasSize(1);
      assertThat(browser.findElements(By.cssSelector("main h1"))).hasSize(1);
    }
  }

  @Test
  void theHandbookStaysInItsFolder() {
    Outcome outcome = Program.run(folder, "handbook", "--out", folder + "/study.yaml");
    assertThat(outcome.code()).isEqualTo(Main.BAD_INPUT);
    assertThat(outcome.errors()).singleElement().asString().contains("accepted: a folder");
  }
}
