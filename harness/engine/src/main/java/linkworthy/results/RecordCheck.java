package linkworthy.results;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.function.UnaryOperator;
import linkworthy.input.BadInput;
import linkworthy.statistics.Cells;
import linkworthy.trial.Trial;

/**
 * Whether a record agrees with itself: {@code trials.csv} has each replicate of a cell and picture
 * once and in ascending order, it has as many rows as {@code run.json} says, and {@code cells.csv}
 * follows from it. Takes the rows one by one.
 */
public final class RecordCheck {
  private static final double RELATIVE = 1e-9;
  private static final int MOST_COMPLAINTS = 100;

  private final ResultsFolder folder;
  private final Cells cells = new Cells();
  private final List<String> complaints = new ArrayList<>();
  private long more;
  private long rows;

  /** A check of this record, before its first row. */
  public RecordCheck(ResultsFolder folder) {
    this.folder = folder;
  }

  /** Takes the next row. */
  public void add(Trial trial) {
    rows++;
    try {
      cells.add(trial);
    } catch (IllegalArgumentException e) {
      if (complaints.size() < MOST_COMPLAINTS) {
        complaints.add(
            folder.path().resolve(TrialsCsv.FILE) + ", line " + (rows + 1) + ": " + e.getMessage());
      } else {
        more++;
      }
    }
  }

  /** How many rows there were. */
  public long rows() {
    return rows;
  }

  /** What the rows so far have against them, one line each; of very many the first. */
  public List<String> ofRows() {
    return List.copyOf(complaints);
  }

  /** How many rows have something against them besides {@link #ofRows}. */
  public long moreOfRows() {
    return more;
  }

  /** What their number has against it, after the last row of a complete run. */
  public List<String> ofNumber() {
    long said = folder.run().trialsDone();
    return rows == said
        ? List.of()
        : List.of(
            folder.path().resolve(TrialsCsv.FILE)
                + " has "
                + rows
                + " rows; accepted: "
                + said
                + ", as run.json says");
  }

  /**
   * What the table of cells has against it, after the last row; nothing if the rows add up to none.
   *
   * @param exactly whether every byte must be the same, or numbers may differ by 1e-9 of
   *     themselves, as they may from machine to machine
   */
  public List<String> ofCells(boolean exactly) {
    if (!complaints.isEmpty()) {
      return List.of();
    }
    Path file = folder.path().resolve(CellsCsv.FILE);
    List<String> expected = CellsCsv.text(cells.toList()).lines().toList();
    List<String> found;
    try {
      found = Files.readString(file).lines().toList();
    } catch (IOException e) {
      throw FolderFiles.unavailable("read", file, e);
    }
    List<String> differences = new ArrayList<>();
    for (int i = 0; i < Math.max(expected.size(), found.size()); i++) {
      String recorded = i < found.size() ? found.get(i) : "";
      String computed = i < expected.size() ? expected.get(i) : "";
      if (!recorded.equals(computed)) {
        difference(expected.get(0), recorded, computed, exactly)
            .map(words(file, i + 1))
            .ifPresent(differences::add);
      }
    }
    return differences;
  }

  private static UnaryOperator<String> words(Path file, int line) {
    return difference ->
        file + ", line " + line + difference + ", which follows from " + TrialsCsv.FILE;
  }

  /**
   * The first column in which two lines differ, or both whole if they have not the same columns.
   */
  private static Optional<String> difference(
      String header, String recorded, String computed, boolean exactly) {
    List<String> names = List.of(header.split(",", -1));
    List<String> found = List.of(recorded.split(",", -1));
    List<String> expected = List.of(computed.split(",", -1));
    if (found.size() != expected.size()) {
      return Optional.of(" is '" + recorded + "'; accepted: '" + computed + "'");
    }
    for (int i = 0; i < found.size(); i++) {
      if (!found.get(i).equals(expected.get(i))
          && (exactly || !isNear(found.get(i), expected.get(i)))) {
        String name = found.size() == names.size() ? names.get(i) : "column " + (i + 1);
        return Optional.of(
            ": " + name + " is '" + found.get(i) + "'; accepted: '" + expected.get(i) + "'");
      }
    }
    return Optional.empty();
  }

  private static boolean isNear(String found, String expected) {
    try {
      double number = Double.parseDouble(expected);
      return Math.abs(Double.parseDouble(found) - number)
          <= RELATIVE * Math.max(1, Math.abs(number));
    } catch (NumberFormatException e) {
      return false;
    }
  }

  /**
   * Takes the next row.
   *
   * @throws BadInput if it stands there twice or in the wrong place
   */
  void require(Trial trial) {
    add(trial);
    refuse(complaints);
  }

  /**
   * After the last row.
   *
   * @throws BadInput if a complete run has other rows or other cells than it says
   */
  void requireEnd() {
    if (folder.run().complete()) {
      refuse(ofNumber());
      refuse(ofCells(false));
    }
  }

  private static void refuse(List<String> complaints) {
    if (!complaints.isEmpty()) {
      throw new BadInput(complaints.get(0));
    }
  }
}
