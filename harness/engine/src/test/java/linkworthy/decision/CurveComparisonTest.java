package linkworthy.decision;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.within;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Map;
import linkworthy.statistics.BcaInterval;
import linkworthy.statistics.Cell;
import linkworthy.statistics.Standing;
import org.junit.jupiter.api.Test;

class CurveComparisonTest {
  private static final Measurements NOTHING = new Measurements();

  private static Cell cell(
      String transform,
      String step,
      int keep,
      double severity,
      double bits,
      double psnr,
      Standing standing) {
    return cell(transform, step, keep, "", severity, bits, psnr, standing);
  }

  private static Cell cell(
      String transform,
      String step,
      int keep,
      String protection,
      double severity,
      double bits,
      double psnr,
      Standing standing) {
    String label = (transform + " rows K" + keep + " step" + step + " " + protection).strip();
    return new Cell(
        "gaussian",
        "samples",
        "snr-db",
        severity,
        40,
        severity,
        label,
        transform,
        "rows",
        keep,
        step,
        2,
        4,
        psnr,
        0.1,
        0.5,
        psnr,
        psnr,
        Double.NaN,
        bits,
        0,
        40,
        0,
        Double.NaN,
        standing,
        0,
        Map.of());
  }

  /** The curves of {@link BjontegaardDeltaTest}; rates in any unit give the same deltas. */
  private static List<Cell> twoFamilies() {
    List<Cell> cells = new ArrayList<>();
    double[][] a = {{2, 27}, {4, 30}, {8, 33.2}, {16, 36}};
    double[][] b = {{1.8, 27.4}, {3.5, 30.6}, {7.2, 33.9}, {15, 36.5}};
    for (int i = 0; i < a.length; i++) {
      cells.add(cell("pca", "8.0", 4 << i, 20, a[i][0], a[i][1], Standing.BELOW));
      cells.add(cell("dct", "8.0", 4 << i, 20, b[i][0], b[i][1], Standing.BELOW));
    }
    cells.add(cell("mean", "16.0", -1, 20, 3, 30, Standing.BELOW));
    return cells;
  }

  @Test
  void familiesAreComparedWithTheFirst() {
    List<CurveComparison> found = CurveComparison.of(twoFamilies(), NOTHING, 7);
    assertThat(found).hasSize(1);
    assertThat(found.get(0).reference()).isEqualTo("pca rows step8");
    assertThat(found.get(0).family()).isEqualTo("dct rows step8");
    assertThat(found.get(0).pchip().orElseThrow().psnrDb()).isCloseTo(1.095878951, within(1e-7));
    assertThat(found.get(0).cubic().orElseThrow().psnrDb()).isCloseTo(1.099030975, within(1e-7));
    assertThat(found.get(0).refusal()).isEmpty();
    assertThat(found.get(0).psnrInterval()).isEqualTo(BcaInterval.NONE);
  }

  /**
   * Two families of equal rates whose PSNR differs by a constant of each picture: their delta is
   * the mean of these constants whichever pictures are drawn, so its interval is that of a mean.
   */
  @Test
  void intervalsAreOverPictures() {
    double[] gaps = new double[24];
    Arrays.setAll(gaps, i -> 0.5 * Math.sqrt(i + 1.0) + (i == 3 ? 2 : 0));
    double mean = Arrays.stream(gaps).average().orElseThrow();
    CurveComparison found = shifted(gaps, mean, gaps.length);
    BcaInterval ofMean =
        BcaInterval.of(
            gaps.length,
            cases -> Arrays.stream(cases).mapToDouble(i -> gaps[i]).average().orElseThrow(),
            0.95,
            7);
    assertThat(found.pchip().orElseThrow().psnrDb()).isCloseTo(mean, within(1e-12));
    assertThat(found.psnrInterval().lower()).isCloseTo(ofMean.lower(), within(1e-9));
    assertThat(found.psnrInterval().upper()).isCloseTo(ofMean.upper(), within(1e-9));
    assertThat(found.rateInterval().upper()).isBetween(-100.0, 0.0);
    assertThat(found.rateInterval().lower()).isLessThan(found.pchip().get().ratePercent());
  }

  @Test
  void codecsOnOtherPicturesOrTooFewHaveNoIntervals() {
    double[] gaps = new double[24];
    Arrays.setAll(gaps, i -> 1 + 0.1 * i);
    assertThat(shifted(gaps, 2.15, 23).psnrInterval()).isEqualTo(BcaInterval.NONE);
    assertThat(shifted(Arrays.copyOf(gaps, 19), 1.9, 19).psnrInterval())
        .isEqualTo(BcaInterval.NONE);
  }

