package linkworthy.decision;

import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.Comparator;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.TreeSet;
import linkworthy.input.BadInput;
import linkworthy.results.ResultsFolder;
import linkworthy.results.RunRecord;
import linkworthy.statistics.Cell;

/**
 * The runs of one study below a folder, in the order of their start times (of their paths where
 * these are equal), and the mean PSNR of every cell in each of them.
 */
public final class History {
  private final List<ResultsFolder> runs;
  private final List<Path> incomplete;
  private final Map<CellKey, double[]> means = new LinkedHashMap<>();

  private History(List<ResultsFolder> runs, List<Path> incomplete) {
    this.runs = List.copyOf(runs);
    this.incomplete = List.copyOf(incomplete);
    for (int i = 0; i < runs.size(); i++) {
      for (Cell cell : runs.get(i).cells()) {
        means.computeIfAbsent(CellKey.of(cell), key -> unknown())[i] = cell.psnrMeanDb();
      }
    }
  }

  private double[] unknown() {
    double[] values = new double[runs.size()];
    Arrays.fill(values, Double.NaN);
    return values;
  }

  /**
   * Opens all complete results folders below a folder, or the folder itself if it is one.
   *
   * @throws BadInput if there is no such folder, no complete run in it, runs of several studies, or
   *     a record that cannot be used
   * @throws linkworthy.input.Unavailable if a folder cannot be read
   */
  public static History over(Path folder) {
    List<ResultsFolder> runs = new ArrayList<>();
    List<Path> incomplete = new ArrayList<>();
    for (Path path : ResultsFolder.below(folder)) {
      if (!Files.exists(path.resolve(RunRecord.FILE))) {
        continue;
      }
      ResultsFolder found = ResultsFolder.open(path);
      if (found.run().complete()) {
        long unused = found.trials(trial -> {});
        runs.add(found);
      } else {
        incomplete.add(path);
      }
    }
    if (runs.isEmpty()) {
      throw new BadInput(
          folder + " has no complete run in it; accepted: a folder with results folders in it");
    }
    Set<String> studies = new TreeSet<>(runs.stream().map(run -> run.run().study()).toList());
    if (studies.size() > 1) {
      throw new BadInput(
          folder
              + " has runs of several studies ("
              + String.join(", ", studies)
              + "); accepted: the runs of one");
    }
    runs.sort(
        Comparator.comparing((ResultsFolder run) -> run.run().start())
            .thenComparing(run -> run.path().toString()));
    return new History(runs, incomplete);
  }

  /** The complete runs, oldest first. */
  public List<ResultsFolder> runs() {
    return runs;
  }

  /** Results folders of runs that are not complete; they are left out. */
  public List<Path> incomplete() {
    return incomplete;
  }

  /** The cells that any run has, in the order in which they first come. */
  public List<CellKey> cells() {
    return List.copyOf(means.keySet());
  }

  /** Mean PSNR of a cell in each run, in dB; NaN where a run does not have it. */
  public double[] psnrMeanDb(CellKey cell) {
    return means.getOrDefault(cell, unknown()).clone();
  }
}
