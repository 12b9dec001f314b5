package linkworthy.trial;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import linkworthy.input.BadInput;
import linkworthy.input.YamlNode;
import linkworthy.study.StudyReader;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class LocalRunnerTest {
  private static final String STUDY =
      """
      name: small
      seed: 7
      pictures:
        select: [handwriting, cat]
        longest-side: 96
      impairments:
        - {noise: gaussian, snr-db: [20, 10]}
        - {noise: salt-and-pepper, density: 0.05}
        - {noise: burst-loss, loss-rate: [0.1, 0.4], mean-burst: 2}
        - {noise: burst-loss, acts-on: samples, snr-db: 10, label: raw-hop}
        - {noise: bit-errors, bit-error-rate: [0.0001, 0.002]}
        - {noise: bit-errors, bit-error-rate: 0.001, mean-burst: 20, frame-check: true, label: bursts}
        - {noise: radio-oqpsk-2450, sinr-db: 0}
        - {noise: radio-bpsk-rayleigh, eb-n0-db: 15}
        - {noise: shot-noise, snr-db: 15}
        - {noise: stripes, columns: true, snr-db: 15}
        - {noise: stuck-pixels, density: 0.01}
        - {noise: trace, as-recorded: 1}
      codecs:
        - {transform: pca, over: rows, keep: [2, 8], step: 8}
        - {transform: pca, over: blocks, keep: 6, step: 8}
        - {transform: dct, keep: 6, step: 8}
        - {transform: mean, step: 16}
      replicates: 3
      """;

  private static final String RADIO =
      """
      name: radio
      seed: 7
      pictures: {select: [handwriting], longest-side: 96}
      impairments:
        - {noise: bit-errors, bit-error-rate: [0.0001, 0.002]}
        - {noise: radio-oqpsk-2450, sinr-db: 0}
      codecs:
        - {transform: mean, step: 16}
      replicates: 150
      """;

  private static Plan plan(String study) {
    return Plan.of(StudyReader.read(YamlNode.parse("small.yaml", study), Path.of("")));
  }

  private static List<Trial> run(String study, int threads) {
    List<Trial> all = new ArrayList<>();
    Plan plan = plan(study);
    int units =
        new LocalRunner(plan, threads).run(0, (unit, trials, timings) -> all.addAll(trials));
    assertThat(units).isEqualTo(plan.units());
    assertThat(all).hasSize(Math.toIntExact(plan.trials()));
    return all;
  }

  @ParameterizedTest
  @ValueSource(ints = {2, 5})
  void rowsDoNotDependOnThreads(int threads) {
    assertThat(run(STUDY, threads)).isEqualTo(run(STUDY, 1));
  }

  @Test
  void anySingleUnitCanBeRunAlone() {
    List<Trial> whole = run(STUDY, 2);
    Plan plan = plan(STUDY);
    int codecs = plan.study().codecs().size();
    for (int at : new int[] {0, 7, plan.units() - 1}) {
      List<Trial> tail = new ArrayList<>();
      new LocalRunner(plan(STUDY), 1).run(at, (unit, trials, timings) -> tail.addAll(trials));
      assertThat(tail).isEqualTo(whole.subList(at * codecs, whole.size()));
    }
  }

  /** The same noise meets every codec, whatever other codecs there are. */
  @Test
  void addingACodecChangesNoRowOfTheOthers() {
    List<Trial> before = run(STUDY, 2);
    List<Trial> after =
        run(
            STUDY.replace(
                "  - {transform: mean",
                "  - {transform: dct, over: rows, keep: 3}\n  - {transform: mean"),
            2);
    assertThat(after).hasSizeGreaterThan(before.size());
    assertThat(after.stream().filter(t -> !t.codec().startsWith("dct rows")).toList())
        .isEqualTo(before);
  }

  @Test
  void everyTrialHasItsOwnId() {
    assertThat(run(STUDY, 2)).extracting(Trial::trial).doesNotHaveDuplicates();
  }

  @Test
  void rowsStandInTheOrderOfTheStudy() {
    List<Trial> trials = run(STUDY, 2);
    assertThat(trials.stream().map(Trial::picture).distinct())
        .containsExactly("cat", "handwriting");
    assertThat(trials.stream().map(Trial::impairment).distinct())
        .containsExactly(
            "none",
            "gaussian",
            "salt-and-pepper",
            "burst-loss",
            "raw-hop",
            "bit-errors",
            "bursts",
            "radio-oqpsk-2450",
            "radio-bpsk-rayleigh",
            "shot-noise",
            "stripes",
            "stuck-pixels",
            "trace");
    assertThat(trials.subList(0, 5))
        .extracting(Trial::codec)
        .containsExactly(
            "pca rows K2 step8",
            "pca rows K8 step8",
            "pca blocks8 K6 step8",
            "dct blocks8 K6 step8",
            "mean rows step16");
    assertThat(trials.get(0).replicate()).isZero();
    assertThat(trials.stream().filter(t -> t.impairment().equals("none"))).hasSize(2 * 5);
  }

  /** Noise variances agree with the definitions: SNR = 10 log10(S / s2), and what was drawn. */
  @Test
  void severitiesMeanWhatTheySay() {
    for (Trial trial : run(STUDY, 2)) {
      if (trial.axis().equals("snr-db")) {
        assertThat(trial.snrDb()).isCloseTo(trial.severity(), within(1e-9));
      }
      boolean checked =
          List.of("bursts", "radio-oqpsk-2450", "radio-bpsk-rayleigh").contains(trial.impairment());
      if (trial.impairment().equals("burst-loss")) {
        assertThat(trial.realisedNoiseVariance() * trial.packetsSent())
            .isCloseTo(
                trial.packetsLost() * trial.equivalentNoiseVariance() / trial.severity(),
                within(1e-6 * trial.packetsSent() * trial.equivalentNoiseVariance()));
      } else if (!checked && !trial.impairment().equals("trace")) {
        assertThat(trial.packetsLost()).isZero();
      }
      assertThat(trial.sentBits())
          .isEqualTo(trial.payloadBits() + 8L * (23 + (checked ? 2 : 0)) * trial.packetsSent());
    }
  }

  /**
   * Realised bit errors lie about the rate: within 6 standard errors of all payload bits of a
   * severity, false-alarm rate 2e-9 each; (4^8 - 1)/3 = 21845.
   */
  @ParameterizedTest
  @ValueSource(doubles = {0.0001, 0.002})
  void realisedBitErrorsAreThoseAskedFor(double rate) {
    double flips = 0;
    double bits = 0;
    for (Trial trial : run(RADIO, 2)) {
      if (trial.axis().equals("bit-error-rate") && trial.severity() == rate) {
        assertThat(trial.equivalentNoiseVariance()).isEqualTo(rate * 21845);
        flips += trial.realisedNoiseVariance() / 21845 * trial.payloadBits();
        bits += trial.payloadBits();
      }
    }
    assertThat(bits).isGreaterThan(50_000);
    assertThat(flips).isCloseTo(bits * rate, within(6 * Math.sqrt(bits * rate) + 1));
  }

  /** Frames of (23 + payload + 2) bytes are lost with probability 1 - (1 - b)^(8 bytes). */
  @Test
  void framesAreDroppedAsOftenAsTheirLengthSays() {
    double lost = 0;
    double expected = 0;
    double variance = 0;
    for (Trial trial : run(RADIO, 2)) {
      if (trial.impairment().equals("radio-oqpsk-2450")) {
        double rate = trial.equivalentNoiseVariance() / 21845;
        double bits = (double) trial.sentBits() / trial.packetsSent();
        double p = -StrictMath.expm1(bits * StrictMath.log1p(-rate));
        lost += trial.packetsLost();
        expected += p * trial.packetsSent();
        variance += p * (1 - p) * trial.packetsSent();
      }
    }
    assertThat(lost)
        .as("within 6 standard errors, false-alarm rate 2e-9; unequal lengths cost below 1 %%")
        .isCloseTo(expected, within(6 * Math.sqrt(variance) + 0.01 * expected));
    assertThat(expected).isGreaterThan(200);
  }

  /**
   * What could be done once for a work unit is done once: the encoders' work on one noisy picture
   * is one analysis for each basis and arrangement, one set of symbols and one growing picture for
   * each of their steps, and for each codec one encoding and one look at the picture that arrives
   * whole.
   */
  @Test
  void workIsDoneOncePerUnit() {
    Plan plan = plan(STUDY);
    Subject subject = new Subject(plan.planes(plan.pictures().get(0)), plan.study());
    int analyses = 4;
    int encodings = plan.study().codecs().size();
    for (int index = 0; index < plan.units() / 2; index++) {
      new UnitRunner(plan.study(), subject, plan.unit(index)).run();
    }
    assertThat(subject.memo().computed())
        .as("every unit that loses packets of the clean picture shares the same work")
        .isEqualTo(analyses + analyses + analyses + encodings + encodings);
  }

  /** A picture that arrives whole is looked at once; the row is that of looking again. */
  @Test
  void whatArrivesWholeIsJudgedOnceAndAlike() {
    String rare = STUDY.replace("loss-rate: [0.1, 0.4]", "loss-rate: [0.001]");
    Plan plan = plan(rare);
    Subject shared = new Subject(plan.planes(plan.pictures().get(0)), plan.study());
    int whole = 0;
    for (int index = 0; index < plan.units() / 2; index++) {
      WorkUnit unit = plan.unit(index);
      List<Trial> remembered = new UnitRunner(plan.study(), shared, unit).run().trials();
      Subject fresh = new Subject(plan.planes(plan.pictures().get(0)), plan.study());
      assertThat(remembered).isEqualTo(new UnitRunner(plan.study(), fresh, unit).run().trials());
      whole +=
          (int)
              remembered.stream()
                  .filter(t -> t.actsOn().equals("packets") && t.packetsLost() == 0)
                  .count();
    }
    assertThat(whole).isPositive();
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "keep: [2, 8] | keep: [2, 99] | keeps 99 components",
        "longest-side: 96 | longest-side: 10 | picture 'cat'",
        "[handwriting, cat] | [handwriting, cta] | did you mean 'cat'",
        "density: 0.05 | snr-db: -30 | picture 'cat'"
      })
  void whatDoesNotGoTogetherIsRefusedBeforeAnythingRuns(String from, String to, String complaint) {
    assertThat(STUDY).contains(from);
    assertThatThrownBy(() -> plan(STUDY.replace(from, to)))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining(complaint)
        .hasMessageNotContaining("\n");
  }

  private static final String TRAINED =
      """
      name: trained
      pictures: {select: [cat], train: [canyon, harbour], longest-side: 96}
      impairments:
        - {noise: gaussian, snr-db: 20}
        - {noise: burst-loss, loss-rate: 0.2}
      codecs:
        - {transform: pca, basis: shared, over: blocks, keep: [4, 8]}
        - {transform: dct, keep: 8}
      replicates: 2
      """;

  /** Learning happens once, on whichever thread comes first, and gives the same rows. */
  @ParameterizedTest
  @ValueSource(ints = {2, 5})
  void sharedBasesDoNotDependOnThreads(int threads) {
    assertThat(run(TRAINED, threads)).isEqualTo(run(TRAINED, 1));
  }

  /** The training pictures are a part of the key of the trials that depend on them. */
  @Test
  void otherTrainingPicturesAreOtherTrials() {
    List<Trial> some = run(TRAINED, 2);
    List<Trial> others = run(TRAINED.replace("canyon, ", ""), 2);
    for (int i = 0; i < some.size(); i++) {
      if (some.get(i).transform().equals("pca-shared")) {
        assertThat(others.get(i).trial()).isNotEqualTo(some.get(i).trial());
        assertThat(others.get(i).mse()).isNotEqualTo(some.get(i).mse());
      } else {
        assertThat(others.get(i)).isEqualTo(some.get(i));
      }
    }
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "train: [canyon, harbour] | train: [field] | 'cat' is in pictures.train and tested",
        "train: [canyon, harbour] | train: [canyn] | did you mean 'canyon'",
        "train: [canyon, harbour] | train: [canyon, sunset] | bits per sample; accepted: one depth",
        "over: blocks | over: rows | rows; accepted over rows: "
      })
  void whatCannotBeLearntFromIsRefused(String from, String to, String complaint) {
    assertThat(TRAINED).contains(from);
    assertThatThrownBy(() -> plan(TRAINED.replace(from, to)))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining(complaint)
        .hasMessageNotContaining("\n");
  }

  @Test
  void anInterruptedRunHandsOverWholeUnits() throws InterruptedException {
    Plan plan = plan(STUDY);
    List<Trial> seen = new ArrayList<>();
    int units =
        new LocalRunner(plan, 2)
            .run(
                0,
                (unit, trials, timings) -> {
                  seen.addAll(trials);
                  if (unit.index() == 4) {
                    Thread.currentThread().interrupt();
                  }
                });
    assertThat(Thread.interrupted()).isTrue();
    assertThat(units).isEqualTo(5);
    assertThat(seen).hasSize(5 * plan.study().codecs().size());
  }

  @Test
  void aStoppedRunKeepsWholeUnitsAndLeavesItsThreadUninterrupted() {
    Plan plan = plan(STUDY);
    LocalRunner runner = new LocalRunner(plan, 2);
    List<Trial> seen = new ArrayList<>();
    int units =
        runner.run(
            0,
            (unit, trials, timings) -> {
              seen.addAll(trials);
              if (unit.index() == 4) {
                runner.stop();
              }
            });
    assertThat(Thread.interrupted()).isFalse();
    assertThat(units).isEqualTo(5);
    assertThat(seen).hasSize(5 * plan.study().codecs().size());
  }
}
