package linkworthy.noise.fit;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import linkworthy.noise.MarkovLoss;
import org.apache.commons.math3.exception.TooManyEvaluationsException;
import org.apache.commons.math3.optim.InitialGuess;
import org.apache.commons.math3.optim.MaxEval;
import org.apache.commons.math3.optim.PointValuePair;
import org.apache.commons.math3.optim.SimpleValueChecker;
import org.apache.commons.math3.optim.nonlinear.scalar.GoalType;
import org.apache.commons.math3.optim.nonlinear.scalar.ObjectiveFunction;
import org.apache.commons.math3.optim.nonlinear.scalar.noderiv.NelderMeadSimplex;
import org.apache.commons.math3.optim.nonlinear.scalar.noderiv.SimplexOptimizer;

/**
 * Gilbert's chain with k = 1 and h free (Gilbert 1960, "Capacity of a burst-noise channel"), whose
 * states are hidden: maximum likelihood by the forward algorithm and a Nelder-Mead search over the
 * logits of p, r and h, from Gilbert's moments and from fixed starts around the simple chain; the
 * best end counts. Standard errors come from the observed information, by second differences of the
 * log-likelihood.
 */
final class GilbertFit {
  private static final int MAX_EVALUATIONS = 3000;
  private static final double NEAREST_TO_LIMIT = 1e-9;

  /** h, and the factors by which p and r of the simple chain are multiplied. */
  private static final double[][] STARTS = {
    {0.02, 1, 0.98}, {0.2, 1, 0.8}, {0.5, 0.8, 0.5}, {0.8, 0.5, 0.2}
  };

  private GilbertFit() {}

  /**
   * Gilbert's inversion of three moments of the fates, a = P(1), b = P(1|1), c = P(111)/(P(111) +
   * P(101)), with 1 for lost: 1-r = (a c - b^2) / (2 a c - b (a + c)), h = 1 - b/(1-r), p = a r /
   * (1-h-a); nothing where that is no chain.
   */
  static Optional<MarkovLoss> ofMoments(double a, double b, double c) {
    double stay = (a * c - b * b) / (2 * a * c - b * (a + c));
    double h = 1 - b / stay;
    double p = a * (1 - stay) / (1 - h - a);
    boolean chain = stay > 0 && stay < 1 && h >= 0 && h < 1 && p > 0 && p < 1;
    return chain ? Optional.of(new MarkovLoss(p, 1 - stay, 1, h)) : Optional.empty();
  }

  /** The moments' chain of a trace. */
  static Optional<MarkovLoss> ofMoments(LossTrace trace) {
    int pairs = 0;
    int ends = 0;
    int triples = 0;
    int first = 0;
    for (int i = 0; i < trace.packets(); i++) {
      boolean lost = trace.lost(i);
      boolean next = i + 1 < trace.packets() && trace.lost(i + 1);
      boolean second = i + 2 < trace.packets() && trace.lost(i + 2);
      first += lost && i + 1 < trace.packets() ? 1 : 0;
      pairs += lost && next ? 1 : 0;
      triples += lost && next && second ? 1 : 0;
      ends += lost && second ? 1 : 0;
    }
    return ofMoments(
        trace.lossRatio(),
        (double) pairs / first,
        ends == 0 ? Double.NaN : (double) triples / ends);
  }

  /** The fit; at least as likely as the simple chain, which it contains. */
  static ChainEstimate of(LossTrace trace, Gaps gaps, MarkovLoss simple) {
    MarkovLoss best = simple;
    double highest = gaps.logLikelihood(simple);
    for (MarkovLoss start : starts(trace, simple)) {
      MarkovLoss end = climb(gaps, climb(gaps, start));
      double reached = gaps.logLikelihood(end);
      if (reached > highest) {
        highest = reached;
        best = end;
      }
    }
    double[] errors = standardErrors(gaps, best);
    return new ChainEstimate(
        ChainEstimate.Form.THREE_PARAMETER,
        best,
        highest,
        errors[0],
        errors[1],
        errors[2],
        Math.sqrt(best.varianceOfLosses(trace.packets())) / trace.packets());
  }

