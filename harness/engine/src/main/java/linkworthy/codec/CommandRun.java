package linkworthy.codec;

import java.io.File;
import java.io.IOException;
import java.io.InputStream;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.LinkOption;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.concurrent.CancellationException;
import java.util.concurrent.TimeUnit;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import java.util.stream.Stream;
import linkworthy.input.Unavailable;

/**
 * One call of a program, with a file in and a file out, in a folder of its own. Arguments go to the
 * program as they are; no shell is involved.
 */
final class CommandRun {
  static final String INPUT = "{input}";
  static final String OUTPUT = "{output}";

  /** A program wrote more than it may. */
  static final String TOO_LARGE = "output-too-large";

  private static final Pattern PLACEHOLDER = Pattern.compile("\\{(input|output|width|height)}");

  /** How long the program is left alone between two looks at its time and its files. */
  private static final long LOOK_MS = 5;

  private final String phase;
  private final List<String> command;
  private final PictureShape shape;
  private final Limits limits;
  private final Confinement confinement;
  private final String inputName;
  private final String outputName;

  /**
   * What one call may take.
   *
   * @param seconds of wall-clock time
   * @param outputBytes in all files that it writes to its folder; 0 for a limit by the picture
   * @param memoryMib address space of each process
   */
  record Limits(int seconds, long outputBytes, int memoryMib) {}

  private CommandRun(
      String phase,
      List<String> command,
      PictureShape shape,
      Limits limits,
      Confinement confinement,
      String inputName,
      String outputName) {
    this.phase = phase;
    this.command = command;
    this.shape = shape;
    this.limits = limits;
    this.confinement = confinement;
    this.inputName = inputName;
    this.outputName = outputName;
  }

  /** A call that makes bytes of a PGM file. */
  static CommandRun encoding(
      List<String> command, PictureShape shape, Limits limits, Confinement confinement) {
    return new CommandRun(
        "encode", command, shape, limits, confinement, "picture.pgm", "coded.bin");
  }

  /** A call that makes a PGM file of bytes. */
  static CommandRun decoding(
      List<String> command, PictureShape shape, Limits limits, Confinement confinement) {
    return new CommandRun(
        "decode", command, shape, limits, confinement, "coded.bin", "picture.pgm");
  }

  /** Where a program is: a name on the PATH, or an absolute path. */
  static Optional<Path> find(String program) {
    if (program.contains("/")) {
      return Optional.of(Path.of(program)).filter(CommandRun::isProgram);
    }
    return Stream.of(searchPath().split(File.pathSeparator, -1))
        .filter(folder -> !folder.isEmpty())
        .map(folder -> Path.of(folder, program).toAbsolutePath())
        .filter(CommandRun::isProgram)
        .findFirst();
  }

  private static boolean isProgram(Path file) {
    return Files.isRegularFile(file) && Files.isExecutable(file);
  }

  private static String searchPath() {
    String path = System.getenv("PATH");
    return path == null ? "/usr/local/bin:/usr/bin:/bin" : path;
  }

  /**
   * Runs the program on a file's bytes and returns those of the file it writes.
   *
   * @throws CodecFailure if it cannot be started, ends with an exit code other than 0, takes too
   *     long, writes too much, writes nothing, or leaves its output elsewhere
   * @throws Unavailable if this machine has no room for the files
   * @throws CancellationException if the calling thread is interrupted; the program is ended first
   */
  byte[] run(byte[] input) {
    try {
      Path folder = Files.createTempDirectory("linkworthy-").toRealPath();
      try {
        Files.write(folder.resolve(inputName), input);
        watch(folder, start(folder));
        return output(folder);
      } finally {
        CommandFolder.delete(folder);
      }
    } catch (IOException e) {
      throw Unavailable.cannot("keep the files of " + command.get(0), e);
    }
  }

