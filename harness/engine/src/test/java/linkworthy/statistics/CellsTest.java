package linkworthy.statistics;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;
import static org.assertj.core.api.Assertions.entry;
import static org.assertj.core.api.Assertions.tuple;
import static org.assertj.core.api.Assertions.within;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.List;
import java.util.Map;
import linkworthy.trial.Trial;
import org.junit.jupiter.api.Test;

/**
 * Expected values recomputed independently in Python: intervals and p values with mpmath 1.2.1 at
 * 30 digits, the rest with NumPy 1.24.2.
 */
class CellsTest {
  private static final double INFINITY = Double.POSITIVE_INFINITY;

  private final List<Trial> trials = new ArrayList<>();

  /** Three pictures with 3, 2 and 4 replicates, three codecs. */
  private void unequalReplicates() {
    psnr("A", "p1", 30.1, 30.5, 29.8);
    psnr("B", "p1", 29.0, 29.3, 28.9);
    psnr("C", "p1", 30.0, 30.9, 29.2);
    psnr("A", "p2", 27.4, 27.9);
    psnr("B", "p2", 26.2, 26.9);
    psnr("C", "p2", 27.6, 27.1);
    psnr("A", "p3", 33.0, 33.2, 32.7, 33.5);
    psnr("B", "p3", 32.1, 32.0, 31.6, 32.4);
    psnr("C", "p3", 31.9, 33.6, 32.8, 33.1);
  }

  @Test
  void everyPictureCountsTheSame() {
    unequalReplicates();
    Cell a = cell("A");
    assertThat(a.pictures()).isEqualTo(3);
    assertThat(a.trials()).isEqualTo(9);
    assertThat(a.psnrMeanDb()).isCloseTo(30.2944444444, within(1e-10));
    assertThat(a.psnrNoiseHalfWidthDb()).isCloseTo(0.357485227576021, within(1e-10));
    assertThat(a.psnrPictureHalfWidthDb()).isCloseTo(6.77814288400582, within(1e-10));
    assertThat(a.psnrOfMeanMseDb()).isCloseTo(29.7421491459, within(1e-10));
    assertThat(a.psnrP05Db()).isCloseTo(27.6, within(1e-10));
    Cell c = cell("C");
    assertThat(c.psnrMeanDb()).isCloseTo(30.0777777778, within(1e-10));
    assertThat(c.psnrNoiseHalfWidthDb()).isCloseTo(0.56821040674252, within(1e-10));
    assertThat(c.psnrPictureHalfWidthDb()).isCloseTo(6.83204780254951, within(1e-10));
    assertThat(c.psnrOfMeanMseDb()).isCloseTo(29.4909931915, within(1e-10));
    assertThat(c.psnrP05Db()).isCloseTo(27.3, within(1e-10));
  }

  /** Unadjusted p: 8.5899e-5 for B, 0.0690507 for C, with 2 degrees of freedom. */
  @Test
  void codecsAreComparedPictureByPicture() {
    unequalReplicates();
    assertThat(cell("A").standing()).isEqualTo(Standing.BEST);
    assertThat(cell("A").behindBestDb()).isZero();
    assertThat(cell("A").behindBestPAdjusted()).isNaN();
    assertThat(cell("B").standing()).isEqualTo(Standing.BELOW);
    assertThat(cell("B").behindBestDb()).isCloseTo(1.0805555556, within(1e-10));
    assertThat(cell("B").behindBestPAdjusted()).isCloseTo(0.00017179803190792321, within(1e-13));
    assertThat(cell("C").standing()).isEqualTo(Standing.NOT_DISTINGUISHABLE);
    assertThat(cell("C").behindBestDb()).isCloseTo(0.2166666667, within(1e-10));
    assertThat(cell("C").behindBestPAdjusted()).isCloseTo(0.06905066374873521, within(1e-12));
  }

  /** Paired over 4 replicates: unadjusted p 0.0043387 for B, 0.8043173 for C. */
  @Test
  void onePictureIsComparedReplicateByReplicate() {
    psnr("A", "p1", 30.1, 30.5, 29.8, 30.4);
    psnr("B", "p1", 29.2, 29.9, 28.7, 29.3);
    psnr("C", "p1", 30.3, 30.0, 30.1, 30.2);
    Cell a = cell("A");
    assertThat(a.psnrNoiseHalfWidthDb()).isCloseTo(0.503188942794204, within(1e-10));
    assertThat(a.psnrPictureHalfWidthDb()).isNaN();
    assertThat(a.psnrOfMeanMseDb()).isCloseTo(30.191303198958398, within(1e-10));
    assertThat(a.psnrP05Db()).isCloseTo(29.845, within(1e-10));
    assertThat(cell("B").behindBestPAdjusted()).isCloseTo(2 * 0.004338710533094845, within(1e-12));
    assertThat(cell("B").standing()).isEqualTo(Standing.BELOW);
    assertThat(cell("C").behindBestDb()).isCloseTo(0.05, within(1e-10));
    assertThat(cell("C").behindBestPAdjusted()).isCloseTo(0.80431730478738, within(1e-12));
    assertThat(cell("C").standing()).isEqualTo(Standing.NOT_DISTINGUISHABLE);
  }

