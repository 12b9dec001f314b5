package linkworthy.bench;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Locale;
import linkworthy.bench.SyntheticRows.Shape;
import linkworthy.corpus.ManifestEntry;
import linkworthy.input.YamlNode;
import linkworthy.statistics.Cell;
import linkworthy.statistics.Cells;
import linkworthy.study.StudyReader;
import linkworthy.trial.Course;
import linkworthy.trial.Plan;
import linkworthy.trial.Trial;

/**
 * How often the 95 % intervals of a cell hold the truth, with fixed numbers of replicates and with
 * replicates that end early.
 */
final class CoverageSimulation {
  private static final String FIXED = "Noise and picture intervals, fixed replicates";
  private static final String UNEQUAL = "Noise intervals, pictures of unequal spread, Gaussian";
  private static final String EARLY = "Noise intervals, replicates that end early";
  private static final double LOWEST = 0.93;
  private static final double HIGHEST = 0.97;

  /** Two replicates of several pictures: the degrees of freedom are guessed too low. */
  private static final double HIGHEST_OF_TWO = 0.985;

  /** Two replicates where one picture has nearly all noise and may happen to hide it. */
  private static final double LOWEST_OF_TWO = 0.90;

  /** Early ends under a skewness beyond 0.5: their means lie to one side. */
  private static final double LOWEST_VERY_SKEWED = 0.90;

  private static final String CODEC = "codec";
  private static final double MEAN = 30;
  private static final double OF_PICTURES = 2;
  private static final double OF_NOISE = 0.3;

  private static final List<Double> SPREADS = List.of(0.002, 0.02, 0.1, 0.2, 0.4);
  private static final String STUDY =
      """
      name: early
      seed: 7
      pictures: {select: [PICTURES]}
      impairments: [{noise: gaussian, snr-db: 20}]
      codecs: [{transform: mean, step: 16}]
      replicates: {at-least: AT-LEAST, at-most: 100, half-width-db: 0.1}
      """;

  private final int repetitions;
  private final long seed;
  private final SyntheticRows rows;

  CoverageSimulation(int repetitions, long seed) {
    this.repetitions = repetitions;
    this.seed = seed;
    this.rows = new SyntheticRows(seed);
  }

  List<Claim> claims() {
    List<Claim> claims = new ArrayList<>();
    for (Shape shape : Shape.values()) {
      for (int pictures : new int[] {1, 2, 12}) {
        for (int replicates : new int[] {2, 3, 5, 10, 30}) {
          fixed(shape, pictures, replicates, claims);
        }
      }
    }
    for (Shape shape : Shape.values()) {
      for (int atLeast : shape == Shape.GAUSSIAN ? new int[] {2, 5, 10} : new int[] {5}) {
        for (int pictures : new int[] {1, 4, 12}) {
          early(shape, atLeast, pictures, claims);
        }
      }
    }
    new CoverageSimulation(repetitions, seed).unequalSpreads(claims);
    return claims;
  }

  private void unequalSpreads(List<Claim> claims) {
    for (int pictures : new int[] {2, 12, 50}) {
      for (int replicates : new int[] {2, 3, 5}) {
        double[] tenfold = new double[pictures];
        Arrays.setAll(tenfold, p -> OF_NOISE * StrictMath.pow(10, -p / (pictures - 1.0)));
        unequal("tenfold between first and last", replicates, tenfold, claims);
        double[] one = new double[pictures];
        Arrays.fill(one, OF_NOISE / 100);
        one[0] = OF_NOISE;
        unequal("one a hundredfold of the others", replicates, one, claims);
      }
    }
  }

  private void unequal(String words, int replicates, double[] spreads, List<Claim> claims) {
    int hits = 0;
    double[] levels = new double[spreads.length];
    for (int i = 0; i < repetitions; i++) {
      Cell cell = Cells.of(rows.cell(CODEC, levels, replicates, Shape.GAUSSIAN, spreads)).get(0);
      hits += holds(cell, 0, cell.psnrNoiseHalfWidthDb());
    }
    claims.add(
        new Claim(
            UNEQUAL,
            "pictures " + spreads.length + ", " + words,
            "replicates " + replicates,
            hits,
            repetitions,
            replicates == 2 ? LOWEST_OF_TWO : LOWEST,
            replicates == 2 ? HIGHEST_OF_TWO : HIGHEST,
            ""));
  }

