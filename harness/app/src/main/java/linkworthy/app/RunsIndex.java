package linkworthy.app;

import java.net.URI;
import java.net.URISyntaxException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Instant;
import java.time.ZoneOffset;
import java.time.format.DateTimeFormatter;
import java.util.ArrayList;
import java.util.Comparator;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;
import linkworthy.report.IndexPage;
import linkworthy.report.ReportRenderer;
import linkworthy.results.ResultsFolder;
import linkworthy.results.RunRecord;
import linkworthy.statistics.Cell;

/** The start page over all runs below a folder: by study, newest first. */
final class RunsIndex {
  /** Name of the page in the folder. */
  static final String FILE = "index.html";

  private static final DateTimeFormatter DATE =
      DateTimeFormatter.ofPattern("yyyy-MM-dd HH:mm", Locale.ROOT).withZone(ZoneOffset.UTC);

  private final Path top;
  private final Path page;
  private final List<Dated> runs = new ArrayList<>();
  private final List<IndexPage.Damaged> damaged = new ArrayList<>();

  private record Dated(Instant start, String study, IndexPage.Run run) {}

  private RunsIndex(Path top, Path page) {
    this.top = top;
    this.page = page;
  }

  /**
   * The page as HTML.
   *
   * @param top the folder
   * @param page where the page will stand; links are relative to it
   * @throws BadInput if there is no such folder
   */
  static String html(Path top, Path page) {
    RunsIndex index = new RunsIndex(top, page);
    for (Path folder : ResultsFolder.below(top)) {
      try {
        index.add(ResultsFolder.open(folder));
      } catch (BadInput | Unavailable e) {
        index.damaged.add(
            new IndexPage.Damaged(index.shown(folder), String.valueOf(e.getMessage())));
      }
    }
    return new ReportRenderer().render(index.page());
  }

  private void add(ResultsFolder results) {
    RunRecord run = results.run();
    boolean isFinished = run.complete();
    if (isFinished && !results.isWhole()) {
      damaged.add(
          new IndexPage.Damaged(
              shown(results.path()), "fewer or more trials than its run.json says"));
      return;
    }
    List<Cell> cells = isFinished ? results.cells() : List.of();
    long codecs = cells.stream().map(Cell::codec).distinct().count();
    runs.add(
        new Dated(
            run.start(),
            run.study(),
            new IndexPage.Run(
                DATE.format(run.start()),
                shown(results.path()),
                link(results.path().resolve(ResultsFolder.REPORT)),
                run.purpose(),
                run.pictures().size()
                    + " pictures, "
                    + (isFinished ? codecs + " codecs, " : "")
                    + run.trialsDone()
                    + " trials",
                isFinished,
                isFinished
                    ? Reports.answer(results).get(0)
                    : "Go on with: linkworthy assess --resume "
                        + CodecOptions.quoted(results.path()))));
  }

  private IndexPage page() {
    runs.sort(
        Comparator.comparing(Dated::start).reversed().thenComparing(dated -> dated.run().folder()));
    Map<String, List<IndexPage.Run>> byStudy = new LinkedHashMap<>();
    runs.forEach(
        dated -> byStudy.computeIfAbsent(dated.study(), s -> new ArrayList<>()).add(dated.run()));
    List<IndexPage.Group> groups = new ArrayList<>();
    byStudy.forEach((study, of) -> groups.add(new IndexPage.Group(study, of)));
    long unfinished = runs.stream().filter(dated -> !dated.run().isFinished()).count();
    return new IndexPage(
        String.valueOf(top.toAbsolutePath().normalize().getFileName()),
        runs.size()
            + (runs.size() == 1 ? " run of " : " runs of ")
            + groups.size()
            + (groups.size() == 1 ? " study" : " studies")
            + (unfinished == 0 ? "" : ", " + unfinished + " of them unfinished")
            + (damaged.isEmpty() ? "" : "; folders that cannot be read: " + damaged.size()),
        groups,
        damaged,
        Version.text());
  }

  private String shown(Path folder) {
    String path = top.relativize(folder).toString();
    return path.isEmpty() ? "." : path;
  }

  /** The relative address of a file, or nothing if there is none. */
  private String link(Path file) {
    if (!Files.isRegularFile(file)) {
      return "";
    }
    Path from = page.toAbsolutePath().normalize().getParent();
    Path way = from == null ? file : from.relativize(file.toAbsolutePath().normalize());
    StringBuilder address = new StringBuilder(".");
    for (Path step : way) {
      try {
        address.append(new URI(null, null, "/" + step, null).toASCIIString());
      } catch (URISyntaxException e) {
        throw new IllegalStateException(e);
      }
    }
    return address.toString();
  }
}
