package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import java.util.stream.Stream;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.MethodSource;
import org.junit.jupiter.params.provider.ValueSource;

/** The same study gives the same bytes, whatever runs it. */
class SameBytesTest {
  private static final List<String> TABLES = List.of("trials.csv", "cells.csv");
  private static final List<String> ALL = List.of("trials.csv", "cells.csv", "report.html");
  private static final Pattern JAVA_RELEASE = Pattern.compile("version \"(\\d+)");
  private static final int OLDEST_JAVA = 17;

  @TempDir private static Path shared;
  private static Map<String, String> expected = Map.of();

  @TempDir private Path folder;

  @BeforeAll
  static void runOnOneThread() {
    Path out = shared.resolve("one");
    assertThat(assess(out, 1)).isEqualTo(new Outcome(0, "", ""));
    expected = Program.contents(out);
    // 2 pictures, each clean once and 4 severities twice, 5 codecs, and a header.
    assertThat(expected.get("trials.csv")).hasLineCount(1 + 2 * (1 + 4 * 2) * 5);
  }

  private static Outcome assess(Path out, int threads) {
    return Program.run(shared, arguments(out, threads));
  }

  private static String[] arguments(Path out, int threads) {
    return new String[] {
      "assess",
      SmallStudy.in(shared).toString(),
      "--out",
      out.toString(),
      "--threads",
      Integer.toString(threads),
      "--quiet"
    };
  }

  private static void assertSame(Path out, List<String> files) throws IOException {
    for (String file : files) {
      assertThat(Files.readString(out.resolve(file), StandardCharsets.ISO_8859_1))
          .describedAs(file)
          .isEqualTo(expected.get(file));
    }
  }

  @ParameterizedTest
  @ValueSource(ints = {2, 5})
  void onAnyNumberOfThreads(int threads) throws IOException {
    assertThat(assess(folder.resolve("out"), threads)).isEqualTo(new Outcome(0, "", ""));
    assertSame(folder.resolve("out"), ALL);
  }

  @ParameterizedTest
  @ValueSource(strings = {"en-US", "de-DE", "tr-TR", "ar-EG"})
  void underAnyDefaultLocale(String tag) throws IOException {
    Locale before = Locale.getDefault();
    Locale.setDefault(Locale.forLanguageTag(tag));
    try {
      assertThat(assess(folder.resolve("out"), 2)).isEqualTo(new Outcome(0, "", ""));
    } finally {
      Locale.setDefault(before);
    }
    assertSame(folder.resolve("out"), ALL);
  }

  @ParameterizedTest
  @ValueSource(
      strings = {
        "-Xint",
        "-Duser.language=de -Duser.country=DE",
        "-Duser.language=tr -Duser.country=TR",
        "-Dfile.encoding=ISO-8859-1 -Duser.timezone=Pacific/Apia"
      })
  void underAnyOptionsOfJava(String options) throws IOException {
    assertThat(
            Program.execute(
                Program.command(
                    Program.thisJava(),
                    List.of(options.split(" ", -1)),
                    shared,
                    arguments(folder.resolve("out"), 2))))
        .isEqualTo(new Outcome(0, "", ""));
    assertSame(folder.resolve("out"), ALL);
  }

  static List<Path> javas() throws IOException {
    List<Path> javas = new ArrayList<>(List.of(Program.thisJava()));
    List<Path> real = new ArrayList<>(List.of(Program.thisJava().toRealPath()));
    Path installed = Path.of("/usr/lib/jvm");
    if (Files.isDirectory(installed)) {
      try (Stream<Path> homes = Files.list(installed)) {
        for (Path home : homes.sorted().toList()) {
          Path java = home.resolve("bin/java");
          if (Files.isExecutable(java) && !real.contains(java.toRealPath()) && isRecent(java)) {
            javas.add(java);
            real.add(java.toRealPath());
          }
        }
      }
    }
    return javas;
  }

  private static boolean isRecent(Path java) {
    Matcher version =
        JAVA_RELEASE.matcher(Program.execute(List.of(java.toString(), "-version")).err());
    return version.find() && Integer.parseInt(version.group(1)) >= OLDEST_JAVA;
  }

  @ParameterizedTest
  @MethodSource("javas")
  void onEveryInstalledJava(Path java) throws IOException {
    Outcome outcome =
        Program.execute(
            Program.command(java, List.of(), shared, arguments(folder.resolve("out"), 2)));
    assertThat(outcome).isEqualTo(new Outcome(0, "", ""));
    assertSame(folder.resolve("out"), TABLES);
    assertThat(Files.readString(folder.resolve("out/study.yaml")))
        .isEqualTo(expected.get("study.yaml"));
  }

  @Test
  void ofARenderedReportToo() throws IOException {
    Path out = folder.resolve("out");
    assertThat(assess(out, 2).code()).isZero();
    Files.delete(out.resolve("report.html"));
    assertThat(Program.run(folder, "report", out.toString()))
        .isEqualTo(new Outcome(0, "report: " + out.resolve("report.html") + "\n", ""));
    assertSame(out, ALL);
    Path elsewhere = folder.resolve("elsewhere.html");
    assertThat(Program.run(folder, "report", out.toString(), "--out", elsewhere.toString()).code())
        .isZero();
    assertThat(Files.readString(elsewhere, StandardCharsets.ISO_8859_1))
        .isEqualTo(expected.get("report.html"));
  }
}
