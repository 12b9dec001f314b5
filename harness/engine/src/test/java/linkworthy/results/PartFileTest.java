package linkworthy.results;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;

import java.io.ByteArrayInputStream;
import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import linkworthy.codec.Failure;
import linkworthy.input.BadInput;
import linkworthy.input.YamlNode;
import linkworthy.study.StudyReader;
import linkworthy.trial.Course;
import linkworthy.trial.LocalRunner;
import linkworthy.trial.Mishap;
import linkworthy.trial.Plan;
import linkworthy.trial.Stretch;
import linkworthy.trial.Trial;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

/** Rows that are run and recorded in parts are those of one run. */
class PartFileTest {
  private static final String RUN = "0a1b";
  private static final Path FILE = Path.of("part");
  private static final String FIXED = "2";
  private static final String EARLY = "{at-least: 2, at-most: 9, half-width-db: 0.5}";

  private static Plan plan(String replicates) {
    return Plan.of(
        StudyReader.read(
            YamlNode.parse(
                "study.yaml",
                """
                name: parts
                pictures: {select: [canyon, cat], longest-side: 16}
                impairments: [{noise: gaussian, snr-db: [20, 10]}]
                codecs: [{transform: dct, keep: 3}, {transform: mean, step: 16}]
                measures: [psnr, ssim, mean-absolute-error]
                seed: 7
                replicates: %s
                """
                    .formatted(replicates)),
            Path.of("")));
  }

  private static Stretch whole(Plan plan) {
    return new Stretch(0, plan.units());
  }

  private static String inOneGo(Plan plan) {
    List<Trial> trials = new ArrayList<>();
    new LocalRunner(plan, 1).run(0, (unit, rows, times) -> trials.addAll(rows));
    return TrialsCsv.text(trials);
  }

  private static byte[] run(Plan plan, Stretch stretch) throws IOException {
    ByteArrayOutputStream out = new ByteArrayOutputStream();
    PartFile.Writer writer = new PartFile.Writer(out, plan, RUN, stretch);
    new LocalRunner(plan, 1)
        .run(
            new Course(plan, stretch),
            (unit, rows, times) -> {
              try {
                writer.append(unit, rows, times, mishaps(unit.index()));
              } catch (IOException e) {
                throw new UncheckedIOException(e);
              }
            });
    writer.end();
    return out.toByteArray();
  }

  /** Made up: every third unit has a failure, with a comma and quotes in its words. */
  private static List<Mishap> mishaps(int unit) {
    return unit % 3 == 0
        ? List.of(
            new Mishap("a codec", "cat", new Failure(Failure.THREW, "unit " + unit + ", \"x\"")))
        : List.of();
  }

  private static void read(
      Plan plan, byte[] part, Course course, List<Trial> trials, List<Mishap> mishaps)
      throws IOException {
    PartFile.read(
        FILE,
        new ByteArrayInputStream(part),
        plan,
        course,
        mishaps::add,
        (unit, rows, times) -> {
          assertThat(rows.get(0).picture()).isEqualTo(unit.entry().id());
          assertThat(times).hasSameSizeAs(rows);
          trials.addAll(rows);
        });
  }

  @ParameterizedTest
  @ValueSource(ints = {1, 2, 3, 7, 1000})
  void anyNumberOfPartsHasTheSameRows(int parts) throws IOException {
    for (String replicates : List.of(FIXED, EARLY)) {
      Plan plan = plan(replicates);
      List<Trial> trials = new ArrayList<>();
      List<Mishap> mishaps = new ArrayList<>();
      Course course = new Course(plan);
      int next = 0;
      for (Stretch stretch : whole(plan).split(plan, parts)) {
        assertThat(stretch.first()).isEqualTo(next);
        next = stretch.end();
        byte[] part = run(plan, stretch);
        assertThat(PartFile.isWhole(new ByteArrayInputStream(part), RUN, stretch)).isTrue();
        read(plan, part, course, trials, mishaps);
      }
      assertThat(next).isEqualTo(plan.units());
      assertThat(course.isAtEnd()).isTrue();
      assertThat(TrialsCsv.text(trials)).isEqualTo(inOneGo(plan));
      assertThat(mishaps).hasSizeGreaterThan(2).contains(mishaps(0).get(0));
    }
  }

  /** Two pictures, clean and two severities each, so six groups at most. */
  @Test
  void replicatesThatMayEndEarlyStayTogether() {
    Plan plan = plan(EARLY);
    List<Stretch> stretches = whole(plan).split(plan, 1000);
    assertThat(stretches).extracting(Stretch::units).containsExactly(1, 9, 9, 1, 9, 9);
    assertThatExceptionOfType(IllegalArgumentException.class)
        .isThrownBy(() -> new Course(plan, new Stretch(0, 5)))
        .withMessage("unit 5 has replicates before it; accepted: a first replicate");
  }

  @Test
  void thereIsNoEmptyStretch() {
    assertThatExceptionOfType(IllegalArgumentException.class)
        .isThrownBy(() -> new Stretch(3, 3))
        .withMessage("the stretch is from 3 to 3; accepted: at least one unit");
  }

  @Test
  void unitsThatAreThereAlreadyArePassedOver() throws IOException {
    Plan plan = plan(FIXED);
    List<Trial> trials = new ArrayList<>();
    Course course = new Course(plan);
    read(plan, run(plan, new Stretch(0, 4)), course, trials, new ArrayList<>());
    read(plan, run(plan, new Stretch(2, plan.units())), course, trials, new ArrayList<>());
    assertThat(TrialsCsv.text(trials)).isEqualTo(inOneGo(plan));
  }

  @Test
  void aPartThatWasCutOffOrAlteredIsNotWhole() throws IOException {
    Plan plan = plan(FIXED);
    Stretch stretch = new Stretch(0, 2);
    byte[] part = run(plan, stretch);
    for (int bytes = 0; bytes < part.length; bytes++) {
      byte[] cut = Arrays.copyOf(part, bytes);
      assertThat(PartFile.isWhole(new ByteArrayInputStream(cut), RUN, stretch)).isFalse();
      byte[] altered = part.clone();
      altered[bytes] ^= 1;
      assertThat(PartFile.isWhole(new ByteArrayInputStream(altered), RUN, stretch)).isFalse();
    }
    assertThat(PartFile.isWhole(new ByteArrayInputStream(part), "other", stretch)).isFalse();
    assertThat(PartFile.isWhole(new ByteArrayInputStream(part), RUN, new Stretch(0, 3))).isFalse();
  }

  @Test
  void rowsOfAnotherPlanAreRefused() throws IOException {
    Plan plan = plan(FIXED);
    byte[] part = run(plan, new Stretch(1, 3));
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> read(plan, part, new Course(plan), new ArrayList<>(), new ArrayList<>()))
        .withMessage("part, line 2 is not of this run; accepted: a part as a task wrote it");
    String other =
        new String(part, StandardCharsets.UTF_8).replaceFirst("unit,1,0\n.", "unit,1,0\n~");
    Course second = new Course(plan, new Stretch(1, 3));
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(
            () ->
                read(
                    plan,
                    other.getBytes(StandardCharsets.UTF_8),
                    second,
                    new ArrayList<>(),
                    new ArrayList<>()))
        .withMessageStartingWith("part, line ");
  }
}
