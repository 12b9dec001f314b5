package linkworthy.decision;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;
import static org.assertj.core.api.Assertions.within;

import java.util.Set;
import linkworthy.statistics.MeanDifference;
import linkworthy.statistics.Moments;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

class DriftTest {
  private static final Set<String> BOTH = Set.of("a", "b");

  private static Drift drift(Rows old, Rows now, Set<String> unchanged, boolean sameNoise) {
    return Drift.between(old.run(), now.run(), unchanged, key -> sameNoise, 0.1);
  }

  private static CellDrift only(Drift drift) {
    assertThat(drift.cells()).hasSize(1);
    return drift.cells().get(0);
  }

  /** By hand: the pictures' mean differences are -0.9 and -1.1. */
  @Test
  void onTheSameNoisePicturesAreTheSample() {
    Rows old = new Rows().add(Rows.CODEC, "a", 30, 31).add(Rows.CODEC, "b", 20, 24);
    Rows now = new Rows().add(Rows.CODEC, "a", 29, 30.2).add(Rows.CODEC, "b", 18.8, 23);
    CellDrift cell = only(drift(old, now, BOTH, true));
    assertThat(cell.test()).isEqualTo(CellDrift.Test.SAME_NOISE);
    assertThat(cell.oldMeanDb()).isEqualTo(26.25);
    assertThat(cell.newMeanDb()).isCloseTo(25.25, within(1e-12));
    assertThat(cell.difference().estimate()).isCloseTo(-1, within(1e-12));
    assertThat(cell.difference().p())
        .isCloseTo(MeanDifference.paired(Moments.of(-0.9, -1.1)).p(), within(1e-10));
    assertThat(cell.verdict()).isEqualTo(Movement.UNDECIDED);
  }

  @Test
  void whatIsPairedDependsOnWhatIsTheSame() {
    Rows old = new Rows().add(Rows.CODEC, "a", 30, 31).add(Rows.CODEC, "b", 20, 24);
    Rows now = new Rows().add(Rows.CODEC, "a", 31, 30).add(Rows.CODEC, "b", 20, 24.5);
    CellDrift pictures = only(drift(old, now, BOTH, false));
    assertThat(pictures.test()).isEqualTo(CellDrift.Test.SAME_PICTURES);
    assertThat(pictures.difference()).isEqualTo(MeanDifference.paired(Moments.of(0, 0.25)));
    CellDrift others = only(drift(old, now, Set.of("a"), true));
    assertThat(others.test()).isEqualTo(CellDrift.Test.PICTURES);
    assertThat(others.difference())
        .isEqualTo(MeanDifference.welch(Moments.of(30.5, 22.25), Moments.of(30.5, 22)));
  }

  @Test
  void ofOnePictureReplicatesAreTheSample() {
    Rows old = new Rows().add(Rows.CODEC, "a", 30, 31, 32);
    Rows now = new Rows().add(Rows.CODEC, "a", 30, 31.5);
    CellDrift paired = only(drift(old, now, BOTH, true));
    assertThat(paired.test()).isEqualTo(CellDrift.Test.SAME_NOISE_OF_ONE_PICTURE);
    assertThat(paired.difference()).isEqualTo(MeanDifference.paired(Moments.of(0, 0.5)));
    CellDrift welch = only(drift(old, now, BOTH, false));
    assertThat(welch.test()).isEqualTo(CellDrift.Test.REPLICATES);
    assertThat(welch.difference())
        .isEqualTo(MeanDifference.welch(Moments.of(30, 31.5), Moments.of(30, 31, 32)));
  }

  /** Three codecs: one falls by 1 dB, one by 0.01 dB, one is as it was. */
  @Test
  void verdicts() {
    Rows old = new Rows();
    Rows now = new Rows();
    for (int i = 0; i < 6; i++) {
      String picture = "p" + i;
      double scatter = 0.001 * (i % 3);
      old.add("worse", picture, 30, 31).add("near", picture, 30, 31).add("equal", picture, 30, 31);
      now.add("worse", picture, 29 + scatter, 30)
          .add("near", picture, 29.99 + scatter, 30.99)
          .add("equal", picture, 30, 31);
    }
    Drift drift = drift(old, now, Set.of("p0", "p1", "p2", "p3", "p4", "p5"), true);
    assertThat(drift.cells().stream().map(CellDrift::verdict))
        .containsExactly(Movement.MOVED, Movement.SAME, Movement.SAME);
    assertThat(drift.cells().stream().map(CellDrift::isWorse)).containsExactly(true, false, false);
    assertThat(drift.cells().stream().map(CellDrift::identical))
        .containsExactly(false, false, true);
    assertThat(drift.cells().get(0).pAdjusted())
        .isCloseTo(3 * drift.cells().get(0).difference().p(), within(1e-12));
    assertThat(drift.worse()).isOne();
    assertThat(drift.count(Movement.SAME)).isEqualTo(2);
    Drift back = drift(now, old, Set.of("p0", "p1", "p2", "p3", "p4", "p5"), true);
    assertThat(back.count(Movement.MOVED)).isOne();
    assertThat(back.worse()).isZero();
  }

