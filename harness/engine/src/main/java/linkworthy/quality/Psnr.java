package linkworthy.quality;

import linkworthy.codec.PictureShape;
import linkworthy.corpus.Picture;
import linkworthy.input.Require;

/**
 * Peak signal-to-noise ratio, {@code 10 log10(P^2 / MSE)} in dB, where P is the peak of the bit
 * depth and MSE the mean over all samples of the squared difference, in grey levels squared.
 * Identical pictures have positive infinity.
 */
public final class Psnr implements QualityMeasure {
  @Override
  public String id() {
    return "psnr";
  }

  @Override
  public String column() {
    return "psnr_db";
  }

  /** Accepts every shape. */
  @Override
  public void check(PictureShape shape) {}

  @Override
  public Judge against(Picture clean) {
    return decoded -> psnrDb(meanSquaredError(clean, decoded), clean.peak());
  }

  /**
   * Mean over all samples of the squared difference, in grey levels squared; the sum is exact.
   *
   * @throws IllegalArgumentException if the pictures differ in size or depth
   */
  public static double meanSquaredError(Picture a, Picture b) {
    requireSameShape(a, b);
    int[] left = a.samples();
    int[] right = b.samples();
    long sum = 0;
    for (int i = 0; i < left.length; i++) {
      int difference = left[i] - right[i];
      sum += (long) difference * difference;
    }
    return (double) sum / left.length;
  }

  /**
   * Peak signal-to-noise ratio in dB; positive infinity where the error is 0.
   *
   * @param mse mean squared error, grey levels squared
   * @param peak largest sample value, grey levels
   * @throws IllegalArgumentException if the error is negative or not finite, or the peak below 1
   */
  public static double psnrDb(double mse, int peak) {
    Require.notNegative(mse, "mean squared error (grey levels squared)");
    Require.inRange(peak, 1, 65_535, "peak (grey levels)");
    return 10 * StrictMath.log10((double) peak * peak / mse);
  }

  static void requireSameShape(Picture clean, Picture decoded) {
    PictureShape expected = PictureShape.of(clean);
    PictureShape found = PictureShape.of(decoded);
    if (!found.equals(expected)) {
      throw new IllegalArgumentException("cannot compare a " + found + " with a " + expected);
    }
  }
}
