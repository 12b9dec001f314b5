package linkworthy.corpus;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.fail;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Random;
import java.util.stream.Stream;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.MethodSource;

/**
 * Damaged files give the announced picture or one line that says why not. The number of cases for
 * each format is 300, or as {@code -Dlinkworthy.fuzz=20000} says; case {@code i} is drawn with seed
 * {@code i}.
 */
class PictureReaderFuzzTest {
  private static final int CASES = Integer.getInteger("linkworthy.fuzz", 300);

  static Stream<String> formats() {
    return PictureFiles.FORMATS.stream();
  }

  @ParameterizedTest
  @MethodSource("formats")
  void damageGivesAPictureOrOneLine(String format) {
    List<List<Picture>> originals = originals(format);
    List<byte[]> files = originals.stream().map(p -> PictureFiles.write(format, p)).toList();
    int refused = 0;
    for (int seed = 0; seed < CASES; seed++) {
      int which = seed % files.size();
      byte[] damaged = damage(files.get(which), new Random(seed));
      PictureHeader announced = PictureFiles.header(originals.get(which));
      try {
        ReadPicture read = PictureReader.read("damaged", damaged, announced);
        assertThat(PictureFiles.header(read.channels())).as("seed %d", seed).isEqualTo(announced);
      } catch (BadInput | Unavailable e) {
        refused++;
        assertThat(e.getMessage()).as("seed %d", seed).contains("damaged").doesNotContain("\n");
      } catch (Throwable e) {
        fail("seed " + seed + " of " + format, e);
      }
    }
    assertThat(refused).as("refused of %d", CASES).isBetween(CASES / 20, CASES);
  }

  private static List<List<Picture>> originals(String format) {
    List<List<Picture>> originals = new ArrayList<>();
    for (int channels : new int[] {1, 3}) {
      originals.add(PictureFiles.noise(13, 9, channels, 8, 1));
      if (!format.equals("jpeg") && !format.equals("bmp")) {
        originals.add(PictureFiles.noise(13, 9, channels, 16, 2));
      }
    }
    return originals;
  }

  private static byte[] damage(byte[] original, Random random) {
    byte[] damaged = original.clone();
    int kind = random.nextInt(4);
    if (kind == 0) {
      return Arrays.copyOf(damaged, random.nextInt(damaged.length));
    }
    int reach = kind == 1 ? Math.min(damaged.length, 128) : damaged.length;
    int hits = 1 + random.nextInt(kind == 3 ? 40 : 4);
    for (int hit = 0; hit < hits; hit++) {
      int at = random.nextInt(reach);
      damaged[at] =
          (byte)
              (random.nextBoolean() ? random.nextInt(256) : damaged[at] ^ 1 << random.nextInt(8));
    }
    return damaged;
  }
}
