package linkworthy.results;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Map;
import java.util.stream.Stream;
import linkworthy.input.BadInput;
import linkworthy.statistics.Cell;
import linkworthy.study.Study;
import linkworthy.study.StudyWriter;
import linkworthy.trial.NodeShare;
import linkworthy.trial.Timing;
import linkworthy.trial.Trial;
import org.jspecify.annotations.Nullable;

/**
 * The record of one run, held for writing: {@link #begin}, {@link #append} for each work unit,
 * {@link #finish}, {@link #writeReport}, {@link #close}. Finished files appear whole or not at all;
 * the two growing tables have whole units. Not safe for use by several threads.
 */
public final class ResultsWriter implements AutoCloseable {
  /** What the program writes, the file that marks a results folder last. */
  private static final List<String> WRITTEN =
      List.of(
          ResultsFolder.REPORT,
          CellsCsv.FILE,
          NodesCsv.FILE,
          TimingsCsv.FILE,
          TrialsCsv.FILE,
          ResultsFolder.STUDY,
          RunRecord.FILE);

  private static final String MODEL_NAME = "[a-z][a-z0-9-]*-[0-9a-f]{8}(\\.yaml|-[a-z]+\\.csv)";

  private final Path folder;
  private final FolderLock lock;
  private @Nullable AppendedTable<Trial> trials;
  private @Nullable AppendedTable<Timing> timings;

  private ResultsWriter(Path folder, FolderLock lock) {
    this.folder = folder;
    this.lock = lock;
  }

  static ResultsWriter create(Path out, boolean overwrite) {
    if (Files.exists(out) && !Files.isDirectory(out)) {
      throw new BadInput(out + " is a file; accepted: a folder, new or empty");
    }
    try {
      Files.createDirectories(out);
      FolderLock.requireNotHeld(out);
      requireFree(out, overwrite);
      FolderLock lock = FolderLock.take(out);
      try {
        requireFree(out, overwrite);
        removeRecord(out);
        return new ResultsWriter(out, lock);
      } catch (RuntimeException | IOException e) {
        lock.close();
        throw e;
      }
    } catch (IOException e) {
      throw FolderFiles.unavailable("write", out, e);
    }
  }

  private static void requireFree(Path out, boolean overwrite) throws IOException {
    List<String> names = names(out);
    if (names.isEmpty() || (names.equals(List.of(FolderLock.FILE)) && FolderLock.isBare(out))) {
      return;
    }
    if (!overwrite) {
      throw new BadInput(
          out
              + " is not empty; accepted: a new or empty folder, or --overwrite to replace a record");
    }
    if (!Files.isRegularFile(out.resolve(RunRecord.FILE))) {
      throw new BadInput(
          out
              + " is not empty and no results folder, so --overwrite leaves it alone; accepted: a"
              + " new, empty or results folder");
    }
    ResultsFolder.readRun(out);
  }

  private static void removeRecord(Path out) throws IOException {
    Path models = out.resolve(StudyWriter.MODEL_FOLDER);
    if (Files.isDirectory(models)) {
      for (String name : names(models)) {
        if (name.replace(FolderFiles.UNFINISHED, "").matches(MODEL_NAME)) {
          Files.delete(models.resolve(name));
        }
      }
      if (names(models).isEmpty()) {
        Files.delete(models);
      }
    }
    for (String name : WRITTEN) {
      Files.deleteIfExists(out.resolve(name + FolderFiles.UNFINISHED));
      Files.deleteIfExists(out.resolve(name));
    }
  }

  private static List<String> names(Path folder) throws IOException {
    try (Stream<Path> files = Files.list(folder)) {
      return files.map(file -> String.valueOf(file.getFileName())).sorted().toList();
    }
  }

  public Path path() {
    return folder;
  }

  /**
   * Writes the study and the circumstances of its run, and opens the tables of trials and timings.
   *
   * @throws linkworthy.input.Unavailable if the folder cannot be written
   */
  public void begin(Study study, RunRecord run) {
    write(RunRecord.FILE, run.toJson());
    Map<String, String> models = StudyWriter.modelFiles(study);
    if (!models.isEmpty()) {
      makeModelFolder();
      models.forEach(this::write);
    }
    write(ResultsFolder.STUDY, StudyWriter.canonical(study));
    List<String> further = study.furtherColumns();
    trials = new AppendedTable<>(TrialsCsv.TABLE.with(further), folder.resolve(TrialsCsv.FILE));
    timings = new AppendedTable<>(TimingsCsv.TABLE, folder.resolve(TimingsCsv.FILE));
  }

  private void makeModelFolder() {
    Path models = folder.resolve(StudyWriter.MODEL_FOLDER);
    try {
      Files.createDirectories(models);
    } catch (IOException e) {
      throw FolderFiles.unavailable("write", models, e);
    }
  }

  /**
   * Adds the rows of one work unit. When this returns, the rows survive the end of the process.
   *
   * @throws linkworthy.input.Unavailable if they cannot be written; the table then ends with the
   *     unit before
   * @throws IllegalStateException before {@link #begin} or after {@link #close}
   */
  public void append(List<Trial> unit, List<Timing> times) {
    if (trials == null || timings == null) {
      throw new IllegalStateException("the record has not begun, or is closed");
    }
    trials.append(unit);
    timings.append(times);
  }

  /**
   * Writes the cells of a complete run and the last word on its circumstances.
   *
   * @throws linkworthy.input.Unavailable if the folder cannot be written
   */
  public void finish(List<Cell> cells, RunRecord run) {
    write(CellsCsv.FILE, CellsCsv.text(cells));
    write(RunRecord.FILE, run.toJson());
  }

  /**
   * Writes each node's part, if any codec has helper nodes.
   *
   * @throws linkworthy.input.Unavailable if the folder cannot be written
   */
  public void writeNodes(List<NodeShare> shares) {
    if (!shares.isEmpty()) {
      write(NodesCsv.FILE, NodesCsv.text(shares));
    }
  }

  /**
   * Notes how far a run came that was stopped.
   *
   * @throws linkworthy.input.Unavailable if the folder cannot be written
   */
  public void stop(RunRecord run) {
    write(RunRecord.FILE, run.toJson());
  }

  /**
   * Writes the report.
   *
   * @throws linkworthy.input.Unavailable if the folder cannot be written
   */
  public void writeReport(String html) {
    write(ResultsFolder.REPORT, html);
  }

  private void write(String name, String text) {
    FolderFiles.replace(folder.resolve(name), text);
  }

  /** Closes the tables and lets go of the folder. */
  @Override
  public void close() {
    try (lock) {
      closeTables();
    }
  }

  private void closeTables() {
    AppendedTable<Timing> open = timings;
    timings = null;
    try {
      if (trials != null) {
        trials.close();
      }
    } finally {
      trials = null;
      if (open != null) {
        open.close();
      }
    }
  }
}