  private Process start(Path folder) {
    List<String> line = new ArrayList<>();
    find("prlimit")
        .ifPresent(
            prlimit -> {
              line.add(prlimit.toString());
              line.add("--as=" + ((long) limits.memoryMib() << 20));
              line.add("--fsize=" + (limits.outputBytes() + 1));
              line.add("--core=0");
            });
    Path program =
        find(command.get(0)).orElseThrow(() -> failure("start", "there is no " + command.get(0)));
    line.addAll(confinement.before(folder));
    line.add(program.toString());
    command.stream().skip(1).map(argument -> filledIn(argument, folder)).forEach(line::add);
    ProcessBuilder builder = new ProcessBuilder(line).directory(folder.toFile());
    builder.redirectErrorStream(true);
    builder.environment().clear();
    builder
        .environment()
        .putAll(
            Map.of(
                "PATH", searchPath(),
                "HOME", folder.toString(),
                "TMPDIR", folder.toString(),
                "LANG", "C.UTF-8"));
    try {
      return builder.start();
    } catch (IOException e) {
      throw failure("start", String.valueOf(e.getMessage()));
    }
  }

  private String filledIn(String argument, Path folder) {
    return PLACEHOLDER
        .matcher(argument)
        .replaceAll(
            found ->
                Matcher.quoteReplacement(
                    switch (found.group(1)) {
                      case "input" -> folder.resolve(inputName).toString();
                      case "output" -> folder.resolve(outputName).toString();
                      case "width" -> Integer.toString(shape.width());
                      default -> Integer.toString(shape.height());
                    }));
  }

  /** Waits for the end of the program, or brings it about. */
  private void watch(Path folder, Process process) throws IOException {
    Said said = new Said(process.getInputStream());
    long start = System.nanoTime();
    try {
      process.getOutputStream().close();
      boolean ended = false;
      while (!ended) {
        ended = process.waitFor(LOOK_MS, TimeUnit.MILLISECONDS);
        said.listen();
        long written = CommandFolder.bytesBesides(folder, inputName);
        if (written > limits.outputBytes()) {
          throw new CodecFailure(
              new Failure(
                  TOO_LARGE,
                  phase + " wrote " + written + " bytes of " + limits.outputBytes() + " allowed"));
        }
        if (!ended && System.nanoTime() - start > TimeUnit.SECONDS.toNanos(limits.seconds())) {
          throw failure("timeout", "no end after " + limits.seconds() + " s; it said: " + said);
        }
      }
    } catch (InterruptedException e) {
      Thread.currentThread().interrupt();
      throw (CancellationException) new CancellationException("interrupted").initCause(e);
    } finally {
      CommandFolder.endProcesses(folder, process);
    }
    if (process.exitValue() != 0) {
      throw failure("exit", "exit code " + process.exitValue() + "; it said: " + said);
    }
  }

  private byte[] output(Path folder) throws IOException {
    Path file = folder.resolve(outputName);
    if (Files.isSymbolicLink(folder) || Files.isSymbolicLink(file)) {
      throw failure("outside", command.get(0) + " put a symbolic link where its output belongs");
    }
    if (!Files.isRegularFile(file, LinkOption.NOFOLLOW_LINKS) || Files.size(file) == 0) {
      throw failure("empty", command.get(0) + " ended well and wrote no output");
    }
    try (InputStream in = Files.newInputStream(file, LinkOption.NOFOLLOW_LINKS)) {
      return in.readNBytes(Math.toIntExact(limits.outputBytes()));
    }
  }

  private CodecFailure failure(String what, String detail) {
    return new CodecFailure(new Failure(phase + "-" + what, detail));
  }

  /** The beginning of what a program prints; the rest is read and dropped, so that it can go on. */
  private static final class Said {
    private static final int KEPT = 1 << 16;
    private static final int MOST_AT_ONCE = 1 << 22;

    private final InputStream in;
    private final byte[] kept = new byte[KEPT];
    private final byte[] dropped = new byte[KEPT];
    private int length;

    Said(InputStream in) {
      this.in = in;
    }

    /** Takes what has been printed so far, without waiting for more. */
    void listen() {
      try {
        take();
      } catch (IOException closed) {
        // Its end has been reached, or its process has just ended.
      }
    }

    private void take() throws IOException {
      int taken = 0;
      while (taken < MOST_AT_ONCE && in.available() > 0) {
        int n =
            length < KEPT
                ? in.read(kept, length, Math.min(in.available(), KEPT - length))
                : in.read(dropped, 0, Math.min(in.available(), KEPT));
        if (n <= 0) {
          return;
        }
        length = Math.min(KEPT, length + n);
        taken += n;
      }
    }

    @Override
    public String toString() {
      String text = new String(kept, 0, length, StandardCharsets.UTF_8).strip();
      return text.isEmpty() ? "nothing" : text;
    }
  }
}
