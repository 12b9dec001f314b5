package linkworthy.app;

import java.nio.file.Path;
import java.util.List;
import java.util.Locale;
import linkworthy.corpus.Finding;
import linkworthy.corpus.Manifest;
import linkworthy.corpus.ManifestEntry;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;
import picocli.CommandLine.ScopeType;

/** The picture manifest. */
@Command(
    name = "corpus",
    description = "The pictures and their manifest.",
    mixinStandardHelpOptions = true,
    synopsisSubcommandLabel = "COMMAND",
    footer = {"", "Example: linkworthy corpus check"})
final class CorpusCommand {
  private final Surroundings surroundings;

  @Option(
      names = "--manifest",
      paramLabel = "FILE",
      scope = ScopeType.INHERIT,
      description = "A manifest of your own (default: the shipped pictures).")
  private @Nullable Path file;

  CorpusCommand(Surroundings surroundings) {
    this.surroundings = surroundings;
  }

  private Manifest manifest() {
    return file == null ? Manifest.shipped() : Manifest.read(file);
  }

  @Command(
      name = "list",
      description = "List the pictures with size, category, licence and credit.",
      mixinStandardHelpOptions = true,
      footer = {"", "Example: linkworthy corpus list"})
  void list() {
    for (ManifestEntry entry : manifest().entries()) {
      surroundings
          .out()
          .println(
              String.format(
                  Locale.ROOT,
                  "%-14s %-8s %4d x %-4d %2d bit %s  %-11s %-24s %s",
                  entry.id(),
                  entry.set(),
                  entry.width(),
                  entry.height(),
                  entry.bitDepth(),
                  entry.channels() == 1 ? "gray" : "RGB ",
                  entry.category(),
                  entry.licence(),
                  entry.attribution()));
    }
  }

  @Command(
      name = "check",
      description = "Verify checksum, size, depth and licence of every picture.",
      mixinStandardHelpOptions = true,
      footer = {
        "",
        "Exit code 1 if a picture is not what the manifest says.",
        "Example: linkworthy corpus check --manifest yard/manifest.csv"
      })
  int check() {
    Manifest manifest = manifest();
    List<Finding> findings = manifest.check();
    for (Finding finding : findings) {
      surroundings.out().println(finding.kind().label() + ": " + finding.message());
    }
    int pictures = manifest.entries().size();
    surroundings
        .out()
        .println(
            findings.isEmpty()
                ? pictures + " pictures checked; all are what the manifest says"
                : findings.size() + " of " + pictures + " pictures are not what the manifest says");
    return findings.isEmpty() ? Main.DONE : Main.NO;
  }
}
