package linkworthy.corpus;

import java.util.Locale;
import linkworthy.input.Require;

/**
 * What a picture file says of itself before any sample is decoded.
 *
 * @param width samples, at least 1
 * @param height samples, at least 1
 * @param channels 1 (gray) or 3 (red, green, blue)
 * @param bitDepth bits per sample, 1 to 16
 */
public record PictureHeader(int width, int height, int channels, int bitDepth) {
  /**
   * @throws IllegalArgumentException if a value is outside its range
   */
  public PictureHeader {
    Require.inRange(width, 1, Integer.MAX_VALUE, "picture width (samples)");
    Require.inRange(height, 1, Integer.MAX_VALUE, "picture height (samples)");
    if (channels != 1 && channels != 3) {
      throw new IllegalArgumentException("channels is " + channels + "; accepted: 1 or 3");
    }
    Require.inRange(bitDepth, 1, 16, "bit depth (bits)");
  }

  /** Bytes of the samples as a file without compression holds them. */
  long rawBytes() {
    return (long) width * height * channels * bytesPerSample(bitDepth);
  }

  /**
   * Whether a file of this header may be used where {@code announced} was promised: sides and
   * channels are equal, and the depth is equal or the file has the 8 or 16 bits into which samples
   * of the announced depth are put.
   */
  boolean holds(PictureHeader announced) {
    boolean container =
        bitDepth % 8 == 0 && bytesPerSample(announced.bitDepth) == bytesPerSample(bitDepth);
    return width == announced.width
        && height == announced.height
        && channels == announced.channels
        && (bitDepth == announced.bitDepth || container);
  }

  /** For messages: {@code 512 x 344, 3 channels, 8 bits}. */
  String describe() {
    return String.format(
        Locale.ROOT,
        "%d x %d, %s, %d %s",
        width,
        height,
        channels == 1 ? "1 channel" : "3 channels",
        bitDepth,
        bitDepth == 1 ? "bit" : "bits");
  }

  private static int bytesPerSample(int bitDepth) {
    return bitDepth > 8 ? 2 : 1;
  }
}
