package linkworthy.codec;

import linkworthy.corpus.Picture;

/**
 * A picture as the 8 x 8 DCT coefficients of ITU-T T.81 A.3.3, block by block, each in zig-zag
 * order; samples are shifted by 128, and blocks at the right and lower edge are filled by repeating
 * the last sample (A.2.4).
 */
final class JpegBlocks {
  private static final int SIDE = JpegTables.SIDE;
  private static final int LEVEL = 128;
  private static final double[][] DCT = DctBasis.oneDimensional(SIDE);

  private final PictureShape shape;

  JpegBlocks(PictureShape shape) {
    this.shape = shape;
  }

  /** Blocks in a row. */
  int across() {
    return (shape.width() + SIDE - 1) / SIDE;
  }

  int down() {
    return (shape.height() + SIDE - 1) / SIDE;
  }

  /** Number of blocks. */
  int count() {
    return across() * down();
  }

  /** The coefficients of a picture, in grey levels. */
  double[] forward(Picture picture) {
    double[] coefficients = new double[count() * JpegTables.BLOCK];
    double[] samples = new double[JpegTables.BLOCK];
    double[] transformed = new double[JpegTables.BLOCK];
    for (int block = 0; block < count(); block++) {
      int left = block % across() * SIDE;
      int top = block / across() * SIDE;
      for (int i = 0; i < samples.length; i++) {
        int x = Math.min(left + i % SIDE, shape.width() - 1);
        int y = Math.min(top + i / SIDE, shape.height() - 1);
        samples[i] = picture.samples()[y * shape.width() + x] - LEVEL;
      }
      transform(samples, transformed);
      for (int i = 0; i < samples.length; i++) {
        coefficients[block * JpegTables.BLOCK + i] = transformed[JpegTables.natural(i)];
      }
    }
    return coefficients;
  }

  /** Indices of coefficients under a quality's steps. */
  static int[] quantised(double[] coefficients, FrequencySteps weights) {
    int[] steps = JpegTables.steps(weights);
    Quantizer[] quantizers = new Quantizer[steps.length];
    java.util.Arrays.setAll(quantizers, i -> new Quantizer(steps[i]));
    int[] indices = new int[coefficients.length];
    for (int i = 0; i < indices.length; i++) {
      indices[i] = quantizers[i % JpegTables.BLOCK].index(coefficients[i]);
    }
    return indices;
  }

  /** The picture that indices stand for, as {@link JpegInverse} computes it. */
  Picture inverse(int[] indices, FrequencySteps weights) {
    int[] steps = JpegTables.steps(weights);
    int[] picture = new int[shape.size()];
    int[] coefficients = new int[JpegTables.BLOCK];
    int[] samples = new int[JpegTables.BLOCK];
    JpegInverse transform = new JpegInverse();
    for (int block = 0; block < count(); block++) {
      int left = block % across() * SIDE;
      int top = block / across() * SIDE;
      for (int i = 0; i < coefficients.length; i++) {
        coefficients[JpegTables.natural(i)] = indices[block * JpegTables.BLOCK + i] * steps[i];
      }
      transform.apply(coefficients, samples);
      for (int y = top; y < Math.min(top + SIDE, shape.height()); y++) {
        for (int x = left; x < Math.min(left + SIDE, shape.width()); x++) {
          picture[y * shape.width() + x] = samples[(y - top) * SIDE + x - left];
        }
      }
    }
    return new Picture(shape.width(), shape.height(), shape.bitDepth(), picture);
  }

  /** Rows, then columns: 1024 multiply-accumulates. */
  private static void transform(double[] from, double[] to) {
    double[] rows = new double[from.length];
    for (int i = 0; i < rows.length; i++) {
      int k = i % SIDE;
      double sum = 0;
      for (int j = 0; j < SIDE; j++) {
        sum += DCT[k][j] * from[i - k + j];
      }
      rows[i] = sum;
    }
    for (int i = 0; i < to.length; i++) {
      double sum = 0;
      for (int j = 0; j < SIDE; j++) {
        sum += DCT[i / SIDE][j] * rows[j * SIDE + i % SIDE];
      }
      to[i] = sum;
    }
  }
}
