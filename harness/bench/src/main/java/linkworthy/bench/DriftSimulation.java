package linkworthy.bench;

import java.util.ArrayList;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Set;
import linkworthy.bench.SyntheticRows.Shape;
import linkworthy.decision.CellDrift;
import linkworthy.decision.Drift;
import linkworthy.decision.Movement;
import linkworthy.trial.Trial;

/**
 * How often drift calls any cell of a table moved when nothing changed, and how often it finds a
 * cell that moved by 0.2 dB.
 */
final class DriftSimulation {
  private static final String FALSE_ALARMS = "Drift: any of 6 cells called moved, nothing changed";
  private static final String POWER = "Drift: a cell that fell by 0.2 dB, among 5 that did not";
  private static final double HIGHEST = 0.06;
  private static final int CELLS = 6;
  private static final double SHIFT = -0.2;
  private static final double TOLERANCE = 0.1;

  private static final double MEAN = 30;
  private static final double OF_PICTURES = 2;
  private static final double COMMON = 0.3;

  private final int repetitions;
  private final SyntheticRows rows;

  DriftSimulation(int repetitions, long seed) {
    this.repetitions = repetitions;
    this.rows = new SyntheticRows(seed);
  }

  /** Replicates of a run and the spread of its own errors, in dB. */
  private record Run(int replicates, double spread) {}

  /**
   * How two runs are drawn.
   *
   * @param test by which they are to be compared
   * @param pictures in each run
   * @param old the one run
   * @param now the other
   */
  private record Case(CellDrift.Test test, int pictures, Run old, Run now, Shape shape) {
    Case(CellDrift.Test test, int pictures, int replicates, double spread) {
      this(
          test, pictures, new Run(replicates, spread), new Run(replicates, spread), Shape.GAUSSIAN);
    }

    boolean hasSamePictures() {
      return test != CellDrift.Test.PICTURES;
    }

    /** Equal replicates then share an error of {@link #COMMON}. */
    boolean hasSameNoise() {
      return test == CellDrift.Test.SAME_NOISE || test == CellDrift.Test.SAME_NOISE_OF_ONE_PICTURE;
    }

    String words() {
      String replicates =
          old.replicates + (now.replicates == old.replicates ? "" : " and " + now.replicates);
      String spreads = old.spread + (now.spread == old.spread ? "" : " and " + now.spread);
      return test
          + ", pictures "
          + pictures
          + ", replicates "
          + replicates
          + ", spread "
          + spreads
          + " dB"
          + (shape == Shape.GAUSSIAN ? "" : ", " + shape);
    }
  }

  List<Claim> claims() {
    List<Claim> claims = new ArrayList<>();
    for (Case nothing :
        List.of(
            new Case(CellDrift.Test.SAME_NOISE, 12, 5, 0.2),
            new Case(CellDrift.Test.SAME_PICTURES, 8, 6, 0.3),
            new Case(CellDrift.Test.SAME_NOISE_OF_ONE_PICTURE, 1, 10, 0.2),
            new Case(CellDrift.Test.REPLICATES, 1, 30, 0.3),
            new Case(CellDrift.Test.REPLICATES, 1, 6, 0.3),
            welch(new Run(10, 0.1), new Run(10, 0.6), Shape.GAUSSIAN),
            welch(new Run(10, 0.6), new Run(30, 0.2), Shape.GAUSSIAN),
            welch(new Run(30, 0.6), new Run(10, 0.2), Shape.GAUSSIAN),
            welch(new Run(30, 0.3), new Run(30, 0.3), Shape.SKEWED),
            new Case(CellDrift.Test.PICTURES, 12, 6, 0.3))) {
      claims.add(claim(FALSE_ALARMS, "share of tables", nothing, 0, 0, HIGHEST));
    }
    for (Case moved :
        List.of(
            new Case(CellDrift.Test.SAME_NOISE, 12, 5, 0.1),
            new Case(CellDrift.Test.SAME_NOISE, 12, 5, 0.2),
            new Case(CellDrift.Test.SAME_PICTURES, 12, 5, 0.2),
            new Case(CellDrift.Test.SAME_NOISE_OF_ONE_PICTURE, 1, 20, 0.2),
            new Case(CellDrift.Test.REPLICATES, 1, 20, 0.2),
            new Case(CellDrift.Test.REPLICATES, 1, 50, 0.2),
            new Case(CellDrift.Test.PICTURES, 12, 5, 0.2))) {
      claims.add(claim(POWER, "found", moved, SHIFT, TOLERANCE, 1));
    }
    return claims;
  }

  private static Case welch(Run old, Run now, Shape shape) {
    return new Case(CellDrift.Test.REPLICATES, 1, old, now, shape);
  }

  private Claim claim(
      String table, String column, Case drawn, double shift, double tolerance, double highest) {
    int hits = 0;
    for (int i = 0; i < repetitions; i++) {
      hits += isMoved(drawn, shift, tolerance) ? 1 : 0;
    }
    return new Claim(table, drawn.words(), column, hits, repetitions, 0, highest, "");
  }

  /** Whether the shifted cell is called moved or, without a shift, any is. */
  private boolean isMoved(Case drawn, double shift, double tolerance) {
    List<Trial> old = new ArrayList<>();
    List<Trial> now = new ArrayList<>();
    for (int cell = 0; cell < CELLS; cell++) {
      add("codec " + cell, drawn, cell == 0 ? shift : 0, old, now);
    }
    Set<String> unchanged = new LinkedHashSet<>();
    for (int p = 0; drawn.hasSamePictures() && p < drawn.pictures; p++) {
      unchanged.add(SyntheticRows.picture(p));
    }
    Drift drift = Drift.between(old, now, unchanged, key -> drawn.hasSameNoise(), tolerance);
    if (drift.cells().stream().anyMatch(cell -> cell.test() != drawn.test)) {
      throw new IllegalStateException(drawn.words() + ": compared in another way");
    }
    return shift == 0
        ? drift.count(Movement.MOVED) > 0
        : drift.cells().get(0).verdict() == Movement.MOVED;
  }

  private void add(String codec, Case drawn, double shift, List<Trial> old, List<Trial> now) {
    double[] before = rows.levels(drawn.pictures, Shape.GAUSSIAN, MEAN, OF_PICTURES);
    double[] after =
        drawn.hasSamePictures()
            ? before
            : rows.levels(drawn.pictures, Shape.GAUSSIAN, MEAN, OF_PICTURES);
    int most = Math.max(drawn.old.replicates, drawn.now.replicates);
    for (int p = 0; p < drawn.pictures; p++) {
      boolean own = drawn.hasSameNoise() && drawn.pictures > 1;
      double moved = after[p] + shift + (own ? drawn.now.spread * rows.draw(Shape.GAUSSIAN) : 0);
      for (int r = 0; r < most; r++) {
        double common = drawn.hasSameNoise() ? COMMON * rows.draw(Shape.GAUSSIAN) : 0;
        add(codec, p, r, before[p] + common, drawn.old, drawn.shape, old);
        add(codec, p, r, moved + common, drawn.now, drawn.shape, now);
      }
    }
  }

  private void add(
      String codec,
      int picture,
      int replicate,
      double level,
      Run run,
      Shape shape,
      List<Trial> to) {
    if (replicate < run.replicates) {
      double psnrDb = level + run.spread * rows.draw(shape);
      to.add(SyntheticRows.row(codec, picture, replicate, psnrDb, false));
    }
  }
}
