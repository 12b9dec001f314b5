package linkworthy.results;

import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.charset.CharacterCodingException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Clock;
import java.time.ZoneOffset;
import java.time.format.DateTimeFormatter;
import java.util.List;
import java.util.Locale;
import java.util.Objects;
import java.util.function.Consumer;
import java.util.stream.Stream;
import linkworthy.codec.CodecFamilies;
import linkworthy.codec.CodecReader;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;
import linkworthy.statistics.Cell;
import linkworthy.study.Study;
import linkworthy.study.StudyReader;
import linkworthy.study.StudyWriter;
import linkworthy.trial.NodeShare;
import linkworthy.trial.Plan;
import linkworthy.trial.Prediction;
import linkworthy.trial.Timing;
import linkworthy.trial.Trial;

/**
 * The record of one run, open for reading. {@code study.yaml} (with {@code models/} beside it where
 * the study has models of its own), {@code run.json} and {@code trials.csv} are always there;
 * {@code cells.csv} once the run is complete.
 */
public final class ResultsFolder {
  /** Name of the study in a results folder. */
  public static final String STUDY = "study.yaml";

  /** Name of the report in a results folder. */
  public static final String REPORT = "report.html";

  private static final DateTimeFormatter TIME =
      DateTimeFormatter.ofPattern("uuuuMMdd'T'HHmmss'Z'", Locale.ROOT).withZone(ZoneOffset.UTC);
  private static final int SHORT_HASH = 8;

  private final Path folder;
  private final RunRecord run;

  private ResultsFolder(Path folder, RunRecord run) {
    this.folder = folder;
    this.run = run;
  }

  /**
   * The folder of a run that has none given: {@code <study name>/<UTC time>-<first 8 digits of the
   * study's fingerprint>}.
   */
  public static Path defaultPath(Path resultsRoot, Study study, Clock clock) {
    String hash = StudyWriter.fingerprint(study).substring(0, SHORT_HASH);
    return resultsRoot.resolve(study.name()).resolve(TIME.format(clock.instant()) + "-" + hash);
  }

  /**
   * Makes a folder and holds it for writing until the writer is closed.
   *
   * @param overwrite whether the record of an earlier run may be removed; other files are left
   * @throws BadInput if the folder is not empty and may not be overwritten, or another run holds it
   * @throws linkworthy.input.Unavailable if it cannot be written
   */
  public static ResultsWriter create(Path out, boolean overwrite) {
    return ResultsWriter.create(out, overwrite);
  }

  /**
   * Opens a record.
   *
   * @throws BadInput if the folder is none, or lacks a file
   * @throws linkworthy.input.Unavailable if it cannot be read
   */
  public static ResultsFolder open(Path folder) {
    requireFolder(folder);
    for (String name : List.of(RunRecord.FILE, STUDY, TrialsCsv.FILE)) {
      requireFile(folder, name);
    }
    RunRecord run = readRun(folder);
    if (run.complete()) {
      requireFile(folder, CellsCsv.FILE);
    }
    return new ResultsFolder(folder, run);
  }

  /**
   * Every folder below a folder, or the folder itself, that has the record of a run or a table of
   * trials, in the order of the paths. Whether it can be used is another matter.
   *
   * @throws BadInput if there is no such folder
   * @throws Unavailable if a folder cannot be read
   */
  public static List<Path> below(Path folder) {
    if (!Files.isDirectory(folder)) {
      throw new BadInput(
          folder
              + (Files.exists(folder) ? " is no folder" : " does not exist")
              + "; accepted: a folder with results folders in it");
    }
    try (Stream<Path> paths = Files.walk(folder)) {
      return paths
          .filter(path -> path.endsWith(RunRecord.FILE) || path.endsWith(TrialsCsv.FILE))
          .filter(Files::isRegularFile)
          .map(path -> path.resolveSibling(""))
          .distinct()
          .sorted()
          .toList();
    } catch (UncheckedIOException e) {
      throw Unavailable.cannot("read " + folder, Objects.requireNonNull(e.getCause()));
    } catch (IOException e) {
      throw Unavailable.cannot("read " + folder, e);
    }
  }

  private static void requireFolder(Path folder) {
    if (!Files.isDirectory(folder)) {
      throw new BadInput(
          folder
              + (Files.exists(folder) ? " is no folder" : " does not exist")
              + "; accepted: a results folder");
    }
  }

