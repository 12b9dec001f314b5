package linkworthy.codec;

import java.util.ArrayList;
import java.util.List;

/**
 * The separable wavelet transform of a picture of any size into subbands: low values of each level
 * in the upper left, {@code ceil(n / 2)} of them in each direction, and transformed again.
 *
 * <p>Each subband has a gain, by which coefficients are multiplied before they are quantised: the
 * Euclidean norm of the picture that one coefficient of 1 in the middle of the band makes. So the
 * same error in any coefficient is the same squared error in the picture, as through an orthonormal
 * basis (but for coefficients at the edges, and for correlation between bands).
 */
final class Subbands {
  private final Wavelet wavelet;
  private final boolean reversible;
  private final int width;
  private final int height;
  private final int levels;

  /**
   * @param reversible whether whole numbers become whole numbers; all gains are then 1
   */
  Subbands(Wavelet wavelet, boolean reversible, PictureShape shape, int levels) {
    this.wavelet = wavelet;
    this.reversible = reversible;
    this.width = shape.width();
    this.height = shape.height();
    this.levels = levels;
  }

  /**
   * A subband that is not empty.
   *
   * @param level 1 for the finest
   * @param left first column of the band among all coefficients
   */
  record Band(int level, int left, int top, int width, int height, double gain) {}

  /** Sides at each level, from the picture's own. */
  private static int side(int length, int level) {
    int side = length;
    for (int l = 0; l < level; l++) {
      side = (side + 1) / 2;
    }
    return side;
  }

  /** All bands, the lowest first, then from coarse to fine: right, lower, diagonal. */
  List<Band> bands() {
    List<Band> bands = new ArrayList<>();
    add(bands, levels, false, false);
    for (int level = levels; level >= 1; level--) {
      add(bands, level, true, false);
      add(bands, level, false, true);
      add(bands, level, true, true);
    }
    return bands;
  }

  private void add(List<Band> bands, int level, boolean highAcross, boolean highDown) {
    int left = highAcross ? side(width, level) : 0;
    int top = highDown ? side(height, level) : 0;
    int across = (highAcross ? side(width, level - 1) : side(width, level)) - left;
    int down = (highDown ? side(height, level - 1) : side(height, level)) - top;
    if (across > 0 && down > 0) {
      double gain =
          reversible
              ? 1
              : norm(width, level, left + across / 2) * norm(height, level, top + down / 2);
      bands.add(new Band(level, left, top, across, down, gain));
    }
  }

  /** Norm of the line that a 1 at a place among the coefficients of a level makes. */
  private double norm(int length, int level, int place) {
    double[] line = new double[length];
    line[place] = 1;
    double[] spread = new double[length];
    for (int l = level; l >= 1; l--) {
      inverseLine(line, 0, 1, side(length, l - 1), spread);
    }
    double sum = 0;
    for (double value : line) {
      sum += value * value;
    }
    return Math.sqrt(sum);
  }

  /** Transforms a picture's values in place, row by row. */
  void forward(double[] values) {
    double[] spare = new double[Math.max(width, height)];
    for (int level = 1; level <= levels; level++) {
      int across = side(width, level - 1);
      int down = side(height, level - 1);
      for (int x = 0; x < across; x++) {
        forwardLine(values, x, width, down, spare);
      }
      for (int y = 0; y < down; y++) {
        forwardLine(values, y * width, 1, across, spare);
      }
    }
  }

  /** The inverse of {@link #forward}. */
  void inverse(double[] values) {
    double[] spare = new double[Math.max(width, height)];
    for (int level = levels; level >= 1; level--) {
      int across = side(width, level - 1);
      int down = side(height, level - 1);
      for (int y = 0; y < down; y++) {
        inverseLine(values, y * width, 1, across, spare);
      }
      for (int x = 0; x < across; x++) {
        inverseLine(values, x, width, down, spare);
      }
    }
  }

  private void forwardLine(double[] values, int start, int stride, int length, double[] line) {
    for (int i = 0; i < length; i++) {
      line[i] = values[start + i * stride];
    }
    wavelet.forward(line, length, reversible);
    int low = (length + 1) / 2;
    for (int i = 0; i < length; i++) {
      values[start + (i % 2 == 0 ? i / 2 : low + i / 2) * stride] = line[i];
    }
  }

  private void inverseLine(double[] values, int start, int stride, int length, double[] line) {
    int low = (length + 1) / 2;
    for (int i = 0; i < length; i++) {
      line[i] = values[start + (i % 2 == 0 ? i / 2 : low + i / 2) * stride];
    }
    wavelet.inverse(line, length, reversible);
    for (int i = 0; i < length; i++) {
      values[start + i * stride] = line[i];
    }
  }
}
