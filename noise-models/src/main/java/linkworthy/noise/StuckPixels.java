package linkworthy.noise;

import linkworthy.corpus.Picture;
import linkworthy.input.BadInput;
import org.apache.commons.rng.UniformRandomProvider;

/**
 * Samples stuck at a level of their own: each sample, independently of the others, is replaced with
 * probability d by a level drawn uniformly from 0..P, which may be the right one by chance. The
 * equivalent noise variance is d (P(2P+1)/6 - P E[x] + E[x^2]), in grey levels squared.
 *
 * <p>Density 0 leaves the picture as it is, density 1 leaves nothing of it. An SNR or a variance
 * that would need a density above 1 is refused with a {@link BadInput}.
 */
public final class StuckPixels extends ShareOfHits {
  /** Share of samples stuck, 0 to 1. */
  public static final String DENSITY = "density";

  public StuckPixels() {
    super(DENSITY, "share of samples", Site.SAMPLES);
  }

  @Override
  public String id() {
    return "stuck-pixels";
  }

  @Override
  public String summary() {
    return "a share d of the samples stuck at random levels;"
        + " equivalent variance d (P(2P+1)/6 - P E[x] + E[x^2])";
  }

  @Override
  double perHit(SignalStatistics signal) {
    double peak = signal.peak();
    return peak * (2 * peak + 1) / 6 - peak * signal.mean() + signal.meanSquare();
  }

  @Override
  Impairment hitting(double share, double equivalentNoiseVariance) {
    return new Stuck(equivalentNoiseVariance, share);
  }

  private record Stuck(double equivalentNoiseVariance, double density)
      implements Impairment.OnSamples {
    @Override
    public Picture apply(Picture clean, UniformRandomProvider random) {
      int[] noisy = clean.samples().clone();
      for (int i = 0; i < noisy.length; i++) {
        if (random.nextDouble() < density) {
          noisy[i] = random.nextInt(clean.peak() + 1);
        }
      }
      return new Picture(clean.width(), clean.height(), clean.bitDepth(), noisy);
    }
  }
}