  @Test
  void oneReplicateHasNoNoiseInterval() {
    psnr("A", "p1", 30.0);
    psnr("A", "p2", 28.0, 28.5);
    psnr("A", "p3", 33.0, 33.5);
    assertThat(cell("A").psnrNoiseHalfWidthDb()).isNaN();
    assertThat(cell("A").psnrPictureHalfWidthDb()).isGreaterThan(0);
  }

  @Test
  void onePictureAndOneReplicateAllowNoComparison() {
    psnr("A", "p1", 30.0);
    psnr("B", "p1", 20.0);
    Cell b = cell("B");
    assertThat(b.standing()).isEqualTo(Standing.UNTESTED);
    assertThat(b.behindBestDb()).isEqualTo(10);
    assertThat(b.behindBestPAdjusted()).isNaN();
    assertThat(b.psnrNoiseHalfWidthDb()).isNaN();
    assertThat(b.psnrPictureHalfWidthDb()).isNaN();
    assertThat(b.psnrP05Db()).isEqualTo(20);
  }

  @Test
  void anIdenticalPictureCountsAsErrorZero() {
    psnr("A", "p1", 40, INFINITY);
    psnr("A", "p2", 20, 24);
    psnr("B", "p1", 39, 41);
    psnr("B", "p2", 19, 23);
    Cell a = cell("A");
    assertThat(a.psnrMeanDb()).isEqualTo(INFINITY);
    assertThat(a.psnrNoiseHalfWidthDb()).isNaN();
    assertThat(a.psnrPictureHalfWidthDb()).isNaN();
    assertThat(a.psnrOfMeanMseDb()).isCloseTo(24.5342428125997, within(1e-10));
    assertThat(a.psnrP05Db()).isCloseTo(20.6, within(1e-10));
    assertThat(a.standing()).isEqualTo(Standing.BEST);
    assertThat(cell("B").standing()).isEqualTo(Standing.UNTESTED);
    assertThat(cell("B").behindBestDb()).isEqualTo(INFINITY);
    assertThat(cell("B").behindBestPAdjusted()).isNaN();
  }

  @Test
  void nothingButIdenticalPictures() {
    psnr("A", "p1", INFINITY);
    psnr("A", "p2", INFINITY);
    psnr("B", "p1", INFINITY);
    psnr("B", "p2", INFINITY);
    assertThat(cell("A").psnrOfMeanMseDb()).isEqualTo(INFINITY);
    assertThat(cell("A").psnrP05Db()).isEqualTo(INFINITY);
    assertThat(cell("A").standing()).isEqualTo(Standing.BEST);
    assertThat(cell("B").behindBestDb()).isZero();
    assertThat(cell("B").behindBestPAdjusted()).isOne();
    assertThat(cell("B").standing()).isEqualTo(Standing.NOT_DISTINGUISHABLE);
  }

  /** Differences 0, 1.5 and 0.9 dB. */
  @Test
  void equalInfinitiesDifferByNothing() {
    psnr("A", "p1", INFINITY);
    psnr("A", "p2", 31.5);
    psnr("A", "p3", 25.9);
    psnr("B", "p1", INFINITY);
    psnr("B", "p2", 30);
    psnr("B", "p3", 25);
    assertThat(cell("B").behindBestPAdjusted()).isCloseTo(0.2078819656186605, within(1e-10));
    assertThat(cell("B").standing()).isEqualTo(Standing.NOT_DISTINGUISHABLE);
  }

  /** Differences 0.5 and 0.8 dB on replicates 1 and 2 of p1. */
  @Test
  void onlyCommonPicturesAndReplicatesArePaired() {
    psnr("A", "p1", 30, 31, 32);
    psnr("A", "p2", 40);
    trials.add(TrialBuilder.of("B").trial("p1", 1, 30.5));
    trials.add(TrialBuilder.of("B").trial("p1", 2, 31.2));
    psnr("B", "p3", 10);
    assertThat(cell("A").standing()).isEqualTo(Standing.BEST);
    assertThat(cell("B").behindBestPAdjusted()).isCloseTo(0.14438463102129448, within(1e-10));
  }

