package linkworthy.decision;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Objects;
import java.util.Set;
import java.util.function.Predicate;
import java.util.stream.Collectors;
import linkworthy.input.BadInput;
import linkworthy.input.Require;
import linkworthy.input.Unavailable;
import linkworthy.results.ResultsFolder;
import linkworthy.results.TrialsCsv;
import linkworthy.statistics.Holm;
import linkworthy.trial.Trial;

/**
 * Two runs compared cell by cell: what moved, what stayed the same within a tolerance, and what the
 * evidence does not decide.
 *
 * <p>A cell is known by impairment, place, axis, severity and codec. The difference of its mean
 * PSNR, new minus old in dB, is tested
 *
 * <ul>
 *   <li>by pairs of (picture, replicate) where seed, model fingerprint and picture are the same, so
 *       that both runs drew the same noise: the mean difference of each picture, Student t over
 *       pictures, or over replicates if there is one picture only. Without noise that is so always.
 *   <li>by pairs of picture means where two pictures or more are the same and the noise is not.
 *   <li>by Welch's test otherwise: over the replicates of the one picture that both have, or over
 *       the picture means.
 * </ul>
 *
 * <p>p values are adjusted by {@link Holm} over all cells. A cell <i>moved</i> if its adjusted p is
 * below {@link #ALPHA} and the difference above the tolerance; it is the <i>same</i> if equivalence
 * within the tolerance is shown by two one-sided tests at {@link #ALPHA}, or if every figure of
 * every trial is equal; otherwise it is <i>undecided</i>. On the same noise, an infinite mean
 * difference (a lossless codec that is so no longer, or is so now) has moved without a test. The
 * difference of two infinite PSNRs is 0.
 */
public final class Drift {
  /** Chance of any cell being called moved, or of one being called the same, by mistake. */
  public static final double ALPHA = 0.05;

  private static final double MAX_TOLERANCE_DB = 100;
  private static final int CHANGES_TOLD = 4;

  private final List<Change> changes;
  private final List<CellDrift> cells;
  private final List<CellKey> onlyOld;
  private final List<CellKey> onlyNew;
  private final boolean sameBytes;

  private Drift(
      List<Change> changes,
      List<CellDrift> cells,
      List<CellKey> onlyOld,
      List<CellKey> onlyNew,
      boolean sameBytes) {
    this.changes = List.copyOf(changes);
    this.cells = List.copyOf(cells);
    this.onlyOld = List.copyOf(onlyOld);
    this.onlyNew = List.copyOf(onlyNew);
    this.sameBytes = sameBytes;
  }

  /**
   * Compares two records.
   *
   * @param toleranceDb smallest difference of mean PSNR that matters, 0 to 100 dB
   * @throws BadInput if a run is not complete, contradicts itself or cannot be read, or no cell is
   *     in both
   * @throws Unavailable if a file cannot be read
   * @throws IllegalArgumentException if the tolerance is outside its range
   */
  public static Drift between(ResultsFolder old, ResultsFolder now, double toleranceDb) {
    old.requireComplete();
    now.requireComplete();
    Circumstances before = Circumstances.of(old);
    Circumstances after = Circumstances.of(now);
    Drift drift =
        between(
            RunFigures.read(old),
            RunFigures.read(now),
            after.unchangedPictures(before),
            cell -> after.hasNoiseOf(before, cell),
            toleranceDb);
    List<Change> changes = after.since(before);
    if (drift.cells.isEmpty()) {
      throw new BadInput(
          now.path()
              + " has no cell in common with "
              + old.path()
              + ": "
              + words(changes)
              + "; accepted: two runs that share an impairment at a severity and a codec");
    }
    return new Drift(changes, drift.cells, drift.onlyOld, drift.onlyNew, sameBytes(old, now));
  }

  private static String words(List<Change> changes) {
    String first =
        changes.stream()
            .limit(CHANGES_TOLD)
            .map(
                change -> change.what() + " " + said(change.before()) + ", " + said(change.after()))
            .collect(Collectors.joining("; "));
    int more = changes.size() - CHANGES_TOLD;
    return "they differ in " + first + (more > 0 ? " and " + more + " more" : "");
  }

  private static String said(String setting) {
    return setting.isEmpty() ? "absent" : "'" + setting + "'";
  }

  private static boolean sameBytes(ResultsFolder old, ResultsFolder now) {
    Path file = now.path().resolve(TrialsCsv.FILE);
    try {
      return Files.mismatch(old.path().resolve(TrialsCsv.FILE), file) < 0;
    } catch (IOException e) {
      throw Unavailable.cannot("read " + file, e);
    }
  }

