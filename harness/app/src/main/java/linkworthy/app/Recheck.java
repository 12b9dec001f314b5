package linkworthy.app;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import java.util.Objects;
import java.util.concurrent.ExecutionException;
import java.util.concurrent.ExecutorService;
import java.util.concurrent.Executors;
import java.util.concurrent.Future;
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

  private static final int SHOWN = 5;
  private static final List<Double> SHARES = List.of(0.01, 0.05);
  private static final int BATCH = 16;

  private final Surroundings surroundings;
  private final ResultsFolder results;
  private final Extent extent;
  private final List<String> verified = new ArrayList<>();
  private final List<String> notVerified = new ArrayList<>();
  private final List<String> mismatches = new ArrayList<>();
  private long mismatched;

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
   * @return the exit code
   */
  int run(Study study, List<PluginFolder.Jar> plugins) {
    checkStudy(study);
    checkModels(study);
    checkProgram(plugins);
    Plan plan = mismatched == 0 ? plan(study) : null;
    if (plan != null) {
      checkPictures(plan);
    }
    if (plan == null || mismatched > 0) {
      notVerified.add("rows: no trial was repeated, as the above must be mended first");
    } else {
      checkRows(plan);
    }
    return say();
  }

  private @Nullable Plan plan(Study study) {
    try {
      return Plan.unchecked(study);
    } catch (BadInput e) {
      mismatch(e.getMessage());
      return null;
    }
  }

  private void mismatch(String what) {
    mismatched++;
    if (mismatches.size() < SHOWN) {
      mismatches.add(what);
    }
  }

  private void checkStudy(Study study) {
    RunRecord run = results.run();
    String fingerprint = StudyWriter.fingerprint(study);
    if (!fingerprint.equals(run.studyFingerprint())) {
      mismatch("study fingerprint recorded " + run.studyFingerprint() + ", found " + fingerprint);
    }
    if (!study.name().equals(run.study()) || !study.purpose().equals(run.purpose())) {
      mismatch("name or purpose in study.yaml are not those in run.json");
    }
    sameText("study.yaml", StudyWriter.canonical(study));
    if (mismatched == 0) {
      verified.add("study: study.yaml has the fingerprint of the run");
    }
  }

  private void checkModels(Study study) {
    long before = mismatched;
    StudyWriter.modelFiles(study).forEach(this::sameText);
    List<RunRecord.ModelUsed> found = RunRecord.models(study);
    for (RunRecord.ModelUsed recorded : results.run().noiseModels()) {
      if (!found.contains(recorded)) {
        mismatch(
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
      notVerified.add("noise models: the words under source and notes in model files of one's own");
    }
    if (before == mismatched) {
      verified.add("noise models: " + found.size() + ", by their fingerprints");
    }
  }

  private void sameText(String name, String expected) {
    Path file = results.path().resolve(name);
    try {
      if (!Files.exists(file) || !Files.readString(file).equals(expected)) {
        mismatch(name + " is not what the program writes for this study");
      }
    } catch (IOException e) {
      throw Unavailable.cannot("read " + file, e);
    }
  }

  /** Another version or plugin need not mean other rows; the rows decide. */
  private void checkProgram(List<PluginFolder.Jar> plugins) {
    String recorded = results.run().programVersion();
    if (recorded.equals(Version.text())) {
      verified.add("program: version " + recorded + ", that of the run");
    } else {
      notVerified.add(
          "program: version " + Version.text() + " repeats what version " + recorded + " recorded");
    }
    List<RunRecord.PluginUsed> found =
        plugins.stream().map(jar -> new RunRecord.PluginUsed(jar.name(), jar.sha256())).toList();
    if (!found.equals(results.run().plugins())) {
      notVerified.add(
          "plugins: " + found + " repeat what " + results.run().plugins() + " recorded");
    } else if (!found.isEmpty()) {
      verified.add("plugins: " + found.size() + " jars, by their checksums");
    }
    results
        .run()
        .programs()
        .forEach(
            program ->
                notVerified.add(
                    "program of the codec '" + program.codec() + "': " + program.program()));
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
      mismatch("the study selects other pictures than run.json lists");
    }
    for (RunRecord.PictureUsed picture : used) {
      ManifestEntry entry = byId.get(picture.id());
      if (entry == null || !entry.sha256().equals(picture.sha256())) {
        mismatch(
            "picture '"
                + picture.id()
                + "' recorded with SHA-256 "
                + picture.sha256()
                + ", in the manifest "
                + (entry == null ? "missing" : entry.sha256()));
        continue;
      }
      manifest.check(entry).map(Finding::message).ifPresent(this::mismatch);
    }
    if (mismatched > 0) {
      return;
    }
    verified.add("pictures: " + used.size() + ", by their checksums");
    if (!manifest.fingerprint().equals(results.run().corpusFingerprint())) {
      notVerified.add(
          "corpus: the manifest's fingerprint was "
              + results.run().corpusFingerprint()
              + " and is "
              + manifest.fingerprint()
              + "; the pictures used are the same");
    } else {
      verified.add("corpus: the manifest has the fingerprint of the run");
    }
  }

  private void checkRows(Plan plan) {
    long rows = checkKeysAndCells(plan);
    checkFormulas(plan);
    long sampled = Math.min(extent.sample(), Math.min(rows, plan.trials()));
    long before = mismatched;
    repeat(plan, RowSample.draw(Math.min(rows, plan.trials()), sampled, extent.seed()));
    if (before == mismatched) {
      verified.add(
          "rows: "
              + sampled
              + " of "
              + rows
              + " trials repeated, equal bit for bit"
              + (sampled < rows ? " (seed " + extent.seed() + ")" : ""));
    }
    if (sampled < rows) {
      notVerified.add("rows: the figures of the other " + (rows - sampled) + " trials");
      notVerified.add(
          "if 1 row was altered, the chance to have missed it is "
              + chance(RowSample.chanceMissed(rows, 1, sampled)));
      for (double share : SHARES) {
        long altered = RowSample.rowsOf(share, rows);
        notVerified.add(
            String.format(
                Locale.ROOT,
                "if %.0f %% of the rows were altered (%d), the chance to have missed all of them"
                    + " is %s",
                100 * share,
                altered,
                chance(RowSample.chanceMissed(rows, altered, sampled))));
      }
    }
    notVerified.add("timings.csv, which no rerun repeats");
  }

  private static String chance(double chance) {
    return chance >= 0.001 || chance == 0
        ? String.format(Locale.ROOT, "%.4f", chance)
        : String.format(Locale.ROOT, "%.2e", chance);
  }

  /** Reads all rows: each must be the trial that the plan has at its place. */
  private long checkKeysAndCells(Plan plan) {
    long before = mismatched;
    RecordCheck check = new RecordCheck(results);
    Course course = new Course(plan);
    long rows =
        results.rows(
            trial -> {
              check.add(trial);
              String expected = course.isAtEnd() ? "none" : course.trialId();
              if (!trial.trial().equals(expected)) {
                mismatch(
                    "row "
                        + check.rows()
                        + ": trial recorded "
                        + trial.trial()
                        + ", by the plan "
                        + expected);
              }
              if (!course.isAtEnd()) {
                course.add(trial);
              }
            });
    check.ofRows().forEach(this::mismatch);
    mismatched += check.moreOfRows();
    if (results.run().complete()) {
      check.ofNumber().forEach(this::mismatch);
      if (!course.isAtEnd()) {
        mismatch("run.json says complete; the plan has trials behind the last row");
      }
    }
    if (before == mismatched) {
      verified.add("order: each of the " + rows + " rows has the id that the plan has there");
    }
    checkCells(check);
    return rows;
  }

  private void checkCells(RecordCheck check) {
    if (!results.run().complete()) {
      notVerified.add("cells: there are none, as the run is not complete");
    } else if (!check.ofRows().isEmpty()) {
      notVerified.add("cells: the rows of trials.csv do not add up to any");
    } else {
      List<String> complaints = check.ofCells(true);
      complaints.forEach(this::mismatch);
      if (complaints.isEmpty()) {
        verified.add("cells: cells.csv computed again from trials.csv, the same bytes");
      }
    }
  }

  /** The tables that follow from the study and its clean pictures. */
  private void checkFormulas(Plan plan) {
    if (!results.run().complete()) {
      notVerified.add("nodes and predictions: there are none, as the run is not complete");
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
      mismatch(name + " is there; by the study there is nothing in it");
    } else if (!expected.isEmpty()) {
      long before = mismatched;
      sameText(name, expected);
      if (before == mismatched) {
        verified.add(name + ": computed again from the study and its pictures, the same bytes");
      }
    }
  }

  /** Repeats the trials at these places, the codecs of one unit together. */
  private void repeat(Plan plan, RowSample sample) {
    Course course = new Course(plan);
    Repetition repetition = new Repetition(plan, extent.threads());
    ExecutorService executor = Executors.newFixedThreadPool(extent.threads());
    Map<Integer, Map<Integer, Row>> batch = new LinkedHashMap<>();
    long[] row = {0};
    try (Progress progress =
        new Progress(surroundings, "recheck", "", sample.size(), extent.quiet())) {
      long unused =
          results.rows(
              trial -> {
                long index = row[0]++;
                if (course.isAtEnd()) {
                  return;
                }
                int unit = course.next();
                int codec = course.codec();
                course.add(trial);
                if (!sample.contains(index)) {
                  return;
                }
                if (!batch.containsKey(unit) && batch.size() >= BATCH * extent.threads()) {
                  progress.step(compare(plan, repetition, executor, batch));
                }
                batch
                    .computeIfAbsent(unit, u -> new LinkedHashMap<>())
                    .put(codec, new Row(2 + index, trial));
              });
      progress.step(compare(plan, repetition, executor, batch));
    } finally {
      executor.shutdownNow();
    }
  }

  /** A recorded trial and its line in the table. */
  private record Row(long line, Trial trial) {}

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
      List<Trial> repeated = result(Objects.requireNonNull(running.get(unit.getKey())));
      int i = 0;
      for (Row recorded : unit.getValue().values()) {
        compare(recorded.line(), recorded.trial(), repeated.get(i++));
        compared++;
      }
    }
    batch.clear();
    return compared;
  }

  private void compare(long line, Trial recorded, Trial repeated) {
    List<TrialsCsv.Difference> differences = TrialsCsv.differences(recorded, repeated);
    if (!differences.isEmpty()) {
      mismatch(
          "trials.csv, line "
              + line
              + ", trial "
              + recorded.trial()
              + ": "
              + String.join("; ", differences.stream().map(Object::toString).toList()));
    }
  }

  private static List<Trial> result(Future<List<Trial>> running) {
    try {
      return running.get();
    } catch (InterruptedException e) {
      Thread.currentThread().interrupt();
      throw new Unavailable("interrupted", e);
    } catch (ExecutionException e) {
      if (e.getCause() instanceof RuntimeException known) {
        throw known;
      }
      if (e.getCause() instanceof Error serious) {
        throw serious;
      }
      throw new IllegalStateException(e.getCause());
    }
  }

  private int say() {
    var out = surroundings.out();
    verified.forEach(line -> out.println("verified      " + line));
    notVerified.forEach(line -> out.println("not verified  " + line));
    mismatches.forEach(line -> out.println("MISMATCH      " + line));
    if (mismatched > mismatches.size()) {
      out.println("MISMATCH      and " + (mismatched - mismatches.size()) + " more");
    }
    out.println(
        mismatched == 0
            ? "the record stands, as far as it was verified"
            : "the record does not stand: mismatches: " + mismatched);
    return mismatched == 0 ? Main.DONE : Main.NO;
  }
}