  @Test
  void codecsWithoutCommonTrialsStayUntested() {
    psnr("A", "p1", 30, 31);
    psnr("B", "p2", 20, 21);
    assertThat(cell("B").standing()).isEqualTo(Standing.UNTESTED);
  }

  @Test
  void theFirstOfEqualCodecsIsTheBest() {
    psnr("A", "p1", 30, 31);
    psnr("B", "p1", 30, 31);
    assertThat(cells())
        .extracting(Cell::standing)
        .containsExactly(Standing.BEST, Standing.NOT_DISTINGUISHABLE);
    assertThat(cell("B").behindBestDb()).isZero();
    assertThat(cell("B").behindBestPAdjusted()).isOne();
  }

  @Test
  void columnsThatDifferBetweenTrialsAreEmpty() {
    TrialBuilder share = TrialBuilder.of("pca rows share0.85");
    trials.add(share.described("pca", "rows", 5, "8").trial("p1", 0, 30));
    trials.add(share.described("pca", "rows", 7, "8").trial("p2", 0, 31));
    trials.add(share.described("pca", "rows", 5, "8").trial("p3", 0, 31));
    TrialBuilder fixed = TrialBuilder.of("dct").described("dct", "blocks8", 6, "none");
    trials.add(fixed.trial("p1", 0, 30));
    trials.add(fixed.trial("p2", 0, 31));
    TrialBuilder odd = TrialBuilder.of("odd");
    trials.add(odd.described("dct", "blocks8", 6, "8").trial("p1", 0, 30));
    trials.add(odd.described("pca", "rows", 6, "16").trial("p2", 0, 31));
    assertThat(cells())
        .extracting(Cell::codec, Cell::transform, Cell::over, Cell::keep, Cell::step)
        .containsExactly(
            tuple("pca rows share0.85", "pca", "rows", -1, "8"),
            tuple("dct", "dct", "blocks8", 6, "none"),
            tuple("odd", "", "", 6, ""));
  }

  /** By hand: p1 has two replicates and p2 one, and both count the same. */
  @Test
  void otherFiguresAreMeansOverPicturesToo() {
    TrialBuilder a = TrialBuilder.of("A");
    trials.add(a.measured(0.9, 1.0, 40, 38, false).trial("p1", 0, 30));
    trials.add(a.measured(0.7, 2.0, 40, 36, true).trial("p1", 1, 20));
    trials.add(a.measured(0.5, 4.5, 400, 380, false).trial("p2", 0, 25));
    Cell cell = cell("A");
    assertThat(cell.ssimMean()).isCloseTo(0.65, within(1e-15));
    assertThat(cell.bitsPerPixelMean()).isEqualTo(3);
    assertThat(cell.equivalentNoiseVariance()).isEqualTo(220);
    assertThat(cell.realisedNoiseVarianceMean()).isEqualTo(208.5);
    assertThat(cell.outageRate()).isEqualTo(0.25);
    assertThat(cell.snrDb()).isCloseTo(15, within(1e-12));
    assertThat(cell.trials()).isEqualTo(3);
  }

  @Test
  void ssimThatWasNotMeasuredStaysSo() {
    trials.add(TrialBuilder.of("A").measured(Double.NaN, 1, 40, 40, false).trial("p1", 0, 30));
    assertThat(cell("A").ssimMean()).isNaN();
  }

  /** By hand: as for the figures above; one infinite value makes the mean infinite. */
  @Test
  void furtherMeasuresAreMeansOverPicturesToo() {
    TrialBuilder a = TrialBuilder.of("A");
    trials.add(a.further(Map.of("blur", 1.0, "ratio_db", 3.0)).trial("p1", 0, 30));
    trials.add(a.further(Map.of("blur", 2.0, "ratio_db", 5.0)).trial("p1", 1, 30));
    trials.add(a.further(Map.of("blur", 4.5, "ratio_db", INFINITY)).trial("p2", 0, 30));
    assertThat(cell("A").furtherMeans())
        .containsOnly(entry("blur", 3.0), entry("ratio_db", INFINITY));
  }

  @Test
  void cleanTrialsAreARowOfTheirOwn() {
    trials.add(TrialBuilder.of("A").clean().trial("p1", 0, 50));
    trials.add(TrialBuilder.of("A").trial("p1", 0, 30));
    trials.add(TrialBuilder.of("A").clean().trial("p2", 0, 52));
    trials.add(TrialBuilder.of("A").trial("p2", 0, 32));
    assertThat(cells())
        .extracting(Cell::impairment, Cell::actsOn, Cell::axis, Cell::psnrMeanDb, Cell::pictures)
        .containsExactly(
            tuple("none", "", "", 51.0, 2), tuple("gaussian", "samples", "snr-db", 31.0, 2));
    assertThat(cells().get(0).severity()).isNaN();
    assertThat(cells().get(0).snrDb()).isNaN();
    assertThat(cells().get(0).equivalentNoiseVariance()).isZero();
    assertThat(cells().get(1).severity()).isEqualTo(20);
  }

