package linkworthy.trial;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.ArrayList;
import java.util.BitSet;
import java.util.List;
import linkworthy.noise.Impairment;
import org.junit.jupiter.api.Test;

/** Noise variances follow from (4^8 - 1)/3 = 21845 grey levels squared for each flip. */
class PassageTest {
  private static final List<byte[]> PACKETS =
      List.of(new byte[] {0, 0}, new byte[] {1, 2, 3}, new byte[] {4, 5, 6});

  /** Flips given bits of packet 1 alone. */
  private static Impairment.Errors errors(int... flips) {
    return (index, bits) -> {
      BitSet flipped = new BitSet();
      for (int bit : flips) {
        flipped.set(bit, index == 1 && bit < bits);
      }
      return flipped;
    };
  }

  private record Delivery(List<byte[]> arrived, double realisedNoiseVariance, long checkBits) {}

  private static Delivery deliver(Passage passage) {
    return deliver(passage, 0, 1, 2);
  }

  /** Takes the packets across, each sent by its node. */
  private static Delivery deliver(Passage passage, int... nodes) {
    Passage.Crossing crossing = passage.open();
    List<byte[]> arrived = new ArrayList<>();
    for (int i = 0; i < PACKETS.size(); i++) {
      byte[] got = crossing.carry(i, nodes[i], PACKETS.get(i));
      if (got != null) {
        arrived.add(got);
      }
    }
    return new Delivery(
        arrived, crossing.realisedNoiseVariance(), (long) crossing.checkBits() * PACKETS.size());
  }

  /** Losses go by transmission, failures by node; a share s lost of variance V is s V. */
  @Test
  void lossesAndFailures() {
    Delivery lossy = deliver(Passage.losing(index -> index != 1, 90), 5, 5, 5);
    assertThat(lossy.arrived()).containsExactly(PACKETS.get(1));
    assertThat(lossy.realisedNoiseVariance()).isEqualTo(60);
    Delivery failing = deliver(Passage.failing(node -> node == 2, 90), 2, 1, 2);
    assertThat(failing.arrived()).containsExactly(PACKETS.get(1));
    assertThat(failing.realisedNoiseVariance()).isEqualTo(60);
    Delivery clear = deliver(Passage.clear(7));
    assertThat(clear.arrived()).isEqualTo(PACKETS);
    assertThat(clear.realisedNoiseVariance()).isEqualTo(7);
  }

  @Test
  void withoutACheckDamagedPacketsArrive() {
    Delivery delivery = deliver(Passage.flipping(errors(0, 15, 24), 0, 23, 255));
    assertThat(delivery.arrived())
        .containsExactly(
            new byte[] {0, 0}, new byte[] {0, (byte) (2 ^ 0x80), 3}, new byte[] {4, 5, 6});
    assertThat(PACKETS.get(1)).containsExactly(1, 2, 3);
    assertThat(delivery.realisedNoiseVariance()).isCloseTo(2 / 64.0 * 21845, within(1e-9));
    assertThat(delivery.checkBits()).isZero();
  }

  /** Header bits 0 to 183, payload bits 184 to 207, check bits 208 to 223. */
  @Test
  void withACheckAnyHitDropsTheFrame() {
    for (int hit : new int[] {0, 183, 184, 207, 208, 223}) {
      Delivery delivery = deliver(Passage.flipping(errors(hit), 16, 23, 255));
      assertThat(delivery.arrived()).containsExactly(PACKETS.get(0), PACKETS.get(2));
      double flips = hit >= 184 && hit <= 207 ? 1 : 0;
      assertThat(delivery.realisedNoiseVariance()).isCloseTo(flips / 64 * 21845, within(1e-9));
      assertThat(delivery.checkBits()).isEqualTo(3 * 16);
    }
    assertThat(deliver(Passage.flipping(errors(224), 16, 23, 255)).arrived()).isEqualTo(PACKETS);
  }

  /** Check bits 208 to 239. */
  @Test
  void aLongerCheckIsCountedAndExposedInFull() {
    for (int hit : new int[] {0, 207, 208, 224, 239}) {
      Delivery delivery = deliver(Passage.flipping(errors(hit), 32, 23, 255));
      assertThat(delivery.arrived()).containsExactly(PACKETS.get(0), PACKETS.get(2));
      assertThat(delivery.checkBits()).isEqualTo(3 * 32);
    }
    assertThat(deliver(Passage.flipping(errors(240), 32, 23, 255)).arrived()).isEqualTo(PACKETS);
  }

  /** x^16 + x^12 + x^5 + 1 divides the pattern 0, 4, 11, 16 of sending order. */
  @Test
  void whatTheCheckDoesNotFindReachesTheDecoder() {
    Delivery delivery = deliver(Passage.flipping(errors(0, 4, 11, 16), 16, 0, 255));
    assertThat(delivery.arrived())
        .containsExactly(new byte[] {0, 0}, new byte[] {0x10, 0x0A, 2}, new byte[] {4, 5, 6});
  }

  /**
   * The polynomial of CRC-32, x^32 + x^26 + x^23 + x^22 + x^16 + x^12 + x^11 + x^10 + x^8 + x^7 +
   * x^5 + x^4 + x^2 + x + 1 (IEEE 802.3), divides itself: exponent e is bit 32 - e of sending
   * order. The check of 16 bits finds the same damage.
   */
  @Test
  void whatALongerCheckDoesNotFindReachesTheDecoder() {
    int[] polynomial = {0, 6, 9, 10, 16, 20, 21, 22, 24, 25, 27, 28, 30, 31, 32};
    assertThat(deliver(Passage.flipping(errors(polynomial), 32, 0, 255)).arrived())
        .containsExactly(
            new byte[] {0, 0}, new byte[] {1 ^ 0x41, 2 ^ 0x06, 3 ^ 0x71}, new byte[] {4, 5, 6});
    assertThat(deliver(Passage.flipping(errors(polynomial), 16, 0, 255)).arrived())
        .containsExactly(PACKETS.get(0), PACKETS.get(2));
  }
}
