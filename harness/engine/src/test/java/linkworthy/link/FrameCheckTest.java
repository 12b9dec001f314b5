package linkworthy.link;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.charset.StandardCharsets;
import java.util.Arrays;
import java.util.HexFormat;
import java.util.Random;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

class FrameCheckTest {
  private static String sequence(int headerBytes, byte[] payload) {
    byte[] frame = FrameCheck.frame(headerBytes, payload);
    return HexFormat.of().formatHex(frame, frame.length - FrameCheck.BYTES, frame.length);
  }

  /**
   * CRC-16/KERMIT of the digits 1 to 9 is 2189 (catalogues of CRC parameters; recomputed
   * independently in Python), the lower byte sent first.
   */
  @Test
  void catalogueValue() {
    assertThat(sequence(0, "123456789".getBytes(StandardCharsets.US_ASCII))).isEqualTo("8921");
  }

  /** Acknowledgement frame 02 00 6A of IEEE 802.15.4-2003, 7.2.1.8 (from memory). */
  @Test
  void acknowledgementOfTheStandard() {
    assertThat(sequence(0, new byte[] {0x02, 0x00, 0x6A})).isEqualTo("e479");
  }

  @ParameterizedTest
  @ValueSource(ints = {0, 1, 23})
  void wholeFramesPassAndGiveTheirPayloadBack(int headerBytes) {
    byte[] payload = {1, 2, 3, -1, 0, 77};
    byte[] frame = FrameCheck.frame(headerBytes, payload);
    assertThat(frame).hasSize(headerBytes + 6 + FrameCheck.BYTES);
    assertThat(FrameCheck.passes(frame)).isTrue();
    assertThat(FrameCheck.payload(headerBytes, frame)).isEqualTo(payload);
    assertThat(FrameCheck.passes(FrameCheck.frame(headerBytes, new byte[0]))).isTrue();
  }

  /** A CRC of 16 bits finds every burst of up to 16 bits; here all short ones at every place. */
  @Test
  void everyBurstOfUpToSixteenBitsIsFound() {
    byte[] frame = FrameCheck.frame(5, new byte[] {1, 2, 3, -1, 0, 77});
    for (int at = 0; at <= 8 * frame.length - 16; at++) {
      for (int pattern : new int[] {1, 3, 5, 0x11, 0x8001, 0xFFFF, 0xA5A5, 0x8408, 0x1021}) {
        byte[] damaged = frame.clone();
        for (int bit = 0; bit < 16; bit++) {
          damaged[(at + bit) / 8] ^= (byte) (((pattern >> bit) & 1) << (at + bit) % 8);
        }
        assertThat(FrameCheck.passes(damaged)).as("%x at %s", pattern, at).isFalse();
      }
    }
  }

  /** Damage that equals a frame with its sequence goes unnoticed, as the code is linear. */
  @Test
  void damageThatIsItselfAFrameIsNotFound() {
    byte[] frame = FrameCheck.frame(0, new byte[] {10, 20, 30});
    byte[] damage = FrameCheck.frame(0, new byte[] {0, 4, 0});
    byte[] damaged = frame.clone();
    for (int i = 0; i < damaged.length; i++) {
      damaged[i] ^= damage[i];
    }
    assertThat(FrameCheck.passes(damaged)).isTrue();
    assertThat(Arrays.equals(frame, damaged)).isFalse();
  }

  /**
   * Frames of any length and content, those shorter than header and sequence included. One in 140
   * has a single byte, which passes if it is 0; one in 65536 of the others passes.
   */
  @Test
  void randomBytesGiveAPayloadThatFits() {
    int unnoticed = 0;
    for (int round = 0; round < Damages.rounds(); round++) {
      Random random = new Random(round);
      byte[] frame = Damages.bytes(random, 140);
      int headerBytes = random.nextInt(30);
      unnoticed += FrameCheck.passes(frame) && frame.length > 0 ? 1 : 0;
      assertThat(FrameCheck.payload(headerBytes, frame))
          .hasSize(Math.max(0, frame.length - headerBytes - FrameCheck.BYTES));
    }
    assertThat((double) unnoticed / Damages.rounds()).isLessThan(0.02);
  }
}
