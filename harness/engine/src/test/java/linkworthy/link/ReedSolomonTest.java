package linkworthy.link;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import com.google.zxing.common.reedsolomon.GenericGF;
import com.google.zxing.common.reedsolomon.ReedSolomonEncoder;
import java.util.Arrays;
import java.util.BitSet;
import java.util.Objects;
import java.util.Random;
import java.util.stream.IntStream;
import org.jspecify.annotations.Nullable;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class ReedSolomonTest {
  /** The field of Data Matrix, ISO/IEC 16022. */
  private static final GaloisField X12D = new GaloisField(0x12D, 2);

  private static byte[][] column(String numbers, int radix) {
    return column(
        Arrays.stream(numbers.split(" ")).mapToInt(n -> Integer.parseInt(n, radix)).toArray());
  }

  private static byte[][] column(int... symbols) {
    return Arrays.stream(symbols).mapToObj(s -> new byte[] {(byte) s}).toArray(byte[][]::new);
  }

  private static byte[][] random(Random random, int rows, int length) {
    byte[][] data = new byte[rows][length];
    for (byte[] row : data) {
      random.nextBytes(row);
    }
    return data;
  }

  /**
   * Rows 1 to 3: parity published in the tests of ZXing (ReedSolomonTestCase, EncoderTestCase), the
   * first from the example in ISO/IEC 18004, Annex I. All rows recomputed independently in Python.
   */
  @ParameterizedTest
  @CsvSource({
    "16, 10 20 0C 56 61 80 EC 11 EC 11 EC 11 EC 11 EC 11, A5 24 D4 C1 ED 36 C7 87 2C 55",
    "10, 32 65 205 69 41 220 46 128 236,"
        + " 42 159 74 221 244 169 239 150 138 70 237 85 224 96 74 219 61",
    "10, 32 49 205 69 42 20 0 236 17, 0 3 130 179 194 0 55 211 110 79 98 72 170 96 211 137 213"
  })
  void parityOfQrCodes(int radix, String data, String parity) {
    byte[][] expected = column(parity, radix);
    assertThat(new ReedSolomon(expected.length).encode(column(data, radix))).isEqualTo(expected);
  }

  /** Data Matrix: published in the tests of ZXing; recomputed independently in Python. */
  @Test
  void parityOfAnotherFieldAndFirstRoot() {
    assertThat(new ReedSolomon(X12D, 1, 5).encode(column(142, 164, 186)))
        .isEqualTo(column(114, 25, 5, 88, 102));
  }

  /** Recomputed independently in Python. */
  @Test
  void parityOfTheLongCode() {
    assertThat(new ReedSolomon(32).encode(column(IntStream.range(0, 223).toArray())))
        .isEqualTo(
            column(
                "41 84 11 83 B1 1F DB 53 74 21 93 96 96 CD A7 0E"
                    + " 1D B5 C8 66 84 AF 22 25 64 B8 9C C6 06 9F 17 2E",
                16));
  }

  /**
   * The code of CCSDS 131.0-B: modulus 0x187, roots (a^11)^j for j = 112 to 143, conventional
   * basis. Parity recomputed independently in Python; the standard itself sends the dual basis.
   */
  @Test
  void parityOfTheTelemetryCode() {
    GaloisField conventional = new GaloisField(0x187, 2);
    GaloisField field = new GaloisField(0x187, conventional.power(11));
    ReedSolomon code = new ReedSolomon(field, 112, 32);
    assertThat(code.encode(column(IntStream.range(0, 223).toArray())))
        .isEqualTo(
            column(
                "2F BD 4F B4 74 84 94 B9 AC D5 54 62 72 12 EE B3"
                    + " EB ED 41 19 1D E1 D3 63 20 EA 49 29 0B 25 AB CF",
                16));
    int[] ones = new int[223];
    Arrays.fill(ones, 1);
    assertThat(code.encode(column(ones))).isEqualTo(column(Arrays.copyOf(ones, 32)));
    assertThat(code.generator()).as("palindromic").isEqualTo(reversed(code.generator()));
  }

  private static int[] reversed(int[] values) {
    return IntStream.range(0, values.length).map(i -> values[values.length - 1 - i]).toArray();
  }

  /** ISO/IEC 18004 Annex A, from memory; recomputed independently in Python. */
  @Test
  void theGeneratorOfDegreeTen() {
    int[] exponents = {0, 251, 67, 46, 61, 118, 70, 64, 94, 32, 45};
    assertThat(new ReedSolomon(10).generator())
        .isEqualTo(Arrays.stream(exponents).map(GaloisField.X11D::power).toArray());
  }

  /** Recomputed independently in Python. */
  @Test
  void arithmeticOfTheField() {
    assertThat(GaloisField.X11D.power(8)).isEqualTo(0x1D);
    assertThat(GaloisField.X11D.product(0x53, 0xCA)).isEqualTo(0x8F);
    assertThat(GaloisField.X11D.inverse(0x02)).isEqualTo(0x8E);
    assertThat(GaloisField.X11D.product(0, 7)).isZero();
    for (int a = 1; a < 256; a++) {
      assertThat(GaloisField.X11D.product(a, GaloisField.X11D.inverse(a))).isEqualTo(1);
    }
    assertThatThrownBy(() -> GaloisField.X11D.inverse(0)).isInstanceOf(ArithmeticException.class);
  }

  @Test
  void whatGeneratesNoFieldIsRefused() {
    assertThatIllegalArgumentException().isThrownBy(() -> new GaloisField(0x11B, 2));
    assertThatIllegalArgumentException().isThrownBy(() -> new GaloisField(0x100, 2));
    assertThatIllegalArgumentException().isThrownBy(() -> new GaloisField(0x200, 2));
  }

  @ParameterizedTest
  @ValueSource(ints = {1, 2, 7, 32, 128, 254})
  void agreesWithAnotherEncoder(int parity) {
    Random random = new Random(parity);
    for (int count : new int[] {1, Math.min(5, 255 - parity), 255 - parity}) {
      byte[][] data = random(random, count, 3);
      byte[][] ours = new ReedSolomon(parity).encode(data);
      byte[][] shifted = new ReedSolomon(X12D, 1, parity).encode(data);
      for (int i = 0; i < 3; i++) {
        assertThat(column(ours, i)).isEqualTo(zxing(GenericGF.QR_CODE_FIELD_256, data, parity, i));
        assertThat(column(shifted, i))
            .isEqualTo(zxing(GenericGF.DATA_MATRIX_FIELD_256, data, parity, i));
      }
    }
  }

  private static int[] column(byte[][] rows, int at) {
    return Arrays.stream(rows).mapToInt(row -> row[at] & 0xFF).toArray();
  }

  private static int[] zxing(GenericGF field, byte[][] data, int parity, int at) {
    int[] word = Arrays.copyOf(column(data, at), data.length + parity);
    new ReedSolomonEncoder(field).encode(word, parity);
    return Arrays.copyOfRange(word, data.length, word.length);
  }

  /** Every pattern of erasures: what k symbols can tell is restored, with fewer nothing is. */
  @ParameterizedTest
  @CsvSource({"1, 1", "1, 3", "2, 1", "3, 2", "4, 4", "8, 4", "10, 2", "5, 7"})
  void allErasuresOfShortCodes(int data, int parity) {
    ReedSolomon code = new ReedSolomon(parity);
    byte[][] sent = random(new Random(data * 100L + parity), data, 4);
    byte[][] checks = code.encode(sent);
    for (int pattern = 0; pattern < 1 << (data + parity); pattern++) {
      byte[] @Nullable [] rows = erase(sent, pattern);
      byte[] @Nullable [] there = erase(checks, pattern >> data);
      boolean enough = Integer.bitCount(pattern) <= parity;
      boolean complete = (pattern & ((1 << data) - 1)) == 0;
      assertThat(code.restore(rows, there)).isEqualTo(enough || complete);
      assertThat(rows).isDeepEqualTo(enough ? sent : erase(sent, pattern));
    }
  }

  private static byte[] @Nullable [] erase(byte[][] rows, int pattern) {
    byte[] @Nullable [] left = rows.clone();
    for (int i = 0; i < rows.length; i++) {
      if ((pattern >> i & 1) == 1) {
        left[i] = null;
      }
    }
    return left;
  }

  /** n - k = 32 erasures anywhere are restored (Singleton bound); 33 are not. */
  @ParameterizedTest
  @ValueSource(ints = {32, 33})
  void asManyErasuresAsParity(int erasures) {
    ReedSolomon code = new ReedSolomon(32);
    Random random = new Random(erasures);
    for (int round = 0; round < 60; round++) {
      byte[][] sent = random(random, 223, 2);
      byte[][] checks = code.encode(sent);
      byte[] @Nullable [] rows = sent.clone();
      byte[] @Nullable [] there = checks.clone();
      IntStream places = random.ints(0, round == 0 ? erasures : 255).distinct().limit(erasures);
      for (int place : places.toArray()) {
        if (place < 223) {
          rows[place] = null;
        } else {
          there[place - 223] = null;
        }
      }
      assertThat(code.restore(rows, there)).isEqualTo(erasures == 32);
      if (erasures == 32) {
        assertThat(rows).isDeepEqualTo(sent);
      }
    }
  }

  /** A word of several rows, byte by byte with damage of its own, and what came of it. */
  private static final class Damaged {
    private static final int WIDTH = 150;
    private final byte[][] sent;
    private final byte[][] arrived;
    private final byte[] @Nullable [] rows;
    private final BitSet beyond;

    Damaged(ReedSolomon code, int data, int errors, int erasures, Random random) {
      sent = random(random, data, WIDTH);
      byte[] @Nullable [] word = Arrays.copyOf(sent, data + code.parity());
      System.arraycopy(code.encode(sent), 0, word, data, code.parity());
      int[] places = shuffled(random, word.length);
      for (int i = 0; i < word.length; i++) {
        byte[] row = word[i];
        word[i] = row == null ? null : row.clone();
      }
      for (int i = 0; i < erasures; i++) {
        word[places[i]] = null;
      }
      int[] whole = Arrays.copyOfRange(places, erasures, places.length);
      for (int at = 0; at < WIDTH; at++) {
        for (int i : Arrays.copyOf(shuffled(random, whole.length), errors)) {
          Objects.requireNonNull(word[whole[i]])[at] ^= (byte) (1 + random.nextInt(255));
        }
      }
      rows = Arrays.copyOf(word, data);
      arrived =
          Arrays.stream(rows)
              .map(row -> row == null ? new byte[WIDTH] : row.clone())
              .toArray(byte[][]::new);
      beyond = code.correct(rows, Arrays.copyOfRange(word, data, word.length));
    }

    private static int[] shuffled(Random random, int count) {
      return random.ints(0, count).distinct().limit(count).toArray();
    }
  }

  /** e errors and f erasures are set right where 2e + f is at most n - k (Singleton bound). */
  @ParameterizedTest
  @CsvSource({
    "223, 32, 16, 0",
    "223, 32, 15, 2",
    "223, 32, 10, 12",
    "223, 32, 7, 17",
    "223, 32, 1, 30",
    "223, 32, 0, 32",
    "223, 32, 3, 5",
    "8, 4, 2, 0",
    "8, 4, 1, 2",
    "8, 4, 0, 4",
    "1, 4, 2, 0",
    "1, 254, 127, 0",
    "1, 254, 27, 200",
    "5, 1, 0, 1",
    "20, 3, 1, 1",
    "20, 3, 1, 0"
  })
  void errorsAndErasuresUpToTheBound(int data, int parity, int errors, int erasures) {
    for (int seed = 0; seed < 12; seed++) {
      Random random = new Random(seed);
      Damaged word = new Damaged(new ReedSolomon(parity), data, errors, erasures, random);
      assertThat(word.beyond.isEmpty()).isTrue();
      assertThat(word.rows).isDeepEqualTo(word.sent);
    }
  }

  /** Another field, and roots that do not begin at a^0: the code of CCSDS 131.0-B. */
  @ParameterizedTest
  @CsvSource({"16, 0", "9, 14", "0, 32"})
  void errorsAndErasuresOfTheTelemetryCode(int errors, int erasures) {
    GaloisField conventional = new GaloisField(0x187, 2);
    ReedSolomon code = new ReedSolomon(new GaloisField(0x187, conventional.power(11)), 112, 32);
    Damaged word = new Damaged(code, 223, errors, erasures, new Random(errors));
    assertThat(word.beyond.isEmpty()).isTrue();
    assertThat(word.rows).isDeepEqualTo(word.sent);
  }

  /**
   * One error too many, with t = (r - f)/2 and m = n - f: a word is t away from a wrong code word
   * with a probability of C(m - t - 1, t) / 255^t, worked by hand from the number of code words of
   * least weight, C(m, d) 255 (MacWilliams and Sloane 1977, from memory). All others are found to
   * be beyond the bound, and stay as they came. The number is within 5 standard deviations; that is
   * missed once in 1.7 million.
   */
  @ParameterizedTest
  @CsvSource({
    "223, 32, 17, 0, 9.464165e-15",
    "223, 32, 9, 16, 9.605631e-6",
    "223, 32, 2, 30, 0.8745098",
    "8, 4, 3, 0, 5.536332e-4",
    "20, 2, 2, 0, 0.07843137"
  })
  void oneErrorTooManyIsFoundButForAKnownChance(
      int data, int parity, int errors, int erasures, double missed) {
    int wrong = 0;
    int words = 0;
    for (int seed = 0; seed < (data < 100 ? 400 : 12); seed++) {
      Random random = new Random(seed);
      Damaged word = new Damaged(new ReedSolomon(parity), data, errors, erasures, random);
      for (int at = 0; at < Damaged.WIDTH; at++, words++) {
        if (word.beyond.get(at)) {
          assertThat(column(filled(word.rows), at)).isEqualTo(column(word.arrived, at));
        } else {
          wrong++;
        }
      }
    }
    double expected = missed * words;
    assertThat((double) wrong).isCloseTo(expected, within(5 * Math.sqrt(expected) + 1e-6));
  }

  private static byte[][] filled(byte[] @Nullable [] rows) {
    return Arrays.stream(rows).map(Objects::requireNonNull).toArray(byte[][]::new);
  }

  /** With more erasures than parity nothing is touched; without damage both ways agree. */
  @Test
  void erasuresAloneAreTheSameInBothWays() {
    ReedSolomon code = new ReedSolomon(4);
    byte[][] sent = random(new Random(9), 8, 5);
    byte[][] checks = code.encode(sent);
    for (int pattern = 0; pattern < (1 << 12) - 1; pattern++) {
      byte[] @Nullable [] rows = erase(filled(sent), pattern);
      byte[] @Nullable [] there = erase(checks, pattern >> 8);
      BitSet beyond = code.correct(rows, there);
      boolean enough = Integer.bitCount(pattern) <= 4;
      assertThat(beyond.cardinality()).isEqualTo(enough ? 0 : 5);
      assertThat(rows).isDeepEqualTo(enough ? sent : erase(sent, pattern));
    }
  }

  @Test
  void rowsThatDoNotFitAreRefused() {
    ReedSolomon code = new ReedSolomon(3);
    assertThat(code.maxData()).isEqualTo(252);
    assertThatIllegalArgumentException().isThrownBy(() -> code.encode(new byte[0][]));
    assertThatIllegalArgumentException().isThrownBy(() -> code.encode(new byte[253][1]));
    assertThatIllegalArgumentException()
        .isThrownBy(() -> code.restore(new byte[2][1], new byte[2][1]));
    assertThatIllegalArgumentException()
        .isThrownBy(() -> code.restore(new byte[2][1], new byte[3][2]));
    assertThatIllegalArgumentException().isThrownBy(() -> new ReedSolomon(0));
    assertThatIllegalArgumentException().isThrownBy(() -> new ReedSolomon(255));
  }
}
