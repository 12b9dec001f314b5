package linkworthy.study;

import java.util.Locale;
import linkworthy.corpus.Picture;
import linkworthy.noise.SignalStatistics;

/** What a study calls the power of a picture in its signal-to-noise ratios. */
public enum SignalPower {
  /** Population variance of the samples (AC power). */
  VARIANCE,
  /** Mean of the squared samples. */
  MEAN_SQUARE;

  /** The word used in studies. */
  public String id() {
    return name().toLowerCase(Locale.ROOT).replace('_', '-');
  }

  /** Statistics of a clean picture with this power as its signal power. */
  public SignalStatistics of(Picture clean) {
    SignalStatistics all = SignalStatistics.of(clean);
    return this == VARIANCE
        ? all
        : new SignalStatistics(
            all.meanSquare(), all.mean(), all.meanSquare(), all.variance(), all.peak());
  }
}
