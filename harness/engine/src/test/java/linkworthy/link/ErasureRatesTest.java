package linkworthy.link;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.ArrayList;
import java.util.BitSet;
import java.util.EnumSet;
import java.util.List;
import linkworthy.noise.Impairment;
import linkworthy.noise.MarkovLoss;
import org.apache.commons.rng.UniformRandomProvider;
import org.apache.commons.rng.core.source64.SplitMix64;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/**
 * Failures of code words, sent through the channel and the loss process. Each block of packets
 * meets a realisation of its own that starts in the long-run distribution, so blocks are
 * independent however bursty the losses inside one are, and the mean of a figure over blocks has
 * the standard error of its sample. Limits are 5 standard errors: a false alarm in 2 million for a
 * normal mean, at worst about 1 in 10 000 for the rarest failures here, whose count is nearly
 * Poisson; seeds are fixed.
 */
class ErasureRatesTest {
  private static final Link LINK = new Link(96, 0, Link.Order.BY_COMPONENT);
  private static final double LIMIT = 5;

  private static final class Mean {
    private int count;
    private double sum;
    private double squares;

    void add(double value) {
      count++;
      sum += value;
      squares += value * value;
    }

    void assertNear(double expected, String what) {
      double mean = sum / count;
      double error = Math.sqrt((squares / count - mean * mean) / (count - 1));
      assertThat(mean).as(what).isBetween(expected - LIMIT * error, expected + LIMIT * error);
    }
  }

  /**
   * Probability that a word fails, P(Bin(n, p) > n - k), and share of the data lost to failed
   * words, sum over j > n - k of (j/n) P(j): recomputed independently in Python with SciPy.
   * Failures of (255, 223) at 5 % (7e-7) are too rare to be counted here.
   */
  @ParameterizedTest
  @CsvSource({
    "10, 8, 0.05, 0.01150355738, 0.00356056981, 20000",
    "12, 8, 0.10, 0.00432934327, 0.00185347612, 40000",
    "20, 16, 0.05, 0.002573940335, 0.0006618004441, 40000",
    "20, 16, 0.10, 0.04317449528, 0.01149975578, 10000",
    "24, 16, 0.20, 0.03617498803, 0.01430116704, 10000",
    "255, 223, 0.10, 0.07572976971, 0.01035979084, 1500"
  })
  void independentLosses(int n, int k, double loss, double fails, double residual, int blocks) {
    MarkovLoss chain = MarkovLoss.simple(loss, 1 / (1 - loss));
    measure(new Protection.ErasureCode(n, k, 1), chain, fails, residual, blocks);
  }

  /**
   * The simple Gilbert chain with 10 % loss: an exact recursion over state and count, recomputed
   * independently in Python. A residual of NaN is not given by the source.
   */
  @ParameterizedTest
  @CsvSource({
    "1.1111111111111112, 12, 8, 1, 0.00432934327, 0.00185347612, 40000",
    "2, 12, 8, 1, 0.04906096104, 0.02391692956, 10000",
    "4, 12, 8, 1, 0.0962078986, 0.05582207577, 10000",
    "8, 12, 8, 1, 0.112144174, 0.07752230439, 10000",
    "1.1111111111111112, 12, 8, 4, 0.00432934327, NaN, 10000",
    "2, 12, 8, 4, 0.006296057295, NaN, 10000",
    "4, 12, 8, 4, 0.02585157358, NaN, 5000",
    "8, 12, 8, 4, 0.06642477519, NaN, 5000",
    "1.1111111111111112, 24, 16, 1, 0.000321265032, NaN, 100000",
    "2, 24, 16, 1, 0.0198243805, NaN, 10000",
    "4, 24, 16, 1, 0.06998365045, NaN, 10000",
    "8, 24, 16, 1, 0.1072170137, NaN, 10000"
  })
  void bursts(double burst, int n, int k, int depth, double fails, double residual, int blocks) {
    measure(
        new Protection.ErasureCode(n, k, depth),
        MarkovLoss.simple(0.1, burst),
        fails,
        residual,
        blocks);
  }

  /** A block is one group of the code: {@code depth} words. */
  private static void measure(
      Protection.ErasureCode code, MarkovLoss chain, double fails, double residual, int blocks) {
    Channel channel =
        new Channel(
            LINK,
            new Protection(
                List.of(new Protection.Rule(EnumSet.allOf(Importance.class), 1, code, 0, 5))));
    List<Packet> packets = new ArrayList<>();
    for (int i = 0; i < code.k() * code.depth(); i++) {
      packets.add(new Packet(new byte[] {(byte) i, (byte) (i >> 8)}, Importance.REST));
    }
    UniformRandomProvider random = new SplitMix64(20_261_201);
    Mean failed = new Mean();
    Mean lost = new Mean();
    for (int block = 0; block < blocks; block++) {
      Impairment.Losses losses = chain.losses(random);
      Channel.Outcome outcome = channel.send(packets, Channel.Air.losing(losses));
      int failures = 0;
      int lostSymbols = 0;
      for (int word = 0; word < code.depth(); word++) {
        int missing = missingOf(word, code, outcome.payloads());
        int erased = erasedOf(word, code, losses);
        assertThat(missing > 0).as("fails above n - k").isEqualTo(erased > code.n() - code.k());
        failures += missing > 0 ? 1 : 0;
        lostSymbols += missing > 0 ? erased : 0;
      }
      failed.add((double) failures / code.depth());
      lost.add((double) lostSymbols / code.n() / code.depth());
    }
    failed.assertNear(fails, "words that fail");
    if (!Double.isNaN(residual)) {
      lost.assertNear(residual, "share of symbols lost in words that fail");
    }
  }

  private static int erasedOf(int word, Protection.ErasureCode code, Impairment.Losses losses) {
    int erased = 0;
    for (int symbol = 0; symbol < code.n(); symbol++) {
      erased += losses.lost(symbol * code.depth() + word) ? 1 : 0;
    }
    return erased;
  }

  private static int missingOf(int word, Protection.ErasureCode code, List<byte[]> payloads) {
    BitSet have = new BitSet();
    for (byte[] payload : payloads) {
      have.set((payload[0] & 0xFF) | (payload[1] & 0xFF) << 8);
    }
    int missing = 0;
    for (int i = 0; i < code.k(); i++) {
      missing += have.get(i * code.depth() + word) ? 0 : 1;
    }
    return missing;
  }
}
