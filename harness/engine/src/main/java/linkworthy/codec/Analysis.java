package linkworthy.codec;

import java.util.Arrays;
import linkworthy.corpus.Picture;
import org.jspecify.annotations.Nullable;

/**
 * A picture seen through an arrangement and a basis, before quantising: means, directions and
 * coefficients, each computed when first asked for. Safe for several threads.
 *
 * <p>The means that travel are whole numbers, so coefficients are taken of the picture minus those:
 * {@code Y = U (X - m 1')} with m rounded. Directions are those of the exactly centred picture.
 */
final class Analysis {
  private final double[][] centred;
  private final int[] means;
  private final double[] meanRests;
  private final boolean identity;
  private final Basis.Directions directions;
  private final double[] @Nullable [] coefficients;

  private Analysis(
      double[][] centred,
      int[] means,
      double[] meanRests,
      boolean identity,
      Basis.Directions directions) {
    this.centred = centred;
    this.means = means;
    this.meanRests = meanRests;
    this.identity = identity;
    this.directions = directions;
    this.coefficients = new double[identity ? centred.length : directions.count()][];
  }

  static Analysis of(Picture picture, Arrangement arrangement, Basis basis) {
    double[][] values = arrangement.gather(picture);
    int[] means = new int[values.length];
    double[] rests = new double[values.length];
    for (int i = 0; i < values.length; i++) {
      double mean = Matrices.centre(values[i]);
      means[i] = (int) Math.floor(mean + 0.5);
      rests[i] = mean - means[i];
    }
    return new Analysis(
        values,
        means,
        rests,
        basis.isIdentity(),
        basis.directions(arrangement, PictureShape.of(picture), values));
  }

  /** Mean of each variable, rounded half up; grey levels. */
  int[] means() {
    return means;
  }

  /** Number of variables d. */
  int variables() {
    return centred.length;
  }

  /** Number of observations n. */
  int observations() {
    return centred[0].length;
  }

  /** Components there are: d, or fewer where a sent basis needs fewer to be exact. */
  int components() {
    return coefficients.length;
  }

  /** Direction k, d entries. */
  double[] direction(int k) {
    return directions.row(k);
  }

  /** Coefficients of component k, one for each observation; grey levels. */
  synchronized double[] component(int k) {
    double[] known = coefficients[k];
    if (known == null) {
      known = project(k);
      coefficients[k] = known;
    }
    return known;
  }

  private double[] project(int k) {
    double[] sums = new double[centred[0].length];
    if (identity) {
      for (int j = 0; j < sums.length; j++) {
        sums[j] = centred[k][j] + meanRests[k];
      }
      return sums;
    }
    double[] direction = directions.row(k);
    double shift = 0;
    for (int i = 0; i < direction.length; i++) {
      shift += direction[i] * meanRests[i];
    }
    Arrays.fill(sums, shift);
    Matrices.addCombination(sums, direction, centred);
    return sums;
  }

  /** Variance along direction k (1/n), in grey levels squared. */
  double variance(int k) {
    if (directions.variances().length > 0) {
      return directions.variances()[k];
    }
    double[] values = component(k);
    double sum = 0;
    double squares = 0;
    for (double value : values) {
      sum += value;
      squares += value * value;
    }
    double mean = sum / values.length;
    return Math.max(0, squares / values.length - mean * mean);
  }

  /** Sum of the variances of all variables, in grey levels squared. */
  double totalVariance() {
    double total = 0;
    for (double[] variable : centred) {
      for (double value : variable) {
        total += value * value;
      }
    }
    return total / centred[0].length;
  }

  /**
   * Energy of one observation about the means that travel, less that of its first {@code kept}
   * coefficients; mean over the observations, grey levels squared.
   */
  double energyBeyond(int kept) {
    double energy = totalVariance();
    for (double rest : meanRests) {
      energy += rest * rest;
    }
    for (int k = 0; k < kept; k++) {
      for (double value : component(k)) {
        energy -= value * value / observations();
      }
    }
    return Math.max(0, energy);
  }

  /**
   * The number of components that a rule keeps of this picture; all of them where the rule goes by
   * more than the picture.
   */
  int kept(Keep keep) {
    if (keep instanceof Keep.First first) {
      return Math.min(first.components(), components());
    }
    if (keep instanceof Keep.Share share) {
      double wanted = share.share() * totalVariance() * (1 - 1e-12);
      double reached = 0;
      int k = 0;
      while (k < components() && reached < wanted) {
        reached += variance(k++);
      }
      return k;
    }
    if (keep instanceof Keep.NoiseFloor floor) {
      double threshold = threshold(floor);
      int k = 0;
      while (k < components() && singularValue(k) > threshold) {
        k++;
      }
      return k;
    }
    return components();
  }

  /** Singular values below this are taken for noise; grey levels. */
  private double threshold(Keep.NoiseFloor floor) {
    int d = variables();
    int n = centred[0].length;
    double beta = SingularValueThreshold.shape(d, n);
    if (!floor.isUnknown()) {
      return SingularValueThreshold.lambda(beta) * Math.sqrt(Math.max(d, n)) * floor.deviation();
    }
    int all = Math.min(d, n);
    double median = (singularValue((all - 1) / 2) + singularValue(all / 2)) / 2;
    return SingularValueThreshold.omega(beta) * median;
  }

  /** Singular value k of the centred matrix, where components are principal ones; grey levels. */
  private double singularValue(int k) {
    return k < components() ? Math.sqrt(centred[0].length * variance(k)) : 0;
  }
}
