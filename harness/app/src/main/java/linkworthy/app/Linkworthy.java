package linkworthy.app;

import picocli.CommandLine.Command;
import picocli.CommandLine.Model.CommandSpec;
import picocli.CommandLine.Option;
import picocli.CommandLine.ParameterException;
import picocli.CommandLine.ScopeType;
import picocli.CommandLine.Spec;

/** The top of the command line. */
@Command(
    name = "linkworthy",
    description = {
      "Shows how picture codecs fare on noisy radio links: noise and losses at set strengths,",
      "every bit counted, quality with intervals, and a report to decide from."
    },
    subcommands = {
      AssessCommand.class,
      ReportCommand.class,
      ReplayCommand.class,
      RecheckCommand.class,
      DriftCommand.class,
      ShortlistCommand.class,
      CorpusCommand.class,
      NoiseCommand.class,
      CodecsCommand.class,
      BeginCommand.class,
      SchemaCommand.class,
      HandbookCommand.class,
      CompletionCommand.class
    },
    mixinStandardHelpOptions = true,
    versionProvider = Version.class,
    footer = {
      "",
      "Exit codes: 0 done; 1 done, and the answer is no; 2 bad usage or input; 3 the machine refused.",
      "Example: linkworthy assess"
    })
final class Linkworthy implements Runnable {
  @Option(
      names = "--trace",
      scope = ScopeType.INHERIT,
      description = "Print a stack trace with an error.")
  private boolean trace;

  @Spec
  @SuppressWarnings("NullAway.Init")
  private CommandSpec spec;

  boolean trace() {
    return trace;
  }

  @Override
  public void run() {
    throw new ParameterException(
        spec.commandLine(),
        "no command given; accepted: " + String.join(", ", spec.subcommands().keySet()));
  }
}
