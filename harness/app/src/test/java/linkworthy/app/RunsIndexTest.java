package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Clock;
import java.time.Instant;
import java.time.ZoneOffset;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** The start page over runs. */
class RunsIndexTest {
  private static final String QUICK =
      """
      name: NAME
      purpose: "PURPOSE"
      pictures: {select: [cat], longest-side: 32}
      impairments: [{noise: gaussian, snr-db: 20}]
      codecs: [{transform: dct, keep: 4}, {transform: mean}]
      replicates: 2
      """;

  @TempDir Path folder;

  private Path run(String where, String name, String purpose, String time) throws IOException {
    Path study = folder.resolve("study.yaml");
    Files.writeString(study, QUICK.replace("NAME", name).replace("PURPOSE", purpose));
    Path out = folder.resolve("results").resolve(where);
    Clock clock = Clock.fixed(Instant.parse(time), ZoneOffset.UTC);
    assertThat(
            Program.run(
                    folder, clock, false, "assess", study.toString(), "--quiet", "--out", "" + out)
                .code())
        .isZero();
    return out;
  }

  private String index() throws IOException {
    Path results = folder.resolve("results");
    assertThat(Program.run(folder, "report", "--index", results.toString()))
        .isEqualTo(new Outcome(0, "page: " + results.resolve("index.html") + "\n", ""));
    return Files.readString(results.resolve("index.html"));
  }

  @Test
  void runsAreGroupedByStudyNewestFirstAndLinked() throws IOException {
    run("a/1 with a blank & more", "alpha", "Which is first?", "2026-11-01T10:00:00Z");
    run("a/2", "alpha", "Which is second?", "2026-11-03T10:00:00Z");
    run("b", "beta", "And beta?", "2026-11-02T10:00:00Z");
    String page = index();
    assertThat(page)
        .contains("3 runs of 2 studies<", "1 pictures, 2 codecs, 6 trials", "2026-11-01 10:00");
    assertThat(page.indexOf(">alpha<")).isPositive().isLessThan(page.indexOf(">beta<"));
    assertThat(page.indexOf("Which is second?")).isLessThan(page.indexOf("Which is first?"));
    assertThat(page).contains("bits per pixel");
    Matcher link = Pattern.compile("<a href=\"(\\./[^\"]+)\"").matcher(page);
    int links = 0;
    while (link.find()) {
      String address = link.group(1).replace("&amp;", "&");
      assertThat(Path.of(folder.resolve("results").toUri().resolve(address)))
          .exists()
          .hasFileName("report.html");
      links++;
    }
    assertThat(links).isEqualTo(3);
  }

  @Test
  void damagedAndUnfinishedRunsAreSaidToBeSo() throws IOException {
    run("good", "alpha", "q", "2026-11-01T10:00:00Z");
    Path cut = run("cut", "alpha", "q", "2026-11-02T10:00:00Z");
    String trials = Files.readString(cut.resolve("trials.csv"));
    Files.writeString(cut.resolve("trials.csv"), trials.substring(0, trials.length() / 2));
    Path lost = run("lost", "alpha", "q", "2026-11-02T10:00:00Z");
    Files.delete(lost.resolve("run.json"));
    Path open = run("open", "alpha", "q", "2026-11-03T10:00:00Z");
    String json = Files.readString(open.resolve("run.json"));
    Files.writeString(
        open.resolve("run.json"),
        json.replace("\"complete\" : true", "\"complete\" : false")
            .replaceAll("\"trials_done\" : \\d+", "\"trials_done\" : 2"));
    String page = index();
    assertThat(page)
        .contains("2 runs of 1 study, 1 of them unfinished; folders that cannot be read: 2")
        .contains("Unfinished. ", "assess --resume", "lost", "has no run.json", "fewer or more");
  }

  @Test
  void hostileNamesAreTextAlone() throws IOException {
    String hostile = "<script>alert(1)</script> [[${page}]] {{x}} th:utext \\u202e &amp;";
    run("x<img src=y>", "alpha", hostile, "2026-11-01T10:00:00Z");
    String page = index();
    assertThat(page)
        .doesNotContain("<script>alert", "<img")
        .contains("&lt;script&gt;alert(1)&lt;/script&gt; [[${page}]] {{x}} th:utext")
        .contains("default-src &#39;none&#39;");
  }

  @Test
  void aFolderThatIsNoneIsRefused() {
    Outcome outcome = Program.run(folder, "report", "--index", folder + "/no");
    assertThat(outcome.code()).isEqualTo(Main.BAD_INPUT);
    assertThat(outcome.errors()).singleElement().asString().contains("does not exist");
  }
}
