package linkworthy.app;

import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.stream.IntStream;
import java.util.stream.Stream;
import linkworthy.codec.PluginFolder;
import linkworthy.corpus.ManifestEntry;
import linkworthy.input.Unavailable;
import linkworthy.results.ResultsFolder;
import linkworthy.results.ResultsWriter;
import linkworthy.results.RunRecord;
import linkworthy.results.TimingsCsv;
import linkworthy.results.TrialsCsv;
import linkworthy.statistics.Cells;
import linkworthy.trial.NodeTable;
import linkworthy.trial.Plan;
import linkworthy.trial.PredictionTable;
import linkworthy.trial.Rehearsal;
import linkworthy.trial.Timing;
import linkworthy.trial.Trial;
import linkworthy.trial.WorkUnit;

/**
 * What the record and the report of a plan take in time and disk. For the pictures of a rehearsal
 * both are made in a temporary folder, which is removed. Its rows are those of the rehearsal, so
 * that the report finds its pictures; the severities and replicates that were not run have rows
 * like them. The tables of rows grow with the plan, the other files are as they will be.
 */
final class SampleRecord {
  /** Seconds that rows are read, for the time of a row. */
  private static final double SECONDS_OF_READING = 0.3;

  /** Seconds from which on formulas are not worked out a second time. */
  private static final double LONG = 1;

  /** Weight of the last unit in the time of writing one. */
  private static final double NEWEST = 0.2;

  private static final int REPLICATES = 2;
  private static final String SOME_ID = "0123456789abcdef";

  private final Plan plan;
  private final Rehearsal rehearsal;
  private final List<Integer> pictures;
  private final int replicates;
  private double secondsOfUnit;
  private double secondsOfRow;
  private double secondsBehind;
  private double bytesOfCleanUnit;
  private double bytesOfNoisyUnit;
  private double bytesOfOthers;

  private SampleRecord(Plan plan, Rehearsal rehearsal) {
    this.plan = plan;
    this.rehearsal = rehearsal;
    this.pictures = rehearsal.pictures();
    this.replicates = Math.min(REPLICATES, plan.study().replicates());
  }

  /**
   * Makes, measures and removes it.
   *
   * @throws Unavailable if no temporary folder can be written
   */
  static SampleRecord of(
      Surroundings surroundings, Plan plan, List<PluginFolder.Jar> plugins, Rehearsal rehearsal) {
    SampleRecord sample = new SampleRecord(plan, rehearsal);
    RunRecord begun =
        RunRecord.begin(plan, Version.text(), surroundings.clock()).withPlugins(plugins);
    try (TemporaryFolder folder = new TemporaryFolder("linkworthy-dry-run")) {
      try {
        sample.measure(folder.path(), begun, surroundings);
      } catch (IOException | RuntimeException e) {
        if (folder.isStopped()) {
          throw new Unavailable("stopped", e);
        }
        throw e;
      }
    } catch (IOException | UncheckedIOException e) {
      throw new Unavailable("cannot write a temporary folder: " + e.getMessage(), e);
    }
    return sample;
  }

  private void measure(Path folder, RunRecord begun, Surroundings surroundings) throws IOException {
    Plan part = plan.of(pictures);
    try (ResultsWriter writer = ResultsFolder.create(folder, false)) {
      writer.begin(plan.study(), begun);
      Cells cells = new Cells();
      long rows = append(writer, cells);
      long start = System.nanoTime();
      writer.writeNodes(NodeTable.of(part));
      writer.writePredictions(PredictionTable.of(part));
      secondsBehind = secondsSince(start) + secondsOfFurtherFormulas(part, secondsSince(start));
      start = System.nanoTime();
      writer.finish(cells.toList(), writer.run().complete(rows, surroundings.clock()));
      ResultsFolder results = ResultsFolder.open(folder);
      writer.writeReport(Reports.html(results, () -> part, null));
      secondsBehind += secondsSince(start);
      secondsOfRow = secondsOfRow(results);
    }
    try (Stream<Path> files = Files.walk(folder)) {
      for (Path file : files.filter(Files::isRegularFile).toList()) {
        bytesOfOthers += Files.size(file);
      }
    }
    bytesOfOthers -= bytesOfTables(folder);
  }

  private static double secondsSince(long start) {
    return (System.nanoTime() - start) / 1e9;
  }

  private static long bytesOfTables(Path folder) {
    try {
      return Files.size(folder.resolve(TrialsCsv.FILE))
          + Files.size(folder.resolve(TimingsCsv.FILE));
    } catch (IOException e) {
      throw new UncheckedIOException(e);
    }
  }

