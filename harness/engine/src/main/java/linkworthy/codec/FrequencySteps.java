package linkworthy.codec;

import linkworthy.input.Require;

/**
 * A step of its own for each coefficient of 8 x 8 blocks, in zig-zag order: table K.1 (luminance)
 * or K.2 (chrominance) of ITU-T T.81, Annex K, scaled by quality as the Independent JPEG Group's
 * library does (a convention, not part of T.81): {@code s = 5000 / q} below 50 (whole-number
 * division), else {@code 200 - 2 q}; {@code step = (s t + 50) / 100}, held to 1..255. Steps are in
 * grey levels of the picture, whatever its depth.
 *
 * @param quality 1 (coarsest) to 100 (all steps 1)
 * @param chroma whether the plane is one of colour, to which table K.2 belongs
 */
record FrequencySteps(int quality, boolean chroma) implements Quantization {
  /** Side of the blocks that the table is for, in samples. */
  static final int SIDE = 8;

  /** Name of the table in studies. */
  static final String ID = "luminance";

  private static final int[] LUMINANCE = {
    16, 11, 10, 16, 24, 40, 51, 61, 12, 12, 14, 19, 26, 58, 60, 55, 14, 13, 16, 24, 40, 57, 69, 56,
    14, 17, 22, 29, 51, 87, 80, 62, 18, 22, 37, 56, 68, 109, 103, 77, 24, 35, 55, 64, 81, 104, 113,
    92, 49, 64, 78, 87, 103, 121, 120, 101, 72, 92, 95, 98, 112, 100, 103, 99
  };

  private static final int[] CHROMINANCE = {
    17, 18, 24, 47, 99, 99, 99, 99, 18, 21, 26, 66, 99, 99, 99, 99, 24, 26, 56, 99, 99, 99, 99, 99,
    47, 66, 99, 99, 99, 99, 99, 99, 99, 99, 99, 99, 99, 99, 99, 99, 99, 99, 99, 99, 99, 99, 99, 99,
    99, 99, 99, 99, 99, 99, 99, 99, 99, 99, 99, 99, 99, 99, 99, 99
  };

  private static final int[] ORDER = DctBasis.zigZag(SIDE);

  FrequencySteps {
    Require.inRange(quality, 1, 100, "quality");
  }

  /** The steps of a luma plane. */
  FrequencySteps(int quality) {
    this(quality, false);
  }

  /** The steps of a colour plane at the same quality. */
  FrequencySteps forChroma() {
    return new FrequencySteps(quality, true);
  }

  /**
   * The step of a coefficient by its natural index, {@code 8 * vertical + horizontal} frequency.
   */
  int step(int natural) {
    int scale = quality < 50 ? 5000 / quality : 200 - 2 * quality;
    return Math.max(
        1, Math.min(255, (scale * (chroma ? CHROMINANCE : LUMINANCE)[natural] + 50) / 100));
  }

  @Override
  public Quantizer component(int k) {
    return new Quantizer(step(ORDER[k]));
  }

  @Override
  public boolean isNone() {
    return false;
  }

  @Override
  public String label() {
    return "q" + quality;
  }

  @Override
  public String column() {
    return label();
  }
}
