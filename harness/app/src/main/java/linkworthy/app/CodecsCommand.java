package linkworthy.app;

import java.nio.file.Path;
import java.util.List;
import linkworthy.codec.CodecFamilies;
import linkworthy.codec.CodecFamily;
import linkworthy.codec.PluginFolder;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;

/** Lists the codecs. */
@Command(
    name = "codecs",
    description = "List the codecs, their parameters and what they cost.",
    mixinStandardHelpOptions = true,
    footer = {"", "Examples:", "  linkworthy codecs", "  linkworthy codecs --plugins my-plugins"})
final class CodecsCommand implements Runnable {
  private final Surroundings surroundings;

  @Option(
      names = "--plugins",
      paramLabel = "DIR",
      description = "Folder with jars of codecs of your own, to be listed as well.")
  private @Nullable Path plugins;

  CodecsCommand(Surroundings surroundings) {
    this.surroundings = surroundings;
  }

  @Override
  public void run() {
    try (PluginFolder opened = plugins == null ? PluginFolder.none() : PluginFolder.open(plugins)) {
      CodecFamilies families = CodecFamilies.installed().with(opened.families());
      List<String> help = families.all().stream().map(CodecFamily::help).toList();
      help.forEach(surroundings.out()::println);
    }
  }
}
