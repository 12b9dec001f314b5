package linkworthy.corpus;

/**
 * Traces of block coding: whether a picture's neighbouring samples differ more across every eighth
 * line, counted from the top left corner, than across any of the seven other lines, as the 8 x 8
 * blocks of JPEG (ITU-T T.81) leave it. A picture that was cut or scaled after coding is not found.
 *
 * <p>For each direction: the mean absolute difference across lines at multiples of 8, over the
 * largest of the means at the seven other places, less 1; the smaller of the two directions counts.
 * Pictures coded at qualities 30 to 75 have 0.03 to 1.1, the shipped pictures, which were coded and
 * then scaled, below 0. A picture of pure noise is above the threshold with a chance of at most 1
 * in 64, and near 0 if it is large.
 */
public final class BlockGrid {
  /** From this excess on a picture is taken to have been coded in blocks. */
  public static final double THRESHOLD = 0.02;

  private static final int BLOCK = 8;
  private static final int LEAST_SIDE = 4 * BLOCK;

  private BlockGrid() {}

  /** Whether a picture shows the grid; never for one with a side below 32 samples. */
  public static boolean isIn(Picture picture) {
    return excess(picture) >= THRESHOLD;
  }

  /**
   * How much larger the differences across the grid are than elsewhere, as a share; -1 where the
   * picture is too small or flat.
   */
  public static double excess(Picture picture) {
    if (Math.min(picture.width(), picture.height()) < LEAST_SIDE) {
      return -1;
    }
    int[] samples = picture.samples();
    long[] across = new long[BLOCK];
    long[] down = new long[BLOCK];
    int width = picture.width();
    for (int y = 0; y < picture.height(); y++) {
      for (int x = 0; x < width; x++) {
        int at = y * width + x;
        if (x > 0) {
          across[x % BLOCK] += Math.abs(samples[at] - samples[at - 1]);
        }
        if (y > 0) {
          down[y % BLOCK] += Math.abs(samples[at] - samples[at - width]);
        }
      }
    }
    return Math.min(excess(across, width), excess(down, picture.height()));
  }

  private static double excess(long[] sums, int side) {
    double largest = 0;
    for (int place = 1; place < BLOCK; place++) {
      largest = Math.max(largest, (double) sums[place] / lines(place, side));
    }
    double grid = (double) sums[0] / lines(0, side);
    return grid == 0 ? -1 : grid / largest - 1;
  }

  /** How many lines of a place have a line before them. */
  private static int lines(int place, int side) {
    return (side - 1 - place) / BLOCK + (place == 0 ? 0 : 1);
  }
}