  /**
   * Compares the trials of two runs, of which nothing else is known.
   *
   * @param unchangedPictures ids of the pictures that are the same in both
   * @param sameNoise whether equal replicates of these pictures met the same noise in a cell
   * @param toleranceDb smallest difference of mean PSNR that matters, 0 to 100 dB
   * @throws IllegalArgumentException if the tolerance is outside its range, or the trials of a cell
   *     and picture do not come together, each replicate once and in ascending order
   */
  public static Drift between(
      Iterable<Trial> old,
      Iterable<Trial> now,
      Set<String> unchangedPictures,
      Predicate<CellKey> sameNoise,
      double toleranceDb) {
    return between(
        RunFigures.of(old), RunFigures.of(now), unchangedPictures, sameNoise, toleranceDb);
  }

  static Drift between(
      RunFigures old,
      RunFigures now,
      Set<String> unchangedPictures,
      Predicate<CellKey> sameNoise,
      double toleranceDb) {
    Require.inRange(toleranceDb, 0, MAX_TOLERANCE_DB, "tolerance (dB)");
    Set<CellKey> common = new LinkedHashSet<>(now.cells().keySet());
    common.retainAll(old.cells().keySet());
    List<CellFigures.Compared> compared = new ArrayList<>();
    for (CellKey key : common) {
      CellFigures before = figures(old, key);
      compared.add(figures(now, key).minus(before, unchangedPictures, sameNoise.test(key)));
    }
    double[] p = compared.stream().mapToDouble(c -> c.difference().p()).toArray();
    double[] adjusted = Holm.adjust(p);
    List<CellDrift> cells = new ArrayList<>();
    for (CellKey key : common) {
      int i = cells.size();
      cells.add(
          cell(
              key,
              figures(old, key),
              figures(now, key),
              compared.get(i),
              adjusted[i],
              toleranceDb));
    }
    return new Drift(List.of(), cells, without(old, common), without(now, common), false);
  }

  private static CellFigures figures(RunFigures run, CellKey key) {
    return Objects.requireNonNull(run.cells().get(key));
  }

  private static List<CellKey> without(RunFigures run, Set<CellKey> common) {
    return run.cells().keySet().stream().filter(key -> !common.contains(key)).toList();
  }

  private static CellDrift cell(
      CellKey key,
      CellFigures before,
      CellFigures after,
      CellFigures.Compared compared,
      double adjusted,
      double toleranceDb) {
    double equivalence = compared.difference().equivalenceP(toleranceDb);
    boolean identical = after.equalTo(before);
    return new CellDrift(
        key,
        compared.test(),
        before.meanDb(),
        after.meanDb(),
        compared.difference(),
        adjusted,
        equivalence,
        identical,
        verdict(compared, adjusted, equivalence, identical, toleranceDb),
        before.meanBits(),
        after.meanBits());
  }

  private static Movement verdict(
      CellFigures.Compared compared,
      double adjusted,
      double equivalence,
      boolean identical,
      double toleranceDb) {
    double size = Math.abs(compared.difference().estimate());
    boolean certain = compared.test().isOfSameNoise() && Double.isInfinite(size);
    if (identical) {
      return Movement.SAME;
    }
    if (certain || (adjusted < ALPHA && size > toleranceDb)) {
      return Movement.MOVED;
    }
    return equivalence < ALPHA ? Movement.SAME : Movement.UNDECIDED;
  }

  /** What differs in the runs' records, apart from times. */
  public List<Change> changes() {
    return changes;
  }

  /** The cells of both runs, in the order of the new one. */
  public List<CellDrift> cells() {
    return cells;
  }

  /** Cells of the old run that the new one has not. */
  public List<CellKey> onlyOld() {
    return onlyOld;
  }

  /** Cells of the new run that the old one had not. */
  public List<CellKey> onlyNew() {
    return onlyNew;
  }

  /** Whether both tables of trials are the same bytes. */
  public boolean sameBytes() {
    return sameBytes;
  }

  /** How many cells have this verdict. */
  public long count(Movement verdict) {
    return cells.stream().filter(cell -> cell.verdict() == verdict).count();
  }

  /** How many cells moved for the worse, by more than the tolerance. */
  public long worse() {
    return cells.stream().filter(CellDrift::isWorse).count();
  }

  /** How many cells changed their mean of bits per pixel. */
  public long bitsMoved() {
    return cells.stream().filter(CellDrift::bitsMoved).count();
  }
}
