package linkworthy.noise;

import linkworthy.corpus.Picture;
import linkworthy.input.BadInput;
import org.apache.commons.rng.UniformRandomProvider;

/**
 * Salt-and-pepper noise: each sample becomes 0 with probability d/2, P with probability d/2, and
 * stays as it is otherwise, independently of the others. The equivalent noise variance is d/2
 * (E[x^2] + E[(P-x)^2]), in grey levels squared.
 *
 * <p>Density 0 leaves the picture as it is, density 1 leaves nothing of it. An SNR or a variance
 * that would need a density above 1 is refused with a {@link BadInput}.
 */
public final class SaltAndPepperNoise extends ShareOfHits {
  /** Share of samples hit, 0 to 1. */
  public static final String DENSITY = "density";

  public SaltAndPepperNoise() {
    super(DENSITY, "share of samples", Site.SAMPLES);
  }

  @Override
  public String id() {
    return "salt-and-pepper";
  }

  @Override
  public String summary() {
    return "a share d of the samples turned black or white;"
        + " equivalent variance d/2 (E[x^2] + E[(P-x)^2])";
  }

  @Override
  double perHit(SignalStatistics signal) {
    double peak = signal.peak();
    return (signal.meanSquare() + (peak * peak - 2 * peak * signal.mean() + signal.meanSquare()))
        / 2;
  }

  @Override
  Impairment hitting(double share, double equivalentNoiseVariance) {
    return new Impulses(equivalentNoiseVariance, share);
  }

  private record Impulses(double equivalentNoiseVariance, double density)
      implements Impairment.OnSamples {
    @Override
    public Picture apply(Picture clean, UniformRandomProvider random) {
      int[] noisy = clean.samples().clone();
      for (int i = 0; i < noisy.length; i++) {
        double draw = random.nextDouble();
        if (draw < density) {
          noisy[i] = draw < density / 2 ? 0 : clean.peak();
        }
      }
      return new Picture(clean.width(), clean.height(), clean.bitDepth(), noisy);
    }
  }
}