  private static List<MarkovLoss> starts(LossTrace trace, MarkovLoss simple) {
    List<MarkovLoss> starts = new ArrayList<>();
    ofMoments(trace).ifPresent(starts::add);
    for (double[] start : STARTS) {
      starts.add(new MarkovLoss(simple.p() * start[1], simple.r() * start[2], 1, start[0]));
    }
    return starts;
  }

  private static MarkovLoss climb(Gaps gaps, MarkovLoss start) {
    SimplexOptimizer optimizer = new SimplexOptimizer(new SimpleValueChecker(1e-15, 1e-9));
    try {
      PointValuePair end =
          optimizer.optimize(
              new MaxEval(MAX_EVALUATIONS),
              new ObjectiveFunction(logits -> gaps.logLikelihood(chain(logits))),
              GoalType.MAXIMIZE,
              new InitialGuess(new double[] {logit(start.p()), logit(start.r()), logit(start.h())}),
              new NelderMeadSimplex(3, 0.5));
      return chain(end.getPointRef());
    } catch (TooManyEvaluationsException e) {
      return start;
    }
  }

  private static double logit(double probability) {
    double inside = Math.max(NEAREST_TO_LIMIT, Math.min(1 - NEAREST_TO_LIMIT, probability));
    return StrictMath.log(inside / (1 - inside));
  }

  private static MarkovLoss chain(double[] logits) {
    return new MarkovLoss(
        probability(logits[0]), probability(logits[1]), 1, probability(logits[2]));
  }

  private static double probability(double logit) {
    double probability = 1 / (1 + StrictMath.exp(-logit));
    return Math.max(NEAREST_TO_LIMIT, Math.min(1 - NEAREST_TO_LIMIT, probability));
  }

  /** Of p, r and h; NaN where the likelihood has no peak inside the range. */
  private static double[] standardErrors(Gaps gaps, MarkovLoss at) {
    double[] x = {at.p(), at.r(), at.h()};
    double[] step = new double[3];
    for (int i = 0; i < 3; i++) {
      step[i] = 1e-3 * Math.min(x[i], 1 - x[i]);
      if (step[i] < 1e-7) {
        return new double[] {Double.NaN, Double.NaN, Double.NaN};
      }
    }
    double[][] information = new double[3][3];
    for (int i = 0; i < 3; i++) {
      for (int j = 0; j <= i; j++) {
        information[i][j] = -secondDifference(gaps, x, step, i, j);
        information[j][i] = information[i][j];
      }
    }
    return rootsOfInverseDiagonal(information);
  }

  private static double secondDifference(Gaps gaps, double[] x, double[] step, int i, int j) {
    double sum = 0;
    for (int a = -1; a <= 1; a += 2) {
      for (int b = -1; b <= 1; b += 2) {
        double[] moved = x.clone();
        moved[i] += a * step[i];
        moved[j] += b * step[j];
        sum += a * b * gaps.logLikelihood(new MarkovLoss(moved[0], moved[1], 1, moved[2]));
      }
    }
    return sum / (4 * step[i] * step[j]);
  }

  private static double[] rootsOfInverseDiagonal(double[][] m) {
    double[] minors = new double[3];
    double determinant = 0;
    for (int i = 0; i < 3; i++) {
      int j = (i + 1) % 3;
      int k = (i + 2) % 3;
      minors[i] = m[j][j] * m[k][k] - m[j][k] * m[k][j];
      determinant += m[0][i] * (m[1][j] * m[2][k] - m[1][k] * m[2][j]);
    }
    double[] roots = new double[3];
    for (int i = 0; i < 3; i++) {
      double variance = minors[i] / determinant;
      roots[i] = determinant > 0 && variance > 0 ? Math.sqrt(variance) : Double.NaN;
    }
    return roots;
  }
}
