package linkworthy.codec;

/**
 * Golomb-Rice code of signed integers (Golomb 1966; Rice 1979; CCSDS 121.0-B): the sign is folded
 * (0, -1, 1, -2, 2 become 0, 1, 2, 3, 4), the folded value's upper part is sent as that many zeros
 * and a one, then its {@code k} lower bits. An upper part of {@link #ESCAPE} or more is sent as
 * that many zeros and the whole folded value in 32 bits.
 */
final class RiceCoder {
  /** Zeros that announce an escaped value. */
  static final int ESCAPE = 24;

  /** The largest parameter k; it is written in 4 bits. */
  static final int MAX_PARAMETER = 15;

  private RiceCoder() {}

  static int fold(int value) {
    return (value << 1) ^ (value >> 31);
  }

  static int unfold(int folded) {
    return (folded >>> 1) ^ -(folded & 1);
  }

  /** Bits of one folded value with parameter k. */
  static int bits(int folded, int k) {
    int upper = folded >>> k;
    return Integer.compareUnsigned(upper, ESCAPE) < 0 ? upper + 1 + k : ESCAPE + 32;
  }

  /** How many parameters, from 0, are worth trying where no folded value is larger. */
  static int parameters(int largest) {
    return Math.min(MAX_PARAMETER, 32 - Integer.numberOfLeadingZeros(largest)) + 1;
  }

  static void write(BitWriter out, int folded, int k) {
    int upper = folded >>> k;
    if (Integer.compareUnsigned(upper, ESCAPE) < 0) {
      out.write(1, upper + 1);
      out.write(folded, k);
    } else {
      out.write(0, ESCAPE);
      out.write(folded, 32);
    }
  }

  static int read(BitReader in, int k) {
    long window = in.peek();
    int zeros = Long.numberOfLeadingZeros(window);
    if (zeros < ESCAPE) {
      in.skip(zeros + 1 + k);
      int lower = k == 0 ? 0 : (int) (window << (zeros + 1) >>> (64 - k));
      return (zeros << k) | lower;
    }
    in.skip(ESCAPE);
    return (int) in.read(32);
  }

  /** Running cost of a run of folded values under every parameter. */
  static final class Cost {
    private final long[] bits;

    /**
     * @param largest no folded value to come is larger, which bounds the parameters worth trying
     */
    Cost(int largest) {
      bits = new long[parameters(largest)];
    }

    void add(int folded) {
      for (int k = 0; k < bits.length; k++) {
        bits[k] += bits(folded, k);
      }
    }

    void remove(int folded) {
      for (int k = 0; k < bits.length; k++) {
        bits[k] -= bits(folded, k);
      }
    }

    void clear() {
      java.util.Arrays.fill(bits, 0);
    }

    /** The cheapest parameter, the smaller on ties. */
    int parameter() {
      int best = 0;
      for (int k = 1; k < bits.length; k++) {
        if (bits[k] < bits[best]) {
          best = k;
        }
      }
      return best;
    }

    /** Bits with the cheapest parameter. */
    long least() {
      return bits[parameter()];
    }
  }
}
