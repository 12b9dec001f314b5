package linkworthy.statistics;

import java.util.LinkedHashMap;
import java.util.Map;
import linkworthy.trial.Trial;

/** Running means of one picture in one cell. */
final class PictureTally {
  private final Moments psnrDb = new Moments();
  private double equivalentNoiseVariance;
  private double realisedNoiseVariance;
  private double snrDb;
  private double relativeError;
  private double ssim;
  private double bitsPerPixel;
  private double outageRate;
  private final Map<String, Moments> further = new LinkedHashMap<>();

  /** What is known of a picture. */
  enum Figure {
    PSNR_DB,
    EQUIVALENT_NOISE_VARIANCE,
    REALISED_NOISE_VARIANCE,
    SNR_DB,
    /** Squared error over squared peak, the same measure at every bit depth. */
    RELATIVE_ERROR,
    SSIM,
    BITS_PER_PIXEL,
    OUTAGE_RATE
  }

  void add(Trial trial) {
    psnrDb.add(trial.psnrDb());
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
    return value == mean ? mean : mean + (value - mean) / psnrDb.count();
  }

  Moments psnrDb() {
    return psnrDb;
  }

  double mean(Figure figure) {
    return switch (figure) {
      case PSNR_DB -> psnrDb.mean();
      case EQUIVALENT_NOISE_VARIANCE -> equivalentNoiseVariance;
      case REALISED_NOISE_VARIANCE -> realisedNoiseVariance;
      case SNR_DB -> snrDb;
      case RELATIVE_ERROR -> relativeError;
      case SSIM -> ssim;
      case BITS_PER_PIXEL -> bitsPerPixel;
      case OUTAGE_RATE -> outageRate;
    };
  }

  /** Mean of a further measure; NaN if it was not measured. */
  double mean(String column) {
    Moments moments = further.get(column);
    return moments == null ? Double.NaN : moments.mean();
  }
}
