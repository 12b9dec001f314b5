package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Clock;
import java.time.Duration;
import java.util.ArrayList;
import java.util.List;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import java.util.stream.Stream;
import linkworthy.report.TestBrowser;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.MethodSource;
import org.junit.jupiter.params.provider.ValueSource;
import org.openqa.selenium.By;
import org.openqa.selenium.Keys;

/** Every page but the report, as the commands write it and a browser lays it out. */
class PagesInBrowserTest {
  private static final String HOSTILE =
      "<script>alert(1)</script> <img src=x> \"'{{x}} th:utext [[${page}]] \u202etxt";

  /** What a codec may be labelled: up to 64 characters. */
  private static final String HOSTILE_LABEL =
      "<script>alert(1)</script> \"'{{x}} [[${page}]] &amp; th:utext";

  /** What a file may be named. */
  private static final String HOSTILE_FILE = "<img src=x> [[${page}]].csv";

  @TempDir private static Path folder;
  private static TestBrowser browser;

  @BeforeAll
  static void open() throws IOException {
    run(0, "handbook", "--out", folder + "/book");
    String study =
        SmallStudy.write(
                folder,
                SmallStudy.TEXT
                    .replace("What does a small study show?", quoted(HOSTILE))
                    .replace("keep: [4]", "label: " + quoted(HOSTILE_LABEL) + "\n    keep: [4]"))
            .toString();
    Path a = folder.resolve("runs/a");
    Path b = folder.resolve("runs/b");
    run(0, "assess", study, "--out", "" + a, "--quiet");
    Clock later = Clock.offset(Program.CLOCK, Duration.ofDays(1));
    assertThat(
            Program.run(
                folder, later, false, "assess", study, "--out", "" + b, "--quiet", "--set",
                "seed=8"))
        .isEqualTo(new Outcome(0, "", ""));
    run(0, "report", "--index", folder + "/runs");
    Files.createDirectories(folder.resolve("pages"));
    run(0, "drift", "" + a, "" + b, "--html", page("drift"));
    run(0, "drift", "" + a, "" + a, "--html", page("identical"));
    run(0, "drift", "--over", folder + "/runs", "--html", page("history"));
    Path need = folder.resolve("needs.yaml");
    Files.writeString(need, "needs: [{measure: bits-per-pixel, at-most: 1000}]");
    run(0, "shortlist", "" + a, "--need", "" + need, "--html", page("shortlist"));
    run(0, "noise", "fit", "" + trace(), "--html", page("trace"));
    String frames = NoiseFitTest.frames(folder.resolve("frames"), 3).toString();
    run(0, "noise", "fit", "--pictures", frames, "--html", page("frames"));
    run(0, "noise", "fit", "--pictures", frames, "--single", "--html", page("single"));
    run(0, "recheck", "" + a, "--sample", "9", "--quiet", "--html", page("recheck"));
    run(0, "recheck", "" + a, "--all", "--quiet", "--html", page("recheck-all"));
    alter(b.resolve("trials.csv"));
    run(1, "recheck", "" + b, "--all", "--quiet", "--html", page("recheck-altered"));
    browser = new TestBrowser(folder);
  }

  @AfterAll
  static void close() {
    browser.close();
  }

  private static String page(String name) {
    return folder + "/pages/" + name + ".html";
  }

  private static void run(int code, String... arguments) {
    Outcome outcome = Program.run(folder, arguments);
    assertThat(outcome.err()).isEmpty();
    assertThat(outcome.code()).as("%s", outcome.out()).isEqualTo(code);
  }

  /** As YAML takes it. */
  private static String quoted(String text) {
    return "\"" + text.replace("\"", "\\\"").replace("\u202e", "\\u202e") + "\"";
  }

  private static Path trace() throws IOException {
    StringBuilder lines = new StringBuilder();
    for (int i = 0; i < 300; i++) {
      lines.append("0\n".repeat(5 + i % 7)).append("1\n".repeat(1 + i % 3 * (i % 4)));
    }
    return Files.writeString(folder.resolve(HOSTILE_FILE), lines);
  }

  /** Changes the payload's bits, on which no cell depends, in a dozen rows without quotes. */
  private static void alter(Path trials) throws IOException {
    List<String> lines = new ArrayList<>(Files.readAllLines(trials));
    int altered = 0;
    for (int i = 20; altered < 12; i++) {
      List<String> fields = new ArrayList<>(List.of(lines.get(i).split(",", -1)));
      if (!lines.get(i).contains("\"")) {
        fields.set(18, fields.get(18) + "0");
        lines.set(i, String.join(",", fields));
        altered++;
      }
    }
    Files.writeString(trials, String.join("\n", lines) + "\n");
  }

