package linkworthy.codec;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import org.apache.commons.rng.UniformRandomProvider;
import org.apache.commons.rng.core.source32.Philox4x32;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class RiceCoderTest {
  /** Fundamental sequence as in CCSDS 121.0-B: zeros, then a one (rule from memory). */
  @ParameterizedTest
  @CsvSource({"9, 2, 00101", "0, 0, 1", "5, 0, 000001", "18, 3, 001010"})
  void writesTheFundamentalSequence(int value, int k, String bits) {
    BitWriter out = new BitWriter();
    RiceCoder.write(out, value, k);
    StringBuilder written = new StringBuilder();
    BitReader in = new BitReader(out.toByteArray());
    for (int i = 0; i < bits.length(); i++) {
      written.append(in.read(1));
    }
    assertThat(written).hasToString(bits);
    assertThat(RiceCoder.bits(value, k)).isEqualTo(bits.length());
  }

  @Test
  void foldsSigns() {
    int[] signed = {0, -1, 1, -2, 2};
    for (int i = 0; i < signed.length; i++) {
      assertThat(RiceCoder.fold(signed[i])).isEqualTo(i);
      assertThat(RiceCoder.unfold(i)).isEqualTo(signed[i]);
    }
    for (int extreme : new int[] {Integer.MAX_VALUE, Integer.MIN_VALUE, 1 << 29, -(1 << 29)}) {
      assertThat(RiceCoder.unfold(RiceCoder.fold(extreme))).isEqualTo(extreme);
    }
  }

  /**
   * Own example: the bits of a run under k = 0..5, counted by hand; the tie goes to the smaller.
   */
  @Test
  void choosesTheCheapestParameter() {
    int[] run = {3, 0, 1, 7, 2, 0, 12, 4};
    int[] expected = {37, 29, 29, 33, 40, 48};
    RiceCoder.Cost cost = new RiceCoder.Cost(12);
    for (int value : run) {
      cost.add(value);
    }
    for (int k = 0; k < expected.length; k++) {
      int bits = 0;
      for (int value : run) {
        bits += RiceCoder.bits(value, k);
      }
      assertThat(bits).isEqualTo(expected[k]);
    }
    assertThat(cost.parameter()).isEqualTo(1);
    assertThat(cost.least()).isEqualTo(29);
  }

  /**
   * Expected length for a geometric source with mean mu under its best k: k + 1 / (1 -
   * theta^(2^k)), theta = mu / (1 + mu) (Kiely 2004, from memory; values recomputed independently
   * in Python by summing the series).
   */
  @ParameterizedTest
  @CsvSource({
    "0.5, 0, 1.5",
    "1, 0, 2",
    "2, 1, 2.8",
    "4, 2, 3.693766938",
    "10, 3, 4.874440176",
    "50, 5, 7.130530367"
  })
  void hasTheExpectedLengthOnGeometricSources(double mean, int bestK, double expected) {
    double theta = mean / (1 + mean);
    double[] lengths = new double[RiceCoder.MAX_PARAMETER + 1];
    double probability = 1 - theta;
    for (int value = 0; value < 20_000; value++) {
      for (int k = 0; k < lengths.length; k++) {
        lengths[k] += probability * ((value >>> k) + 1 + k);
      }
      probability *= theta;
    }
    int best = 0;
    for (int k = 1; k < lengths.length; k++) {
      best = lengths[k] < lengths[best] - 1e-12 ? k : best;
    }
    assertThat(best).isEqualTo(bestK);
    assertThat(lengths[best]).isCloseTo(expected, within(1e-8));
    for (int value = 0; value < RiceCoder.ESCAPE << bestK; value++) {
      assertThat(RiceCoder.bits(value, bestK)).isEqualTo((value >>> bestK) + 1 + bestK);
    }
  }

  /** Values recomputed independently in Python. */
  @ParameterizedTest
  @CsvSource({
    "1.75, 0.5 0.25 0.125 0.125",
    "0.4689955936, 0.9 0.1",
    "1.846439345, 0.4 0.3 0.2 0.1"
  })
  void orderZeroEntropyOfTextbookSources(double expected, String probabilities) {
    double bits = 0;
    for (String p : probabilities.split(" ", -1)) {
      double probability = Double.parseDouble(p);
      bits -= probability * StrictMath.log(probability) / StrictMath.log(2);
    }
    assertThat(bits).isCloseTo(expected, within(1e-9));
  }

  @Test
  void readsBackWhatItWrote() {
    UniformRandomProvider random = new Philox4x32(new int[] {42, 0, 0, 0, 0, 0});
    int[] values = new int[5000];
    int[] parameters = new int[values.length];
    BitWriter out = new BitWriter();
    for (int i = 0; i < values.length; i++) {
      values[i] = random.nextInt() >> random.nextInt(32);
      parameters[i] = random.nextInt(RiceCoder.MAX_PARAMETER + 1);
      RiceCoder.write(out, RiceCoder.fold(values[i]), parameters[i]);
    }
    BitReader in = new BitReader(out.toByteArray());
    for (int i = 0; i < values.length; i++) {
      assertThat(RiceCoder.unfold(RiceCoder.read(in, parameters[i]))).isEqualTo(values[i]);
    }
    assertThat(in.isExhausted()).isFalse();
  }

  @Test
  void varintsAndTheEndOfData() {
    BitWriter out = new BitWriter();
    int[] values = {0, 127, 128, 16_383, 16_384, (1 << 28) - 1};
    for (int value : values) {
      int before = out.toByteArray().length;
      out.writeVarint(value);
      assertThat(out.toByteArray().length - before).isEqualTo(BitWriter.varintBytes(value));
    }
    BitReader in = new BitReader(out.toByteArray());
    for (int value : values) {
      assertThat(in.readVarint()).isEqualTo(value);
    }
    assertThat(in.hasByte()).isFalse();
    assertThat(in.isExhausted()).isFalse();
    in.read(1);
    assertThat(in.isExhausted()).isTrue();
    assertThat(new BitReader(new byte[] {-1, -1, -1, -1, -1}).readVarint()).isEqualTo(-1);
  }
}
