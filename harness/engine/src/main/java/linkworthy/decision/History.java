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
  private final List<String> leftOut;
  private final Map<CellKey, double[]> means = new LinkedHashMap<>();

  private record Run(ResultsFolder folder, List<Cell> cells) {}

  private History(List<Run> found, List<String> leftOut) {
    this.runs = found.stream().map(Run::folder).toList();
    this.leftOut = List.copyOf(leftOut);
    for (int i = 0; i < found.size(); i++) {
      for (Cell cell : found.get(i).cells()) {
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
   * Opens all sound and complete results folders below a folder, or the folder itself if it is one.
   *
   * @throws BadInput if there is no such folder, no such run in it, or runs of several studies
   * @throws linkworthy.input.Unavailable if a folder cannot be read
   */
  public static History over(Path folder) {
    List<Run> runs = new ArrayList<>();
    List<String> leftOut = new ArrayList<>();
    for (Path path : ResultsFolder.below(folder)) {
      if (!Files.exists(path.resolve(RunRecord.FILE))) {
        continue;
      }
      try {
        ResultsFolder found = ResultsFolder.open(path);
        if (found.run().complete()) {
          long unused = found.trials(trial -> {});
          runs.add(new Run(found, found.cells()));
        } else {
          leftOut.add(path + " is not complete");
        }
      } catch (BadInput e) {
        leftOut.add(e.getMessage());
      }
    }
    if (runs.isEmpty()) {
      throw new BadInput(
          folder
              + " has no sound and complete run in it"
              + leftOut.stream().findFirst().map(why -> " (" + why + ")").orElse("")
              + "; accepted: a folder with results folders in it");
    }
    Set<String> studies =
        new TreeSet<>(runs.stream().map(run -> run.folder().run().study()).toList());
    if (studies.size() > 1) {
      throw new BadInput(
          folder
              + " has runs of several studies ("
              + String.join(", ", studies)
              + "); accepted: the runs of one");
    }
    runs.sort(
        Comparator.comparing((Run run) -> run.folder().run().start())
            .thenComparing(run -> run.folder().path().toString()));
    return new History(runs, leftOut);
  }

  /** The complete runs, oldest first. */
  public List<ResultsFolder> runs() {
    return runs;
  }

  /** Which folders are left out and why, a line each: not complete, or a record not sound. */
  public List<String> leftOut() {
    return leftOut;
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
