package linkworthy.app;

import java.util.Locale;
import java.util.stream.Collectors;
import linkworthy.noise.NoiseLibrary;
import linkworthy.noise.NoiseModel;
import linkworthy.noise.Site;
import picocli.CommandLine.Command;
import picocli.CommandLine.Parameters;

/** The noise-model library. */
@Command(
    name = "noise",
    description = "The noise models.",
    mixinStandardHelpOptions = true,
    synopsisSubcommandLabel = "COMMAND",
    footer = {"", "Example: linkworthy noise list"})
final class NoiseCommand {
  private final Surroundings surroundings;

  NoiseCommand(Surroundings surroundings) {
    this.surroundings = surroundings;
  }

  @Command(
      name = "list",
      description = "List the shipped models.",
      mixinStandardHelpOptions = true,
      footer = {"", "Example: linkworthy noise list"})
  void list() {
    for (NoiseModel model : NoiseLibrary.shipped()) {
      surroundings
          .out()
          .println(
              String.format(
                  Locale.ROOT,
                  "%-18s version %d  acts on %-18s  severity by %s",
                  model.id(),
                  model.version(),
                  sites(model),
                  String.join(", ", model.axes())));
    }
  }

  @Command(
      name = "show",
      description = "Show one model: parameters, source and fingerprint.",
      mixinStandardHelpOptions = true,
      footer = {"", "Example: linkworthy noise show burst-loss"})
  void show(@Parameters(paramLabel = "ID", description = "Id of a shipped model.") String id) {
    NoiseModel model = NoiseLibrary.find(id);
    var out = surroundings.out();
    out.println("id:          " + model.id());
    out.println("version:     " + model.version());
    out.println("process:     " + model.process());
    out.println("does:        " + model.implementation().summary());
    out.println("acts on:     " + sites(model));
    out.println("parameters:  " + model.parameters());
    out.println("severity by: " + String.join(", ", model.axes()));
    out.println("source:      " + model.source());
    out.println("notes:       " + model.notes());
    out.println("fingerprint: " + model.fingerprint());
  }

  private static String sites(NoiseModel model) {
    return model.actsOn().stream().map(Site::id).collect(Collectors.joining(", "));
  }
}
