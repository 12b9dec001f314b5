package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import linkworthy.corpus.Manifest;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** Pictures of the user's own, through a manifest of their own. */
class OwnPicturesTest {
  private static final String HTML = "<script>alert(1)</script>\"&'";

  @TempDir private Path folder;

  private static byte[] picture(String format) {
    return OwnPictures.picture(format, OwnPictures.WIDTH, OwnPictures.HEIGHT, 8);
  }

  @Test
  void inEveryFormatUnderAnyName() throws IOException {
    Path home = Files.createDirectories(folder.resolve("my p\u00efctures \u2602"));
    byte[] deep = OwnPictures.picture("png", OwnPictures.WIDTH, OwnPictures.HEIGHT, 16);
    OwnPictures pictures =
        new OwnPictures(home)
            .add("a.pgm", OwnPictures.pgm())
            .add("b c.tiff", picture("tiff"))
            .add("d\u00e9.jpeg", picture("jpeg"))
            .add("e.bmp", picture("bmp"))
            .add("f.png", deep, 16, Manifest.sha256(deep), HTML);
    Path manifest = pictures.manifest();
    assertThat(Program.run(folder, "corpus", "check", "--manifest", manifest.toString()))
        .isEqualTo(new Outcome(0, "5 pictures checked; all are what the manifest says\n", ""));

    Path out = home.resolve("out");
    Outcome run =
        Program.run(
            folder, "assess", pictures.study().toString(), "--out", out.toString(), "--quiet");
    assertThat(run).isEqualTo(new Outcome(0, "", ""));
    assertThat(
            Files.readAllLines(out.resolve("trials.csv")).stream()
                .skip(1)
                .map(r -> r.split(",", -1)[1]))
        .containsOnly("a.pgm", "b_c.tiff", "dx.jpeg", "e.bmp", "f.png")
        .hasSize(5 * (1 + 4 * 2) * 5);
    assertThat(Files.readString(out.resolve("report.html")))
        .contains("&lt;script&gt;alert(1)&lt;/script&gt;")
        .doesNotContain("<script>alert", "<b>yard");
    assertThat(Program.run(folder, "report", out.toString()).code()).isZero();
  }

  @Test
  void textsOfTheStudyAreEscapedToo() throws IOException {
    String text =
        SmallStudy.TEXT
            .replace("purpose: What", "purpose: \"<img src=x onerror=alert(1)>\" # What")
            .replace("step: 16", "step: 16\n    label: '=1+1,\"<i>x</i>\"'")
            .replace("snr-db: [20, 10]", "snr-db: [20, 10]\n    label: '<u>sensor</u>, dark'");
    Path out = folder.resolve("out");
    Outcome run =
        Program.run(
            folder, "assess", SmallStudy.write(folder, text).toString(), "--out", out.toString());
    assertThat(run.err()).isEmpty();
    assertThat(run.code()).isZero();
    assertThat(Files.readString(out.resolve("report.html")))
        .contains("&lt;img src=x", "&lt;i&gt;x", "&lt;u&gt;sensor")
        .doesNotContain("<img", "<i>x", "<u>");
    assertThat(Files.readAllLines(out.resolve("trials.csv")))
        .anyMatch(row -> row.contains(",\"'=1+1,\"\"<i>x</i>\"\"\",mean,"))
        .anyMatch(row -> row.contains(",\"<u>sensor</u>, dark\",samples,snr-db,"));
    assertThat(Program.run(folder, "report", out.toString()).code()).isZero();
  }
}