  private static List<Path> in(String name) throws IOException {
    try (Stream<Path> files = Files.list(folder.resolve(name))) {
      return files.filter(file -> file.toString().endsWith(".html")).sorted().toList();
    }
  }

  /** Those that answer a question, and the start page over runs. */
  static List<Path> answers() throws IOException {
    List<Path> pages = new ArrayList<>(in("pages"));
    assertThat(pages).hasSize(10);
    pages.add(folder.resolve("runs/index.html"));
    return pages;
  }

  private static List<Path> handbook() throws IOException {
    List<Path> pages = in("book");
    assertThat(pages).hasSizeGreaterThan(10);
    return pages;
  }

  @ParameterizedTest
  @ValueSource(ints = {390, 768, 1280})
  void everyPageFitsItsWindowAsksForNothingAndComplainsOfNothing(int width) throws IOException {
    for (Path page : answers()) {
      browser.requireQuiet(page, width);
    }
    for (Path page : handbook()) {
      browser.requireQuiet(page, width);
    }
  }

  @ParameterizedTest
  @CsvSource({"light, 1280", "dark, 1280", "light, 390", "dark, 768"})
  void noAccessibilityRuleIsBroken(String scheme, int width) throws IOException {
    browser.setScheme(scheme);
    List<Path> pages = new ArrayList<>(answers());
    pages.addAll(handbook().subList(0, 3));
    for (Path page : pages) {
      browser.show(page, width);
      assertThat(browser.violations()).as("%s", page).isEmpty();
    }
  }

  @ParameterizedTest
  @MethodSource("answers")
  void namesFromOutsideArePlainText(Path page) throws IOException {
    browser.show(page, 1280);
    assertThat(browser.number("document.querySelectorAll('script').length")).isEqualTo(1);
    assertThat(browser.number("document.querySelectorAll('main img').length")).isZero();
    String text = browser.text("document.body.innerText");
    assertThat(text).doesNotContain("NaN", "null", "\u202e");
    String name = page.getFileName().toString();
    if (name.matches("(shortlist|index)\\.html")) {
      assertThat(text).contains(HOSTILE.replace('\u202e', '\ufffd'));
    }
    if (name.matches("(drift|history|shortlist)\\.html")) {
      assertThat(text).contains(HOSTILE_LABEL);
    } else if (name.equals("trace.html")) {
      assertThat(text).contains(HOSTILE_FILE);
    }
  }

  /** Script is kept from running by the page's own policy, with no hash for it. */
  @ParameterizedTest
  @MethodSource("answers")
  void withoutScriptThePageIsCompleteAndHasNoControl(Path page) throws IOException {
    String rows = "[...document.querySelectorAll('main tr')].filter(r => r.checkVisibility())";
    browser.show(page, 1280);
    String cells = browser.text(rows + ".flatMap(r => [...r.cells]).map(c => c.innerText)");
    long shown = browser.number(rows + ".length");
    assertThat(shown).isGreaterThan(1);
    assertThat(browser.number("document.querySelectorAll('main .tools button').length"))
        .isEqualTo(browser.number("document.querySelectorAll('main table').length"));
    Path bare = folder.resolve("bare.html");
    Files.writeString(
        bare,
        Files.readString(page)
            .replaceFirst("script-src &#39;sha256-[^&]+&#39;", "script-src &#39;none&#39;"));
    browser.show(bare, 1280);
    assertThat(browser.number("document.querySelectorAll('button, input').length")).isZero();
    assertThat(browser.text(rows + ".flatMap(r => [...r.cells]).map(c => c.innerText)"))
        .isEqualTo(cells);
  }

  @Test
  void tablesSortFilterAndAreCopied() {
    browser.show(Path.of(page("recheck-altered")), 1280);
    String shown =
        "[...document.querySelectorAll('main table')[0].tBodies[0].rows].filter(r =>"
            + " r.checkVisibility()).map(r => r.cells[0].innerText)";
    assertThat(browser.text(shown)).isEqualTo("1,2,3,4,5,6,7,8,9,10,11,12");
    browser
        .driver()
        .findElement(By.cssSelector("main thead button"))
        .sendKeys(Keys.ENTER, Keys.ENTER);
    assertThat(browser.text(shown)).isEqualTo("12,11,10,9,8,7,6,5,4,3,2,1");
    browser.driver().findElement(By.cssSelector("main input[type=search]")).sendKeys("line 21,");
    assertThat(browser.text(shown)).isEqualTo("1");
    browser
        .driver()
        .executeScript(
            "Object.defineProperty(navigator, 'clipboard', {value: {writeText: t => {"
                + " window.copied = t; return Promise.resolve(); }}, configurable: true})");
    browser.driver().findElement(By.cssSelector("main .tools button")).sendKeys(Keys.ENTER);
    assertThat(browser.text("window.copied").lines())
        .hasSize(2)
        .last()
        .asString()
        .contains("payload_bits recorded", "./linkworthy replay ");
  }

