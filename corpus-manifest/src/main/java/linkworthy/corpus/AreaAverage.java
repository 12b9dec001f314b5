package linkworthy.corpus;

import linkworthy.input.Require;

/**
 * Reduction of a picture by area averaging: every sample of the result is the mean of the part of
 * the original that it covers, where original samples cut by its border count with the share that
 * lies inside; rounded half up. The arithmetic is of whole numbers and exact, so the result is the
 * same anywhere.
 */
public final class AreaAverage {
  private AreaAverage() {}

  /**
   * Reduces a picture so that its longest side has {@code longestSide} samples; the other side
   * keeps the proportion, rounded half up, at least 1. A picture that is small enough is returned
   * as it is.
   *
   * @throws IllegalArgumentException if {@code longestSide} is not 1 to {@link Picture#MAX_SIDE}
   */
  public static Picture toLongestSide(Picture picture, int longestSide) {
    Require.inRange(longestSide, 1, Picture.MAX_SIDE, "longest side (samples)");
    int longest = Math.max(picture.width(), picture.height());
    if (longest <= longestSide) {
      return picture;
    }
    return toSize(
        picture,
        scaled(picture.width(), longestSide, longest),
        scaled(picture.height(), longestSide, longest));
  }

  private static int scaled(int side, int longestSide, int longest) {
    return Math.max(1, (2 * side * longestSide + longest) / (2 * longest));
  }

  /**
   * Reduces a picture to a size, each side by a factor of its own.
   *
   * @throws IllegalArgumentException if a new side is not 1 to the picture's own
   */
  public static Picture toSize(Picture picture, int newWidth, int newHeight) {
    // In units of 1/newSide of an original sample, original sample i covers i newSide to (i + 1)
    // newSide and new sample x covers x oldSide to (x + 1) oldSide: all overlaps are integers.
    int width = picture.width();
    int height = picture.height();
    Require.inRange(newWidth, 1, width, "new width (samples)");
    Require.inRange(newHeight, 1, height, "new height (samples)");
    long area = (long) width * height;
    int[] samples = new int[newWidth * newHeight];
    long[] sums = new long[newWidth];
    int[] row = new int[newWidth];
    int y = 0;
    for (int j = 0; j < height; j++) {
      averageRow(picture, j, row);
      int top = j * newHeight;
      int bottom = top + newHeight;
      while (top < bottom) {
        int end = Math.min(bottom, (y + 1) * height);
        for (int x = 0; x < newWidth; x++) {
          sums[x] += (long) (end - top) * row[x];
        }
        if (end == (y + 1) * height) {
          for (int x = 0; x < newWidth; x++) {
            samples[y * newWidth + x] = (int) ((2 * sums[x] + area) / (2 * area));
            sums[x] = 0;
          }
          y++;
        }
        top = end;
      }
    }
    return new Picture(newWidth, newHeight, picture.bitDepth(), samples);
  }

  /** Sums of one original row, weighted by overlap; each is {@code width} times a mean. */
  private static void averageRow(Picture picture, int j, int[] row) {
    int width = picture.width();
    int newWidth = row.length;
    int[] samples = picture.samples();
    for (int x = 0; x < newWidth; x++) {
      int left = x * width;
      int right = left + width;
      int sum = 0;
      for (int i = left / newWidth; i * newWidth < right; i++) {
        int overlap = Math.min(right, (i + 1) * newWidth) - Math.max(left, i * newWidth);
        sum += overlap * samples[j * width + i];
      }
      row[x] = sum;
    }
  }
}
