package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

class ShortlistCommandTest {
  @TempDir private static Path folder;

  @BeforeAll
  static void run() {
    Outcome outcome =
        Program.run(
            folder,
            "assess",
            SmallStudy.in(folder).toString(),
            "--out",
            folder + "/out",
            "--quiet");
    assertThat(outcome.code()).isZero();
  }

  private static Outcome shortlist(String needs, String... options) throws IOException {
    Path file = Files.writeString(folder.resolve("needs.yaml"), needs);
    String[] arguments = new String[4 + options.length];
    arguments[0] = "shortlist";
    arguments[1] = folder + "/out";
    arguments[2] = "--need";
    arguments[3] = file.toString();
    System.arraycopy(options, 0, arguments, 4, options.length);
    return Program.run(folder, arguments);
  }

  @Test
  void anEasyNeedIsMetByTheCheapest() throws IOException {
    Outcome outcome = shortlist("needs: [{measure: bits-per-pixel, at-most: 1000}]");
    assertThat(outcome.err()).isEmpty();
    assertThat(outcome.code()).isEqualTo(Main.DONE);
    assertThat(outcome.out())
        .startsWith("need 1: mean bits-per-pixel at most 1000 (each of 4 conditions)\n")
        .contains("is the cheapest codec shown to meet all needs: ")
        .endsWith("bits per pixel; 5 are shown to.\n");
  }

  @Test
  void aNeedThatNothingMeetsIsNo() throws IOException {
    Outcome outcome = shortlist("needs: [{measure: psnr-db, at-least: 99, for: 0.5}]");
    assertThat(outcome.code()).isEqualTo(Main.NO);
    assertThat(outcome.out()).contains("No codec is shown to meet all needs: ");
  }

  @Test
  void badNeedsAreBadInput() throws IOException {
    Outcome outcome = shortlist("needs:\n  - {measure: psnr, at-least: 9}");
    assertThat(outcome.code()).isEqualTo(Main.BAD_INPUT);
    assertThat(outcome.errors())
        .singleElement()
        .asString()
        .contains("needs.yaml, line 2: 'needs[0].measure' is 'psnr'")
        .contains("did you mean 'psnr-db'?");
  }

  @Test
  void thePageIsWrittenAndComplete() throws IOException {
    Path page = folder.resolve("shortlist.html");
    Outcome outcome =
        shortlist(
            "needs: [{measure: psnr-db, mean-at-least: 20}, {measure: outage-rate, at-most: 0.3}]",
            "--html",
            page.toString());
    assertThat(outcome.out()).endsWith("page: " + page + "\n");
    assertThat(Files.readString(page))
        .contains("What does a small study show?")
        .contains("Need 2")
        .contains("Method")
        .contains("Content-Security-Policy")
        .doesNotContain("<script");
  }
}
