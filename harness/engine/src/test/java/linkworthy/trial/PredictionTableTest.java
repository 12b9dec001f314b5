package linkworthy.trial;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import linkworthy.input.YamlNode;
import linkworthy.study.StudyReader;
import org.junit.jupiter.api.Test;

class PredictionTableTest {
  private static final String STUDY =
      """
      name: predicted
      seed: 7
      pictures: {select: [cat], train: [handwriting], longest-side: 96}
      impairments:
        - {noise: gaussian, snr-db: [20, 10]}
        - {noise: salt-and-pepper, density: 0.05}
        - {noise: burst-loss, snr-db: 10}
        - {noise: burst-loss, acts-on: samples, snr-db: 10, label: raw-hop}
      codecs:
        - {transform: dct, keep: 16, step: 4}
        - {transform: dct, keep: 16, step: 4, protect: {retransmit: 2}}
        - {transform: pca, basis: shared, over: blocks, keep: 16, step: 4}
        - {transform: pca, keep: 8}
        - {jpeg: baseline, quality: 50}
      replicates: 20
      """;

  private static Plan plan(String text) {
    return Plan.of(StudyReader.read(YamlNode.parse("predicted.yaml", text), Path.of("")));
  }

  /** Two severities of noise on samples, one of lost packets; nothing of the others. */
  @Test
  void everyCodecHasARowWhereThereIsAFormulaForSome() {
    List<Prediction> table = PredictionTable.of(plan(STUDY));
    assertThat(table).hasSize(3 * 5);
    assertThat(table.subList(0, 5))
        .extracting(Prediction::isMade)
        .containsExactly(true, true, true, false, false);
    assertThat(table.subList(10, 15))
        .extracting(Prediction::refusal)
        .containsExactly(
            "",
            "its packets are protected",
            "",
            "a lost direction drops its component",
            "there is no formula for this kind of codec");
    assertThat(PredictionTable.of(plan(STUDY))).isEqualTo(table);
  }

  /**
   * Limit 0.3 dB: common practice, no source; the picture has dark places where noise is clipped.
   */
  @Test
  void predictionsUnderNoiseAreOnTheScaleOfTheCells() {
    Plan plan = plan(STUDY);
    List<Trial> trials = new ArrayList<>();
    int unused = new LocalRunner(plan, 2).run(0, (unit, all, timings) -> trials.addAll(all));
    for (Prediction prediction : PredictionTable.of(plan)) {
      if (prediction.isMade() && prediction.actsOn().equals("samples")) {
        double mean =
            trials.stream()
                .filter(t -> t.codec().equals(prediction.codec()))
                .filter(t -> t.severity() == prediction.severity())
                .filter(t -> t.impairment().equals(prediction.impairment()))
                .mapToDouble(Trial::mse)
                .average()
                .orElseThrow();
        assertThat(prediction.psnrOfMeanMseDb())
            .isCloseTo(10 * StrictMath.log10(255 * 255 / mean), within(0.3));
      }
    }
  }

  @Test
  void lumaAloneIsPredicted() {
    String all = STUDY.replace("{select: [cat], ", "{select: [cat], planes: all, ");
    assertThat(PredictionTable.of(plan(all)))
        .isNotEmpty()
        .allMatch(p -> p.refusal().equals("luma alone is predicted"));
  }

  @Test
  void aPredictionIsANumberOrARefusal() {
    assertThatThrownBy(() -> new Prediction("a", "samples", "variance", 1, "b", 30, "why"))
        .isInstanceOf(IllegalArgumentException.class);
    assertThatThrownBy(() -> new Prediction("a", "samples", "variance", 1, "b", Double.NaN, ""))
        .isInstanceOf(IllegalArgumentException.class);
  }
}
