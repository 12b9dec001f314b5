package linkworthy.statistics;

import java.util.Arrays;
import java.util.EnumMap;
import java.util.LinkedHashMap;
import java.util.Map;
import java.util.Objects;
import linkworthy.statistics.PictureTally.Figure;
import linkworthy.trial.Trial;

/**
 * What is known of one cell so far: the PSNR of every trial, running moments over the pictures that
 * are done, and the tally of the one at hand.
 */
final class CellTally {
  private final Trial first;
  private final PsnrTable psnrDb;
  private final Map<Figure, Moments> done = new EnumMap<>(Figure.class);
  private final Map<String, Moments> furtherDone = new LinkedHashMap<>();
  private PictureTally current = new PictureTally();
  private double[] squaredErrors = new double[1];
  private boolean hasNoiseInterval = true;
  private String transform;
  private String over;
  private int keep;
  private String step;
  private long failures;

  CellTally(Trial first, Numbering pictures) {
    this.first = first;
    psnrDb = new PsnrTable(pictures);
    transform = first.transform();
    over = first.over();
    keep = first.keep();
    step = first.step();
    for (Figure figure : Figure.values()) {
      done.put(figure, new Moments());
    }
    first.further().keySet().forEach(column -> furtherDone.put(column, new Moments()));
  }

  void add(Trial trial) {
    if (psnrDb.add(trial) && psnrDb.pictures() > 1) {
      endPicture(psnrDb.pictures() - 2);
    }
    current.add(trial);
    transform = transform.equals(trial.transform()) ? transform : "";
    over = over.equals(trial.over()) ? over : "";
    keep = keep == trial.keep() ? keep : -1;
    step = step.equals(trial.step()) ? step : "";
    failures += trial.failure().isEmpty() ? 0 : 1;
  }

  /** A picture with a single trial, or an infinite value, leaves the cell without an interval. */
  private void endPicture(int place) {
    done.forEach((figure, moments) -> moments.add(current.mean(figure)));
    furtherDone.forEach((column, moments) -> moments.add(current.mean(column)));
    double squaredError = squaredError(current);
    hasNoiseInterval &= !Double.isNaN(squaredError);
    if (hasNoiseInterval) {
      if (place == squaredErrors.length) {
        squaredErrors = Arrays.copyOf(squaredErrors, 2 * place);
      }
      squaredErrors[place] = squaredError;
    }
    current = new PictureTally();
  }

  private static double squaredError(PictureTally picture) {
    return picture.psnrDb().variance() / picture.psnrDb().count();
  }

  /** Per-picture means of PSNR, in dB. */
  Moments psnrOfPictures() {
    return Objects.requireNonNull(done.get(Figure.PSNR_DB)).with(current.mean(Figure.PSNR_DB));
  }

  /**
   * This cell's PSNR minus the other's on the same noise: a difference for each picture that both
   * have (the mean over their common replicates), or for each replicate if that is one picture
   * only.
   */
  Moments minus(CellTally other) {
    Moments overPictures = new Moments();
    Moments overReplicates = new Moments();
    int[] places = psnrDb.placesIn(other.psnrDb);
    for (int i = 0; i < places.length; i++) {
      if (places[i] >= 0) {
        Moments differences = psnrDb.minus(i, other.psnrDb, places[i]);
        if (differences.count() > 0) {
          overReplicates = differences;
          overPictures.add(differences.mean());
        }
      }
    }
    return overPictures.count() == 1 ? overReplicates : overPictures;
  }

  Cell cell(double behindBestDb, double behindBestPAdjusted, Standing standing) {
    Moments psnr = psnrOfPictures();
    return new Cell(
        first.impairment(),
        first.actsOn(),
        first.axis(),
        first.severity(),
        mean(Figure.EQUIVALENT_NOISE_VARIANCE),
        mean(Figure.SNR_DB),
        first.codec(),
        transform,
        over,
        keep,
        step,
        psnrDb.pictures(),
        psnrDb.trials(),
        psnr.mean(),
        noiseHalfWidth(),
        StudentT.halfWidth(psnr),
        10 * StrictMath.log10(1 / mean(Figure.RELATIVE_ERROR)),
        Percentile.of(psnrDb.toArray(), 0.05),
        mean(Figure.SSIM),
        mean(Figure.BITS_PER_PIXEL),
        mean(Figure.OUTAGE_RATE),
        mean(Figure.REALISED_NOISE_VARIANCE),
        behindBestDb,
        behindBestPAdjusted,
        standing,
        failures,
        furtherMeans());
  }

  private double noiseHalfWidth() {
    int last = psnrDb.pictures() - 1;
    if (!hasNoiseInterval) {
      return Double.NaN;
    }
    double[] parts = Arrays.copyOf(squaredErrors, last + 1);
    long[] counts = new long[last + 1];
    parts[last] = squaredError(current);
    Arrays.setAll(counts, psnrDb::trials);
    return StudentT.halfWidthOfGroups(parts, counts);
  }

  private Map<String, Double> furtherMeans() {
    Map<String, Double> means = new LinkedHashMap<>();
    furtherDone.forEach(
        (column, moments) -> means.put(column, moments.with(current.mean(column)).mean()));
    return means;
  }

  private double mean(Figure figure) {
    return Objects.requireNonNull(done.get(figure)).with(current.mean(figure)).mean();
  }
}
