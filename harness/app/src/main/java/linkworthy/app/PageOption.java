package linkworthy.app;

import java.nio.file.Files;
import java.nio.file.Path;
import java.util.function.Supplier;
import linkworthy.input.BadInput;
import linkworthy.report.ComparisonPage;
import linkworthy.report.Fact;
import linkworthy.report.ReportRenderer;
import linkworthy.results.FolderFiles;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Option;

/** The option to have a command's answer as a page as well. */
final class PageOption {
  @Option(names = "--html", paramLabel = "FILE", description = "Write a page as well.")
  private @Nullable Path html;

  /**
   * To be called before long work.
   *
   * @throws BadInput if the page has the name of a folder
   */
  void check() {
    if (html != null && Files.isDirectory(html)) {
      throw new BadInput("--html is the folder " + html + "; accepted: a file");
    }
  }

  /** Writes the page, if one is asked for, and says where it is. */
  void write(Surroundings surroundings, Supplier<ComparisonPage> page) {
    writeText(surroundings, () -> new ReportRenderer().render(page.get()));
  }

  /** The same of a page that is rendered already. */
  void writeText(Surroundings surroundings, Supplier<String> text) {
    if (html != null) {
      FolderFiles.replace(html, text.get());
      surroundings.out().println("page: " + html);
    }
  }

  /** What to type at the root of the project, with what it does; paths are quoted where needed. */
  static Fact command(String what, Object... words) {
    StringBuilder line = new StringBuilder("./linkworthy");
    for (Object word : words) {
      line.append(' ').append(CodecOptions.quoted(word.toString()));
    }
    return new Fact(what, line.toString());
  }
}
