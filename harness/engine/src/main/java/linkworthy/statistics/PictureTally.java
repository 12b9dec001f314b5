package linkworthy.statistics;

import java.util.Arrays;
import java.util.LinkedHashMap;
import java.util.Map;
import linkworthy.trial.Trial;

/** What one cell knows of one picture: running means, and the PSNR of every replicate. */
final class PictureTally {
  private int count;
  private int[] replicates = new int[1];
  private double[] psnrDb = new double[1];
  private double equivalentNoiseVariance;
  private double realisedNoiseVariance;
  private double snrDb;
  private double relativeError;
  private double ssim;
  private double bitsPerPixel;
  private double outageRate;
  private final Map<String, Moments> further = new LinkedHashMap<>();

  void add(Trial trial) {
    if (count > 0 && trial.replicate() <= replicates[count - 1]) {
      throw new IllegalArgumentException(
          "trial "
              + trial.trial()
              + " is replicate "
              + trial.replicate()
              + " of its cell and picture, after replicate "
              + replicates[count - 1]
              + "; accepted: each replicate once, in ascending order");
    }
    if (count == replicates.length) {
      replicates = Arrays.copyOf(replicates, 2 * count);
      psnrDb = Arrays.copyOf(psnrDb, 2 * count);
    }
    replicates[count] = trial.replicate();
    psnrDb[count] = trial.psnrDb();
    count++;
    equivalentNoiseVariance = moved(equivalentNoiseVariance, trial.equivalentNoiseVariance());
    realisedNoiseVariance = moved(realisedNoiseVariance, trial.realisedNoiseVariance());
    snrDb = moved(snrDb, trial.snrDb());
    relativeError = moved(relativeError, StrictMath.pow(10, -trial.psnrDb() / 10));
    ssim = moved(ssim, trial.ssim());
    bitsPerPixel = moved(bitsPerPixel, trial.bitsPerPixel());
    outageRate = moved(outageRate, trial.outage() ? 1 : 0);
    trial
        .further()
        .forEach(
            (column, figure) -> further.computeIfAbsent(column, c -> new Moments()).add(figure));
  }

  /** The running mean after the newest value; exact while all values are equal. */
  private double moved(double mean, double value) {
    return value == mean ? mean : mean + (value - mean) / count;
  }

  int count() {
    return count;
  }

  double equivalentNoiseVariance() {
    return equivalentNoiseVariance;
  }

  double realisedNoiseVariance() {
    return realisedNoiseVariance;
  }

  double snrDb() {
    return snrDb;
  }

  /** Mean squared error over squared peak, the same measure at every bit depth. */
  double relativeError() {
    return relativeError;
  }

  double ssim() {
    return ssim;
  }

  double bitsPerPixel() {
    return bitsPerPixel;
  }

  double outageRate() {
    return outageRate;
  }

  /** Mean of a further measure; NaN if it was not measured. */
  double further(String column) {
    Moments moments = further.get(column);
    return moments == null ? Double.NaN : moments.mean();
  }

  Moments psnr() {
    return Moments.of(psnrDb());
  }

  double[] psnrDb() {
    return Arrays.copyOf(psnrDb, count);
  }

  /**
   * This picture's PSNR minus the other's, for each replicate that both have; 0 where they are
   * equal, infinite ones included.
   */
  Moments minus(PictureTally other) {
    Moments differences = new Moments();
    int j = 0;
    for (int i = 0; i < count; i++) {
      while (j < other.count && other.replicates[j] < replicates[i]) {
        j++;
      }
      if (j < other.count && other.replicates[j] == replicates[i]) {
        differences.add(difference(psnrDb[i], other.psnrDb[j]));
      }
    }
    return differences;
  }

  /** {@code a - b}, and 0 where both are the same infinity. */
  static double difference(double a, double b) {
    return a == b ? 0 : a - b;
  }
}
