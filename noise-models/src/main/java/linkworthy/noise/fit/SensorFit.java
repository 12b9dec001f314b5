package linkworthy.noise.fit;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import linkworthy.corpus.Picture;
import linkworthy.input.BadInput;

/**
 * Sensor noise from frames of one scene: variance = gain * mean + offset (Foi, Trimeche, Katkovnik
 * and Egiazarian 2008, see {@link linkworthy.noise.ShotNoise}).
 *
 * <p>Each sample's variance over the frames, for two frames (a-b)^2/2, is averaged over samples of
 * nearly equal mean, 64 classes of equal width between the darkest and the brightest. The line is
 * fitted to the classes by weighted least squares; the weights are the inverse variances 2 v^2 / (n
 * (frames-1)) of a class's mean variance at the fitted v, so they are found in turns. Standard
 * errors are widened by the root of chi-square over its degrees of freedom where that is above 1.
 * Classes with fewer than 100 samples, or with one sample in 1000 black or white, do not count.
 * 1/12 is taken off for rounding (Sheppard's correction).
 *
 * @param frames number of frames
 * @param variance mean noise variance of all classes that count, grey levels squared, without the
 *     rounding
 * @param errorOfVariance its standard error
 * @param line the line, if there are classes enough for one
 * @param drift largest difference between the means of two frames, grey levels
 * @param levels the classes that count, from dark to bright
 */
