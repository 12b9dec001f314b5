package linkworthy.codec;

import linkworthy.corpus.Picture;

/** Size of a picture in samples and its depth in bits per sample. */
public record PictureShape(int width, int height, int bitDepth) {
  public static PictureShape of(Picture picture) {
    return new PictureShape(picture.width(), picture.height(), picture.bitDepth());
  }

  /** Number of samples. */
  public int size() {
    return width * height;
  }

  /**
   * Rounds a reconstructed value half up and clips it to {@code 0..P}. Values within 5e-10 below a
   * half count as halves, so that the order of summation does not show.
   */
  int toSample(double value) {
    return (int) raised(value, (1 << bitDepth) - 1);
  }

  /** Writes values that become those of {@link #toSample} when their fraction is cut off. */
  void raise(double[] values, double[] raised) {
    double peak = (1 << bitDepth) - 1;
    for (int i = 0; i < values.length; i++) {
      raised[i] = raised(values[i], peak);
    }
  }

  private static double raised(double value, double peak) {
    return Math.max(0, Math.min(peak, value)) + (0.5 + 5e-10);
  }
}
