package linkworthy.trial;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.stream.IntStream;
import linkworthy.input.YamlNode;
import linkworthy.study.StudyReader;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;

class RehearsalTest {
  /** The pictures have 96 x 96 samples or, of 500 x 372, 96 x 71; severities are not in order. */
  private static final String STUDY =
      """
      name: small
      seed: 7
      pictures: {select: [canyon, handwriting, cat, harbour], longest-side: 96}
      impairments:
        - {noise: gaussian, snr-db: [20, 5, 15, 10, 30, 25]}
        - {noise: burst-loss, loss-rate: [0.1, 0.4], mean-burst: 2}
      codecs:
        - {transform: pca, over: rows, keep: [2, 8], step: 8}
        - {transform: mean, step: 16}
      replicates: 3
      """;

  /** Seconds that are not reached: a rehearsal ends with as many runs as the plan has units. */
  private static final double LONG = 1e6;

  private final Plan plan =
      Plan.of(StudyReader.read(YamlNode.parse("small.yaml", STUDY), Path.of("")));
  private final List<List<Trial>> units = new ArrayList<>();
  private final Rehearsal rehearsal = Rehearsal.of(plan, 2, LONG);

  @BeforeEach
  void run() {
    new LocalRunner(plan, 2).run(0, (unit, trials, timings) -> units.add(trials));
  }

  private List<Trial> inThePlan(int picture, int condition) {
    return units.get(plan.unit(picture, condition, 0).index());
  }

  @Test
  void mildestMiddleAndHarshestSeverityOfThreePicturesAreRunAsInThePlan() {
    assertThat(rehearsal.pictures()).hasSize(3).isSorted().doesNotHaveDuplicates();
    assertThat(rehearsal.units()).isEqualTo(3 * (1 + 3 + 2));
    assertThat(rehearsal.isWhole()).isTrue();
    for (int picture : rehearsal.pictures()) {
      // Clean; 30, 20 and 5 dB; 0.1 and 0.4 of the packets.
      for (int condition : new int[] {-1, 4, 0, 1, 6, 7}) {
        assertThat(rehearsal.trials(picture, condition)).isEqualTo(inThePlan(picture, condition));
        assertThat(rehearsal.timings(picture, condition)).hasSize(3);
      }
    }
  }

  @Test
  void aSeverityBetweenThemHasTheRowsOfTheMilderOne() {
    int picture = rehearsal.pictures().get(1);
    assertThat(rehearsal.trials(picture, 5)).isEqualTo(inThePlan(picture, 4));
    assertThat(rehearsal.trials(picture, 2)).isEqualTo(inThePlan(picture, 0));
    assertThat(rehearsal.trials(picture, 3)).isEqualTo(inThePlan(picture, 0));
  }

  @Test
  void noiseGrowsWithSeverity() {
    double[] variances =
        IntStream.of(4, 5, 0, 2, 3, 1).mapToDouble(rehearsal::equivalentNoiseVariance).toArray();
    assertThat(variances).isSorted();
  }

  @Test
  void moreReplicatesAndSlowerWritingTakeLonger() {
    double few = rehearsal.seconds(3, 0);
    assertThat(few).isPositive();
    assertThat(rehearsal.seconds(300, 0)).isGreaterThan(few);
    // 4 pictures, each clean and 8 conditions with 3 replicates.
    assertThat(rehearsal.seconds(3, 1e6)).isGreaterThanOrEqualTo(100e6);
  }

  @Test
  void aPlanOfFewUnitsIsNotRunMoreOftenThanItHas() {
    Rehearsal small = Rehearsal.of(plan.of(List.of(0)), 1, LONG);
    assertThat(small.units()).isEqualTo(6);
    // A plan of 25 units is reached in the fifth pass, which is run to its end.
    assertThat(small.runs()).isEqualTo(30);
  }

  @Test
  void whereUnitsAreVerySlowTheRestIsLikeTheFirst() {
    Rehearsal slow = Rehearsal.of(plan, 1, 0);
    // Of 100 units 10 % and one more: those of the smallest picture, and of the middle one all but
    // the harshest loss.
    assertThat(slow.runs()).isEqualTo(11);
    assertThat(slow.units()).isEqualTo(11);
    assertThat(slow.isWhole()).isFalse();
    // The largest picture has the rows of the middle one.
    assertThat(slow.pictures().stream().map(picture -> slow.trials(picture, -1)).distinct())
        .hasSize(2);
    assertThat(slow.seconds(3, 0)).isPositive();
  }
}
