package linkworthy.corpus;

import java.util.List;

/**
 * Colour as luma and two colour differences over the full range 0 to P, as ITU-T T.871 (2011),
 * section 7, defines them from the weights of ITU-R BT.601:
 *
 * <pre>
 * Y  = 0.299 R + 0.587 G + 0.114 B
 * Cb = (B - Y) / 1.772 + (P + 1) / 2
 * Cr = (R - Y) / 1.402 + (P + 1) / 2
 * </pre>
 *
 * each rounded half up and limited to P. The arithmetic is of whole numbers and exact. T.871 says
 * it for 8 bits; the other depths follow the same formula with their own P.
 */
public final class YCbCr {
  private YCbCr() {}

  /** Y of red, green and blue planes of one size and depth. */
  static Picture luma(Picture red, Picture green, Picture blue) {
    int[] r = red.samples();
    int[] g = green.samples();
    int[] b = blue.samples();
    int[] luma = new int[r.length];
    for (int i = 0; i < luma.length; i++) {
      luma[i] = (299 * r[i] + 587 * g[i] + 114 * b[i] + 500) / 1000;
    }
    return new Picture(red.width(), red.height(), red.bitDepth(), luma);
  }

  /** Y, Cb and Cr of red, green and blue planes of one size and depth. */
  static List<Picture> planes(Picture red, Picture green, Picture blue) {
    return List.of(
        luma(red, green, blue),
        difference(red, green, blue, -299, -587, 886, 1772),
        difference(red, green, blue, 701, -587, -114, 1402));
  }

  private static Picture difference(
      Picture red, Picture green, Picture blue, int forRed, int forGreen, int forBlue, int scale) {
    int[] samples = new int[red.size()];
    int peak = red.peak();
    int middle = (peak + 1) / 2;
    for (int i = 0; i < samples.length; i++) {
      int weighted =
          forRed * red.samples()[i] + forGreen * green.samples()[i] + forBlue * blue.samples()[i];
      int rounded = Math.floorDiv(2 * weighted + scale * (2 * middle + 1), 2 * scale);
      samples[i] = Math.max(0, Math.min(peak, rounded));
    }
    return new Picture(red.width(), red.height(), red.bitDepth(), samples);
  }
}