  /**
   * Opens the record of a run that was stopped at any moment: tables may be cut off or missing.
   *
   * @throws BadInput if the folder is none, or the run was stopped before its study was written
   * @throws linkworthy.input.Unavailable if it cannot be read
   */
  public static ResultsFolder openStopped(Path folder) {
    requireFolder(folder);
    requireFile(folder, RunRecord.FILE);
    RunRecord run = readRun(folder);
    if (!Files.isRegularFile(folder.resolve(STUDY))) {
      throw new BadInput(
          folder
              + " has no "
              + STUDY
              + ": its run was stopped before it had begun; accepted: 'assess' with --overwrite");
    }
    return new ResultsFolder(folder, run);
  }

  /** How a run finds its folder. */
  public enum Start {
    /** New or empty. */
    NEW,
    /** With the record of an earlier run, which is removed. */
    OVERWRITE,
    /** With the record of this very run, which was stopped. */
    RESUME
  }

  /**
   * Opens the folder of a run as {@link #create} and {@link #resume} do, and in a new one begins
   * the record.
   *
   * @param now the record of a run that begins now
   * @param each takes the trials that are kept
   * @throws BadInput as those do
   * @throws linkworthy.input.Unavailable as those do
   */
  public static ResultsWriter open(
      Path folder, Start start, Plan plan, RunRecord now, Consumer<? super Trial> each) {
    if (start == Start.RESUME) {
      return resume(folder, plan, now, each);
    }
    ResultsWriter writer = create(folder, start == Start.OVERWRITE);
    try {
      writer.begin(plan.study(), now);
      return writer;
    } catch (RuntimeException e) {
      writer.close();
      throw e;
    }
  }

  /** Whether the record says that it is complete and has as many rows and files as it says. */
  public boolean isWhole() {
    Path trials = folder.resolve(TrialsCsv.FILE);
    if (!run.complete()
        || !Files.isRegularFile(trials)
        || !Files.isRegularFile(folder.resolve(CellsCsv.FILE))) {
      return false;
    }
    try (LineInput lines = new LineInput(trials)) {
      long rows = -1;
      while (lines.next() != null) {
        rows++;
      }
      return rows == run.trialsPlanned() && lines.atEnd();
    } catch (IOException e) {
      throw FolderFiles.unavailable("read", trials, e);
    }
  }

  /**
   * Takes a run up again that was stopped, and holds its folder for writing until the writer is
   * closed. Tables are cut back to whole work units, and to the same number of them.
   *
   * @param plan of the folder's own study
   * @param now the record of a run of this plan that would begin now
   * @param each takes the trials that are kept
   * @throws BadInput if another run holds the folder, its rows are not those of the plan, or the
   *     run that was stopped differs from this one in what decides the rows
   * @throws linkworthy.input.Unavailable if it cannot be read or written
   */
  public static ResultsWriter resume(
      Path folder, Plan plan, RunRecord now, Consumer<? super Trial> each) {
    return ResultsWriter.resume(folder, plan, now, each);
  }

  /**
   * Whether a complete folder lacks its report or has files of a run that was killed at its end.
   */
  public boolean isUntidy() {
    return !Files.exists(folder.resolve(REPORT)) || ResultsWriter.hasRemains(folder);
  }

  /**
   * Holds a complete folder for its report to be written; what a killed run left is removed.
   *
   * @throws BadInput if another run holds the folder
   * @throws linkworthy.input.Unavailable if it cannot be written
   */
  public ResultsWriter tidy() {
    return ResultsWriter.complete(folder);
  }

  static RunRecord readRun(Path folder) {
    Path file = folder.resolve(RunRecord.FILE);
    try {
      return RunRecord.parse(file.toString(), Files.readString(file));
    } catch (CharacterCodingException e) {
      throw new BadInput(file + " is not UTF-8 text; accepted: the record of a run", e);
    } catch (IOException e) {
      throw FolderFiles.unavailable("read", file, e);
    }
  }

  private static void requireFile(Path folder, String name) {
    if (!Files.isRegularFile(folder.resolve(name))) {
      throw new BadInput(
          folder + " has no " + name + "; accepted: a results folder, as 'assess' makes it");
    }
  }

  public Path path() {
    return folder;
  }

  /** The circumstances of the run. */
  public RunRecord run() {
    return run;
  }

  /**
   * The text of the study as run, every default written out.
   *
   * @throws BadInput if the file is not UTF-8 text
   * @throws linkworthy.input.Unavailable if it cannot be read
   */
  public String studyText() {
    Path file = folder.resolve(STUDY);
    try {
      return Files.readString(file);
    } catch (CharacterCodingException e) {
      throw new BadInput(file + " is not UTF-8 text; accepted: a study", e);
    } catch (IOException e) {
      throw FolderFiles.unavailable("read", file, e);
    }
  }

