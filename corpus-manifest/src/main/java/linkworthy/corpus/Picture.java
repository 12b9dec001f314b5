package linkworthy.corpus;

import linkworthy.input.Require;

/**
 * One plane of samples: {@code height} rows of {@code width} integers from 0 to the peak {@code P =
 * 2^bitDepth - 1} (grey levels). The array is shared, never copied, and must not be changed once
 * the picture is made.
 */
public final class Picture {
  /** The longest side accepted, in samples. */
  public static final int MAX_SIDE = 16_384;

  private final int width;
  private final int height;
  private final int bitDepth;
  private final int[] samples;

  /**
   * @param samples row-major, {@code width * height} of them, each 0 to {@code 2^bitDepth - 1}
   * @throws IllegalArgumentException if a side is not 1 to {@link #MAX_SIDE}, the depth not 1 to 16
   *     bits, the length wrong or a sample outside its range
   */
  public Picture(int width, int height, int bitDepth, int[] samples) {
    this.width = Require.inRange(width, 1, MAX_SIDE, "picture width (samples)");
    this.height = Require.inRange(height, 1, MAX_SIDE, "picture height (samples)");
    this.bitDepth = Require.inRange(bitDepth, 1, 16, "bit depth (bits)");
    if (samples.length != width * height) {
      throw new IllegalArgumentException(
          "a " + width + " x " + height + " picture has " + samples.length + " samples");
    }
    int seen = 0;
    for (int sample : samples) {
      seen |= sample;
    }
    if (seen < 0 || seen > peak()) {
      throw new IllegalArgumentException("a sample lies outside 0 to " + peak());
    }
    this.samples = samples;
  }

  public int width() {
    return width;
  }

  public int height() {
    return height;
  }

  /** Bits per sample. */
  public int bitDepth() {
    return bitDepth;
  }

  /** The largest sample value P, in grey levels. */
  public int peak() {
    return (1 << bitDepth) - 1;
  }

  /** Number of samples. */
  public int size() {
    return samples.length;
  }

  /** The samples themselves, row-major; not to be changed. */
  public int[] samples() {
    return samples;
  }

  /** Mean of the samples, in grey levels. */
  public double mean() {
    long sum = 0;
    for (int sample : samples) {
      sum += sample;
    }
    return (double) sum / samples.length;
  }

  /** Mean of the squared samples, in grey levels squared. */
  public double meanSquare() {
    long sum = 0;
    for (int sample : samples) {
      sum += (long) sample * sample;
    }
    return (double) sum / samples.length;
  }

  /** Population variance of the samples (AC power), in grey levels squared. */
  public double variance() {
    double mean = mean();
    double sum = 0;
    for (int sample : samples) {
      double difference = sample - mean;
      sum += difference * difference;
    }
    return sum / samples.length;
  }
}
