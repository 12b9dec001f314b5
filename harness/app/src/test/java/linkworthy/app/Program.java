package linkworthy.app;

import java.io.IOException;
import java.io.PrintWriter;
import java.io.StringWriter;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Clock;
import java.time.Instant;
import java.time.ZoneOffset;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.TreeMap;
import java.util.stream.Stream;

/** The program, run in this process or in one of its own, always at the same moment of time. */
final class Program {
  static final Clock CLOCK = Clock.fixed(Instant.parse("2026-12-01T10:15:00Z"), ZoneOffset.UTC);

  private Program() {}

  /** The program in a process of its own, with {@link #CLOCK}; the first argument is its home. */
  public static void main(String[] arguments) {
    Surroundings surroundings =
        new Surroundings(
            new PrintWriter(System.out, true, StandardCharsets.UTF_8),
            new PrintWriter(System.err, true, StandardCharsets.UTF_8),
            false,
            CLOCK,
            Path.of(arguments[0]));
    System.exit(
        Main.run(
            surroundings, List.of(arguments).subList(1, arguments.length).toArray(new String[0])));
  }

  static Outcome run(Path home, String... arguments) {
    return run(home, CLOCK, false, arguments);
  }

  static Outcome run(Path home, Clock clock, boolean terminal, String... arguments) {
    StringWriter out = new StringWriter();
    StringWriter err = new StringWriter();
    int code =
        Main.run(
            new Surroundings(new PrintWriter(out), new PrintWriter(err), terminal, clock, home),
            arguments);
    return new Outcome(code, out.toString(), err.toString());
  }

  /** A command that starts the program in a process of its own. */
  static List<String> command(Path java, List<String> javaOptions, Path home, String... arguments) {
    List<String> command = new ArrayList<>(List.of(java.toString()));
    command.addAll(javaOptions);
    command.addAll(
        List.of("-cp", System.getProperty("java.class.path", ""), Program.class.getName()));
    command.add(home.toString());
    command.addAll(List.of(arguments));
    return command;
  }

  /** The Java that runs this test. */
  static Path thisJava() {
    return Path.of(System.getProperty("java.home", ""), "bin", "java");
  }

  /** Runs a command to its end. */
  static Outcome execute(List<String> command) {
    try {
      Path out = Files.createTempFile("out", ".txt");
      Path err = Files.createTempFile("err", ".txt");
      try {
        int code =
            new ProcessBuilder(command)
                .redirectOutput(out.toFile())
                .redirectError(err.toFile())
                .start()
                .waitFor();
        return new Outcome(code, Files.readString(out), Files.readString(err));
      } finally {
        Files.delete(out);
        Files.delete(err);
      }
    } catch (IOException e) {
      throw new UncheckedIOException(e);
    } catch (InterruptedException e) {
      throw new AssertionError(command + " was interrupted", e);
    }
  }

  /** Every path below a folder, with the bytes of the files as Latin-1. */
  static Map<String, String> contents(Path folder) {
    Map<String, String> contents = new TreeMap<>();
    try (Stream<Path> paths = Files.walk(folder)) {
      for (Path path : (Iterable<Path>) paths::iterator) {
        String text =
            Files.isRegularFile(path) ? Files.readString(path, StandardCharsets.ISO_8859_1) : "";
        contents.put(folder.relativize(path).toString(), text);
      }
    } catch (IOException e) {
      throw new UncheckedIOException(e);
    }
    return contents;
  }
}
