package linkworthy.app;

import java.nio.file.Files;
import java.nio.file.Path;
import linkworthy.codec.PluginFolder;
import linkworthy.input.BadInput;
import linkworthy.results.FolderFiles;
import linkworthy.results.ResultsFolder;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;

/** Renders the report again. */
@Command(
    name = "report",
    description = {
      "Render the report of a results folder again, from its recorded data alone.",
      "Its pictures are made by repeating the trials that they are of, where the study's pictures",
      "are at hand."
    },
    mixinStandardHelpOptions = true,
    footer = {
      "",
      "Examples:",
      "  linkworthy report results/first-look/20261201T101500Z-0123abcd",
      "  linkworthy report results/yard/20261201T101500Z-0123abcd --need needs.yaml --out yard.html",
      "  linkworthy report --index results"
    })
final class ReportCommand implements Runnable {
  private final Surroundings surroundings;

  @Parameters(paramLabel = "RESULTS", description = "Results folder.")
  @SuppressWarnings("NullAway.Init")
  private Path folder;

  @Option(names = "--index", description = "Make a start page over all runs below RESULTS instead.")
  private boolean index;

  @Option(
      names = "--out",
      paramLabel = "FILE",
      description = "File to write (default: report.html, or index.html, in the folder).")
  private @Nullable Path out;

  @Option(
      names = "--need",
      paramLabel = "FILE",
      description =
          "File of needs, as 'shortlist' takes it: the page then answers which codec meets them.")
  private @Nullable Path need;

  @Mixin private final CodecOptions codecs = new CodecOptions();

  ReportCommand(Surroundings surroundings) {
    this.surroundings = surroundings;
  }

  @Override
  public void run() {
    if (index) {
      writeIndex();
      return;
    }
    Path file = out == null ? folder.resolve(ResultsFolder.REPORT) : out;
    requireNoFolder(file);
    ResultsFolder results = ResultsFolder.open(folder);
    try (PluginFolder plugins = codecs.open()) {
      FolderFiles.replace(file, Reports.html(results, codecs, plugins, need));
    }
    surroundings.out().println("report: " + file);
  }

  private void writeIndex() {
    Path file = out == null ? folder.resolve(RunsIndex.FILE) : out;
    requireNoFolder(file);
    FolderFiles.replace(file, RunsIndex.html(folder, file));
    surroundings.out().println("page: " + file);
  }

  private static void requireNoFolder(Path file) {
    if (Files.isDirectory(file)) {
      throw new BadInput("--out is the folder " + file + "; accepted: a file");
    }
  }
}
