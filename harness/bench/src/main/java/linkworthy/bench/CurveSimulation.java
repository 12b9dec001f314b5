package linkworthy.bench;

import java.util.ArrayList;
import java.util.List;
import linkworthy.bench.SyntheticRows.Shape;
import linkworthy.decision.BjontegaardDelta;
import linkworthy.decision.CurveComparison;
import linkworthy.decision.Interpolation;
import linkworthy.decision.Measurements;
import linkworthy.decision.RateCurve;
import linkworthy.statistics.BcaInterval;
import linkworthy.statistics.Cells;
import linkworthy.trial.Trial;

/**
 * How often the 95 % intervals of Bjontegaard deltas hold the delta between the curves through the
 * means of all pictures that there are.
 */
final class CurveSimulation {
  private static final String TABLE = "Bjontegaard deltas, intervals over pictures";
  private static final double LOWEST = 0.93;
  private static final double HIGHEST = 0.97;
  private static final int FEWER = 10;

  private static final double OF_PICTURES = 2;
  private static final double OF_CODECS = 0.5;
  private static final double OF_RATES = 0.15;
  private static final double[] RATES = {0.5, 1, 2, 4};
  private static final double[] PSNRS_DB = {27, 30, 33.2, 36};
  private static final double GAIN_DB = 0.7;
  private static final double SAVING = 0.9;

  private final int repetitions;
  private final SyntheticRows rows;

  /**
   * @param repetitions of figures that are cheap; a tenth of them is made here
   */
  CurveSimulation(int repetitions, long seed) {
    this.repetitions = Math.max(1, repetitions / FEWER);
    this.rows = new SyntheticRows(seed);
  }

  List<Claim> claims() {
    List<Claim> claims = new ArrayList<>();
    for (int pictures : new int[] {20, 50}) {
      for (Shape shape : List.of(Shape.GAUSSIAN, Shape.VERY_SKEWED)) {
        claim(shape, pictures, claims);
      }
    }
    return claims;
  }

  private void claim(Shape shape, int pictures, List<Claim> claims) {
    BjontegaardDelta truth = BjontegaardDelta.of(curve(false), curve(true), Interpolation.PCHIP);
    int psnr = 0;
    int rate = 0;
    for (int i = 0; i < repetitions; i++) {
      CurveComparison found = compared(shape, pictures, i);
      psnr += holds(found.psnrInterval(), truth.psnrDb());
      rate += holds(found.rateInterval(), truth.ratePercent());
    }
    String row = shape + ", pictures " + pictures;
    claims.add(new Claim(TABLE, row, "PSNR", psnr, repetitions, LOWEST, HIGHEST, ""));
    claims.add(new Claim(TABLE, row, "rate", rate, repetitions, LOWEST, HIGHEST, ""));
  }

  private static int holds(BcaInterval interval, double truth) {
    return interval.lower() <= truth && truth <= interval.upper() ? 1 : 0;
  }

  private static RateCurve curve(boolean better) {
    List<RateCurve.Point> points = new ArrayList<>();
    for (int i = 0; i < RATES.length; i++) {
      points.add(new RateCurve.Point(rate(i, better), psnrDb(i, better)));
    }
    return new RateCurve(points);
  }

  private static double rate(int place, boolean better) {
    return RATES[place] * (better ? SAVING : 1);
  }

  private static double psnrDb(int place, boolean better) {
    return PSNRS_DB[place] + (better ? GAIN_DB : 0);
  }

  private CurveComparison compared(Shape shape, int pictures, long seed) {
    List<Trial> trials = new ArrayList<>();
    Measurements measured = Measurements.ofPsnrAndBits();
    for (int p = 0; p < pictures; p++) {
      double level = OF_PICTURES * rows.draw(shape);
      double size = OF_RATES * rows.draw(shape);
      for (boolean better : new boolean[] {false, true}) {
        double own = OF_CODECS * rows.draw(shape);
        double ownSize = OF_RATES / 2 * rows.draw(shape);
        for (int i = 0; i < RATES.length; i++) {
          trials.add(
              SyntheticRows.rate(
                  better ? "dct" : "pca",
                  4 << i,
                  p,
                  psnrDb(i, better) + level + own,
                  rate(i, better) * (1 + size + ownSize)));
        }
      }
    }
    trials.forEach(measured::add);
    return CurveComparison.of(Cells.of(trials), measured, seed).get(0);
  }
}
