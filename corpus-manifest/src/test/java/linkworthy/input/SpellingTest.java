package linkworthy.input;

import static org.assertj.core.api.Assertions.assertThat;

import java.time.Duration;
import java.util.Collections;
import java.util.List;
import java.util.stream.IntStream;
import org.assertj.core.api.Assertions;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class SpellingTest {
  private static final List<String> WORDS =
      List.of("psnr", "ssim", "snr-db", "density", "salt-and-pepper", "dct", "K");

  @ParameterizedTest
  @CsvSource({
    "psrn, psnr",
    "psn, psnr",
    "psnrr, psnr",
    "psxr, psnr",
    "PSNR, psnr",
    "snr-bd, snr-db",
    "snrdb, snr-db",
    "snr_db, snr-db",
    "densty, density",
    "salt-pepper, salt-and-pepper",
    "Salt-And-Peper, salt-and-pepper",
    "dtc, dct",
    "k, K"
  })
  void findsTheNearest(String found, String meant) {
    assertThat(Spelling.nearest(found, WORDS)).hasValue(meant);
  }

  @ParameterizedTest
  @CsvSource({"gaussian", "x", "''", "psnr-db-and-more", "tcd", "pass"})
  void doesNotGuessWhenNothingIsNear(String found) {
    assertThat(Spelling.nearest(found, WORDS)).isEmpty();
  }

  @Test
  void prefersTheNearerAndThenTheFirstInTheAlphabet() {
    assertThat(Spelling.nearest("abcdef", List.of("abcxyf", "abcdxf"))).hasValue("abcdxf");
    assertThat(Spelling.nearest("rose", List.of("rise", "nose"))).hasValue("nose");
    assertThat(Spelling.nearest("rose", List.of("nose", "rise"))).hasValue("nose");
    assertThat(Spelling.nearest("rose", List.of())).isEmpty();
  }

  @Test
  void hintsAtTheNearestAndListsWhatIsAccepted() {
    assertThat(Spelling.hint("psrn", List.of("psnr", "ssim")))
        .isEqualTo("did you mean 'psnr'? accepted: psnr, ssim");
    assertThat(Spelling.hint("mse", List.of("psnr", "ssim"))).isEqualTo("accepted: psnr, ssim");
  }

  @Test
  void listsNoMoreThanSixty() {
    List<String> many = IntStream.range(0, 5000).mapToObj(i -> "picture-" + i).toList();
    assertThat(Spelling.hint("pictur-4999", many))
        .startsWith("did you mean 'picture-4999'? accepted: picture-0, picture-1,")
        .endsWith(", picture-59 and 4940 more");
  }

  @Test
  void isQuickWithLongText() {
    String found = String.join("", Collections.nCopies(500_000, "ab"));
    Assertions.assertThatNoException()
        .isThrownBy(
            () ->
                org.junit.jupiter.api.Assertions.assertTimeout(
                    Duration.ofSeconds(2),
                    () -> assertThat(Spelling.nearest(found, WORDS)).isEmpty()));
  }
}
