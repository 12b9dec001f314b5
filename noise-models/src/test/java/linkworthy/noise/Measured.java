package linkworthy.noise;

import java.util.stream.IntStream;
import linkworthy.corpus.Picture;
import org.apache.commons.rng.UniformRandomProvider;

/** A sample's mean and the standard error of that mean, for statistical tests. */
record Measured(double mean, double standardError) {
  static Measured of(double[] values) {
    int n = values.length;
    double sum = 0;
    for (double value : values) {
      sum += value;
    }
    double mean = sum / n;
    double squares = 0;
    for (double value : values) {
      squares += (value - mean) * (value - mean);
    }
    return new Measured(mean, Math.sqrt(squares / (n - 1.0) / n));
  }

  /** How many standard errors the mean lies from what is expected. */
  double errorsFrom(double expected) {
    return (mean - expected) / standardError;
  }

  /** The squared error of each sample, grey levels squared. */
  static double[] squaredErrors(Picture clean, Picture noisy) {
    return IntStream.range(0, clean.size())
        .mapToDouble(i -> noisy.samples()[i] - clean.samples()[i])
        .map(difference -> difference * difference)
        .toArray();
  }

  /** A picture of one grey level. */
  static Picture flat(int width, int height, int bitDepth, int level) {
    return new Picture(
        width,
        height,
        bitDepth,
        IntStream.generate(() -> level).limit((long) width * height).toArray());
  }

  /** A stream for tests; the seed tells them apart. */
  static UniformRandomProvider stream(long seed) {
    return NoiseStreams.open(
        seed, "test", "none", Site.SAMPLES, new Severity(Severity.VARIANCE, 0), 0, "test");
  }
}
