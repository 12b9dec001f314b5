package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.LinkOption;
import java.nio.file.Path;
import java.nio.file.StandardCopyOption;
import java.nio.file.attribute.FileTime;
import java.time.Instant;
import java.util.List;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

/** The shell launcher, in a checkout that has its sources' names only, with a Java that tells. */
class LauncherTest {
  private static final List<String> TOOLS =
      List.of(
          "sh",
          "dirname",
          "readlink",
          "find",
          "head",
          "sed",
          "mktemp",
          "touch",
          "cat",
          "rm",
          "mkdir");

  @TempDir private Path folder;
  private Path checkout = Path.of("");
  private Path tools = Path.of("");
  private Path jar = Path.of("");
  private Path source = Path.of("");

  @BeforeEach
  void layOut() throws IOException {
    checkout = Files.createDirectories(folder.resolve("a check\u00f6ut"));
    Files.copy(
        Path.of("../../linkworthy"),
        checkout.resolve("linkworthy"),
        StandardCopyOption.COPY_ATTRIBUTES);
    for (String module :
        List.of(
            "corpus-manifest",
            "noise-models",
            "report-templates",
            "harness/engine",
            "harness/app")) {
      Files.createDirectories(checkout.resolve(module).resolve("src/main/java"));
    }
    Files.createDirectories(checkout.resolve("harness/studies"));
    Files.writeString(checkout.resolve("pom.xml"), "<project/>");
    source = Files.writeString(checkout.resolve("harness/engine/src/main/java/A.java"), "");
    jar = checkout.resolve("harness/app/target/linkworthy.jar");
    tools = Files.createDirectories(folder.resolve("bin"));
    for (String tool : TOOLS) {
      script(tool, "exec " + where(tool) + " \"$@\"\n");
    }
  }

  private static Path where(String tool) {
    return Path.of(Program.execute(List.of("sh", "-c", "command -v " + tool)).out().strip());
  }

  private void script(String name, String body) throws IOException {
    Path file = Files.writeString(tools.resolve(name), "#!/bin/sh\n" + body);
    assertThat(file.toFile().setExecutable(true)).isTrue();
  }

  private void java(String version) throws IOException {
    script(
        "java",
        "[ \"$1\" = -version ] && { echo 'openjdk version \""
            + version
            + "\" 2026-01-01' >&2; exit 0; }\n"
            + "for last in \"$@\"; do :; done\necho \"ran $last in ${LC_ALL:-no locale}\"\n");
  }

  private void mvn() throws IOException {
    script(
        "mvn",
        "mkdir -p \""
            + jar.getParent()
            + "\"\n: >\""
            + jar
            + "\"\necho built >>\""
            + folder
            + "/builds\"\n");
  }

  private Outcome launch(String variables, Path launcher) {
    return Program.execute(
        List.of(
            where("env").toString(),
            "-i",
            "PATH=" + tools,
            variables,
            launcher.toString(),
            "codecs",
            "last one"));
  }

  private Outcome launch() {
    return launch("LANG=en_US.UTF-8", checkout.resolve("linkworthy"));
  }

  private long builds() throws IOException {
    Path log = folder.resolve("builds");
    return Files.exists(log, LinkOption.NOFOLLOW_LINKS) ? Files.readAllLines(log).size() : 0;
  }

  @Test
  void buildsOnFirstUseAndWhenASourceIsNewerOnly() throws IOException {
    java("17.0.2");
    mvn();
    Outcome first = launch();
    assertThat(first.errors())
        .containsExactly("linkworthy: building the program (the first time takes a few minutes)");
    assertThat(first.out()).isEqualTo("ran last one in no locale\n");
    assertThat(first.code()).isZero();
    assertThat(launch()).isEqualTo(new Outcome(0, "ran last one in no locale\n", ""));
    assertThat(builds()).isEqualTo(1);
    Files.setLastModifiedTime(source, FileTime.from(Instant.now().plusSeconds(60)));
    Files.setLastModifiedTime(jar, FileTime.from(Instant.now()));
    assertThat(launch().errors()).hasSize(1);
    assertThat(builds()).isEqualTo(2);
  }

  @Test
  void aTestThatChangedBuildsNothing() throws IOException {
    java("17.0.2");
    mvn();
    Path test = Files.createDirectories(checkout.resolve("harness/app/src/test"));
    launch();
    Files.setLastModifiedTime(
        Files.writeString(test.resolve("T.java"), ""),
        FileTime.from(Instant.now().plusSeconds(60)));
    assertThat(launch().errors()).isEmpty();
    assertThat(builds()).isEqualTo(1);
  }

  @Test
  void namesTheToolThatIsMissing() throws IOException {
    mvn();
    Outcome noJava = launch();
    assertThat(noJava.errors()).singleElement().asString().contains("no java found", "JDK 17");
    assertThat(noJava.code()).isEqualTo(3);
    Files.delete(tools.resolve("mvn"));
    java("17.0.2");
    Outcome noMaven = launch();
    assertThat(noMaven.errors()).singleElement().asString().contains("no mvn found", "Maven 3.8");
    assertThat(noMaven.code()).isEqualTo(3);
    assertThat(builds()).isZero();
  }

  @ParameterizedTest
  @ValueSource(strings = {"1.8.0_402", "11.0.2", "16-ea"})
  void refusesAnOldJava(String version) throws IOException {
    java(version);
    mvn();
    Outcome outcome = launch();
    assertThat(outcome.errors())
        .singleElement()
        .asString()
        .contains("java is Java " + version.split("[.-]", -1)[0] + ";", "JDK 17 or newer");
    assertThat(outcome.code()).isEqualTo(3);
    assertThat(builds()).isZero();
  }

  @ParameterizedTest
  @ValueSource(strings = {"17", "25-ea", "26.0.1"})
  void takesANewJava(String version) throws IOException {
    java(version);
    mvn();
    assertThat(launch().code()).isZero();
  }

  @Test
  void saysWhyABuildFailed() throws IOException {
    java("17.0.2");
    script("mvn", "echo 'the disk is full'; exit 1\n");
    Outcome outcome = launch();
    assertThat(outcome.code()).isEqualTo(3);
    assertThat(outcome.errors().subList(1, 3))
        .containsExactly(
            "the disk is full", "linkworthy: the build failed; the lines above say why");
    assertThat(outcome.out()).isEmpty();
  }

  @Test
  void givesThePlainLocaleTheNamesOfFiles() throws IOException {
    java("17.0.2");
    mvn();
    launch();
    Path launcher = checkout.resolve("linkworthy");
    for (String plain : List.of("LANG=C", "LC_ALL=POSIX", "LC_CTYPE=C", "NOTHING=set")) {
      assertThat(launch(plain, launcher).out()).isEqualTo("ran last one in C.UTF-8\n");
    }
    assertThat(launch("LC_ALL=de_DE.UTF-8", launcher).out())
        .isEqualTo("ran last one in de_DE.UTF-8\n");
  }

  @Test
  void isFoundThroughLinks() throws IOException {
    java("17.0.2");
    mvn();
    Path first = Files.createSymbolicLink(checkout.resolve("one"), Path.of("linkworthy"));
    Path second = Files.createSymbolicLink(folder.resolve("two"), folder.relativize(first));
    assertThat(launch("LANG=en_US.UTF-8", second).out()).isEqualTo("ran last one in no locale\n");
    assertThat(jar).exists();
  }

  @Test
  void passesOverAJavaHomeThatIsNone() throws IOException {
    java("17.0.2");
    mvn();
    assertThat(launch("JAVA_HOME=/nonexistent", checkout.resolve("linkworthy")).code()).isZero();
  }
}
