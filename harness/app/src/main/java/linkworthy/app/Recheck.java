package linkworthy.app;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Objects;
import java.util.concurrent.ExecutorService;
import java.util.concurrent.Executors;
import java.util.concurrent.Future;
import java.util.function.Consumer;
import linkworthy.codec.PluginFolder;
import linkworthy.corpus.Finding;
import linkworthy.corpus.Manifest;
import linkworthy.corpus.ManifestEntry;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;
import linkworthy.results.NodesCsv;
import linkworthy.results.PredictionsCsv;
import linkworthy.results.RecordCheck;
import linkworthy.results.ResultsFolder;
import linkworthy.results.RunRecord;
import linkworthy.results.TrialsCsv;
import linkworthy.statistics.RowSample;
import linkworthy.study.CodecChoice;
import linkworthy.study.Study;
import linkworthy.study.StudyWriter;
import linkworthy.trial.Awaited;
import linkworthy.trial.Course;
import linkworthy.trial.NodeShare;
import linkworthy.trial.NodeTable;
import linkworthy.trial.Plan;
import linkworthy.trial.Prediction;
import linkworthy.trial.PredictionTable;
import linkworthy.trial.Repetition;
import linkworthy.trial.Trial;
import org.jspecify.annotations.Nullable;

/**
 * Checks a record in steps, from what the rows rest on to the rows themselves, and says of each
 * step what was found. Trials are repeated only if study and pictures are those of the run:
 * otherwise they would be other trials.
 */
final class Recheck {
  /** Trials that are repeated unless something else is asked for. */
  static final long USUAL_SAMPLE = 100;

  private static final int BATCH = 16;

  private final Surroundings surroundings;
  private final ResultsFolder results;
  private final Extent extent;
  private final RecheckFindings findings = new RecheckFindings();

  /**
   * How much is done.
   *
   * @param sample trials to repeat, at most all there are
   * @param seed of the sample
   */
  record Extent(long sample, long seed, int threads, boolean quiet) {}

  Recheck(Surroundings surroundings, ResultsFolder results, Extent extent) {
    this.surroundings = surroundings;
    this.results = results;
    this.extent = extent;
  }

  /**
   * @param study the study in the folder, whether or not it is still that of the run
   * @return what was found
   */
  RecheckFindings run(Study study, List<PluginFolder.Jar> plugins) {
    checkStudy(study);
    checkModels(study);
    checkProgram(plugins);
    Plan plan = findings.stands() ? plan(study) : null;
    if (plan != null) {
      checkPictures(plan);
    }
    if (plan == null || !findings.stands()) {
      findings.notVerified("rows", "no trial was repeated, as the above must be mended first");
    } else {
      checkRows(plan);
    }
    return findings;
  }

  private @Nullable Plan plan(Study study) {
    try {
      return Plan.unchecked(study);
    } catch (BadInput e) {
      findings.mismatch(e.getMessage());
      return null;
    }
  }

  private void checkStudy(Study study) {
    RunRecord run = results.run();
    String fingerprint = StudyWriter.fingerprint(study);
    if (!fingerprint.equals(run.studyFingerprint())) {
      findings.mismatch(
          "study fingerprint recorded " + run.studyFingerprint() + ", found " + fingerprint);
    }
    if (!study.name().equals(run.study()) || !study.purpose().equals(run.purpose())) {
      findings.mismatch("name or purpose in study.yaml are not those in run.json");
    }
    if (study.seed() != run.seed()) {
      findings.mismatch("seed in run.json is " + run.seed() + ", in study.yaml " + study.seed());
    }
    sameText("study.yaml", StudyWriter.canonical(study));
    if (findings.stands()) {
      findings.verified("study", "study.yaml has the fingerprint of the run");
    }
  }

  private void checkModels(Study study) {
    long before = findings.mismatched();
    StudyWriter.modelFiles(study).forEach(this::sameText);
    List<RunRecord.ModelUsed> found = RunRecord.models(study);
    for (RunRecord.ModelUsed recorded : results.run().noiseModels()) {
      if (!found.contains(recorded)) {
        findings.mismatch(
            "noise model "
                + recorded.id()
                + " version "
                + recorded.version()
                + " recorded with fingerprint "
                + recorded.fingerprint()
                + ", which the study has not");
      }
    }
    if (!StudyWriter.modelFiles(study).isEmpty()) {
      findings.notVerified(
          "noise models", "the words under source and notes in model files of one's own");
    }
    if (before == findings.mismatched()) {
      findings.verified("noise models", found.size() + ", by their fingerprints");
    }
  }

  private void sameText(String name, String expected) {
    Path file = results.path().resolve(name);
    try {
      if (!Files.exists(file) || !Files.readString(file).equals(expected)) {
        findings.mismatch(name + " is not what the program writes for this study");
      }
    } catch (IOException e) {
      throw Unavailable.cannot("read " + file, e);
    }
  }