  /**
   * @param pictures number of pictures that the last codec was measured on
   */
  private static CurveComparison shifted(double[] gaps, double mean, int pictures) {
    List<Cell> cells = new ArrayList<>();
    Measurements measured = Measurements.ofPsnrAndBits();
    for (int i = 0; i < 4; i++) {
      for (String transform : List.of("pca", "dct")) {
        double gap = transform.equals("dct") ? mean : 0;
        Cell cell = cell(transform, "8.0", 4 << i, 20, 1 << i, 27 + 3 * i + gap, Standing.BELOW);
        cells.add(cell);
        int seen = i == 3 && gap > 0 ? pictures : gaps.length;
        for (int picture = 0; picture < seen; picture++) {
          double psnr = 27 + 3 * i + (gap > 0 ? gaps[picture] : 0);
          measured.add(Trials.of(cell.codec(), 20, "p" + picture, 0, psnr, 1 << i));
        }
      }
    }
    return CurveComparison.of(cells, measured, 7).get(0);
  }

  @Test
  void stepsMakeAFamilyToo() {
    List<Cell> cells = twoFamilies();
    for (int i = 0; i < 3; i++) {
      String step = Integer.toString(4 << i) + ".0";
      cells.add(cell("wht", step, 8, 20, 12 - i, 34 - i, Standing.BELOW));
    }
    List<CurveComparison> found = CurveComparison.of(cells, NOTHING, 7);
    assertThat(found.stream().map(CurveComparison::family))
        .containsExactly("dct rows step8", "wht rows K8");
    assertThat(found.get(1).cubic()).isEmpty();
    assertThat(found.get(1).pchip()).isPresent();
  }

  /** Bits that protection adds are no point of the curve without it. */
  @Test
  void anotherProtectionIsAnotherFamily() {
    List<Cell> cells = twoFamilies();
    for (String protection : List.of("repeat2", "rs12-8")) {
      for (int i = 0; i < 3; i++) {
        int bits = 4 << i;
        cells.add(cell("dct", "8.0", bits, protection, 20, bits, 27 + 2 * i, Standing.BELOW));
      }
    }
    cells.add(cell("dct", "8.0", 4, "retry3", 20, 3, 30, Standing.BELOW));
    assertThat(CurveComparison.of(cells, NOTHING, 7).stream().map(CurveComparison::family))
        .containsExactly("dct rows step8", "dct rows step8 repeat2", "dct rows step8 rs12-8");
  }

  @Test
  void aCurveThatFallsIsRefusedWithTheReason() {
    List<Cell> cells = twoFamilies();
    cells.add(cell("dct", "8.0", 64, 20, 30, 30, Standing.BELOW));
    CurveComparison found = CurveComparison.of(cells, NOTHING, 7).get(0);
    assertThat(found.pchip()).isEmpty();
    assertThat(found.refusal()).isEqualTo("dct rows step8: PSNR does not increase with rate");
  }

  @Test
  void oneFamilyIsComparedWithNothing() {
    assertThat(CurveComparison.of(twoFamilies().subList(0, 1), NOTHING, 7)).isEmpty();
    assertThat(CurveComparison.of(List.of(), NOTHING, 7)).isEmpty();
  }

  /** Only codecs that are best somewhere count. */
  @Test
  void leadersThatChangeOrderAreFound() {
    List<Cell> cells = new ArrayList<>();
    Measurements measured = new Measurements();
    for (double snr : new double[] {20, 10}) {
      double[] psnrs = snr == 20 ? new double[] {34, 32, 31} : new double[] {25, 27, 26};
      String[] transforms = {"pca", "dct", "wht"};
      for (int i = 0; i < psnrs.length; i++) {
        boolean best = i == (snr == 20 ? 0 : 1);
        Cell cell =
            cell(
                transforms[i],
                "8.0",
                4,
                snr,
                1,
                psnrs[i],
                best ? Standing.BEST : Standing.NOT_DISTINGUISHABLE);
        cells.add(cell);
        for (int picture = 0; picture < 3; picture++) {
          measured.add(
              Trials.of(cell.codec(), snr, "p" + picture, 0, psnrs[i] + 0.1 * picture * i, 1));
        }
      }
    }
    List<OrderChange> changes = OrderChange.of(cells, measured);
    assertThat(changes).hasSize(1);
    assertThat(changes.get(0).impairment()).isEqualTo("gaussian");
    Crossover crossover = changes.get(0).crossover();
    assertThat(crossover.below()).isEqualTo("dct rows K4 step8.0");
    assertThat(crossover.above()).isEqualTo("pca rows K4 step8.0");
    assertThat(crossover.at()).isBetween(15.0, 15.3);
  }
}