  private void fixed(Shape shape, int pictures, int replicates, List<Claim> claims) {
    int ofNoise = 0;
    int ofPictures = 0;
    for (int i = 0; i < repetitions; i++) {
      double[] levels = rows.levels(pictures, Shape.GAUSSIAN, MEAN, OF_PICTURES);
      Cell cell = Cells.of(rows.cell(CODEC, levels, replicates, shape, OF_NOISE)).get(0);
      double truth = Arrays.stream(levels).average().orElseThrow();
      ofNoise += holds(cell, truth, cell.psnrNoiseHalfWidthDb());
      ofPictures += holds(cell, MEAN, cell.psnrPictureHalfWidthDb());
    }
    String row = shape + ", pictures " + pictures + ": ";
    String column = "replicates " + replicates;
    double highest = replicates == 2 && pictures > 1 ? HIGHEST_OF_TWO : HIGHEST;
    claims.add(new Claim(FIXED, row + "noise", column, ofNoise, repetitions, LOWEST, highest, ""));
    if (pictures > 1) {
      claims.add(
          new Claim(FIXED, row + "pictures", column, ofPictures, repetitions, LOWEST, HIGHEST, ""));
    }
  }

  private static int holds(Cell cell, double truth, double halfWidth) {
    return Math.abs(cell.psnrMeanDb() - truth) <= halfWidth ? 1 : 0;
  }

  private void early(Shape shape, int atLeast, int pictures, List<Claim> claims) {
    Plan plan = plan(atLeast, pictures);
    for (double spread : SPREADS) {
      double ofOne = spread * Math.sqrt(pictures);
      int hits = 0;
      long trials = 0;
      for (int i = 0; i < repetitions; i++) {
        Cell cell = Cells.of(run(plan, shape, ofOne)).get(0);
        hits += holds(cell, MEAN, cell.psnrNoiseHalfWidthDb());
        trials += cell.trials();
      }
      claims.add(
          new Claim(
              EARLY,
              shape + ", at-least " + atLeast + ", pictures " + pictures,
              "spread " + spread,
              hits,
              repetitions,
              shape == Shape.VERY_SKEWED ? LOWEST_VERY_SKEWED : LOWEST,
              HIGHEST,
              String.format(Locale.ROOT, "%.0f", (double) trials / repetitions / pictures)));
    }
  }

  private static Plan plan(int atLeast, int pictures) {
    List<String> ids =
        StudyReader.read(YamlNode.parse("all", text("field", 2)), Path.of(""))
            .pictures()
            .open()
            .select(List.of("field"))
            .stream()
            .map(ManifestEntry::id)
            .limit(pictures)
            .toList();
    return Plan.unchecked(
        StudyReader.read(
            YamlNode.parse("early", text(String.join(", ", ids), atLeast)), Path.of("")));
  }

  private static String text(String pictures, int atLeast) {
    return STUDY.replace("PICTURES", pictures).replace("AT-LEAST", atLeast + "");
  }

  /** The rows of the noisy units that the rule asks for. */
  private List<Trial> run(Plan plan, Shape shape, double spread) {
    List<Trial> noisy = new ArrayList<>();
    Course course = new Course(plan);
    while (!course.isAtEnd()) {
      boolean clean = course.unit().condition() == null;
      double psnrDb = clean ? MEAN : MEAN + spread * rows.draw(shape);
      Trial trial =
          SyntheticRows.row(
              CODEC, course.unit().picture(), course.unit().replicate(), psnrDb, false);
      if (!clean) {
        noisy.add(trial);
      }
      course.add(trial);
    }
    return noisy;
  }
}