  /** Appends all rows, and takes their bytes and time. */
  private long append(ResultsWriter writer, Cells cells) {
    long rows = 0;
    for (int picture : pictures) {
      for (int condition = -1; condition < plan.conditions().size(); condition++) {
        for (int replicate = 0; replicate < (condition < 0 ? 1 : replicates); replicate++) {
          WorkUnit unit = plan.unit(picture, condition, replicate);
          List<Trial> trials = trials(unit, condition);
          List<Timing> timings = timings(unit, condition);
          long before = bytesOfTables(writer.path());
          long start = System.nanoTime();
          writer.append(trials, timings);
          trials.forEach(cells::add);
          secondsOfUnit += NEWEST * (secondsSince(start) - secondsOfUnit);
          double bytes = bytesOfTables(writer.path()) - before;
          if (condition < 0) {
            bytesOfCleanUnit += bytes / pictures.size();
          } else {
            bytesOfNoisyUnit += bytes / (pictures.size() * plan.conditions().size() * replicates);
          }
          rows += trials.size();
        }
      }
    }
    return rows;
  }

  /** Seconds of the formulas for the pictures that are not in the part. */
  private double secondsOfFurtherFormulas(Plan part, double first) {
    long start = System.nanoTime();
    if (first < LONG) {
      Object unused = List.of(NodeTable.of(part), PredictionTable.of(part));
    }
    double again = first < LONG ? secondsSince(start) : first;
    return again * (plan.pictures().size() - pictures.size()) / pictures.size();
  }

  /** Seconds in which a report reads a row: to check it, for comparisons and for pictures. */
  private static double secondsOfRow(ResultsFolder results) {
    long start = System.nanoTime();
    double last = 0;
    while (secondsSince(start) < SECONDS_OF_READING) {
      long now = System.nanoTime();
      long rows = results.trials(trial -> {});
      last = secondsSince(now) / rows;
      now = System.nanoTime();
      rows = results.rows(trial -> {});
      last += 2 * secondsSince(now) / rows;
    }
    return last;
  }

  /** The rows of a unit: those of the rehearsal, or others like them. */
  private List<Trial> trials(WorkUnit unit, int condition) {
    List<Trial> like = rehearsal.trials(unit.picture(), condition);
    Trial first = like.get(0);
    if (unit.replicate() == 0
        && unit.entry().id().equals(first.picture())
        && unit.axis().equals(first.axis())
        && Double.compare(unit.severity(), first.severity()) == 0) {
      return like;
    }
    double variance = condition < 0 ? 0 : rehearsal.equivalentNoiseVariance(condition);
    double little = 1e-4 * (1 + condition % 7 + unit.replicate()) / 3;
    return like.stream()
        .map(trial -> trial.movedTo(unit, SOME_ID, variance, trial.psnrDb() + little))
        .toList();
  }

  private List<Timing> timings(WorkUnit unit, int condition) {
    return rehearsal.timings(unit.picture(), condition).stream()
        .map(like -> Timing.of(unit, like.codec(), like.encodeMs(), like.decodeMs()))
        .toList();
  }

  private double units(int ofEach) {
    return plan.pictures().size() * (1 + (double) plan.conditions().size() * ofEach);
  }

  /**
   * Seconds of the whole run, from its first unit on.
   *
   * @param ofEach replicates of each severity
   */
  double seconds(int ofEach) {
    double rows =
        (units(ofEach) - pictures.size() * (1 + (double) plan.conditions().size() * replicates))
            * plan.study().codecs().size();
    return rehearsal.seconds(ofEach, secondsOfUnit)
        + secondsBehind
        + secondsOfRow * Math.max(0, rows);
  }

  /**
   * Bytes of the results folder. The names of pictures and the numbers of replicates, which stand
   * in both tables, are as long as they will be.
   *
   * @param ofEach replicates of each severity
   */
  double bytes(int ofEach) {
    int names = 2 * plan.study().codecs().size();
    double digits =
        IntStream.range(0, ofEach)
            .mapToDouble(replicate -> Integer.toString(replicate).length() - 1)
            .average()
            .orElse(0);
    double longer =
        meanBytesOfIds(IntStream.range(0, plan.pictures().size()))
            - meanBytesOfIds(pictures.stream().mapToInt(Integer::intValue));
    double clean = plan.pictures().size();
    double noisy = units(ofEach) - clean;
    return bytesOfOthers
        + clean * bytesOfCleanUnit
        + noisy * (bytesOfNoisyUnit + names * digits)
        + units(ofEach) * names * longer;
  }

  private double meanBytesOfIds(IntStream places) {
    return places
        .mapToObj(plan.pictures()::get)
        .map(ManifestEntry::id)
        .mapToInt(id -> id.getBytes(StandardCharsets.UTF_8).length)
        .average()
        .orElse(0);
  }
}
