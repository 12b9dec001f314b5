package linkworthy.corpus;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.Arrays;
import java.util.zip.CRC32;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

/** Checksums recomputed independently in Python (integer arithmetic modulo 2^32). */
class TestPatternTest {
  @ParameterizedTest
  @CsvSource({
    "64, 278b95c9, 511630, 37, 217, -1628, 345962, 95, 90",
    "256, 48a9ff65, 8222529, 32, 219, -31349, 5544261, 1572, 1539"
  })
  void hasTheKnownChecksums(
      int n,
      String crc,
      long sum,
      int min,
      int max,
      long noiseSum,
      long noiseSquares,
      int black,
      int white) {
    int[] samples = TestPattern.cvp(n).samples();
    CRC32 crc32 = new CRC32();
    long noise = 0;
    long squares = 0;
    int blacks = 0;
    int whites = 0;
    for (int i = 0; i < samples.length; i++) {
      crc32.update(samples[i]);
      int e = TestPattern.noise(i % n, i / n);
      noise += e;
      squares += (long) e * e;
      int hit = TestPattern.saltAndPepper(i % n, i / n);
      blacks += hit < 0 ? 1 : 0;
      whites += hit > 0 ? 1 : 0;
    }
    assertThat(Long.toHexString(crc32.getValue())).isEqualTo(crc);
    assertThat(Arrays.stream(samples).asLongStream().sum()).isEqualTo(sum);
    assertThat(Arrays.stream(samples).min()).hasValue(min);
    assertThat(Arrays.stream(samples).max()).hasValue(max);
    assertThat(noise).isEqualTo(noiseSum);
    assertThat(squares).isEqualTo(noiseSquares);
    assertThat(blacks).isEqualTo(black);
    assertThat(whites).isEqualTo(white);
  }
}
