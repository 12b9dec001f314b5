package linkworthy.app;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import linkworthy.input.Unavailable;
import linkworthy.results.ResultsFolder;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;

/** Renders the report again. */
@Command(
    name = "report",
    description = "Render the report of a results folder again, from its recorded data alone.",
    mixinStandardHelpOptions = true,
    footer = {"", "Example: linkworthy report results/first-look/20261201T101500Z-0123abcd"})
final class ReportCommand implements Runnable {
  private final Surroundings surroundings;

  @Parameters(paramLabel = "RESULTS", description = "Results folder.")
  @SuppressWarnings("NullAway.Init")
  private Path folder;

  @Option(
      names = "--out",
      paramLabel = "FILE",
      description = "File to write (default: report.html in the folder).")
  private @Nullable Path out;

  ReportCommand(Surroundings surroundings) {
    this.surroundings = surroundings;
  }

  @Override
  public void run() {
    String html = Reports.html(ResultsFolder.open(folder));
    Path file = out == null ? folder.resolve(ResultsFolder.REPORT) : out;
    try {
      Path unfinished = file.resolveSibling(file.getFileName() + ".part");
      Files.writeString(unfinished, html);
      Files.move(unfinished, file, java.nio.file.StandardCopyOption.REPLACE_EXISTING);
    } catch (IOException e) {
      throw new Unavailable("cannot write " + file + ": " + e.getMessage(), e);
    }
    surroundings.out().println("report: " + file);
  }
}
