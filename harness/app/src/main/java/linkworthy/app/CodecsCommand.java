package linkworthy.app;

import linkworthy.codec.CodecFamilies;
import linkworthy.codec.CodecFamily;
import picocli.CommandLine.Command;

/** Lists the codecs. */
@Command(
    name = "codecs",
    description = "List the codecs, their parameters and what they cost.",
    mixinStandardHelpOptions = true,
    footer = {"", "Example: linkworthy codecs"})
final class CodecsCommand implements Runnable {
  private final Surroundings surroundings;

  CodecsCommand(Surroundings surroundings) {
    this.surroundings = surroundings;
  }

  @Override
  public void run() {
    for (CodecFamily family : CodecFamilies.all()) {
      surroundings.out().println(family.help());
    }
  }
}
