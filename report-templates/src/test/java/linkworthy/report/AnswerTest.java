package linkworthy.report;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.util.ArrayList;
import java.util.List;
import org.junit.jupiter.api.Test;

/** Own examples; means and margins worked out by hand. */
class AnswerTest {
  private static final CodecColumn CHEAP = SamplePages.codec("dct", "blocks8", "K4 step8");
  private static final CodecColumn FAIR = SamplePages.codec("dct", "blocks8", "K16 step8");
  private static final CodecColumn DEAR = SamplePages.codec("pca", "rows", "K32 step8");
  private static final Condition GAUSSIAN =
      SamplePages.condition("gaussian", "samples", "snr-db", 20, 20);
  private static final Condition BURST =
      SamplePages.condition("burst-loss", "packets", "loss-rate", 0.1, 10);

  private static Figure figure(Condition condition, CodecColumn codec, double psnr, double bits) {
    return figure(condition, codec, psnr, bits, Standing.BEST, 0);
  }

  private static Figure figure(
      Condition condition,
      CodecColumn codec,
      double psnr,
      double bits,
      Standing standing,
      double behind) {
    return new Figure(
        condition,
        codec,
        new Figure.Evidence(8, 80),
        new Figure.Quality(psnr, 0.1, 0.9, psnr, psnr, 0.8),
        bits,
        0,
        new Figure.Comparison(behind, 0.01, standing));
  }

  @Test
  void takesTheCheapestWithinHalfADecibelOfTheBest() {
    Answer answer =
        Answer.from(
            List.of(
                figure(GAUSSIAN, CHEAP, 25, 0.2, Standing.BELOW, 5),
                figure(GAUSSIAN, FAIR, 29.6, 0.8, Standing.BELOW, 0.4),
                figure(GAUSSIAN, DEAR, 30, 1.6)));
    assertThat(answer.sentence())
        .isEqualTo(
            "dct blocks8 K16 step8 sends the fewest bits, 0.800 per pixel, of the 2 codecs within"
                + " 0.5 dB of the best mean PSNR in the one noisy condition: 29.60 dB, 0.40 dB"
                + " behind pca rows K32 step8, which sends 1.60.");
    assertThat(answer.confidence())
        .isEqualTo(
            "Measured on 8 pictures, 10 replicates each. Row by row on the same noise it is the"
                + " best or not distinguishable from it in 0 of 1 and below it in 1 (by at most"
                + " 0.40 dB). On other pictures like these its mean PSNR is known to \u00b10.90 dB"
                + " (picture interval of a row).");
    assertThat(answer.exceptions()).isEmpty();
  }

  @Test
  void namesTheNoiseUnderWhichItDoesNotHold() {
    Answer answer =
        Answer.from(
            List.of(
                figure(GAUSSIAN, FAIR, 30, 0.8),
                figure(GAUSSIAN, DEAR, 28, 1.6),
                figure(BURST, FAIR, 22, 0.8),
                figure(BURST, DEAR, 23.5, 1.6)));
    assertThat(answer.sentence()).startsWith("dct blocks8 K16 step8 ");
    assertThat(answer.exceptions())
        .containsExactly(
            "Under burst-loss on packets it is 1.50 dB behind pca rows K32 step8 (1.60 bits per"
                + " pixel).");
  }

  @Test
  void saysWhenNoOtherCodecComesNear() {
    Answer answer =
        Answer.from(List.of(figure(GAUSSIAN, CHEAP, 25, 0.2), figure(GAUSSIAN, DEAR, 30, 1.6)));
    assertThat(answer.sentence())
        .isEqualTo(
            "pca rows K32 step8 has the best mean PSNR in the one noisy condition, 30.00 dB, and no"
                + " other codec comes within 0.5 dB of it; it sends 1.60 bits per pixel.");
  }

  @Test
  void saysThatOneCodecIsNoChoice() {
    Answer answer = Answer.from(List.of(figure(GAUSSIAN, DEAR, 30, 1.6)));
    assertThat(answer.sentence()).contains("is the only codec measured");
    assertThat(answer.reasons()).isEmpty();
  }

  @Test
  void saysThatOnePictureSaysNothingOfOthers() {
    Answer answer =
        Answer.from(
            List.of(
                SamplePages.bare(GAUSSIAN, FAIR, 30, 0.8),
                SamplePages.bare(GAUSSIAN, DEAR, 30.2, 1.6)));
    assertThat(answer.confidence())
        .isEqualTo(
            "Measured on 1 picture, 1 replicate each. No paired test was possible. One picture"
                + " gives no picture interval: nothing is known about other pictures.");
  }

  @Test
  void usesTheCleanConditionAloneWhereThereIsNoNoiseAndSaysSo() {
    Answer answer =
        Answer.from(
            List.of(
                figure(Condition.clean(), FAIR, Double.POSITIVE_INFINITY, 0.8),
                figure(Condition.clean(), DEAR, Double.POSITIVE_INFINITY, 1.6)));
    assertThat(answer.sentence()).contains("without any noise").contains("the best with inf dB");
  }

  @Test
  void leavesOutCodecsThatLackAFigure() {
    List<Figure> figures = new ArrayList<>();
    figures.add(figure(GAUSSIAN, CHEAP, 30, 0.2));
    figures.add(figure(GAUSSIAN, FAIR, 29, 0.8));
    figures.add(figure(BURST, FAIR, 22, 0.8));
    Answer answer = Answer.from(figures);
    assertThat(answer.sentence()).startsWith("dct blocks8 K16 step8 ");
    assertThat(answer.reasons())
        .contains("1 codec lacks a figure in some condition and did not compete.");
  }

  @Test
  void givesNoAnswerWithoutFigures() {
    assertThat(Answer.from(List.of()).sentence()).startsWith("This study gives no answer");
  }

  @Test
  void refusesTwoFiguresInOnePlace() {
    assertThatThrownBy(
            () ->
                Answer.from(
                    List.of(figure(GAUSSIAN, FAIR, 29, 0.8), figure(GAUSSIAN, FAIR, 28, 0.8))))
        .isInstanceOf(IllegalArgumentException.class)
        .hasMessageContaining("dct blocks8 K16 step8");
  }
}
