package linkworthy.corpus;

/**
 * A deterministic test picture made of integers only: stripes, a checkerboard, rings and a little
 * hash noise. All arithmetic is 32-bit and wraps. Its checksums are tested in {@link
 * TestPatternTest}.
 */
public final class TestPattern {
  private TestPattern() {}

  /** The pattern with {@code n} rows and columns, 8 bits deep. */
  public static Picture cvp(int n) {
    return cvp(n, n);
  }

  /** The pattern's top left corner of any size. */
  public static Picture cvp(int width, int height) {
    int[] samples = new int[width * height];
    for (int y = 0; y < height; y++) {
      for (int x = 0; x < width; x++) {
        samples[y * width + x] =
            32
                + 3 * triangle(x + 2 * y, 48)
                + 2 * triangle(3 * x - y + 768, 40)
                + 40 * ((x / 10 + y / 14) & 1)
                + 2 * triangle((x * x + y * y) >> 6, 32)
                + (hash(x, y, 73856093, 19349663) >>> 30);
      }
    }
    return new Picture(width, height, 8, samples);
  }

  /** The pattern's additive noise at a place, -16 to 15. */
  public static int noise(int x, int y) {
    return (hash(x, y, 19349663, 83492791) >>> 27) - 16;
  }

  /** The pattern's salt-and-pepper noise at a place: -1 black, 1 white, 0 untouched. */
  public static int saltAndPepper(int x, int y) {
    int t = hash(x, y, 83492791, 73856093) >>> 24;
    return t < 6 ? -1 : t >= 250 ? 1 : 0;
  }

  private static int triangle(int v, int period) {
    return Math.abs(v % period - period / 2);
  }

  private static int hash(int x, int y, int a, int b) {
    return ((x * a) ^ (y * b)) * 0x9E3779B1;
  }
}
