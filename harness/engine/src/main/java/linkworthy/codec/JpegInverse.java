package linkworthy.codec;

/**
 * The inverse 8 x 8 DCT of ITU-T T.81 A.3.3 in whole numbers, so that every machine and every
 * decoder of this kind finds the same samples: the flow graph of Loeffler, Ligtenberg and Moschytz,
 * 'Practical fast 1-D DCT algorithms with 11 multiplications' (ICASSP 1989), each output of which
 * is sqrt(8) times the orthonormal one, in the form that has no two products in a row.
 *
 * <p>Constants are sums of {@code sqrt(2) cos(k pi / 16)} times 2^13, rounded. Columns come first
 * and keep 2 bits below the point; then rows, whose sums lose these bits, those of the constants,
 * and the 3 bits of the two factors sqrt(8). Each loss rounds half up. The same steps are known as
 * the 'slow integer' or 'accurate integer' method of JPEG decoders. Sums have 64 bits, so damaged
 * coefficients of any size give some sample and nothing overflows.
 */
final class JpegInverse {
  private static final int SIDE = JpegTables.SIDE;
  private static final int CONSTANT_BITS = 13;
  private static final int BITS_BETWEEN = 2;
  private static final int LEVEL = 128;
  private static final int PEAK = 255;

  private static final long C3 = constant(0, 1, 0, 0);
  private static final long C3_LESS_C7 = constant(0, 1, 0, -1);
  private static final long C3_AND_C1 = constant(1, 1, 0, 0);
  private static final long C3_AND_C5 = constant(0, 1, 1, 0);
  private static final long C3_LESS_C5 = constant(0, 1, -1, 0);
  private static final long OF_FIRST = constant(1, 1, -1, -1);
  private static final long OF_THIRD = constant(1, 1, 1, -1);
  private static final long OF_FIFTH = constant(1, 1, -1, 1);
  private static final long OF_SEVENTH = constant(-1, 1, 1, -1);
  private static final long C6 = fixed(cosine(6));
  private static final long C2_LESS_C6 = fixed(cosine(2) - cosine(6));
  private static final long C2_AND_C6 = fixed(cosine(2) + cosine(6));

  private final long[] between = new long[JpegTables.BLOCK];

  private static double cosine(int k) {
    return Math.sqrt(2) * StrictMath.cos(k * StrictMath.PI / 16);
  }

  /** A sum of the odd cosines. */
  private static long constant(int c1, int c3, int c5, int c7) {
    return fixed(c1 * cosine(1) + c3 * cosine(3) + c5 * cosine(5) + c7 * cosine(7));
  }

  private static long fixed(double value) {
    return (long) Math.rint(value * (1 << CONSTANT_BITS));
  }

  /**
   * @param coefficients in natural order, in grey levels
   * @param samples 0 to 255, row by row
   */
  void apply(int[] coefficients, int[] samples) {
    for (int i = 0; i < between.length; i++) {
      between[i] = coefficients[i];
    }
    for (int x = 0; x < SIDE; x++) {
      pass(x, SIDE, CONSTANT_BITS - BITS_BETWEEN);
    }
    for (int y = 0; y < SIDE; y++) {
      pass(y * SIDE, 1, CONSTANT_BITS + BITS_BETWEEN + 3);
    }
    for (int i = 0; i < samples.length; i++) {
      samples[i] = (int) Math.max(0, Math.min(PEAK, between[i] + LEVEL));
    }
  }

  /** One line of eight, in place. */
  private void pass(int first, int stride, int bitsLost) {
    long x1 = between[first + stride];
    long x2 = between[first + 2 * stride];
    long x3 = between[first + 3 * stride];
    long x5 = between[first + 5 * stride];
    long x6 = between[first + 6 * stride];
    long x7 = between[first + 7 * stride];
    long sum = (between[first] + between[first + 4 * stride]) << CONSTANT_BITS;
    long difference = (between[first] - between[first + 4 * stride]) << CONSTANT_BITS;
    long turned = (x2 + x6) * C6;
    long high = turned + x2 * C2_LESS_C6;
    long low = turned - x6 * C2_AND_C6;

    long all = (x1 + x3 + x5 + x7) * C3;
    long outer = (x1 + x7) * -C3_LESS_C7;
    long inner = (x3 + x5) * -C3_AND_C1;
    long later = all - (x3 + x7) * C3_AND_C5;
    long earlier = all - (x1 + x5) * C3_LESS_C5;

    put(first, stride, 0, sum + high, x1 * OF_FIRST + outer + earlier, bitsLost);
    put(first, stride, 1, difference + low, x3 * OF_THIRD + inner + later, bitsLost);
    put(first, stride, 2, difference - low, x5 * OF_FIFTH + inner + earlier, bitsLost);
    put(first, stride, 3, sum - high, x7 * OF_SEVENTH + outer + later, bitsLost);
  }

  /** The last butterfly: output k and its mirror image. */
  private void put(int first, int stride, int k, long even, long odd, int bitsLost) {
    long half = 1L << (bitsLost - 1);
    between[first + k * stride] = (even + odd + half) >> bitsLost;
    between[first + (SIDE - 1 - k) * stride] = (even - odd + half) >> bitsLost;
  }
}
