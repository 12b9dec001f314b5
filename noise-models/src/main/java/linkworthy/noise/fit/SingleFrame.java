package linkworthy.noise.fit;

import linkworthy.corpus.Picture;
import linkworthy.input.BadInput;

/**
 * Noise of a single picture: the median absolute value of its finest diagonal Haar detail, (a - b -
 * c + d)/2 over blocks of 2 x 2 samples, over 0.6745, the same of a normal deviate (Donoho and
 * Johnstone 1994, "Ideal spatial adaptation by wavelet shrinkage", quoted from memory; the constant
 * to four digits, here the quartile of the normal distribution). The details are multiples of one
 * half, so the median is interpolated within its step, as of grouped figures. Fine texture counts
 * as noise: the result is an upper bound in busy pictures. Noise that changes with the light comes
 * out as an average.
 *
 * @param deviation standard deviation of the noise, grey levels; the rounding's 1/12 is taken off
 *     its square, down to 0
 * @param error its standard error for normal noise, 1.166 deviations over the root of the number of
 *     details (asymptotic error of a median)
 */
public record SingleFrame(double deviation, double error) {
  private static final double QUARTILE = 0.6744897501960817;
  private static final double RELATIVE_ERROR = 1.1664;
  private static final double ROUNDING = 1 / 12.0;
  private static final int LEAST_SIDE = 16;

  /**
   * @throws BadInput if a side is below 16 samples
   */
  public static SingleFrame of(Picture picture) {
    int width = picture.width() / 2;
    int height = picture.height() / 2;
    if (Math.min(picture.width(), picture.height()) < LEAST_SIDE) {
      throw new BadInput(
          "a picture is %d x %d; accepted: sides of at least %d samples"
              .formatted(picture.width(), picture.height(), LEAST_SIDE));
    }
    int[] counts = new int[2 * picture.peak() + 1];
    int[] s = picture.samples();
    for (int y = 0; y < height; y++) {
      for (int x = 0; x < width; x++) {
        int at = 2 * y * picture.width() + 2 * x;
        int below = at + picture.width();
        counts[Math.abs(s[at] - s[at + 1] - s[below] + s[below + 1])]++;
      }
    }
    double details = (double) width * height;
    double deviation = median(counts, details) / 2 / QUARTILE;
    double noise = Math.sqrt(Math.max(0, deviation * deviation - ROUNDING));
    return new SingleFrame(noise, RELATIVE_ERROR * deviation / Math.sqrt(details));
  }

  /** Value v stands for those from v - 1/2 to v + 1/2, and 0 for those up to 1/2. */
  private static double median(int[] counts, double all) {
    double below = 0;
    int value = 0;
    while (below + counts[value] < all / 2) {
      below += counts[value++];
    }
    double within = (all / 2 - below) / counts[value];
    return value == 0 ? within / 2 : value - 0.5 + within;
  }
}
