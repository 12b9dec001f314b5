package linkworthy.trial;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;
import static org.assertj.core.api.Assertions.withinPercentage;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import linkworthy.input.YamlNode;
import linkworthy.statistics.Moments;
import linkworthy.statistics.StudentT;
import linkworthy.study.StudyReader;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

/** Replicates that end early. */
class CourseTest {
  private static final int LEAST = 3;
  private static final int MOST = 40;
  private static final double HALF_WIDTH_DB = 0.25;
  private static final int PICTURES = 2;

  private static final String FIXED =
      """
      name: early
      seed: 7
      pictures: {select: [canyon, cat], longest-side: 32}
      impairments:
        - {noise: gaussian, snr-db: [20, 10]}
        - {noise: burst-loss, loss-rate: 0.2, mean-burst: 2}
      codecs:
        - {transform: dct, keep: 6, step: 8}
        - {transform: mean, step: 16}
      replicates: 40
      """;

  private static final String EARLY =
      FIXED.replace(
          "replicates: 40", "replicates: {at-least: 3, at-most: 40, half-width-db: 0.25}");

  private static Plan plan(String study) {
    return Plan.of(StudyReader.read(YamlNode.parse("early.yaml", study), Path.of("")));
  }

  private static List<Trial> run(String study, int threads) {
    List<Trial> all = new ArrayList<>();
    Plan plan = plan(study);
    Course course = new Course(plan);
    int units =
        new LocalRunner(plan, threads).run(course, (unit, trials, timings) -> all.addAll(trials));
    assertThat(course.isAtEnd()).isTrue();
    assertThat(all).hasSize(units * plan.study().codecs().size());
    return all;
  }

  private static Map<String, List<Trial>> groups(List<Trial> trials) {
    Map<String, List<Trial>> groups = new LinkedHashMap<>();
    for (Trial trial : trials) {
      String key = trial.picture() + " " + trial.impairment() + " " + trial.severity();
      groups.computeIfAbsent(key, k -> new ArrayList<>()).add(trial);
    }
    return groups;
  }

  /**
   * The widest of the codecs' intervals over the first n replicates of a group, as if they were n -
   * 10, or 3^(n - 11) of 11 or fewer; none of fewer than five.
   */
  private static double width(List<Trial> group, int replicates) {
    Map<String, Moments> psnr = new LinkedHashMap<>();
    group.stream()
        .filter(trial -> trial.replicate() < replicates)
        .forEach(t -> psnr.computeIfAbsent(t.codec(), c -> new Moments()).add(t.psnrDb()));
    double counted = replicates > 10 ? replicates - 10 : StrictMath.pow(3, replicates - 11);
    double widest = psnr.values().stream().mapToDouble(StudentT::halfWidth).max().orElseThrow();
    return replicates < 5 ? Double.POSITIVE_INFINITY : widest * Math.sqrt(replicates / counted);
  }

  @ParameterizedTest
  @ValueSource(ints = {2, 5})
  void rowsDoNotDependOnThreads(int threads) {
    assertThat(run(EARLY, threads)).isEqualTo(run(EARLY, 1));
  }

  @Test
  void eachGroupEndsAtTheFirstReplicateThatIsEnough() {
    double accepted = HALF_WIDTH_DB * Math.sqrt(PICTURES);
    groups(run(EARLY, 2))
        .forEach(
            (key, group) -> {
              if (key.contains("none")) {
                assertThat(group).hasSize(2);
                return;
              }
              int count = group.get(group.size() - 1).replicate() + 1;
              assertThat(count).as(key).isBetween(LEAST, MOST);
              for (int n = LEAST; n < count; n++) {
                assertThat(width(group, n)).as(key + " " + n).isGreaterThan(accepted);
              }
              if (count < MOST) {
                assertThat(width(group, count)).as(key).isLessThanOrEqualTo(accepted);
              }
            });
  }

  @Test
  void widelyScatteredTrialsAreRepeatedMoreOften() {
    Map<String, List<Trial>> groups = groups(run(EARLY, 2));
    for (String picture : List.of("canyon", "cat")) {
      assertThat(groups.get(picture + " burst-loss 0.2"))
          .hasSizeGreaterThan(groups.getOrDefault(picture + " gaussian 20.0", List.of()).size());
    }
  }

  @Test
  void rowsAreThoseOfAFixedNumberWithoutTheLastOnes() {
    Map<String, List<Trial>> fixed = groups(run(FIXED, 2));
    groups(run(EARLY, 2))
        .forEach(
            (key, group) ->
                assertThat(fixed.get(key)).as(key).startsWith(group.toArray(Trial[]::new)));
  }

  @ParameterizedTest
  @ValueSource(ints = {1, 2})
  void aCourseGoesOnFromAnyUnit(int threads) {
    List<Trial> whole = run(EARLY, 2);
    Plan plan = plan(EARLY);
    for (int kept = 0; kept < whole.size(); kept += 2) {
      Course course = new Course(plan);
      whole.subList(0, kept).forEach(course::add);
      List<Trial> tail = new ArrayList<>();
      LocalRunner runner = new LocalRunner(plan, threads);
      int wanted = Math.min(whole.size() - kept, 10);
      int units =
          runner.run(
              course,
              (unit, trials, timings) -> {
                tail.addAll(trials);
                if (tail.size() >= wanted) {
                  runner.stop();
                }
              });
      assertThat(tail).hasSize(2 * units).isEqualTo(whole.subList(kept, kept + tail.size()));
    }
  }

  @Test
  void aGroupIsNotBegunInItsMiddle() {
    LocalRunner runner = new LocalRunner(plan(EARLY), 1);
    assertThatIllegalArgumentException()
        .isThrownBy(() -> runner.run(2, (unit, trials, timings) -> {}))
        .withMessageContaining("unit 2");
  }

  /**
   * Values 1 to n, whose variance is n (n + 1)/12. Five count as 1/729 and 14 as 4; t(0.975, 4) =
   * 2.776445 and t(0.975, 13) = 2.160369, as in any table.
   */
  @ParameterizedTest
  @CsvSource({"5, 2.776445, 729", "14, 2.160369, 0.25"})
  void theWidthIsStudentsOfFewerValues(int values, double t, double inverse) {
    NoiseWidth width = new NoiseWidth();
    for (int value = 1; value <= values; value++) {
      assertThat(width.halfWidth()).isPositive();
      width.add(value);
    }
    double variance = values * (values + 1) / 12.0;
    assertThat(width.halfWidth())
        .isCloseTo(t * Math.sqrt(variance * inverse), withinPercentage(1e-10));
    assertThat(width.copy().halfWidth()).isEqualTo(width.halfWidth());
  }

  @Test
  void equalValuesHaveNoWidthAndInfiniteOnesNoEnd() {
    NoiseWidth width = new NoiseWidth();
    for (int n = 1; n <= 5; n++) {
      assertThat(width.halfWidth()).isInfinite();
      width.add(Double.POSITIVE_INFINITY);
    }
    assertThat(width.halfWidth()).isZero();
    width.add(30);
    assertThat(width.halfWidth()).isInfinite();
  }
}
