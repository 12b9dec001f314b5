package linkworthy.app;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import linkworthy.codec.CodecFamilies;
import linkworthy.codec.PluginFolder;
import linkworthy.input.BadInput;
import linkworthy.input.Spelling;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;

/** Prints what a file may hold. */
@Command(
    name = "schema",
    description = {
      "Print what a file may hold as JSON Schema, draft 2020-12.",
      "Editors complete and check from it. With keys: all keys as a page of the handbook."
    },
    mixinStandardHelpOptions = true,
    footer = {"", "Example: linkworthy schema study"})
final class SchemaCommand implements Runnable {
  private static final String KEYS = "keys";

  private final Surroundings surroundings;

  @Parameters(
      paramLabel = "KIND",
      completionCandidates = Kinds.class,
      description = "One of: ${COMPLETION-CANDIDATES}.")
  private String kind = "";

  @Option(
      names = "--plugins",
      paramLabel = "DIR",
      description = "Folder with jars of codecs of your own, to be part of the study's schema.")
  private @Nullable Path plugins;

  SchemaCommand(Surroundings surroundings) {
    this.surroundings = surroundings;
  }

  /** What can be asked for. */
  static final class Kinds extends ArrayList<String> {
    private static final long serialVersionUID = 1;

    Kinds() {
      super(Schemas.IDS);
      add(KEYS);
    }
  }

  @Override
  public void run() {
    List<String> kinds = new Kinds();
    if (!kinds.contains(kind)) {
      throw new BadInput("no schema of '" + kind + "'; " + Spelling.hint(kind, kinds));
    }
    try (PluginFolder opened = plugins == null ? PluginFolder.none() : PluginFolder.open(plugins)) {
      CodecFamilies families = CodecFamilies.installed().with(opened.families());
      surroundings.out().print(kind.equals(KEYS) ? KeysPage.text() : Schemas.text(kind, families));
      surroundings.out().flush();
    }
  }
}
