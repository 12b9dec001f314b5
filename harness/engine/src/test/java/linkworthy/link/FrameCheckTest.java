package linkworthy.link;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;

import java.nio.charset.StandardCharsets;
import java.util.Arrays;
import java.util.HexFormat;
import java.util.List;
import java.util.Random;
import java.util.stream.LongStream;
import java.util.zip.CRC32;
import java.util.zip.CRC32C;
import java.util.zip.Checksum;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class FrameCheckTest {
  private static final byte[] DIGITS = "123456789".getBytes(StandardCharsets.US_ASCII);
  private static final List<FrameCheck> IN_USE = List.of(FrameCheck.BITS_16, FrameCheck.BITS_32);

  private static String sequence(FrameCheck check, byte[] payload) {
    byte[] frame = check.frame(0, payload);
    return HexFormat.of().formatHex(frame, frame.length - check.bytes(), frame.length);
  }

  /**
   * CRC of the digits 1 to 9 (catalogue of parametrised CRC algorithms: 31C3, 2189 and 4B37 seen,
   * the others from memory; all, and the parameters, recomputed independently in Python, bit by
   * bit). Reflected ones are sent lower byte first, the others higher byte first.
   */
  @ParameterizedTest
  @CsvSource({
    "XMODEM, 16, 1021, 0, false, 0, 31c3, 31c3",
    "KERMIT, 16, 1021, 0, true, 0, 2189, 8921",
    "IBM-3740, 16, 1021, ffff, false, 0, 29b1, 29b1",
    "MODBUS, 16, 8005, ffff, true, 0, 4b37, 374b",
    "ISO-HDLC, 32, 04c11db7, ffffffff, true, ffffffff, cbf43926, 2639f4cb",
    "ISCSI, 32, 1edc6f41, ffffffff, true, ffffffff, e3069283, 839206e3",
    "BZIP2, 32, 04c11db7, ffffffff, false, ffffffff, fc891918, fc891918",
  })
  void catalogueValues(
      String name,
      int width,
      String polynomial,
      String initial,
      boolean reflected,
      String mask,
      String value,
      String sent) {
    FrameCheck check = new FrameCheck(width, hex(polynomial), hex(initial), reflected, hex(mask));
    assertThat(check.crc(DIGITS, DIGITS.length)).as(name).isEqualTo(hex(value));
    assertThat(sequence(check, DIGITS)).isEqualTo(sent);
    assertThat(check.passes(check.frame(7, DIGITS))).isTrue();
  }

  private static int hex(String digits) {
    return Integer.parseUnsignedInt(digits, 16);
  }

  @Test
  void theTwoInUseAreKermitAndTheCrcOfEthernet() {
    assertThat(sequence(FrameCheck.of(16), DIGITS)).isEqualTo("8921");
    assertThat(sequence(FrameCheck.of(32), DIGITS)).isEqualTo("2639f4cb");
    assertThatIllegalArgumentException()
        .isThrownBy(() -> FrameCheck.of(0))
        .withMessage("frame check has 0 bits; accepted: 16, 32");
    assertThatIllegalArgumentException()
        .isThrownBy(() -> new FrameCheck(24, 0x864CFB, 0, false, 0))
        .withMessage("width of a CRC is 24; accepted: 16, 32");
  }

  @Test
  void agreesWithTheJdk() {
    FrameCheck castagnoli = new FrameCheck(32, 0x1EDC6F41, ~0, true, ~0);
    for (int round = 0; round < 2000; round++) {
      byte[] bytes = Damages.bytes(new Random(round), 300);
      assertThat(FrameCheck.BITS_32.crc(bytes, bytes.length)).isEqualTo(jdk(new CRC32(), bytes));
      assertThat(castagnoli.crc(bytes, bytes.length)).isEqualTo(jdk(new CRC32C(), bytes));
    }
  }

  private static int jdk(Checksum checksum, byte[] bytes) {
    checksum.update(bytes, 0, bytes.length);
    return (int) checksum.getValue();
  }

  /** Acknowledgement frame 02 00 6A of IEEE 802.15.4-2003, 7.2.1.8 (from memory). */
  @Test
  void acknowledgementOfTheStandard() {
    assertThat(sequence(FrameCheck.BITS_16, new byte[] {0x02, 0x00, 0x6A})).isEqualTo("e479");
  }

  @ParameterizedTest
  @ValueSource(ints = {0, 1, 23})
  void wholeFramesPassAndGiveTheirPayloadBack(int headerBytes) {
    byte[] payload = {1, 2, 3, -1, 0, 77};
    for (FrameCheck check : IN_USE) {
      byte[] frame = check.frame(headerBytes, payload);
      assertThat(frame).hasSize(headerBytes + 6 + check.bytes());
      assertThat(check.passes(frame)).isTrue();
      assertThat(check.payload(headerBytes, frame)).isEqualTo(payload);
      assertThat(check.passes(check.frame(headerBytes, new byte[0]))).isTrue();
    }
  }

  /** A CRC finds every burst that is not longer than itself; here some patterns at every place. */
  @Test
  void everyBurstUpToItsOwnLengthIsFound() {
    for (FrameCheck check : IN_USE) {
      byte[] frame = check.frame(5, new byte[] {1, 2, 3, -1, 0, 77});
      int width = 8 * check.bytes();
      for (int at = 0; at <= 8 * frame.length - width; at++) {
        for (long pattern : patterns(width)) {
          byte[] damaged = frame.clone();
          for (int bit = 0; bit < width; bit++) {
            damaged[(at + bit) / 8] ^= (byte) (((pattern >> bit) & 1) << (at + bit) % 8);
          }
          assertThat(check.passes(damaged)).as("%x at %s", pattern, at).isFalse();
        }
      }
    }
  }

  private static long[] patterns(int width) {
    long[] short16 = {1, 3, 5, 0x11, 0x8001, 0xFFFF, 0xA5A5, 0x8408, 0x1021};
    long[] longer = {0x80000001L, 0xFFFFFFFFL, 0xA5A5A5A5L, 0xEDB88320L, 0x04C11DB7L, 0x10811};
    return width == 16
        ? short16
        : LongStream.concat(Arrays.stream(short16), Arrays.stream(longer)).toArray();
  }

  /** Damage that is the difference of two frames goes unnoticed, as the code is affine. */
  @Test
  void damageThatIsTheDifferenceOfTwoFramesIsNotFound() {
    for (FrameCheck check : IN_USE) {
      byte[] frame = check.frame(0, new byte[] {10, 20, 30});
      byte[] one = check.frame(0, new byte[] {0, 4, 0});
      byte[] other = check.frame(0, new byte[3]);
      byte[] damaged = frame.clone();
      for (int i = 0; i < damaged.length; i++) {
        damaged[i] ^= (byte) (one[i] ^ other[i]);
      }
      assertThat(check.passes(damaged)).isTrue();
      assertThat(Arrays.equals(frame, damaged)).isFalse();
    }
  }

  /**
   * Frames of any length and content, those shorter than header and sequence included; one in 65536
   * passes a check of 16 bits, and one in 141 is empty and passes none.
   */
  @Test
  void randomBytesGiveAPayloadThatFits() {
    for (FrameCheck check : IN_USE) {
      int unnoticed = 0;
      for (int round = 0; round < Damages.rounds(); round++) {
        Random random = new Random(round);
        byte[] frame = Damages.bytes(random, 140);
        int headerBytes = random.nextInt(30);
        unnoticed += check.passes(frame) ? 1 : 0;
        assertThat(check.payload(headerBytes, frame))
            .hasSize(Math.max(0, frame.length - headerBytes - check.bytes()));
      }
      assertThat((double) unnoticed / Damages.rounds()).isLessThan(0.02);
      assertThat(check.passes(new byte[0])).isFalse();
      assertThat(check.passes(new byte[check.bytes() - 1])).isFalse();
    }
  }
}
