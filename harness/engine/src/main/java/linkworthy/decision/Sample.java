package linkworthy.decision;

import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import linkworthy.statistics.Moments;

/** What was measured of one codec in one condition: moments over replicates, by picture. */
final class Sample {
  private final Map<String, Map<String, Moments>> pictures = new LinkedHashMap<>();

  void add(String picture, Map<String, Double> figures) {
    Map<String, Moments> moments = pictures.computeIfAbsent(picture, p -> new LinkedHashMap<>());
    figures.forEach(
        (name, figure) -> moments.computeIfAbsent(name, n -> new Moments()).add(figure));
  }

  /** Number of pictures. */
  int pictures() {
    return pictures.size();
  }

  /** The means over replicates, a number a picture. */
  Map<String, Double> means(String measure) {
    Map<String, Double> means = new LinkedHashMap<>();
    pictures.forEach((picture, of) -> means.put(picture, moments(of, measure).mean()));
    return means;
  }

  /** The moments of {@link #means}. */
  Moments overPictures(String measure) {
    return Moments.of(means(measure).values().stream().mapToDouble(mean -> mean).toArray());
  }

  /** Trials of all pictures. */
  long trials() {
    return counts().stream().mapToLong(count -> count).sum();
  }

  /** The smallest number of replicates of any picture. */
  long replicates() {
    return counts().stream().mapToLong(count -> count).min().orElse(0);
  }

  /** Number of trials in which a figure of 0 or 1 is 1. */
  long hits(String measure) {
    return pictures.values().stream()
        .mapToLong(of -> Math.round(moments(of, measure).mean() * moments(of, measure).count()))
        .sum();
  }

  /** The variance between replicates, as the mean over pictures; NaN for a single replicate. */
  double noiseVariance(String measure) {
    return pictures.values().stream()
        .mapToDouble(of -> moments(of, measure).variance())
        .average()
        .orElse(Double.NaN);
  }

  private List<Long> counts() {
    return pictures.values().stream().map(of -> of.values().iterator().next().count()).toList();
  }

  private static Moments moments(Map<String, Moments> of, String measure) {
    return of.getOrDefault(measure, new Moments());
  }
}
