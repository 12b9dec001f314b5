package linkworthy.trial;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.BitSet;
import java.util.List;
import linkworthy.link.Importance;
import linkworthy.link.Packet;
import linkworthy.noise.Impairment;
import org.junit.jupiter.api.Test;

/** Noise variances follow from (4^8 - 1)/3 = 21845 grey levels squared for each flip. */
class PassageTest {
  private static final List<Packet> PACKETS =
      List.of(
          packet(0, new byte[] {0, 0}),
          packet(2, new byte[] {1, 2, 3}),
          packet(2, new byte[] {4, 5, 6}));

  private static Packet packet(int node, byte[] payload) {
    return new Packet(payload, Importance.REST, node);
  }

  private static byte[] payload(int index) {
    return PACKETS.get(index).payload();
  }

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

  @Test
  void packetsAreLostByNumberOrByNode() {
    Passage.Delivery one = Passage.losing(index -> index == 2, 300).deliver(PACKETS);
    assertThat(one.arrived()).containsExactly(payload(0), payload(1));
    assertThat(one.realisedNoiseVariance()).isEqualTo(100);
    Passage.Delivery node = Passage.losingNodes(index -> index == 2, 300).deliver(PACKETS);
    assertThat(node.arrived()).containsExactly(payload(0));
    assertThat(node.realisedNoiseVariance()).isEqualTo(200);
    assertThat(Passage.clear(5).deliver(PACKETS).arrived())
        .containsExactly(payload(0), payload(1), payload(2));
  }

  @Test
  void withoutACheckDamagedPacketsArrive() {
    Passage.Delivery delivery =
        Passage.flipping(errors(0, 15, 24), false, 23, 255).deliver(PACKETS);
    assertThat(delivery.arrived())
        .containsExactly(
            new byte[] {0, 0}, new byte[] {0, (byte) (2 ^ 0x80), 3}, new byte[] {4, 5, 6});
    assertThat(payload(1)).containsExactly(1, 2, 3);
    assertThat(delivery.realisedNoiseVariance()).isCloseTo(2 / 64.0 * 21845, within(1e-9));
    assertThat(delivery.checkBits()).isZero();
  }

  /** Header bits 0 to 183, payload bits 184 to 207, check bits 208 to 223. */
  @Test
  void withACheckAnyHitDropsTheFrame() {
    for (int hit : new int[] {0, 183, 184, 207, 208, 223}) {
      Passage.Delivery delivery = Passage.flipping(errors(hit), true, 23, 255).deliver(PACKETS);
      assertThat(delivery.arrived()).containsExactly(payload(0), payload(2));
      double flips = hit >= 184 && hit <= 207 ? 1 : 0;
      assertThat(delivery.realisedNoiseVariance()).isCloseTo(flips / 64 * 21845, within(1e-9));
      assertThat(delivery.checkBits()).isEqualTo(3 * 16);
    }
    assertThat(Passage.flipping(errors(224), true, 23, 255).deliver(PACKETS).arrived())
        .containsExactly(payload(0), payload(1), payload(2));
  }

  /** x^16 + x^12 + x^5 + 1 divides the pattern 0, 4, 11, 16 of sending order. */
  @Test
  void whatTheCheckDoesNotFindReachesTheDecoder() {
    Passage.Delivery delivery =
        Passage.flipping(errors(0, 4, 11, 16), true, 0, 255).deliver(PACKETS);
    assertThat(delivery.arrived())
        .containsExactly(new byte[] {0, 0}, new byte[] {0x10, 0x0A, 2}, new byte[] {4, 5, 6});
  }
}
