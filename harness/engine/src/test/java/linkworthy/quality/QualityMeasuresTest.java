package linkworthy.quality;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalStateException;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.util.List;
import linkworthy.codec.PictureShape;
import linkworthy.corpus.Picture;
import linkworthy.input.BadInput;
import org.junit.jupiter.api.Test;

class QualityMeasuresTest {
  @Test
  void listsMeasuresInTheOrderOfTheirIds() {
    assertThat(QualityMeasures.all()).extracting(QualityMeasure::id).contains("psnr", "ssim");
    assertThat(QualityMeasures.all()).extracting(QualityMeasure::id).isSorted();
  }

  @Test
  void anUnknownIdIsAnsweredWithWhatExists() {
    assertThatThrownBy(() -> QualityMeasures.get("sim"))
        .isInstanceOf(BadInput.class)
        .hasMessageStartingWith("unknown measure 'sim'; did you mean 'ssim'? accepted: ")
        .hasMessageContaining("psnr, ssim");
    assertThatThrownBy(() -> QualityMeasures.get(""))
        .isInstanceOf(BadInput.class)
        .hasMessageStartingWith("unknown measure ''; accepted: ");
  }

  @Test
  void aSharedColumnStopsTheProgram() {
    QualityMeasure other =
        new QualityMeasure() {
          @Override
          public String id() {
            return "other";
          }

          @Override
          public String column() {
            return "psnr_db";
          }

          @Override
          public void check(PictureShape shape) {}

          @Override
          public Judge against(Picture clean) {
            return decoded -> 0;
          }
        };
    assertThatIllegalStateException()
        .isThrownBy(() -> QualityMeasures.byId(List.of(new Psnr(), other)))
        .withMessageStartingWith("two quality measures have the column 'psnr_db': ");
  }

  @Test
  void aSharedIdStopsTheProgram() {
    assertThatIllegalStateException()
        .isThrownBy(() -> QualityMeasures.byId(List.of(new Psnr(), new Ssim(), new Psnr())))
        .withMessage(
            "two quality measures have the id 'psnr': linkworthy.quality.Psnr and"
                + " linkworthy.quality.Psnr");
  }
}
