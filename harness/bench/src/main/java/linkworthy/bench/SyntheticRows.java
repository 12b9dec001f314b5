package linkworthy.bench;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Map;
import java.util.SplittableRandom;
import linkworthy.trial.Trial;

/** Draws rows of trials whose truth is known; only what statistics look at differs. */
final class SyntheticRows {
  private final SplittableRandom random;

  SyntheticRows(long seed) {
    this.random = new SplittableRandom(seed);
  }

  /** How errors are spread: mean 0 and standard deviation 1. */
  enum Shape {
    /** Normal. */
    GAUSSIAN("Gaussian", 0),
    /** Of a gamma distribution with 16 degrees of shape, mirrored: skewness -0.5. */
    SKEWED("skewness -0.5", 16),
    /** With 4 degrees: skewness -1. */
    VERY_SKEWED("skewness -1", 4);

    private final String words;
    private final int degrees;

    Shape(String words, int degrees) {
      this.words = words;
      this.degrees = degrees;
    }

    private double draw(SplittableRandom random) {
      if (degrees == 0) {
        return random.nextGaussian();
      }
      double product = 1;
      for (int i = 0; i < degrees; i++) {
        product *= 1 - random.nextDouble();
      }
      return (degrees + StrictMath.log(product)) / Math.sqrt(degrees);
    }

    @Override
    public String toString() {
      return words;
    }
  }

  double draw(Shape shape) {
    return shape.draw(random);
  }

  boolean happens(double probability) {
    return random.nextDouble() < probability;
  }

  /** Levels of so many pictures, in dB. */
  double[] levels(int pictures, Shape shape, double mean, double spread) {
    double[] levels = new double[pictures];
    for (int p = 0; p < pictures; p++) {
      levels[p] = mean + spread * draw(shape);
    }
    return levels;
  }

  /** Rows of one cell: each picture's level and errors of this spread, in dB. */
  List<Trial> cell(String codec, double[] levels, int replicates, Shape shape, double spread) {
    double[] spreads = new double[levels.length];
    Arrays.fill(spreads, spread);
    return cell(codec, levels, replicates, shape, spreads);
  }

  /** The same with a spread for each picture. */
  List<Trial> cell(String codec, double[] levels, int replicates, Shape shape, double[] spreads) {
    List<Trial> rows = new ArrayList<>(levels.length * replicates);
    for (int p = 0; p < levels.length; p++) {
      for (int r = 0; r < replicates; r++) {
        rows.add(row(codec, p, r, levels[p] + spreads[p] * draw(shape), false));
      }
    }
    return rows;
  }

  static Trial row(String codec, int picture, int replicate, double psnrDb, boolean outage) {
    return row(codec, "dct", 8, picture, replicate, psnrDb, 1, outage);
  }

  /** A point of a curve: a codec of this transform and number of components. */
  static Trial rate(String transform, int keep, int picture, double psnrDb, double bitsPerPixel) {
    return row(transform + " K" + keep, transform, keep, picture, 0, psnrDb, bitsPerPixel, false);
  }

  private static Trial row(
      String codec,
      String transform,
      int keep,
      int picture,
      int replicate,
      double psnrDb,
      double bitsPerPixel,
      boolean outage) {
    return new Trial(
        codec,
        picture(picture),
        "gaussian",
        "samples",
        "snr-db",
        20,
        40,
        40,
        20,
        codec,
        transform,
        "blocks8",
        keep,
        "8",
        replicate,
        40,
        psnrDb,
        Double.NaN,
        8_000,
        9_000,
        bitsPerPixel,
        4,
        0,
        outage,
        "",
        Map.of());
  }

  static String picture(int number) {
    return "p" + number;
  }
}