  /** One comparison in each row, so that nothing is adjusted. */
  @Test
  void rowsAreComparedApart() {
    double[] milder = {1, 1.2, 1.4};
    double[] stronger = {2, 2.1, 2.9};
    for (int p = 0; p < 3; p++) {
      String picture = "p" + p;
      trials.add(TrialBuilder.of("A").trial(picture, 0, 30));
      trials.add(TrialBuilder.of("B").trial(picture, 0, 30 - milder[p]));
      trials.add(TrialBuilder.of("A").severity(10).trial(picture, 0, 20 - stronger[p]));
      trials.add(TrialBuilder.of("B").severity(10).trial(picture, 0, 20));
    }
    assertThat(cells())
        .extracting(Cell::severity, Cell::codec, Cell::standing)
        .containsExactly(
            tuple(20.0, "A", Standing.BEST),
            tuple(20.0, "B", Standing.BELOW),
            tuple(10.0, "A", Standing.BELOW),
            tuple(10.0, "B", Standing.BEST));
    assertThat(cells().get(1).behindBestPAdjusted()).isCloseTo(0.009132611386275451, within(1e-10));
    assertThat(cells().get(2).behindBestPAdjusted()).isCloseTo(0.014573091983778918, within(1e-10));
  }

  @Test
  void moreTrialsMayFollow() {
    unequalReplicates();
    Cells halfway = new Cells();
    for (int i = 0; i < trials.size(); i++) {
      assertThat(halfway.toList()).isEqualTo(Cells.of(trials.subList(0, i)));
      halfway.add(trials.get(i));
    }
    assertThat(halfway.toList()).isEqualTo(cells());
  }

  /** Pictures may come in any order; only sums over pictures may then differ in the last digit. */
  @Test
  void theOrderOfPicturesDoesNotMatter() {
    unequalReplicates();
    List<Trial> reversed = new ArrayList<>(trials);
    reversed.sort(Comparator.comparing(Trial::picture).reversed().thenComparing(Trial::replicate));
    for (Cell cell : Cells.of(reversed)) {
      assertThat(cell.psnrMeanDb()).isCloseTo(cell(cell.codec()).psnrMeanDb(), within(1e-12));
      assertThat(cell.standing()).isEqualTo(cell(cell.codec()).standing());
    }
  }

  @Test
  void aReplicateCountsOnce() {
    psnr("A", "p1", 30, 31);
    for (int replicate : new int[] {0, 1}) {
      Trial again = TrialBuilder.of("A").trial("p1", replicate, 30);
      assertThatIllegalArgumentException()
          .isThrownBy(
              () -> {
                Cells cells = new Cells();
                trials.forEach(cells::add);
                cells.add(again);
              })
          .withMessage(
              "trial p1/A/"
                  + replicate
                  + " is replicate "
                  + replicate
                  + " of its cell and picture, after replicate 1; accepted: each replicate once, in"
                  + " ascending order");
    }
  }

  @Test
  void theTrialsOfAPictureComeTogether() {
    psnr("A", "p1", 30);
    psnr("A", "p2", 30);
    trials.add(TrialBuilder.of("A").trial("p1", 1, 31));
    assertThatIllegalArgumentException()
        .isThrownBy(this::cells)
        .withMessage(
            "trial p1/A/1 is of picture 'p1', after another picture of its cell; accepted: the"
                + " trials of each picture together, each replicate once");
  }

  @Test
  void refusesAPsnrThatIsNone() {
    Trial bad = TrialBuilder.of("A").trial("p1", 0, Double.NaN);
    assertThatIllegalArgumentException()
        .isThrownBy(() -> new Cells().add(bad))
        .withMessage("trial p1/A/0 has PSNR NaN; accepted: a number or infinity");
  }

  @Test
  void noTrialsMakeNoCells() {
    assertThat(Cells.of(List.of())).isEmpty();
  }

  @Test
  void standingsAreWordsOfTheResults() {
    assertThat(Standing.values())
        .extracting(Standing::toString)
        .containsExactly("best", "not-distinguishable", "below", "untested");
  }

  private void psnr(String codec, String picture, double... replicates) {
    for (int replicate = 0; replicate < replicates.length; replicate++) {
      trials.add(TrialBuilder.of(codec).trial(picture, replicate, replicates[replicate]));
    }
  }

  private List<Cell> cells() {
    return Cells.of(trials);
  }

  private Cell cell(String codec) {
    return cells().stream().filter(c -> c.codec().equals(codec)).findFirst().orElseThrow();
  }
}
