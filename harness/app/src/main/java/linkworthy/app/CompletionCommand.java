package linkworthy.app;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import linkworthy.input.BadInput;
import linkworthy.input.Spelling;
import picocli.AutoComplete;
import picocli.CommandLine;
import picocli.CommandLine.Command;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.Model.OptionSpec;
import picocli.CommandLine.Parameters;
import picocli.CommandLine.Spec;

/** Prints what a shell needs to complete commands and options. */
@Command(
    name = "completion",
    description = "Print a script with which a shell completes commands and options.",
    mixinStandardHelpOptions = true,
    footer = {
      "",
      "Examples:",
      "  linkworthy completion fish > ~/.config/fish/completions/linkworthy.fish",
      "  source <(linkworthy completion bash)"
    })
final class CompletionCommand implements Runnable {
  private static final List<String> SHELLS = List.of("bash", "zsh", "fish");

  private final Surroundings surroundings;

  @Parameters(
      paramLabel = "SHELL",
      completionCandidates = Shells.class,
      description = "bash, zsh or fish.")
  private String shell = "";

  @Spec
  @SuppressWarnings("NullAway.Init")
  private CommandSpec spec;

  CompletionCommand(Surroundings surroundings) {
    this.surroundings = surroundings;
  }

  /** What can be asked for. */
  static final class Shells extends ArrayList<String> {
    private static final long serialVersionUID = 1;

    Shells() {
      super(SHELLS);
    }
  }

  @Override
  public void run() {
    if (!SHELLS.contains(shell)) {
      throw new BadInput("no completion for '" + shell + "'; " + Spelling.hint(shell, SHELLS));
    }
    CommandLine program = spec.root().commandLine();
    surroundings
        .out()
        .print(
            shell.equals("fish")
                ? fish(program)
                : AutoComplete.bash(program.getCommandName(), program).replace("\r", ""));
    surroundings.out().flush();
  }

  private static String fish(CommandLine program) {
    StringBuilder script = new StringBuilder("complete -c linkworthy -f\n");
    script.append("complete -c linkworthy -n 'not __fish_seen_subcommand_from ");
    script.append(String.join(" ", program.getSubcommands().keySet()));
    script.append("' -a '");
    script.append(String.join(" ", program.getSubcommands().keySet())).append("'\n");
    options(script, program, "");
    program
        .getSubcommands()
        .forEach(
            (name, command) -> {
              String seen = "__fish_seen_subcommand_from " + name;
              options(script, command, seen);
              argument(script, command, seen);
              if (!command.getSubcommands().isEmpty()) {
                String inner = String.join(" ", command.getSubcommands().keySet());
                script.append(line(seen + "; and not __fish_seen_subcommand_from " + inner));
                script.append(" -a '").append(inner).append("'\n");
              }
              command
                  .getSubcommands()
                  .forEach(
                      (innerName, inner) -> {
                        String both = seen + "; and __fish_seen_subcommand_from " + innerName;
                        options(script, inner, both);
                        argument(script, inner, both);
                      });
            });
    return script.toString();
  }

  /** Files, or the words that an argument may be, where a command takes an argument. */
  private static void argument(StringBuilder script, CommandLine command, String condition) {
    for (var parameter : command.getCommandSpec().positionalParameters()) {
      Iterable<String> words = parameter.completionCandidates();
      script.append(line(condition));
      script.append(
          words == null
              ? (parameter.type() == Path.class ? " -F\n" : " -f\n")
              : " -a " + quoted(String.join(" ", words)) + "\n");
    }
  }

  private static void options(StringBuilder script, CommandLine command, String condition) {
    for (OptionSpec option : command.getCommandSpec().options()) {
      script.append(line(condition));
      for (String name : option.names()) {
        script.append(name.startsWith("--") ? " -l " : " -s ").append(name.replaceFirst("-+", ""));
      }
      if (option.arity().max() > 0) {
        Iterable<String> words = option.completionCandidates();
        script.append(
            words == null
                ? (option.type() == Path.class ? " -r -F" : " -x")
                : " -x -a " + quoted(String.join(" ", words)));
      }
      String[] description = option.description();
      script
          .append(" -d ")
          .append(quoted(String.format(Locale.ROOT, String.join(" ", description))))
          .append('\n');
    }
  }

  private static String line(String condition) {
    return "complete -c linkworthy" + (condition.isEmpty() ? "" : " -n " + quoted(condition));
  }

  private static String quoted(String text) {
    return "'" + text.replace("\\", "\\\\").replace("'", "\\'") + "'";
  }
}
