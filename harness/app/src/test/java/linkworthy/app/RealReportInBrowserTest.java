package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.file.Path;
import linkworthy.report.TestBrowser;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;
import org.openqa.selenium.By;

/** The report of a study that was really run, as a browser lays it out. */
class RealReportInBrowserTest {
  @TempDir private static Path folder;
  private static TestBrowser browser;

  @BeforeAll
  static void open() {
    String study = SmallStudy.in(folder).toString();
    assertThat(Program.run(folder, "assess", study, "--out", folder + "/out", "--quiet").code())
        .isZero();
    browser = new TestBrowser(folder);
  }

  @AfterAll
  static void close() {
    browser.close();
  }

  @ParameterizedTest
  @ValueSource(ints = {390, 1280})
  void fitsItsWindowAsksForNothingAndComplainsOfNothing(int width) {
    browser.requireQuiet(folder.resolve("out/report.html"), width);
    assertThat(browser.driver().getTitle()).isEqualTo("small - Linkworthy report");
    assertThat(browser.driver().findElement(By.tagName("h1")).getText()).isNotBlank();
    assertThat(browser.driver().findElements(By.cssSelector("table.matrix"))).hasSizeGreaterThan(2);
    assertThat(browser.driver().findElement(By.tagName("body")).getText())
        .contains("What does a small study show?", "K2");
  }
}
