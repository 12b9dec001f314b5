package linkworthy.decision;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.BitSet;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import linkworthy.statistics.Moments;

/**
 * What was measured of one codec in one condition: moments over replicates, by picture. Takes the
 * trials of each picture together; keeps about 20 bytes for each picture and measure.
 */
final class Sample {
  private static final Column NOTHING = new Column();

  private final List<String> pictures = new ArrayList<>(1);
  private final BitSet seen = new BitSet();
  private final Map<String, Column> columns = new LinkedHashMap<>(2);
  private int current = -1;
  private long trials;
  private long trialsOfPicture;
  private long fewestTrials = Long.MAX_VALUE;

  /** A measure: mean and variance over replicates of each picture that is done. */
  private static final class Column {
    private double[] means = new double[0];
    private double[] variances = new double[0];
    private Moments moments = new Moments();
    private long hits;

    /** Ends the picture at a place. */
    void end(int place) {
      int length = means.length;
      if (place >= length) {
        means = Arrays.copyOf(means, place + place / 2 + 1);
        variances = Arrays.copyOf(variances, means.length);
        Arrays.fill(means, length, means.length, Double.NaN);
        Arrays.fill(variances, length, means.length, Double.NaN);
      }
      means[place] = moments.mean();
      variances[place] = moments.variance();
      hits += hitsOfPicture();
      moments = new Moments();
    }

    long hitsOfPicture() {
      return Math.round(moments.mean() * moments.count());
    }

    double mean(int place, boolean open) {
      return open ? moments.mean() : place < means.length ? means[place] : Double.NaN;
    }

    double variance(int place, boolean open) {
      return open ? moments.variance() : place < variances.length ? variances[place] : Double.NaN;
    }
  }

  /**
   * Takes one more trial.
   *
   * @param number of the picture, the same in all samples of a run
   * @throws IllegalArgumentException if the picture came before and another since
   */
  void add(int number, String picture, Map<String, Double> figures) {
    if (number != current) {
      begin(number, picture);
    }
    trials++;
    trialsOfPicture++;
    figures.forEach(
        (name, figure) -> columns.computeIfAbsent(name, n -> new Column()).moments.add(figure));
  }

  private void begin(int number, String picture) {
    if (seen.get(number)) {
      throw new IllegalArgumentException(
          "picture '"
              + picture
              + "' comes after another picture of its cell once more; accepted: the trials of each"
              + " picture together");
    }
    if (current >= 0) {
      columns.values().forEach(column -> column.end(pictures.size() - 1));
      fewestTrials = Math.min(fewestTrials, trialsOfPicture);
    }
    trialsOfPicture = 0;
    current = number;
    seen.set(number);
    pictures.add(picture);
  }

  private Column column(String measure) {
    return columns.getOrDefault(measure, NOTHING);
  }

  private boolean isOpen(int place) {
    return place == pictures.size() - 1;
  }

  /** Number of pictures. */
  int pictures() {
    return pictures.size();
  }

  /** The means over replicates, a number a picture. */
  Map<String, Double> means(String measure) {
    Map<String, Double> means = new LinkedHashMap<>();
    for (int i = 0; i < pictures.size(); i++) {
      means.put(pictures.get(i), column(measure).mean(i, isOpen(i)));
    }
    return means;
  }

  /** The numbers of {@link #means}. */
  double[] figures(String measure) {
    return means(measure).values().stream().mapToDouble(mean -> mean).toArray();
  }

  /** Their moments. */
  Moments overPictures(String measure) {
    return Moments.of(figures(measure));
  }

  /** Trials of all pictures. */
  long trials() {
    return trials;
  }

  /** The smallest number of replicates of any picture. */
  long replicates() {
    return Math.min(fewestTrials, trialsOfPicture);
  }

  /** Number of trials in which a figure of 0 or 1 is 1. */
  long hits(String measure) {
    return column(measure).hits + column(measure).hitsOfPicture();
  }

  /** The variance between replicates, as the mean over pictures; NaN for a single replicate. */
  double noiseVariance(String measure) {
    double[] variances = new double[pictures.size()];
    Arrays.setAll(variances, i -> column(measure).variance(i, isOpen(i)));
    return Arrays.stream(variances).average().orElse(Double.NaN);
  }
}
