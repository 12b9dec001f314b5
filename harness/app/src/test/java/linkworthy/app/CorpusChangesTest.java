package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import com.sun.net.httpserver.HttpServer;
import java.io.IOException;
import java.net.InetAddress;
import java.net.InetSocketAddress;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import linkworthy.corpus.Manifest;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

class CorpusChangesTest {
  @TempDir private Path folder;

  @Test
  void aFolderOfPicturesIsAddedAndChecks() throws IOException {
    Path day = Files.createDirectories(folder.resolve("yard/day"));
    Files.write(day.resolve("a.pgm"), OwnPictures.pgm());
    Files.write(day.resolve("b.jpg"), OwnPictures.picture("jpeg", 24, 20, 8));
    Files.writeString(day.resolve("c.png"), "no picture");
    String manifest = folder + "/yard/manifest.csv";
    Outcome add =
        Program.run(
            folder, "corpus", "add", day.toString(), "--manifest", manifest, "--set", "yard");
    assertThat(add.err()).isEmpty();
    assertThat(add.out().lines().toList())
        .satisfiesExactly(
            line -> assertThat(line).isEqualTo("added: a  day/a.pgm"),
            line -> assertThat(line).isEqualTo("added: b  day/b.jpg"),
            line -> assertThat(line).startsWith("warning: ").contains("b.jpg is a JPEG file"),
            line -> assertThat(line).startsWith("not added: ").contains("c.png"),
            line -> assertThat(line).startsWith("2 added, 0 listed already, 1 not added: "));
    assertThat(add.code()).isEqualTo(1);
    assertThat(Program.run(folder, "corpus", "check", "--manifest", manifest).code()).isZero();
    Path study =
        SmallStudy.write(
            folder,
            SmallStudy.TEXT.replace(
                "{select: [canyon, cat], longest-side: 32}",
                "{manifest: yard/manifest.csv, select: [yard]}"));
    assertThat(Program.run(folder, "assess", study.toString(), "--dry-run").out())
        .contains("pictures: 2\n");
  }

  @Test
  void wrongTextsAndFoldersAreRefusedInOneLine() throws IOException {
    Path empty = Files.createDirectories(folder.resolve("empty"));
    Map<String, String> before = Program.contents(folder);
    for (List<String> wrong :
        List.of(
            List.of("add", "nowhere", "nowhere does not exist"),
            List.of("add", empty.toString(), empty + " has no files; accepted: a folder of"),
            List.of("add", folder.toString(), "--licence", "CC-BY-NC-4.0", "--licence has"),
            List.of("add", folder.toString(), "--set", " ", "--set is"),
            List.of("fetch", "accepted: --manifest FILE"))) {
      List<String> arguments = new ArrayList<>(List.of("corpus"));
      arguments.addAll(wrong.subList(0, wrong.size() - 1));
      Outcome outcome = Program.run(folder, arguments.toArray(new String[0]));
      assertThat(outcome.errors()).singleElement().asString().contains(wrong.get(wrong.size() - 1));
      assertThat(outcome.code()).isEqualTo(2);
    }
    assertThat(Program.contents(folder)).isEqualTo(before);
  }

  @Test
  void listedPicturesAreFetched() throws IOException {
    byte[] pgm = OwnPictures.pgm();
    HttpServer server =
        HttpServer.create(new InetSocketAddress(InetAddress.getLoopbackAddress(), 0), 0);
    server.createContext(
        "/a.pgm",
        exchange -> {
          try (exchange) {
            exchange.sendResponseHeaders(200, pgm.length);
            exchange.getResponseBody().write(pgm);
          }
        });
    server.start();
    try {
      String at = "http://127.0.0.1:" + server.getAddress().getPort();
      String head = String.join(",", Manifest.COLUMNS) + ",address\n";
      String row = "%s,own,day/%s.pgm,24,20,1,8,yard,CC0-1.0,me,,%s,,%s\n";
      String manifest = folder + "/manifest.csv";
      String sha = Manifest.sha256(pgm);
      Files.writeString(Path.of(manifest), head + row.formatted("a", "a", sha, at + "/a.pgm"));
      Outcome fetch = Program.run(folder, "corpus", "fetch", "--manifest", manifest);
      assertThat(fetch).isEqualTo(new Outcome(0, "fetched: a  day/a.pgm\n", ""));
      assertThat(folder.resolve("day/a.pgm")).hasBinaryContent(pgm);
      Files.writeString(
          Path.of(manifest),
          head
              + row.formatted("a", "a", sha, at + "/a.pgm")
              + row.formatted("b", "b", "0".repeat(64), at + "/a.pgm")
              + row.formatted("c", "c", sha, at + "/c.pgm"));
      Outcome again = Program.run(folder, "corpus", "fetch", "--manifest", manifest);
      assertThat(again.out().lines().toList())
          .satisfiesExactly(
              line -> assertThat(line).isEqualTo("here: a  day/a.pgm"),
              line -> assertThat(line).startsWith("wrong: b ").contains("expected 0000"),
              line -> assertThat(line).startsWith("failed: c ").contains("answers 404"));
      assertThat(again.code()).isEqualTo(3);
    } finally {
      server.stop(0);
    }
  }

  @Test
  void addressesOfThisMachinesFilesAreRefused() throws IOException {
    Path manifest = folder.resolve("manifest.csv");
    Files.writeString(
        manifest,
        String.join(",", Manifest.COLUMNS)
            + ",address\na,own,day/a.pgm,24,20,1,8,yard,CC0-1.0,me,,"
            + "0".repeat(64)
            + ",,file:///etc/hostname\n");
    Outcome outcome = Program.run(folder, "corpus", "fetch", "--manifest", manifest.toString());
    assertThat(outcome.errors())
        .singleElement()
        .asString()
        .contains("manifest.csv", "line 2", "'file:///etc/hostname'", "begins with");
    assertThat(outcome.code()).isEqualTo(2);
    assertThat(folder.resolve("day")).doesNotExist();
  }
}