  /**
   * The study as run, ready to be repeated: a manifest of the user's own is looked for where it was
   * at the time of the run.
   *
   * @throws BadInput if the file cannot be used
   */
  public Study study() {
    return study(CodecFamilies.installed());
  }

  /**
   * The study as run, its codecs made by these families.
   *
   * @throws BadInput if the file cannot be used
   */
  public Study study(CodecReader codecs) {
    return placed(StudyReader.read(folder.resolve(STUDY), codecs));
  }

  /**
   * The study as run, for reading only: of its codecs it has the labels alone, so that neither
   * plugins nor leave to run programs are needed.
   *
   * @throws BadInput if the file cannot be used
   */
  public Study studyOnPaper() {
    return study(LabelledCodec.READER);
  }

  private Study placed(Study study) {
    Path manifest = run.manifestFile();
    return manifest == null ? study : study.withManifestAt(manifest);
  }

  /**
   * The study as run, for work that must give the same numbers.
   *
   * @throws BadInput if its fingerprint is no longer that of the run: the file was changed, or this
   *     version of the program has other noise models
   */
  public Study unchangedStudy() {
    return unchangedStudy(CodecFamilies.installed());
  }

  /**
   * The same with codecs made by these families.
   *
   * @throws BadInput if its fingerprint is no longer that of the run
   */
  public Study unchangedStudy(CodecReader codecs) {
    Study study = study(codecs);
    String found = StudyWriter.fingerprint(study);
    if (!found.equals(run.studyFingerprint())) {
      throw new BadInput(
          folder.resolve(STUDY)
              + " has the fingerprint "
              + found.substring(0, SHORT_HASH)
              + "...; accepted: "
              + run.studyFingerprint()
              + ", that of the run (was the file changed, or is this another version than "
              + run.programVersion()
              + "?)");
    }
    return study;
  }

  /**
   * Reads the trials one by one, in the order of the plan, and holds the record against itself.
   *
   * @return the number of trials
   * @throws BadInput if the file is cut off or no table of trials, has a row twice or in the wrong
   *     place, or if a complete run has not as many rows as it says or cells that do not follow
   *     from them
   */
  public long trials(Consumer<? super Trial> each) {
    RecordCheck check = new RecordCheck(this);
    long rows =
        rows(
            trial -> {
              check.require(trial);
              each.accept(trial);
            });
    check.requireEnd();
    return rows;
  }

  /**
   * Reads the trials one by one, whatever else the record says.
   *
   * @return the number of trials
   * @throws BadInput if the file is cut off or no table of trials
   */
  public long rows(Consumer<? super Trial> each) {
    return TrialsCsv.read(folder.resolve(TrialsCsv.FILE), each);
  }

  /**
   * @throws BadInput if the run is not complete
   */
  public void requireComplete() {
    if (!run.complete()) {
      throw new BadInput(
          folder
              + " is the record of a run that is not complete ("
              + run.trialsDone()
              + " of "
              + run.trialsPlanned()
              + " trials); accepted: a complete run, as 'assess --resume "
              + folder
              + "' makes it");
    }
  }

  /**
   * The cells of a complete run.
   *
   * @throws BadInput if the run is not complete, or the file is missing or no table of cells
   */
  public List<Cell> cells() {
    requireComplete();
    requireFile(folder, CellsCsv.FILE);
    return CellsCsv.read(folder.resolve(CellsCsv.FILE));
  }

  /**
   * Each node's part in the codecs that have helper nodes; empty where there are none.
   *
   * @throws BadInput if the file is no table of nodes
   */
  public List<NodeShare> nodes() {
    Path file = folder.resolve(NodesCsv.FILE);
    return Files.exists(file) ? NodesCsv.read(file) : List.of();
  }

  /**
   * What formulas say of the quality under noise; empty where they say nothing.
   *
   * @throws BadInput if the file is no table of predictions
   */
  public List<Prediction> predictions() {
    Path file = folder.resolve(PredictionsCsv.FILE);
    return Files.exists(file) ? PredictionsCsv.read(file) : List.of();
  }

  /**
   * Reads the timings one by one.
   *
   * @return the number of rows
   * @throws BadInput if the file is missing, cut off or no table of timings
   */
  public long timings(Consumer<? super Timing> each) {
    return TimingsCsv.read(folder.resolve(TimingsCsv.FILE), each);
  }
}