public record SensorFit(
    int frames,
    double variance,
    double errorOfVariance,
    Optional<Line> line,
    double drift,
    List<Level> levels) {
  public SensorFit {
    levels = List.copyOf(levels);
  }

  /**
   * A class of samples of nearly equal mean.
   *
   * @param samples how many
   * @param mean their mean, grey levels
   * @param variance their mean noise variance without the rounding, grey levels squared; may come
   *     out below 0
   * @param error standard error of the variance for normal noise
   */
  public record Level(long samples, double mean, double variance, double error) {}

  /**
   * A line through the classes.
   *
   * @param gain noise variance for each grey level of the mean, grey levels
   * @param errorOfGain its standard error
   * @param offset noise variance at black without the rounding, grey levels squared; may come out
   *     below 0
   * @param errorOfOffset its standard error
   * @param chiSquare weighted squared deviations of the classes from the line
   * @param degreesOfFreedom classes less 2
   */
  public record Line(
      double gain,
      double errorOfGain,
      double offset,
      double errorOfOffset,
      double chiSquare,
      int degreesOfFreedom) {
    /** Standard deviation of the noise at black, grey levels; 0 where the offset is below 0. */
    public double readNoise() {
      return Math.sqrt(Math.max(0, offset));
    }
  }

  private static final double ROUNDING = 1 / 12.0;
  private static final int CLASSES = 64;
  private static final int LEAST_SAMPLES = 100;
  private static final int LEAST_CLASSES = 4;
  private static final double MOST_CLIPPED = 1e-3;
  private static final int TURNS = 8;

  /** Gains of fewer standard errors than this are taken for 0. */
  private static final double CLEAR = 3;

  /** From this share of the picture's variance on, frames are taken for different scenes. */
  public static final double DIFFERENT_SCENES = 0.25;

  /** Whether the noise clearly grows with the light. */
  public boolean growsWithLight() {
    return line.isPresent() && line.get().gain() > CLEAR * line.get().errorOfGain();
  }

  /** Whether all pictures have one size and depth. */
  public static boolean sameShape(List<Picture> pictures) {
    Picture first = pictures.get(0);
    return pictures.stream()
        .allMatch(
            p ->
                p.width() == first.width()
                    && p.height() == first.height()
                    && p.bitDepth() == first.bitDepth());
  }

  /**
   * Half the mean squared difference of neighbouring frames over the mean variance of the frames:
   * about the noise's share for one scene, about 1 or more for different scenes or flat ones, 0 for
   * equal frames.
   */
  public static double difference(List<Picture> frames) {
    double squares = 0;
    double variance = frames.get(frames.size() - 1).variance();
    for (int i = 1; i < frames.size(); i++) {
      int[] a = frames.get(i - 1).samples();
      int[] b = frames.get(i).samples();
      double sum = 0;
      for (int at = 0; at < a.length; at++) {
        sum += (double) (a[at] - b[at]) * (a[at] - b[at]);
      }
      squares += sum / a.length / 2;
      variance += frames.get(i - 1).variance();
    }
    double mean = variance / frames.size();
    if (squares == 0) {
      return 0;
    }
    return mean == 0 ? 1 : squares / (frames.size() - 1) / mean;
  }

  /**
   * Fits frames of one scene.
   *
   * @throws BadInput if there are fewer than two, they differ in size, are equal, or no class
   *     counts
   */
  public static SensorFit of(List<Picture> frames) {
    if (frames.size() < 2 || !sameShape(frames)) {
      throw new BadInput(
          (frames.size() > 1 ? frames.size() + " frames of different size" : "a single frame")
              + "; accepted: two or more of equal size and depth");
    }
    List<Tally> levels = levels(frames);
    if (levels.isEmpty()) {
      throw new BadInput(
          "no grey level of the frames has enough samples that are neither black nor white;"
              + " accepted: frames of at least "
              + LEAST_SAMPLES
              + " samples of one level");
    }
    double samples = 0;
    double sum = 0;
    double squares = 0;
    for (Tally level : levels) {
      samples += level.samples;
      sum += level.samples * level.variance;
      squares += level.samples * level.variance * level.variance;
    }
    if (sum == 0) {
      throw new BadInput("the frames are equal, sample by sample; accepted: frames with noise");
    }
    double error = Math.sqrt(2 * squares / (frames.size() - 1)) / samples;
    Optional<Line> line =
        levels.size() < LEAST_CLASSES ? Optional.empty() : Optional.of(line(levels, frames.size()));
    return new SensorFit(
        frames.size(),
        Math.max(0, sum / samples - ROUNDING),
        error,
        line,
        drift(frames),
        levels.stream().map(level -> level.without(frames.size())).toList());
  }

  private static double drift(List<Picture> frames) {
    double lowest = Double.POSITIVE_INFINITY;
    double highest = 0;
    for (Picture frame : frames) {
      lowest = Math.min(lowest, frame.mean());
      highest = Math.max(highest, frame.mean());
    }
    return highest - lowest;
  }

  /** Samples of nearly equal mean. */
  private record Tally(double samples, double mean, double variance) {
    Level without(int frames) {
      return new Level(
          (long) samples,
          mean,
          variance - ROUNDING,
          variance * Math.sqrt(2 / (samples * (frames - 1))));
    }
  }

  private static List<Tally> levels(List<Picture> frames) {
    int size = frames.get(0).size();
    int peak = frames.get(0).peak();
    int n = frames.size();
    long[] sums = new long[size];
    long[] squares = new long[size];
    boolean[] clipped = new boolean[size];
    for (Picture frame : frames) {
      int[] samples = frame.samples();
      for (int i = 0; i < size; i++) {
        sums[i] += samples[i];
        squares[i] += (long) samples[i] * samples[i];
        clipped[i] |= samples[i] == 0 || samples[i] == peak;
      }
    }
    long lowest = Long.MAX_VALUE;
    long highest = 0;
    for (long sum : sums) {
      lowest = Math.min(lowest, sum);
      highest = Math.max(highest, sum);
    }
    double[][] tally = new double[CLASSES][4];
    for (int i = 0; i < size; i++) {
      double[] of = tally[(int) ((sums[i] - lowest) * CLASSES / (highest - lowest + 1))];
      of[0]++;
      of[1] += (double) sums[i] / n;
      of[2] += (squares[i] - (double) sums[i] * sums[i] / n) / (n - 1);
      of[3] += clipped[i] ? 1 : 0;
    }
    List<Tally> levels = new ArrayList<>();
    for (double[] of : tally) {
      if (of[0] >= LEAST_SAMPLES && of[3] < MOST_CLIPPED * of[0] * n) {
        levels.add(new Tally(of[0], of[1] / of[0], of[2] / of[0]));
      }
    }
    return levels;
  }

  private static Line line(List<Tally> levels, int frames) {
    double gain = 0;
    double offset = 1;
    Line line = new Line(0, 0, 0, 0, 0, 0);
    for (int turn = 0; turn < TURNS; turn++) {
      line = line(levels, frames, gain, offset, turn == 0);
      gain = line.gain;
      offset = line.offset;
    }
    return new Line(
        line.gain,
        line.errorOfGain,
        line.offset - ROUNDING,
        line.errorOfOffset,
        line.chiSquare,
        line.degreesOfFreedom);
  }

  /** One turn: weights from the line before, or by the numbers of samples alone at first. */
  private static Line line(
      List<Tally> levels, int frames, double gain, double offset, boolean first) {
    double least = levels.stream().mapToDouble(Tally::variance).max().orElse(1) / 1000;
    double w = 0;
    double wx = 0;
    double wy = 0;
    double[] weights = new double[levels.size()];
    for (int i = 0; i < weights.length; i++) {
      Tally level = levels.get(i);
      double fitted = first ? 1 : Math.max(least, gain * level.mean + offset);
      weights[i] = level.samples * (frames - 1) / (2 * fitted * fitted);
      w += weights[i];
      wx += weights[i] * level.mean;
      wy += weights[i] * level.variance;
    }
    double meanX = wx / w;
    double meanY = wy / w;
    double xx = 0;
    double xy = 0;
    for (int i = 0; i < weights.length; i++) {
      double dx = levels.get(i).mean - meanX;
      xx += weights[i] * dx * dx;
      xy += weights[i] * dx * (levels.get(i).variance - meanY);
    }
    double slope = xy / xx;
    double chiSquare = 0;
    for (int i = 0; i < weights.length; i++) {
      double off = levels.get(i).variance - meanY - slope * (levels.get(i).mean - meanX);
      chiSquare += weights[i] * off * off;
    }
    int free = levels.size() - 2;
    double wide = Math.sqrt(Math.max(1, chiSquare / free));
    return new Line(
        slope,
        wide * Math.sqrt(1 / xx),
        meanY - slope * meanX,
        wide * Math.sqrt(1 / w + meanX * meanX / xx),
        chiSquare,
        free);
  }
}
