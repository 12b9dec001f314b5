package linkworthy.decision;

import static linkworthy.decision.Interpolation.CUBIC;
import static linkworthy.decision.Interpolation.PCHIP;
import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;
import static org.assertj.core.api.Assertions.within;
import static org.assertj.core.api.Assertions.withinPercentage;

import java.util.ArrayList;
import java.util.List;
import org.junit.jupiter.api.Test;

/**
 * Own curves; expected values recomputed independently in Python with SciPy: {@code
 * PchipInterpolator} and {@code numpy.polyfit} of order 3, integrated over the common range.
 */
class BjontegaardDeltaTest {
  private static final double[] RATES = {2000, 4000, 8000, 16_000};
  private static final double[] PSNRS = {27.0, 30.0, 33.2, 36.0};
  private static final RateCurve A = curve(RATES, PSNRS);
  private static final RateCurve B =
      curve(new double[] {1800, 3500, 7200, 15_000}, new double[] {27.4, 30.6, 33.9, 36.5});

  private static RateCurve curve(double[] rates, double[] psnrs) {
    List<RateCurve.Point> points = new ArrayList<>();
    for (int i = 0; i < rates.length; i++) {
      points.add(new RateCurve.Point(rates[i], psnrs[i]));
    }
    return new RateCurve(points);
  }

  private static RateCurve moved(double rateFactor, double psnrOffset) {
    return new RateCurve(
        A.points().stream()
            .map(p -> new RateCurve.Point(p.rate() * rateFactor, p.psnrDb() + psnrOffset))
            .toList());
  }

  private static void compare(
      RateCurve reference,
      RateCurve test,
      Interpolation interpolation,
      double psnrDb,
      double ratePercent,
      double tolerance) {
    BjontegaardDelta delta = BjontegaardDelta.of(reference, test, interpolation);
    assertThat(delta.psnrDb()).isCloseTo(psnrDb, within(tolerance));
    assertThat(delta.ratePercent()).isCloseTo(ratePercent, within(tolerance));
    assertThat(delta.rising()).isTrue();
  }

  @Test
  void twoCurves() {
    compare(A, B, CUBIC, 1.099030975, -22.31420955, 1e-7);
    compare(A, B, PCHIP, 1.095878951, -22.39561118, 1e-7);
  }

  @Test
  void theOtherWayRoundIsTheReciprocal() {
    compare(B, A, CUBIC, -1.099030975, 28.72366932, 1e-7);
    compare(B, A, PCHIP, -1.095878951, 28.85869153, 1e-7);
    double there = BjontegaardDelta.of(A, B, PCHIP).ratePercent() / 100;
    double back = BjontegaardDelta.of(B, A, PCHIP).ratePercent() / 100;
    assertThat((1 + there) * (1 + back)).isCloseTo(1, within(1e-12));
  }

  /** A tenth less rate at every point is a tenth less rate, by definition. */
  @Test
  void aTenthLessRate() {
    compare(A, moved(0.9, 0), CUBIC, 0.4592994203, -10, 1e-9);
    compare(A, moved(0.9, 0), PCHIP, 0.4579081088, -10, 1e-9);
  }

  /** One decibel more at every point is one decibel more, by definition. */
  @Test
  void oneDecibelMore() {
    compare(A, moved(1, 1), CUBIC, 1, -20.36541804, 1e-8);
    compare(A, moved(1, 1), PCHIP, 1, -20.46456149, 1e-8);
  }

  @Test
  void aCurveEqualsItself() {
    compare(A, A, CUBIC, 0, 0, 1e-12);
    compare(A, A, PCHIP, 0, 0, 1e-12);
  }

  /** Where losses hold PSNR down, the cubic swings; confirmed with exact rationals. */
  @Test
  void theCubicSwingsOnCurvesThatLossesFlatten() {
    double[] rates = {500, 1000, 2000, 4000};
    RateCurve better = curve(rates, new double[] {25.0, 28.8, 29.1, 29.2});
    RateCurve worse = curve(rates, new double[] {24.0, 28.0, 29.0, 29.3});
    BjontegaardDelta cubic = BjontegaardDelta.of(worse, better, CUBIC);
    BjontegaardDelta pchip = BjontegaardDelta.of(worse, better, PCHIP);
    assertThat(cubic.psnrDb()).isCloseTo(0.45, within(1e-9));
    assertThat(cubic.ratePercent()).isCloseTo(2_788_776.18, withinPercentage(1e-6));
    assertThat(cubic.rising()).isFalse();
    assertThat(pchip.psnrDb()).isCloseTo(0.4513888889, within(1e-9));
    assertThat(pchip.ratePercent()).isCloseTo(-21.09973877, within(1e-7));
    assertThat(pchip.rising()).isTrue();
  }

  @Test
  void noCommonRangeIsRefused() {
    assertThatIllegalArgumentException()
        .isThrownBy(() -> BjontegaardDelta.of(A, moved(1, 20), PCHIP))
        .withMessage("the curves share no range of PSNR; accepted: curves that overlap");
    assertThatIllegalArgumentException()
        .isThrownBy(() -> BjontegaardDelta.of(A, moved(100, 0), PCHIP))
        .withMessageContaining("no range of rate");
  }

  @Test
  void curvesThatDoNotRiseAreRefused() {
    assertThatIllegalArgumentException()
        .isThrownBy(() -> curve(RATES, new double[] {27, 30, 30, 36}))
        .withMessageContaining("PSNR does not increase with rate");
    assertThatIllegalArgumentException()
        .isThrownBy(() -> curve(new double[] {1, 2, 2}, new double[] {27, 30, 31}))
        .withMessageContaining("two points have the same rate");
    assertThatIllegalArgumentException()
        .isThrownBy(() -> curve(new double[] {1, 2}, new double[] {27, 30}))
        .withMessage("a curve of 2 points; accepted: at least 3");
  }

  @Test
  void aCubicTakesFourPoints() {
    RateCurve three = curve(new double[] {2000, 4000, 8000}, new double[] {27, 30, 33});
    assertThatIllegalArgumentException()
        .isThrownBy(() -> BjontegaardDelta.of(A, three, CUBIC))
        .withMessage("a cubic through 3 points; accepted: 4");
    assertThat(BjontegaardDelta.of(A, three, PCHIP).rising()).isTrue();
  }

  @Test
  void pointsMayComeInAnyOrder() {
    assertThat(curve(new double[] {8000, 2000, 16_000, 4000}, new double[] {33.2, 27, 36, 30}))
        .isEqualTo(A);
  }
}
