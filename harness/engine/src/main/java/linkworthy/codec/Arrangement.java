package linkworthy.codec;

import linkworthy.corpus.Picture;
import linkworthy.input.BadInput;
import linkworthy.input.Require;

/**
 * How a picture becomes a matrix of d variables (rows) by n observations (columns).
 *
 * <p>Values of one variable stay together: {@code values[i][j]} is variable i in observation j.
 */
public sealed interface Arrangement {
  /** As in the results' column {@code over}: {@code rows}, {@code blocks8}. */
  String id();

  /** Number of variables d. */
  int variables(PictureShape shape);

  /** Number of observations n. */
  int observations(PictureShape shape);

  /**
   * Checks that pictures of this shape can be arranged.
   *
   * @throws BadInput if not
   */
  void check(PictureShape shape);

  /** The matrix of a picture, d rows of n samples in grey levels. */
  double[][] gather(Picture picture);

  /**
   * Puts variable i of all observations back into its place, rounded and clipped as {@link
   * PictureShape#toSample} does.
   *
   * @param raised room to work in, at least as long as the values, or these if they may be lost
   */
  void scatter(double[] values, int variable, PictureShape shape, double[] raised, int[] samples);

  /** Each picture row is a variable, each picture column an observation. */
  record Rows() implements Arrangement {
    @Override
    public String id() {
      return "rows";
    }

    @Override
    public int variables(PictureShape shape) {
      return shape.height();
    }

    @Override
    public int observations(PictureShape shape) {
      return shape.width();
    }

    @Override
    public void check(PictureShape shape) {}

    @Override
    public double[][] gather(Picture picture) {
      int width = picture.width();
      int[] samples = picture.samples();
      double[][] values = new double[picture.height()][width];
      for (int y = 0; y < values.length; y++) {
        double[] row = values[y];
        for (int x = 0; x < width; x++) {
          row[x] = samples[y * width + x];
        }
      }
      return values;
    }

    @Override
    public void scatter(
        double[] values, int variable, PictureShape shape, double[] raised, int[] samples) {
      int start = variable * shape.width();
      shape.raise(values, raised);
      for (int x = 0; x < values.length; x++) {
        samples[start + x] = (int) raised[x];
      }
    }
  }

  /**
   * Each place within a square block is a variable, row by row; each block an observation, row by
   * row. Pictures are padded to whole blocks by half-sample mirroring (the edge sample repeated).
   *
   * @param side samples along a block's side
   */
  record Blocks(int side) implements Arrangement {
    public Blocks {
      Require.inRange(side, 2, 64, "block side (samples)");
    }

    @Override
    public String id() {
      return "blocks" + side;
    }

    @Override
    public int variables(PictureShape shape) {
      return side * side;
    }

    @Override
    public int observations(PictureShape shape) {
      return across(shape) * down(shape);
    }

    private int across(PictureShape shape) {
      return (shape.width() + side - 1) / side;
    }

    private int down(PictureShape shape) {
      return (shape.height() + side - 1) / side;
    }

    @Override
    public void check(PictureShape shape) {
      if (shape.width() < side || shape.height() < side) {
        throw new BadInput(
            "a picture of "
                + shape.width()
                + " x "
                + shape.height()
                + " samples is smaller than a block of "
                + side
                + " x "
                + side
                + "; accepted: both sides at least "
                + side);
      }
    }

    @Override
    public double[][] gather(Picture picture) {
      PictureShape shape = PictureShape.of(picture);
      int across = across(shape);
      int width = picture.width();
      int[] samples = picture.samples();
      double[][] values = new double[side * side][observations(shape)];
      for (int y = 0; y < down(shape) * side; y++) {
        int row = mirrored(y, picture.height()) * width;
        int firstBlock = y / side * across;
        for (int left = 0; left < side; left++) {
          double[] variable = values[y % side * side + left];
          for (int x = left, b = firstBlock; x < across * side; x += side, b++) {
            variable[b] = samples[row + (x < width ? x : mirrored(x, width))];
          }
        }
      }
      return values;
    }

    private static int mirrored(int at, int length) {
      return at < length ? at : 2 * length - 1 - at;
    }

    @Override
    public void scatter(
        double[] values, int variable, PictureShape shape, double[] raised, int[] samples) {
      int across = across(shape);
      int left = variable % side;
      shape.raise(values, raised);
      for (int y = variable / side, block = 0; y < shape.height(); y += side, block += across) {
        int row = y * shape.width();
        for (int x = left, b = block; x < shape.width(); x += side, b++) {
          samples[row + x] = (int) raised[b];
        }
      }
    }
  }
}
