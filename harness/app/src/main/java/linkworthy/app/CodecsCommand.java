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
  private static final String PROTECT =
      """
      Every entry also takes
        protect: none | a group of keys | a list of groups for classes of their own; it goes before
                 the protect of the study (none). A group has one or more of
                 repeat:       copies of each packet in all, 1 to 16 (1)
                 reed-solomon: {n, k, depth, corrects}: n - k parity packets for every k, symbols
                               of a code word depth packets apart (none; depth 1); corrects
                               erasures or errors: missing packets alone, or damaged ones too
                               (erasures)
                 hamming:      {depth}: the code (7,4) on the bits of every transmission (none)
                 retransmit:   further tries for a packet that did not arrive, 0 to 255 (0)
                 and may have
                 ack-bytes:    length of an acknowledgement, with retransmit (5)
                 only:         classes of packets: header, basis, first, rest (all four)
      Sent, and counted: every copy, parity packet, further try and acknowledgement; with
      reed-solomon 1, 4 or 5 bytes in front of each payload, with hamming 7 bits for every 4.""";

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
      surroundings.out().println(PROTECT);
    }
  }
}
