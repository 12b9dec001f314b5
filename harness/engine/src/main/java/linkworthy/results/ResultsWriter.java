package linkworthy.results;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Map;
import java.util.function.Consumer;
import java.util.stream.Stream;
import linkworthy.input.BadInput;
import linkworthy.statistics.Cell;
import linkworthy.study.Study;
import linkworthy.study.StudyWriter;
import linkworthy.trial.NodeShare;
import linkworthy.trial.NodeTable;
import linkworthy.trial.Plan;
import linkworthy.trial.Prediction;
import linkworthy.trial.PredictionTable;
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
          PredictionsCsv.FILE,
          TimingsCsv.FILE,
          TrialsCsv.FILE,
          ResultsFolder.STUDY,
          RunRecord.FILE);

  private static final String MODEL_NAME = "[a-z][a-z0-9-]*-[0-9a-f]{8}(\\.yaml|-[a-z]+\\.csv)";

  private final Path folder;
  private final FolderLock lock;
  private @Nullable RunRecord run;
  private int units;
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
    if (isNothingBegun(out, names)) {
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

  /** Whether there is nothing, or what a run leaves that is killed before it has begun. */
  private static boolean isNothingBegun(Path out, List<String> names) throws IOException {
    for (String name : names) {
      boolean bareLock = name.equals(FolderLock.FILE) && FolderLock.isBare(out);
      if (!bareLock && !name.equals(RunRecord.FILE + FolderFiles.UNFINISHED)) {
        return false;
      }
    }
    return true;
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
  public void begin(Study study, RunRecord begun) {
    run = begun;
    write(RunRecord.FILE, begun.toJson());
    Map<String, String> models = StudyWriter.modelFiles(study);
    if (!models.isEmpty()) {
      makeModelFolder();
      models.forEach(this::write);
    }
    write(ResultsFolder.STUDY, StudyWriter.canonical(study));
    trials = AppendedTable.create(trialsTable(study), folder.resolve(TrialsCsv.FILE));
    timings = AppendedTable.create(TimingsCsv.TABLE, folder.resolve(TimingsCsv.FILE));
  }

  private static CsvTable<Trial> trialsTable(Study study) {
    return TrialsCsv.TABLE.with(study.furtherColumns());
  }

  static ResultsWriter resume(Path folder, Plan plan, RunRecord now, Consumer<? super Trial> each) {
    try {
      FolderLock.requireNotHeld(folder);
      if (Files.exists(folder.resolve(FolderLock.FILE)) && !FolderLock.isBare(folder)) {
        throw new BadInput(
            folder.resolve(FolderLock.FILE) + " is not empty; accepted: none, or one of a run");
      }
    } catch (IOException e) {
      throw FolderFiles.unavailable("read", folder, e);
    }
    ResultsWriter writer = new ResultsWriter(folder, FolderLock.take(folder));
    try {
      writer.goOn(plan, now, each);
      return writer;
    } catch (RuntimeException e) {
      writer.close();
      throw e;
    }
  }

  /**
   * Finds what can be kept before anything is changed. A unit counts if both tables have it: a run
   * that is killed leaves the times at most one unit behind.
   */
  private void goOn(Plan plan, RunRecord now, Consumer<? super Trial> each) {
    RunRecord begun = ResultsFolder.readRun(folder);
    boolean mayEndEarly = plan.study().earlyStop() != null;
    RunRecord unused = begun.goesOn(now, 0, mayEndEarly);
    CsvTable<Trial> table = trialsTable(plan.study());
    Path trialsFile = folder.resolve(TrialsCsv.FILE);
    Path timingsFile = folder.resolve(TimingsCsv.FILE);
    int codecs = plan.study().codecs().size();
    PlannedRows planned = new PlannedRows(plan, trialsFile, timingsFile);
    WholeUnits times =
        WholeUnits.of(TimingsCsv.TABLE, timingsFile, codecs, plan.units(), planned::timings);
    WholeUnits rows =
        WholeUnits.of(
            table,
            trialsFile,
            codecs,
            plan.units(),
            (unit, unitRows, line) -> {
              planned.trials(unit, unitRows, line);
              if (unit < times.units()) {
                unitRows.forEach(each);
              }
            });
    if (!Files.exists(timingsFile) && rows.units() > 1) {
      throw new BadInput(
          folder + " has no " + TimingsCsv.FILE + "; accepted: a folder as its run left it");
    }
    units = Math.min(rows.units(), times.units());
    run = begun.goesOn(now, (long) units * codecs, mayEndEarly);
    removeUnfinished();
    for (String model : StudyWriter.modelFiles(plan.study()).keySet()) {
      removeUnfinished(model);
    }
    write(RunRecord.FILE, run.toJson());
    trials = AppendedTable.reopen(table, trialsFile, upTo(units, rows, table, trialsFile, codecs));
    timings =
        AppendedTable.reopen(
            TimingsCsv.TABLE,
            timingsFile,
            upTo(units, times, TimingsCsv.TABLE, timingsFile, codecs));
  }

  private static <T> long upTo(
      int units, WholeUnits found, CsvTable<T> table, Path file, int rowsOfUnit) {
    return found.units() == units
        ? found.bytes()
        : WholeUnits.of(table, file, rowsOfUnit, units, (unit, rows, line) -> {}).bytes();
  }

  /** Holds a complete folder to write its report, and removes what a killed run left. */
  static ResultsWriter complete(Path folder) {
    ResultsWriter writer = new ResultsWriter(folder, FolderLock.take(folder));
    try {
      writer.removeUnfinished();
      return writer;
    } catch (RuntimeException e) {
      writer.close();
      throw e;
    }
  }

  /** Whether a run that was killed at its very end left files behind. */
  static boolean hasRemains(Path folder) {
    return Files.exists(folder.resolve(FolderLock.FILE))
        || WRITTEN.stream()
            .anyMatch(name -> Files.exists(folder.resolve(name + FolderFiles.UNFINISHED)));
  }

  private void removeUnfinished() {
    WRITTEN.forEach(this::removeUnfinished);
  }

  private void removeUnfinished(String name) {
    Path file = folder.resolve(name + FolderFiles.UNFINISHED);
    try {
      Files.deleteIfExists(file);
    } catch (IOException e) {
      throw FolderFiles.unavailable("remove", file, e);
    }
  }

  /** Whole units in the record when it was opened; 0 in a new one. */
  public int unitsAtStart() {
    return units;
  }

  /**
   * The record of the run, as it stands in the folder.
   *
   * @throws IllegalStateException before {@link #begin}
   */
  public RunRecord run() {
    if (run == null) {
      throw new IllegalStateException("the record has not begun");
    }
    return run;
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
  public void finish(List<Cell> cells, RunRecord ended) {
    write(CellsCsv.FILE, CellsCsv.text(cells));
    stop(ended);
  }

  /**
   * Writes all that follows from the rows and the pictures of a complete run, but for the report.
   *
   * @param run the record of the run at its end
   * @throws linkworthy.input.Unavailable if the folder cannot be written
   */
  public void complete(Plan plan, List<Cell> cells, RunRecord run) {
    writeNodes(NodeTable.of(plan));
    writePredictions(PredictionTable.of(plan));
    finish(cells, run);
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
   * Writes the predictions, if anything is predicted.
   *
   * @throws linkworthy.input.Unavailable if the folder cannot be written
   */
  public void writePredictions(List<Prediction> predictions) {
    if (predictions.stream().anyMatch(Prediction::isMade)) {
      write(PredictionsCsv.FILE, PredictionsCsv.text(predictions));
    }
  }

  /**
   * Notes how far a run came that was stopped.
   *
   * @throws linkworthy.input.Unavailable if the folder cannot be written
   */
  public void stop(RunRecord ended) {
    write(RunRecord.FILE, ended.toJson());
    run = ended;
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
