package linkworthy.quality;

import java.util.Arrays;
import linkworthy.codec.PictureShape;
import linkworthy.corpus.Picture;
import linkworthy.input.Require;

/**
 * Peak signal-to-noise ratio, {@code 10 log10(P^2 / MSE)} in dB, where P is the peak of the bit
 * depth and MSE the mean over all samples of the squared difference, in grey levels squared.
 * Identical pictures have positive infinity.
 */
public final class Psnr implements QualityMeasure {
  /** Sums that run side by side; 4 KB of them stay in the first-level cache. */
  private static final int LANES = 1024;

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
    int turns = (int) (Integer.MAX_VALUE / ((long) a.peak() * a.peak()));
    int[] sums = new int[Math.min(LANES, left.length)];
    long sum = 0;
    int turn = 0;
    int i = 0;
    for (; turns > 0 && i + sums.length <= left.length; i += sums.length) {
      addSquares(left, right, i, sums);
      if (++turn == turns) {
        sum += drained(sums);
        turn = 0;
      }
    }
    sum += drained(sums);
    for (; i < left.length; i++) {
      long difference = (long) left[i] - right[i];
      sum += difference * difference;
    }
    return (double) sum / left.length;
  }

  /** Squared differences of the samples from one on, each to a sum of its own: no sum waits. */
  private static void addSquares(int[] left, int[] right, int from, int[] sums) {
    for (int j = 0; j < sums.length; j++) {
      int difference = left[from + j] - right[from + j];
      sums[j] += difference * difference;
    }
  }

  /** The sum of sums, which begin anew. */
  private static long drained(int[] sums) {
    long all = 0;
    for (int sum : sums) {
      all += sum;
    }
    Arrays.fill(sums, 0);
    return all;
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