  /** Eight cells whose p values alone are about 0.03: none remains after Holm's adjustment. */
  @Test
  void manyCellsAreNotManyChances() {
    Rows old = new Rows();
    Rows now = new Rows();
    for (int cell = 0; cell < 8; cell++) {
      for (int i = 0; i < 4; i++) {
        old.add("codec " + cell, "p" + i, 30);
        now.add("codec " + cell, "p" + i, 31 + 0.4 * (i - 1.5));
      }
    }
    Drift drift = drift(old, now, Set.of("p0", "p1", "p2", "p3"), true);
    assertThat(drift.cells()).allMatch(cell -> cell.difference().p() < 0.05);
    assertThat(drift.count(Movement.UNDECIDED)).isEqualTo(8);
  }

  @Test
  void aLosslessCodecThatIsSoNoLongerHasMoved() {
    Rows old = new Rows().add(Rows.CODEC, "a", Double.POSITIVE_INFINITY).add(Rows.CODEC, "b", 40);
    Rows now = new Rows().add(Rows.CODEC, "a", 60).add(Rows.CODEC, "b", 40);
    CellDrift worse = only(drift(old, now, BOTH, true));
    assertThat(worse.verdict()).isEqualTo(Movement.MOVED);
    assertThat(worse.isWorse()).isTrue();
    CellDrift better = only(drift(now, old, BOTH, true));
    assertThat(better.verdict()).isEqualTo(Movement.MOVED);
    assertThat(better.isWorse()).isFalse();
    assertThat(only(drift(old, now, BOTH, false)).verdict()).isEqualTo(Movement.UNDECIDED);
    CellDrift lossless = only(drift(old, old, BOTH, false));
    assertThat(lossless.verdict()).isEqualTo(Movement.SAME);
    assertThat(lossless.identical()).isTrue();
    assertThat(lossless.difference().estimate()).isZero();
  }

  /** 0.1 % of 2 bits per pixel is 0.002. */
  @Test
  void bitsAreComparedToo() {
    Rows old = new Rows().add(Rows.trial(Rows.CODEC, "a", 0, 30, 2));
    Rows near = new Rows().add(Rows.trial(Rows.CODEC, "a", 0, 30, 2.0019));
    Rows far = new Rows().add(Rows.trial(Rows.CODEC, "a", 0, 30, 1.9979));
    assertThat(only(drift(old, near, BOTH, true)).bitsMoved()).isFalse();
    CellDrift moved = only(drift(old, far, BOTH, true));
    assertThat(moved.bitsMoved()).isTrue();
    assertThat(moved.bitsChange()).isCloseTo(-0.00105, within(1e-12));
    assertThat(moved.identical()).isFalse();
    assertThat(moved.isOfNote()).isTrue();
  }

  @Test
  void bitsOutOfNothing() {
    Rows none = new Rows().add(Rows.trial(Rows.CODEC, "a", 0, 30, 0));
    Rows some = new Rows().add(Rows.trial(Rows.CODEC, "a", 0, 30, 1));
    assertThat(only(drift(none, none, BOTH, true)).bitsMoved()).isFalse();
    assertThat(only(drift(none, some, BOTH, true)).bitsMoved()).isTrue();
  }

  @Test
  void cellsOfOneRunOnlyAreListed() {
    Rows old = new Rows().add("left", "a", 30).add("both", "a", 30);
    Rows now = new Rows().add("both", "a", 30).add("right", "a", 30);
    Drift drift = drift(old, now, BOTH, true);
    assertThat(only(drift).key()).isEqualTo(Rows.key("both"));
    assertThat(drift.onlyOld()).containsExactly(Rows.key("left"));
    assertThat(drift.onlyNew()).containsExactly(Rows.key("right"));
  }

  @Test
  void aReplicateStandsOnce() {
    Rows twice = new Rows().add(Rows.CODEC, "a", 30).add(Rows.CODEC, "a", 31);
    assertThatIllegalArgumentException()
        .isThrownBy(twice::run)
        .withMessageContaining("replicate 0");
  }

  @ParameterizedTest
  @ValueSource(doubles = {-Double.MIN_VALUE, 100.00000000000001, Double.NaN})
  void refusesWhatIsNoTolerance(double toleranceDb) {
    RunFigures run = new Rows().add(Rows.CODEC, "a", 30).run();
    assertThatIllegalArgumentException()
        .isThrownBy(() -> Drift.between(run, run, BOTH, key -> true, toleranceDb))
        .withMessageContaining("tolerance (dB) is " + toleranceDb);
  }
}
