package linkworthy.codec;

import static org.assertj.core.api.Assertions.assertThat;

import org.apache.commons.rng.UniformRandomProvider;
import org.apache.commons.rng.core.source32.Philox4x32;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

class RiceCostsTest {
  /** Against the cost counted symbol by symbol, escapes included. */
  @ParameterizedTest
  @ValueSource(ints = {1, 3, 40, 5000, 1 << 29})
  void everyRunCostsWhatItsSymbolsCost(int range) {
    UniformRandomProvider random = new Philox4x32(new int[] {range, 1, 0, 0, 0, 0});
    int[] symbols = random.ints(60, -range, range + 1).toArray();
    symbols[30] = range;
    RiceCosts costs = new RiceCosts(symbols);
    for (int from = 0; from < symbols.length; from++) {
      RiceCoder.Cost counted = new RiceCoder.Cost(-1);
      for (int to = from + 1; to <= symbols.length; to++) {
        counted.add(RiceCoder.fold(symbols[to - 1]));
        assertThat((long) costs.least(from, to)).isEqualTo(counted.least());
        assertThat(costs.parameter(from, to)).isEqualTo(counted.parameter());
      }
    }
  }

  @Test
  void asManyFitAsTheRoomHolds() {
    UniformRandomProvider random = new Philox4x32(new int[] {5, 1, 0, 0, 0, 0});
    int[] symbols = random.ints(80, -30, 31).toArray();
    RiceCosts costs = new RiceCosts(symbols);
    for (int from = 0; from <= symbols.length; from += 7) {
      for (int bits = -3; bits < 700; bits++) {
        int count = costs.fitting(from, bits);
        assertThat(count == 0 || costs.least(from, from + count) <= bits).isTrue();
        assertThat(from + count == symbols.length || costs.least(from, from + count + 1) > bits)
            .isTrue();
      }
    }
  }
}
