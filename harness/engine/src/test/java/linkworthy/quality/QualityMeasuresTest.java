package linkworthy.quality;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalStateException;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.util.List;
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
  void aSharedIdStopsTheProgram() {
    assertThatIllegalStateException()
        .isThrownBy(() -> QualityMeasures.byId(List.of(new Psnr(), new Ssim(), new Psnr())))
        .withMessage(
            "two quality measures have the id 'psnr': linkworthy.quality.Psnr and"
                + " linkworthy.quality.Psnr");
  }
}
