package linkworthy.app;

import java.nio.file.Path;
import java.util.List;
import linkworthy.codec.CodecFamilies;
import linkworthy.codec.PluginFolder;
import linkworthy.input.BadInput;
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

  /**
   * These options for a driver elsewhere.
   *
   * @throws linkworthy.input.BadInput if programs are to be run, which no other machine may have
   */
  List<String> forDriver() {
    if (allowCommands) {
      throw new BadInput(
          "--allow-commands is given with --on, and the programs of this machine are not on others;"
              + " accepted with --on: codecs of this program and of --plugins");
    }
    return plugins == null ? List.of() : List.of("--plugins", plugins.toAbsolutePath().toString());
  }

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
    return quoted(path.toString());
  }

  /** A word as a shell takes it. */
  static String quoted(String text) {
    return text.matches("[\\w./:@%+,-]+") ? text : "'" + text.replace("'", "'\\''") + "'";
  }
}
