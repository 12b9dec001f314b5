package linkworthy.app;

import java.io.OutputStream;
import java.io.OutputStreamWriter;
import java.io.PrintWriter;
import java.nio.charset.StandardCharsets;
import java.nio.file.InvalidPathException;
import java.nio.file.Path;
import java.time.Clock;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.TreeSet;
import linkworthy.input.BadInput;
import linkworthy.input.Spelling;
import linkworthy.input.Unavailable;
import picocli.CommandLine;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.ParameterException;
import picocli.CommandLine.TypeConversionException;

/** The program: parses the command line, runs a command, turns its end into an exit code. */
public final class Main {
  /** Done. */
  static final int DONE = 0;

  /** Done, and the answer is 'no'. */
  static final int NO = 1;

  /** Bad usage or bad input. */
  static final int BAD_INPUT = 2;

  /** The machine refused. */
  static final int ENVIRONMENT = 3;

  /** What picocli says of a command that needs another word. */
  private static final String NO_SUBCOMMAND = "Missing required subcommand";

  private Main() {}

  public static void main(String[] arguments) {
    Surroundings surroundings =
        new Surroundings(
            writer(System.out),
            writer(System.err),
            Boolean.getBoolean("linkworthy.terminal"),
            Clock.systemUTC(),
            Path.of(System.getProperty("linkworthy.home", "")));
    System.exit(run(surroundings, arguments));
  }

  private static PrintWriter writer(OutputStream stream) {
    return new PrintWriter(new OutputStreamWriter(stream, StandardCharsets.UTF_8), true);
  }

  /** Runs the program in given surroundings and returns its exit code. */
  static int run(Surroundings surroundings, String... arguments) {
    Linkworthy program = new Linkworthy();
    CommandLine commandLine =
        new CommandLine(program, new Commands(surroundings))
            .setOut(surroundings.out())
            .setErr(surroundings.err())
            .registerConverter(Path.class, Main::path)
            .setExpandAtFiles(false)
            .setUsageHelpAutoWidth(false)
            .setUsageHelpWidth(100)
            .setParameterExceptionHandler((e, args) -> badUsage(surroundings, e))
            .setExecutionExceptionHandler(
                (e, command, result) -> explain(surroundings, e, program.trace()));
    try {
      return commandLine.execute(arguments);
    } catch (OutOfMemoryError e) {
      return explain(surroundings, outOfMemory(e), program.trace());
    }
  }

  private static Unavailable outOfMemory(OutOfMemoryError e) {
    return new Unavailable(
        "not enough memory: Java may use "
            + (Runtime.getRuntime().maxMemory() >> 20)
            + " MiB (more with JAVA_TOOL_OPTIONS=-Xmx4g, less needed with fewer --threads)",
        e);
  }

  private static Path path(String text) {
    if (text.isBlank()) {
      throw new TypeConversionException("it is empty; accepted: a path");
    }
    try {
      return Path.of(text);
    } catch (InvalidPathException e) {
      throw new TypeConversionException(
          "'" + text + "' is no path on this system (is the locale UTF-8?)");
    }
  }

  private static int badUsage(Surroundings surroundings, ParameterException e) {
    String command = e.getCommandLine().getCommandSpec().qualifiedName();
    StringBuilder line =
        new StringBuilder(oneLine(String.valueOf(e.getMessage())).replaceFirst("^Error: ", ""));
    if (line.toString().equals(NO_SUBCOMMAND)) {
      line.append("; accepted: ")
          .append(String.join(", ", new TreeSet<>(e.getCommandLine().getSubcommands().keySet())));
    }
    if (e instanceof CommandLine.UnmatchedArgumentException unmatched) {
      nearest(unmatched).ifPresent(w -> line.append("; did you mean '").append(w).append("'?"));
    }
    surroundings.err().println("linkworthy: " + line + " (see '" + command + " --help')");
    return BAD_INPUT;
  }

  /** The option or command that the first argument without a place was perhaps meant to be. */
  private static Optional<String> nearest(CommandLine.UnmatchedArgumentException e) {
    CommandSpec command = e.getCommandLine().getCommandSpec();
    List<String> words = new ArrayList<>(command.optionsMap().keySet());
    words.addAll(command.subcommands().keySet());
    return Spelling.nearest(e.getUnmatched().get(0), words)
        .or(() -> e.getSuggestions().stream().findFirst());
  }

  private static int explain(Surroundings surroundings, Exception e, boolean trace) {
    if (trace) {
      e.printStackTrace(surroundings.err());
    }
    if (e instanceof BadInput) {
      surroundings.err().println("linkworthy: " + oneLine(String.valueOf(e.getMessage())));
      return BAD_INPUT;
    }
    if (e instanceof Unavailable) {
      surroundings.err().println("linkworthy: " + oneLine(String.valueOf(e.getMessage())));
      return ENVIRONMENT;
    }
    surroundings
        .err()
        .println(
            "linkworthy: internal error: "
                + oneLine(String.valueOf(e))
                + "; --trace prints where it happened");
    return ENVIRONMENT;
  }

  private static String oneLine(String message) {
    return message.replaceAll("\\s*\\R\\s*", " ").strip();
  }
}
