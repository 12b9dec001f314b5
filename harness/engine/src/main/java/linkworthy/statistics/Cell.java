package linkworthy.statistics;

import java.util.Collections;
import java.util.LinkedHashMap;
import java.util.Map;
import linkworthy.input.Require;

/**
 * One codec under one severity, over all pictures; a row of {@code cells.csv}. {@link Cells} says
 * how each figure is computed. NaN stands for 'n/a'.
 *
 * @param impairment name of the noise model, {@code none} for clean
 * @param actsOn {@code samples}, {@code packets}, {@code bits}, or empty for clean
 * @param axis key the severity was given by, or empty for clean
 * @param severity value on that axis; NaN for clean
 * @param equivalentNoiseVariance mean over pictures, grey levels squared
 * @param snrDb mean over pictures, in dB; NaN for clean
 * @param codec label of the codec
 * @param transform basis of the transform codec, or empty if there is none or it differs
 * @param over arrangement, or empty if there is none or it differs
 * @param keep components in force, or -1 if there are none or it differs
 * @param step quantiser step in grey levels, {@code none}, or empty if there is none or it differs
 * @param pictures number of pictures
 * @param trials number of trials
 * @param psnrMeanDb mean PSNR, in dB; infinite if any trial's is
 * @param psnrNoiseHalfWidthDb half-width of the noise interval, in dB, or NaN
 * @param psnrPictureHalfWidthDb half-width of the picture interval, in dB, or NaN
 * @param psnrOfMeanMseDb PSNR of the mean squared error, in dB
 * @param psnrP05Db 5th percentile of PSNR over trials, in dB
 * @param ssimMean mean structural similarity, or NaN where it was not measured
 * @param bitsPerPixelMean mean of the sent bits per sample
 * @param outageRate share of trials in which nothing usable arrived, 0 to 1
 * @param realisedNoiseVarianceMean mean of the realised noise variance, grey levels squared
 * @param behindBestDb how far the mean PSNR lies below the row's best, in dB; 0 for the best
 * @param behindBestPAdjusted adjusted p value of that difference, or NaN
 * @param standing what may be said of that difference
 * @param failures number of trials in which the codec failed; they count as outages
 * @param furtherMeans means of the study's measures besides psnr and ssim, by column of the trial,
 *     in study order
 * @throws IllegalArgumentException if a name is empty, there is no picture, a picture without
 *     trial, the outage rate is not 0 to 1, or there are more failures than trials
 */
public record Cell(
    String impairment,
    String actsOn,
    String axis,
    double severity,
    double equivalentNoiseVariance,
    double snrDb,
    String codec,
    String transform,
    String over,
    int keep,
    String step,
    int pictures,
    long trials,
    double psnrMeanDb,
    double psnrNoiseHalfWidthDb,
    double psnrPictureHalfWidthDb,
    double psnrOfMeanMseDb,
    double psnrP05Db,
    double ssimMean,
    double bitsPerPixelMean,
    double outageRate,
    double realisedNoiseVarianceMean,
    double behindBestDb,
    double behindBestPAdjusted,
    Standing standing,
    long failures,
    Map<String, Double> furtherMeans) {
  public Cell {
    Require.notBlank(impairment, "impairment");
    Require.notBlank(codec, "codec");
    Require.inRange(pictures, 1, Integer.MAX_VALUE, "number of pictures");
    if (trials < pictures) {
      throw new IllegalArgumentException(
          "number of trials is " + trials + "; accepted: at least one for each picture");
    }
    Require.inRange(outageRate, 0, 1, "outage rate");
    if (failures < 0 || failures > trials) {
      throw new IllegalArgumentException(
          "number of failures is " + failures + "; accepted: 0 to " + trials);
    }
    furtherMeans = Collections.unmodifiableMap(new LinkedHashMap<>(furtherMeans));
  }
}
