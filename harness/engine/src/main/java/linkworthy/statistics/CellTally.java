package linkworthy.statistics;

import java.util.LinkedHashMap;
import java.util.Map;
import java.util.function.ToDoubleFunction;
import java.util.stream.DoubleStream;
import linkworthy.trial.Trial;

/** What is known of one cell so far. */
final class CellTally {
  private final Trial first;
  private final Map<String, PictureTally> pictures = new LinkedHashMap<>();
  private String transform;
  private String over;
  private int keep;
  private String step;
  private long failures;

  CellTally(Trial first) {
    this.first = first;
    transform = first.transform();
    over = first.over();
    keep = first.keep();
    step = first.step();
  }

  void add(Trial trial) {
    pictures.computeIfAbsent(trial.picture(), id -> new PictureTally()).add(trial);
    transform = transform.equals(trial.transform()) ? transform : "";
    over = over.equals(trial.over()) ? over : "";
    keep = keep == trial.keep() ? keep : -1;
    step = step.equals(trial.step()) ? step : "";
    failures += trial.failure().isEmpty() ? 0 : 1;
  }

  /** Per-picture means of PSNR, in dB. */
  Moments psnrOfPictures() {
    return Moments.of(pictures.values().stream().mapToDouble(p -> p.psnr().mean()).toArray());
  }

  /**
   * This cell's PSNR minus the other's on the same noise: a difference for each picture that both
   * have (the mean over their common replicates), or for each replicate if that is one picture
   * only.
   */
  Moments minus(CellTally other) {
    Moments overPictures = new Moments();
    Moments overReplicates = new Moments();
    for (Map.Entry<String, PictureTally> entry : pictures.entrySet()) {
      PictureTally theirs = other.pictures.get(entry.getKey());
      if (theirs != null) {
        Moments differences = entry.getValue().minus(theirs);
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
        mean(PictureTally::equivalentNoiseVariance),
        mean(PictureTally::snrDb),
        first.codec(),
        transform,
        over,
        keep,
        step,
        pictures.size(),
        pictures.values().stream().mapToLong(PictureTally::count).sum(),
        psnr.mean(),
        StudentT.halfWidthOfGroups(pictures.values().stream().map(PictureTally::psnr).toList()),
        StudentT.halfWidth(psnr),
        10 * StrictMath.log10(1 / mean(PictureTally::relativeError)),
        Percentile.of(allPsnrDb(), 0.05),
        mean(PictureTally::ssim),
        mean(PictureTally::bitsPerPixel),
        mean(PictureTally::outageRate),
        mean(PictureTally::realisedNoiseVariance),
        behindBestDb,
        behindBestPAdjusted,
        standing,
        failures,
        furtherMeans());
  }

  private Map<String, Double> furtherMeans() {
    Map<String, Double> means = new LinkedHashMap<>();
    for (String column : first.further().keySet()) {
      means.put(column, mean(picture -> picture.further(column)));
    }
    return means;
  }

  private double mean(ToDoubleFunction<PictureTally> figure) {
    return Moments.of(pictures.values().stream().mapToDouble(figure).toArray()).mean();
  }

  private double[] allPsnrDb() {
    return pictures.values().stream().flatMapToDouble(p -> DoubleStream.of(p.psnrDb())).toArray();
  }
}
