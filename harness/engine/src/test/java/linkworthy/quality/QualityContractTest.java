package linkworthy.quality;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;

import java.util.List;
import java.util.function.IntUnaryOperator;
import java.util.stream.IntStream;
import linkworthy.codec.PictureShape;
import linkworthy.corpus.Picture;
import linkworthy.corpus.TestPattern;
import org.junit.jupiter.api.Test;

/** What every quality measure promises; the test of each measure extends this one. */
public abstract class QualityContractTest {
  /** The measure under test. */
  protected abstract QualityMeasure measure();

  /** The figure of a picture that equals the clean one. */
  protected abstract double perfect();

  @Test
  void theRegistryFindsItByItsId() {
    assertThat(QualityMeasures.get(measure().id())).hasSameClassAs(measure());
    assertThat(QualityMeasures.all()).anyMatch(m -> m.getClass() == measure().getClass());
  }

  @Test
  void idAndColumnAreFitForFiles() {
    assertThat(measure().id()).matches("[a-z][a-z0-9-]*");
    assertThat(measure().column()).matches("[a-z][a-z0-9_]*");
  }

  @Test
  void anEqualPictureIsPerfect() {
    for (Picture clean : List.of(pattern(64, 64, 8), pattern(61, 47, 16), pattern(47, 61, 1))) {
      Picture copy =
          new Picture(clean.width(), clean.height(), clean.bitDepth(), clean.samples().clone());
      assertThat(measure().against(clean).of(copy)).isEqualTo(perfect());
    }
  }

  @Test
  void moreNoiseIsFartherFromPerfect() {
    Picture clean = pattern(97, 83, 8);
    QualityMeasure.Judge judge = measure().against(clean);
    double little = judge.of(noisy(clean, 1));
    double much = judge.of(noisy(clean, 4));
    assertThat(little).isFinite();
    assertThat(much).isFinite();
    if (perfect() > little) {
      assertThat(much).isLessThan(little);
    } else {
      assertThat(perfect()).isLessThan(little);
      assertThat(much).isGreaterThan(little);
    }
  }

  @Test
  void theJudgeGivesTheSameBitsFromSeveralThreads() {
    Picture clean = pattern(97, 83, 8);
    QualityMeasure.Judge judge = measure().against(clean);
    List<Picture> decoded = IntStream.range(0, 32).mapToObj(i -> noisy(clean, 1 + i % 4)).toList();
    double[] alone = decoded.stream().mapToDouble(d -> measure().against(clean).of(d)).toArray();
    double[] together = decoded.parallelStream().mapToDouble(judge::of).toArray();
    assertThat(together).containsExactly(alone);
  }

  @Test
  void thePicturesAreLeftAsTheyWere() {
    Picture clean = pattern(64, 64, 8);
    Picture decoded = noisy(clean, 2);
    int[] cleanBefore = clean.samples().clone();
    int[] decodedBefore = decoded.samples().clone();
    measure().against(clean).of(decoded);
    assertThat(clean.samples()).isEqualTo(cleanBefore);
    assertThat(decoded.samples()).isEqualTo(decodedBefore);
  }

  @Test
  void picturesOfUsualSizesPassTheCheck() {
    PictureShape shape = new PictureShape(768, 512, 8);
    measure().check(shape);
    assertThat(measure().against(pattern(768, 512, 8)).of(pattern(768, 512, 8)))
        .isEqualTo(perfect());
  }

  @Test
  void anotherSizeOrDepthIsRefused() {
    QualityMeasure.Judge judge = measure().against(pattern(64, 48, 8));
    for (Picture other :
        List.of(pattern(48, 64, 8), pattern(64, 47, 8), pattern(63, 48, 8), pattern(64, 48, 7))) {
      assertThatIllegalArgumentException()
          .isThrownBy(() -> judge.of(other))
          .withMessageContaining("cannot compare");
    }
  }

  /** A test picture of any size and depth. */
  protected static Picture pattern(int width, int height, int bitDepth) {
    int shift = bitDepth - 8;
    int[] samples = TestPattern.cvp(width, height).samples();
    return new Picture(
        width, height, bitDepth, map(samples, s -> shift < 0 ? s >> -shift : s << shift));
  }

  /** The picture with the test pattern's noise at some times its strength, clipped. */
  protected static Picture noisy(Picture clean, int strength) {
    int width = clean.width();
    int[] samples = clean.samples().clone();
    for (int i = 0; i < samples.length; i++) {
      int noise = strength * TestPattern.noise(i % width, i / width);
      samples[i] = Math.max(0, Math.min(clean.peak(), samples[i] + noise));
    }
    return new Picture(width, clean.height(), clean.bitDepth(), samples);
  }

  static int[] map(int[] samples, IntUnaryOperator change) {
    return IntStream.of(samples).map(change).toArray();
  }
}
