package linkworthy.app;

import java.nio.file.Path;
import linkworthy.codec.CodecFamilies;
import linkworthy.codec.PluginFolder;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Option;

/** Codecs of the user's own, for commands that run a study. */
final class CodecOptions {
  @Option(
      names = "--plugins",
      paramLabel = "DIR",
      description =
          "Folder with jars of codecs of your own; they run with all your rights. Their names and"
              + " checksums are recorded.")
  private @Nullable Path plugins;

  @Option(
      names = "--allow-commands",
      description =
          "Let codecs of the kind 'command' run programs of this machine, with all your rights.")
  private boolean allowCommands;

  /** The plugins, to be closed after the study. */
  PluginFolder open() {
    return plugins == null ? PluginFolder.none() : PluginFolder.open(plugins);
  }

  /**
   * The families that a study may name.
   *
   * @throws linkworthy.input.BadInput if two share an id
   */
  CodecFamilies families(PluginFolder opened) {
    CodecFamilies families = CodecFamilies.installed().with(opened.families());
    return allowCommands ? families.allowingCommands() : families;
  }

  /** These options as they would be given again, each with a space before it. */
  String asArguments() {
    return (plugins == null ? "" : " --plugins " + quoted(plugins))
        + (allowCommands ? " --allow-commands" : "");
  }

  /** A path as a shell takes it. */
  static String quoted(Path path) {
    String text = path.toString();
    return text.matches("[\\w./:@%+,-]+") ? text : "'" + text.replace("'", "'\\''") + "'";
  }
}