  /** Another version or plugin need not mean other rows; the rows decide. */
  private void checkProgram(List<PluginFolder.Jar> plugins) {
    String recorded = results.run().programVersion();
    if (recorded.equals(Version.text())) {
      findings.verified("program", "version " + recorded + ", that of the run");
    } else {
      findings.notVerified(
          "program",
          "version " + Version.text() + " repeats what version " + recorded + " recorded");
    }
    List<RunRecord.PluginUsed> found =
        plugins.stream().map(jar -> new RunRecord.PluginUsed(jar.name(), jar.sha256())).toList();
    if (!found.equals(results.run().plugins())) {
      findings.notVerified(
          "plugins", found + " repeat what " + results.run().plugins() + " recorded");
    } else if (!found.isEmpty()) {
      findings.verified("plugins", found.size() + " jars, by their checksums");
    }
    results
        .run()
        .programs()
        .forEach(
            program ->
                findings.notVerified(
                    "program of the codec '" + program.codec() + "'", program.program()));
  }

  private void checkPictures(Plan plan) {
    Manifest manifest = plan.manifest();
    Map<String, ManifestEntry> byId = new LinkedHashMap<>();
    manifest.entries().forEach(entry -> byId.put(entry.id(), entry));
    List<RunRecord.PictureUsed> used = results.run().pictures();
    if (!used.stream()
        .map(RunRecord.PictureUsed::id)
        .toList()
        .equals(plan.pictures().stream().map(ManifestEntry::id).toList())) {
      findings.mismatch("the study selects other pictures than run.json lists");
    }
    for (RunRecord.PictureUsed picture : used) {
      ManifestEntry entry = byId.get(picture.id());
      if (entry == null || !entry.sha256().equals(picture.sha256())) {
        findings.mismatch(
            "picture '"
                + picture.id()
                + "' recorded with SHA-256 "
                + picture.sha256()
                + ", in the manifest "
                + (entry == null ? "missing" : entry.sha256()));
        continue;
      }
      manifest.check(entry).map(Finding::message).ifPresent(findings::mismatch);
    }
    if (!findings.stands()) {
      return;
    }
    findings.verified("pictures", used.size() + ", by their checksums");
    if (!manifest.fingerprint().equals(results.run().corpusFingerprint())) {
      findings.notVerified(
          "corpus",
          "the manifest's fingerprint was "
              + results.run().corpusFingerprint()
              + " and is "
              + manifest.fingerprint()
              + "; the pictures used are the same");
    } else {
      checkCredits(used, byId);
      findings.verified("corpus", "the manifest has the fingerprint of the run");
    }
  }

  private void checkCredits(List<RunRecord.PictureUsed> used, Map<String, ManifestEntry> byId) {
    for (RunRecord.PictureUsed picture : used) {
      ManifestEntry entry = byId.get(picture.id());
      if (entry != null && !picture.equals(RunRecord.PictureUsed.of(entry))) {
        findings.mismatch(
            "picture '"
                + picture.id()
                + "' has another size, licence or credit in run.json than in the manifest");
      }
    }
  }

  private void checkRows(Plan plan) {
    long rows = checkKeysAndCells(plan);
    checkFormulas(plan);
    long sampled = Math.min(extent.sample(), Math.min(rows, plan.trials()));
    long before = findings.mismatched();
    repeat(plan, RowSample.draw(Math.min(rows, plan.trials()), sampled, extent.seed()));
    findings.repeated(sampled, rows, extent.seed());
    if (before == findings.mismatched()) {
      findings.verified(
          "rows",
          sampled
              + " of "
              + rows
              + " trials repeated, equal bit for bit"
              + (sampled < rows ? " (seed " + extent.seed() + ")" : ""));
    }
    if (sampled < rows) {
      findings.notVerified("rows", "the figures of the other " + (rows - sampled) + " trials");
    }
    findings.notVerified("timings.csv", "measured times, which no rerun repeats");
    findings.notVerified("run.json", "start, end, Java and system, which no rerun repeats");
    if (Files.exists(results.path().resolve("report.html"))) {
      findings.notVerified("report.html", "'report' makes it again from the record");
    }
  }

  /** Reads all rows: each must be the trial that the plan has at its place. */
  private long checkKeysAndCells(Plan plan) {
    long before = findings.mismatched();
    RecordCheck check = new RecordCheck(results);
    Course course = new Course(plan);
    long rows =
        follow(
            course,
            row -> {
              check.add(row.trial());
              String found = row.trial().trial();
              String expected = course.isAtEnd() ? "none" : course.trialId();
              if (row.isDoubled()) {
                findings.mismatch(row.place() + " repeats the line before, trial " + found);
              } else if (!found.equals(expected)) {
                findings.mismatch(
                    row.place() + ": trial recorded " + found + ", by the plan " + expected);
              }
            });
    check.ofRows().forEach(findings::mismatch);
    findings.more(check.moreOfRows());
    if (results.run().complete()) {
      check.ofNumber().forEach(findings::mismatch);
      if (!course.isAtEnd()) {
        findings.mismatch("run.json says complete; the plan has trials behind the last row");
      }
    }
    if (before == findings.mismatched()) {
      findings.verified(
          "order", "each of the " + rows + " rows has the id that the plan has there");
    }
    checkCells(check);
    return rows;
  }

