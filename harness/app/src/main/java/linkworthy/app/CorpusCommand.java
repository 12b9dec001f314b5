package linkworthy.app;

import java.nio.file.Path;
import java.time.Duration;
import java.util.List;
import java.util.Locale;
import linkworthy.corpus.Finding;
import linkworthy.corpus.Manifest;
import linkworthy.corpus.ManifestAddition;
import linkworthy.corpus.ManifestEntry;
import linkworthy.corpus.PictureFetch;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;
import picocli.CommandLine.ScopeType;

/** The picture manifest. */
@Command(
    name = "corpus",
    description = "The pictures and their manifest.",
    mixinStandardHelpOptions = true,
    synopsisSubcommandLabel = "COMMAND",
    footer = {"", "Example: linkworthy corpus check"})
final class CorpusCommand {
  private static final Duration PATIENCE = Duration.ofSeconds(20);

  private final Surroundings surroundings;

  @Option(
      names = "--manifest",
      paramLabel = "FILE",
      scope = ScopeType.INHERIT,
      description =
          "A manifest of your own (default: the shipped pictures; for add, manifest.csv in the"
              + " folder).")
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
                ? (pictures == 1
                        ? "1 picture checked; it is"
                        : pictures + " pictures checked; all are")
                    + " what the manifest says"
                : findings.size() + " of " + pictures + " pictures are not what the manifest says");
    return findings.isEmpty() ? Main.DONE : Main.NO;
  }

  @Command(
      name = "add",
      description = {
        "Add the pictures of a folder to a manifest, which is made if there is none. The manifest",
        "stands in the folder or above it."
      },
      mixinStandardHelpOptions = true,
      footer = {
        "",
        "Exit code 1 if a file of the folder was not added.",
        "Example: linkworthy corpus add yard/day --manifest yard/manifest.csv --set yard"
      })
  int add(
      @Parameters(paramLabel = "DIR", description = "Folder of pictures.") Path folder,
      @Option(
              names = "--licence",
              paramLabel = "ID",
              defaultValue = "LicenseRef-own-work",
              description = "Their licence (default: ${DEFAULT-VALUE}).")
          String licence,
      @Option(
              names = "--attribution",
              paramLabel = "TEXT",
              defaultValue = "the owner of the manifest",
              description = "Whom to credit (default: ${DEFAULT-VALUE}).")
          String attribution,
      @Option(
              names = "--set",
              paramLabel = "NAME",
              defaultValue = "own",
              description = "Set they join (default: ${DEFAULT-VALUE}).")
          String set,
      @Option(
              names = "--category",
              paramLabel = "TEXT",
              defaultValue = "own",
              description = "What they show (default: ${DEFAULT-VALUE}).")
          String category) {
    Path manifest = file == null ? folder.resolve("manifest.csv") : file;
    ManifestAddition.Result result =
        addition(licence, attribution, set, category).add(manifest, folder);
    var out = surroundings.out();
    result.added().forEach(entry -> out.println("added: " + entry.id() + "  " + entry.file()));
    result.listed().forEach(line -> out.println("listed already: " + line));
    result.warnings().forEach(line -> out.println("warning: " + line));
    result.refused().forEach(line -> out.println("not added: " + line));
    out.println(
        "%d added, %d listed already, %d not added: %s"
            .formatted(
                result.added().size(), result.listed().size(), result.refused().size(), manifest));
    return result.refused().isEmpty() ? Main.DONE : Main.NO;
  }

  private static ManifestAddition addition(
      String licence, String attribution, String set, String category) {
    try {
      return new ManifestAddition(licence, attribution, set, category);
    } catch (IllegalArgumentException e) {
      throw new BadInput("--" + e.getMessage(), e);
    }
  }

  @Command(
      name = "fetch",
      description = {
        "Fetch the pictures that the manifest lists with an address (column address, https) and",
        "that are not there yet. A cut one is continued."
      },
      mixinStandardHelpOptions = true,
      footer = {
        "",
        "Exit code 1 if a picture is not what the manifest says, 3 if one could not be fetched.",
        "Example: linkworthy corpus fetch --manifest yard/manifest.csv"
      })
  int fetch() {
    Manifest manifest = manifest();
    PictureFetch fetch = new PictureFetch(manifest, PATIENCE);
    var out = surroundings.out();
    int code = Main.DONE;
    for (ManifestEntry entry : manifest.entries()) {
      try {
        switch (fetch.fetch(entry)) {
          case FETCHED -> out.println("fetched: " + entry.id() + "  " + entry.file());
          case HERE -> out.println("here: " + entry.id() + "  " + entry.file());
          case WITHOUT_ADDRESS -> out.println("missing, no address: " + entry.id());
        }
      } catch (BadInput e) {
        code = Math.max(code, Main.NO);
        out.println("wrong: " + entry.id() + "  " + e.getMessage());
      } catch (Unavailable e) {
        code = Main.ENVIRONMENT;
        out.println("failed: " + entry.id() + "  " + e.getMessage());
      }
    }
    return code;
  }
}