  @Test
  void everyMismatchHasTheCommandThatShowsIt() {
    browser.show(Path.of(page("recheck-altered")), 1280);
    assertThat(browser.text("document.querySelector('.sentence').innerText"))
        .isEqualTo("The record does not stand: 12 mismatches were found.");
    String command = browser.text("document.querySelector('td.code').innerText");
    Matcher words =
        Pattern.compile("\\./linkworthy (replay) (\\S+) (--trial) ([0-9a-f]{16})").matcher(command);
    assertThat(words.matches()).as(command).isTrue();
    Outcome replayed =
        Program.run(
            folder,
            words.group(1),
            words.group(2),
            words.group(3),
            words.group(4),
            "--out",
            folder + "/replayed");
    assertThat(replayed.out()).contains("payload_bits");
    assertThat(replayed.code()).isEqualTo(Main.NO);
  }

  /** A point for each level, the line through them, and both within the frame. */
  @Test
  void thePageOfFramesDrawsVarianceOverLevelWithItsLine() {
    browser.show(Path.of(page("frames")), 1280);
    long levels = browser.number("document.querySelectorAll('main tbody tr').length");
    assertThat(levels).isGreaterThan(10);
    String drawn = "document.querySelector('figure > svg g:nth-of-type(%d) %s').getAttribute('d')";
    assertThat(browser.text(drawn.formatted(1, ".whisker")).split("V", -1))
        .hasSize((int) levels + 1);
    assertThat(browser.text(drawn.formatted(2, ".line")).split("[ML]", -1))
        .hasSize((int) levels + 1);
    assertThat(browser.number("document.querySelectorAll('figure > svg .line').length"))
        .isEqualTo(1);
    assertThat(
            browser.number(
                "[...document.querySelectorAll('figure > svg :is(.line, .marker)')].filter(p => {"
                    + " const b = p.getBBox(); return b.x < 30 || b.x + b.width > 392 || b.y < 20"
                    + " || b.y + b.height > 242; }).length"))
        .isZero();
  }

  /** A table and a plot for each of clean, gaussian, salt-and-pepper and burst-loss. */
  @Test
  void theHistoryHasATableAndAPlotForEachNoise() {
    browser.show(Path.of(page("history")), 1280);
    assertThat(
            browser.text(
                "[...document.querySelectorAll('#tables section')].map(s =>"
                    + " s.querySelectorAll('table').length + '/' +"
                    + " s.querySelectorAll('figure').length)"))
        .isEqualTo("1/0,1/1,1/1,1/1,1/1");
  }

  @Test
  void everyLinkLeadsToAPageAndToAPlaceInIt() throws IOException {
    int anchors = 0;
    List<Path> pages = new ArrayList<>(handbook());
    pages.addAll(answers());
    for (Path page : pages) {
      String html = Files.readString(page);
      assertThat(html).contains("default-src &#39;none&#39;").doesNotContain("src=\"http");
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
  void everyPageOfTheHandbookIsInTheNavigationOfEveryOther() throws IOException {
    for (Path page : handbook()) {
      browser.show(page, 1280);
      assertThat(Files.readString(page)).doesNotContain("<script");
      assertThat(browser.driver().findElements(By.cssSelector("nav a"))).hasSize(handbook().size());
      assertThat(browser.driver().findElements(By.cssSelector("nav a[aria-current=page]")))
          .hasSize(1);
      assertThat(browser.driver().findElements(By.cssSelector("main h1"))).hasSize(1);
    }
  }

  @Test
  void theHandbookStaysInItsFolder() {
    Outcome outcome = Program.run(folder, "handbook", "--out", folder + "/study.yaml");
    assertThat(outcome.code()).isEqualTo(Main.BAD_INPUT);
    assertThat(outcome.errors()).singleElement().asString().contains("accepted: a folder");
  }
}