  private void checkCells(RecordCheck check) {
    if (!results.run().complete()) {
      findings.notVerified(
          "cells", "there are none until 'assess --resume " + results.path() + "' ends the run");
    } else if (!check.ofRows().isEmpty()) {
      findings.notVerified("cells", "the rows of trials.csv do not add up to any");
    } else {
      List<String> complaints = check.ofCells(true);
      complaints.forEach(findings::mismatch);
      if (complaints.isEmpty()) {
        findings.verified("cells", "cells.csv computed again from trials.csv, the same bytes");
      }
    }
  }

  /** The tables that follow from the study and its clean pictures. */
  private void checkFormulas(Plan plan) {
    if (!results.run().complete()) {
      findings.notVerified("nodes and predictions", "there are none before the run has ended");
      return;
    }
    List<NodeShare> nodes = NodeTable.of(plan);
    checkFormula(NodesCsv.FILE, nodes.isEmpty() ? "" : NodesCsv.text(nodes));
    List<Prediction> predictions = PredictionTable.of(plan);
    boolean any = predictions.stream().anyMatch(Prediction::isMade);
    checkFormula(PredictionsCsv.FILE, any ? PredictionsCsv.text(predictions) : "");
  }

  private void checkFormula(String name, String expected) {
    boolean there = Files.exists(results.path().resolve(name));
    if (expected.isEmpty() && there) {
      findings.mismatch(name + " is there; by the study there is nothing in it");
    } else if (!expected.isEmpty()) {
      long before = findings.mismatched();
      sameText(name, expected);
      if (before == findings.mismatched()) {
        findings.verified(name, "computed again from the study and its pictures, the same bytes");
      }
    }
  }

  /**
   * Reads all rows along the plan. A row that repeats the one before is no step, so that the rows
   * behind it are held against their own trials.
   */
  private long follow(Course course, Consumer<Row> visitor) {
    long[] line = {1};
    String[] before = {""};
    return results.rows(
        trial -> {
          boolean isDoubled =
              trial.trial().equals(before[0])
                  && (course.isAtEnd() || !trial.trial().equals(course.trialId()));
          visitor.accept(new Row(++line[0], trial, isDoubled));
          before[0] = trial.trial();
          if (!isDoubled && !course.isAtEnd()) {
            course.add(trial);
          }
        });
  }

  /** Repeats the trials at these places, the codecs of one unit together. */
  private void repeat(Plan plan, RowSample sample) {
    Course course = new Course(plan);
    Repetition repetition = new Repetition(plan, extent.threads());
    ExecutorService executor = Executors.newFixedThreadPool(extent.threads());
    Map<Integer, Map<Integer, Row>> batch = new LinkedHashMap<>();
    long[] index = {0};
    try (Progress progress =
        new Progress(surroundings, "recheck", "", sample.size(), extent.quiet())) {
      long unused =
          follow(
              course,
              row -> {
                if (row.isDoubled() || course.isAtEnd() || !sample.contains(index[0]++)) {
                  return;
                }
                int unit = course.next();
                if (!batch.containsKey(unit) && batch.size() >= BATCH * extent.threads()) {
                  progress.step(compare(plan, repetition, executor, batch));
                }
                batch.computeIfAbsent(unit, u -> new LinkedHashMap<>()).put(course.codec(), row);
              });
      progress.step(compare(plan, repetition, executor, batch));
    } finally {
      executor.shutdownNow();
    }
  }

  /** A recorded trial, its line in the table, and whether it repeats the line before. */
  private record Row(long line, Trial trial, boolean isDoubled) {
    String place() {
      return TrialsCsv.FILE + ", line " + line;
    }
  }

  /** Runs a batch of units, compares their rows in order and empties the batch. */
  private long compare(
      Plan plan,
      Repetition repetition,
      ExecutorService executor,
      Map<Integer, Map<Integer, Row>> batch) {
    Map<Integer, Future<List<Trial>>> running = new LinkedHashMap<>();
    batch.forEach(
        (unit, recorded) -> {
          List<CodecChoice> choices =
              recorded.keySet().stream().map(plan.study().codecs()::get).toList();
          running.put(unit, executor.submit(() -> repetition.trials(plan.unit(unit), choices)));
        });
    long compared = 0;
    for (Map.Entry<Integer, Map<Integer, Row>> unit : batch.entrySet()) {
      List<Trial> repeated = Awaited.result(Objects.requireNonNull(running.get(unit.getKey())));
      int i = 0;
      for (Row recorded : unit.getValue().values()) {
        compare(recorded, repeated.get(i++));
        compared++;
      }
    }
    batch.clear();
    return compared;
  }

  private void compare(Row row, Trial repeated) {
    Trial recorded = row.trial();
    List<TrialsCsv.Difference> differences = TrialsCsv.differences(recorded, repeated);
    if (!differences.isEmpty()) {
      findings.mismatch(
          row.place()
              + ", trial "
              + recorded.trial()
              + ": "
              + String.join("; ", differences.stream().map(Object::toString).toList()),
          recorded.trial());
    }
  }
}
