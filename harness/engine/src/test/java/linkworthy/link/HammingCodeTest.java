package linkworthy.link;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.BitSet;
import java.util.EnumSet;
import java.util.List;
import java.util.Random;
import java.util.SplittableRandom;
import org.jspecify.annotations.Nullable;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class HammingCodeTest {
  private static final Link LINK = new Link(96, 23, Link.Order.BY_COMPONENT);

  private static Protection protection(
      int repeat, Protection.@Nullable ErasureCode code, int depth) {
    return new Protection(
        List.of(
            new Protection.Rule(
                EnumSet.allOf(Importance.class), repeat, code, new HammingCode(depth), 0, 5)));
  }

  /** Data 1 0 1 1 at places 3, 5, 6, 7 give 0 1 1 0 0 1 1; recomputed independently in Python. */
  @Test
  void aWordOfTheTextbooks() {
    assertThat(HammingCode.word(0b1101)).isEqualTo(0b1100110);
  }

  /** Weights 0 to 7 of the 16 words: 1, 0, 0, 7, 7, 0, 0, 1; recomputed independently in Python. */
  @Test
  void weightsOfTheWords() {
    int[] counts = new int[8];
    for (int data = 0; data < 16; data++) {
      counts[Integer.bitCount(HammingCode.word(data))]++;
    }
    assertThat(counts).containsExactly(1, 0, 0, 7, 7, 0, 0, 1);
  }

  @Test
  void anySingleErrorIsSetRightAndNoPairIs() {
    for (int data = 0; data < 16; data++) {
      int word = HammingCode.word(data);
      assertThat(HammingCode.data(word)).isEqualTo(data);
      for (int i = 0; i < 7; i++) {
        assertThat(HammingCode.data(word ^ 1 << i)).isEqualTo(data);
        for (int j = 0; j < i; j++) {
          assertThat(HammingCode.data(word ^ 1 << i ^ 1 << j)).isNotEqualTo(data);
        }
      }
    }
  }

  private static byte[] bytes(int length, int seed) {
    byte[] bytes = new byte[length];
    new Random(seed).nextBytes(bytes);
    return bytes;
  }

  /** A burst of up to {@code depth} flips anywhere, in payloads of all lengths. */
  @ParameterizedTest
  @ValueSource(ints = {1, 2, 7, 8, 56, 4096})
  void burstsUpToTheDepthAreSetRight(int depth) {
    HammingCode code = new HammingCode(depth);
    for (int length = 0; length < 40; length++) {
      byte[] payload = bytes(length, length);
      byte[] coded = code.encode(payload);
      assertThat(coded).hasSize((7 * length + 3) / 4);
      assertThat(code.decode(coded)).isEqualTo(payload);
      int last = 2 * length % depth;
      int burst = last == 0 ? Math.min(depth, 2 * length) : last;
      for (int at = 0; at + burst <= 14 * length; at += 5) {
        byte[] hit = coded.clone();
        for (int bit = at; bit < at + burst; bit++) {
          hit[bit / 8] ^= (byte) (1 << bit % 8);
        }
        assertThat(code.decode(hit)).as("%d bytes, flips from %d", length, at).isEqualTo(payload);
      }
    }
  }

  @Test
  void roomIsTheInverseOfTheCodedLength() {
    for (int length = 0; length < 300; length++) {
      assertThat(HammingCode.room(HammingCode.coded(length))).isEqualTo(length);
      assertThat(HammingCode.coded(HammingCode.room(length))).isLessThanOrEqualTo(length);
    }
    assertThat(protection(1, null, 1).overheadBytes(96)).isEqualTo(96 - 54);
    assertThat(protection(1, null, 1).leastPayload(54)).isEqualTo(95);
    Protection both = protection(1, new Protection.ErasureCode(12, 8, 1), 1);
    assertThat(both.overheadBytes(96)).isEqualTo(96 - 54 + 7);
    assertThat(both.leastPayload(32)).isEqualTo(69);
    assertThat(69 - both.overheadBytes(69)).isEqualTo(32);
    assertThat(68 - both.overheadBytes(68)).isLessThan(32);
  }

  /** Flips independent bits of what is sent, and counts words with two flips or more. */
  private static final class FlippingAir implements Channel.Air {
    private final SplittableRandom random = new SplittableRandom(20_261_201);
    private final double rate;
    private final List<Integer> lengths = new ArrayList<>();

    FlippingAir(double rate) {
      this.rate = rate;
    }

    @Override
    public byte[] carry(int index, int node, byte[] payload) {
      lengths.add(payload.length);
      byte[] got = payload.clone();
      double gaps = StrictMath.log1p(-rate);
      for (double at = gap(gaps); at < 8 * got.length; at += 1 + gap(gaps)) {
        got[(int) at / 8] ^= (byte) (1 << (int) at % 8);
      }
      return got;
    }

    private double gap(double gaps) {
      return Math.floor(StrictMath.log(1 - random.nextDouble()) / gaps);
    }
  }

  /**
   * Share of words that are wrong at the receiver: 1 - (1-p)^7 - 7 p (1-p)^6, recomputed
   * independently in Python. The limit is 5 standard errors of a share of independent words: a
   * false alarm in 2 million for the higher rate, about 1 in 50 000 for the lower, whose count of
   * 42 is nearly Poisson; the seed is fixed.
   */
  @ParameterizedTest
  @CsvSource({
    "0.01, 1, 0.002031041635, 500000",
    "0.01, 8, 0.002031041635, 500000",
    "0.001, 1, 2.093010492e-05, 2000000"
  })
  void shareOfWrongWords(double rate, int depth, double expected, int words) {
    int size = 50;
    List<Packet> packets = new ArrayList<>();
    for (int i = 0; i < words / (2 * size); i++) {
      packets.add(new Packet(bytes(size, i), Importance.REST));
    }
    Channel.Outcome outcome =
        new Channel(LINK, protection(1, null, depth)).send(packets, new FlippingAir(rate));
    assertThat(outcome.payloads()).hasSameSizeAs(packets);
    long wrong = 0;
    for (int i = 0; i < packets.size(); i++) {
      byte[] sent = packets.get(i).payload();
      byte[] got = outcome.payloads().get(i);
      for (int b = 0; b < size; b++) {
        int difference = sent[b] ^ got[b];
        wrong += ((difference & 0x0F) == 0 ? 0 : 1) + ((difference & 0xF0) == 0 ? 0 : 1);
      }
    }
    double error = Math.sqrt(expected * (1 - expected) / words);
    assertThat((double) wrong / words).isBetween(expected - 5 * error, expected + 5 * error);
  }

  /** The very bits that were sent are counted: 7 for 4, whole bytes, copies and parity too. */
  @Test
  void theExpansionIsCounted() {
    List<Packet> packets = new ArrayList<>();
    for (int i = 0; i < 16; i++) {
      packets.add(new Packet(bytes(10 + i, i), Importance.REST));
    }
    FlippingAir air = new FlippingAir(1e-9);
    Channel.Outcome plain = new Channel(LINK, protection(1, null, 1)).send(packets, air);
    assertThat(plain.packetsSent()).isEqualTo(16);
    assertThat(plain.payloadBits())
        .isEqualTo(packets.stream().mapToLong(p -> 8L * ((7 * p.length() + 3) / 4)).sum())
        .isEqualTo(air.lengths.stream().mapToLong(length -> 8L * length).sum());
    assertThat(plain.sentBits()).isEqualTo(plain.payloadBits() + 8L * 23 * 16);

    FlippingAir more = new FlippingAir(1e-9);
    Channel.Outcome coded =
        new Channel(LINK, protection(2, new Protection.ErasureCode(12, 8, 2), 1))
            .send(packets, more);
    assertThat(coded.packetsSent()).isEqualTo(2 * 24);
    assertThat(coded.payloadBits())
        .isEqualTo(more.lengths.stream().mapToLong(length -> 8L * length).sum());
    assertThat(coded.payloads()).hasSize(16);
  }

  /** Only the classes that are named are coded. */
  @Test
  void otherClassesAreSentAsTheyAre() {
    Protection headers =
        new Protection(
            List.of(
                new Protection.Rule(
                    EnumSet.of(Importance.HEADER), 1, null, new HammingCode(1), 0, 5)));
    FlippingAir air = new FlippingAir(1e-9);
    Channel.Outcome outcome =
        new Channel(LINK, headers)
            .send(
                List.of(
                    new Packet(bytes(20, 1), Importance.HEADER),
                    new Packet(bytes(20, 2), Importance.REST)),
                air);
    assertThat(air.lengths).containsExactly(35, 20);
    assertThat(outcome.payloads().get(0)).isEqualTo(bytes(20, 1));
    assertThat(outcome.payloads().get(1)).isEqualTo(bytes(20, 2));
  }

  /** Whatever arrives, in whatever length, becomes a payload of 4/7 of it. */
  @Test
  void randomBytesAreOrdinaryInput() {
    for (int round = 0; round < Damages.rounds(); round++) {
      Random random = new Random(round);
      byte[] input = Damages.bytes(random, 200);
      HammingCode code = new HammingCode(1 + random.nextInt(100));
      byte[] payload =
          Damages.bounded(1024 + input.length, "coded bits " + round, () -> code.decode(input));
      assertThat(payload).hasSize(4 * input.length / 7);
    }
  }

  /** A word with every bit flipped is a word too; damage of three bits may look like none. */
  @Test
  void damageThatIsItselfAWordGoesUnnoticed() {
    assertThat(HammingCode.data(HammingCode.word(0b1101) ^ 127)).isEqualTo(0b1101 ^ 15);
    BitSet words = new BitSet();
    for (int data = 0; data < 16; data++) {
      words.set(HammingCode.word(data));
    }
    assertThat(words.stream().map(word -> word ^ 0b0000111).filter(words::get).count())
        .isEqualTo(16);
  }

  @Test
  void depthsOutsideTheirRangeAreRefused() {
    assertThatIllegalArgumentException().isThrownBy(() -> new HammingCode(0));
    assertThatIllegalArgumentException().isThrownBy(() -> new HammingCode(4097));
    assertThat(Arrays.asList(protection(1, null, 56).label(), protection(2, null, 1).label()))
        .containsExactly("hamming7-4x56", "hamming7-4x1+repeat2");
  }
}
