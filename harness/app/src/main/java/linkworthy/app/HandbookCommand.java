package linkworthy.app;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Map;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;
import linkworthy.results.FolderFiles;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;

/** Writes the handbook as pages for a browser. */
@Command(
    name = "handbook",
    description =
        "Write the handbook as HTML pages that need nothing else, from the program's jar.",
    mixinStandardHelpOptions = true,
    footer = {"", "Example: linkworthy handbook --out handbook"})
final class HandbookCommand implements Runnable {
  private final Surroundings surroundings;

  @Option(
      names = "--out",
      paramLabel = "DIR",
      required = true,
      description = "Folder to write to; pages of the same name are replaced.")
  @SuppressWarnings("NullAway.Init")
  private Path out;

  HandbookCommand(Surroundings surroundings) {
    this.surroundings = surroundings;
  }

  @Override
  public void run() {
    if (Files.exists(out) && !Files.isDirectory(out)) {
      throw new BadInput("--out is the file " + out + "; accepted: a folder");
    }
    Map<String, String> pages = Handbook.pages(Resources::bytes);
    try {
      Files.createDirectories(out);
    } catch (IOException e) {
      throw Unavailable.cannot("write " + out, e);
    }
    pages.forEach((name, html) -> FolderFiles.replace(out.resolve(name), html));
    surroundings.out().println("handbook: " + out.resolve(Handbook.START));
  }
}
