package linkworthy.quality;

import java.util.List;
import java.util.ServiceLoader;
import java.util.SortedMap;
import java.util.TreeMap;
import linkworthy.input.BadInput;
import linkworthy.input.Spelling;

/** The measures there are, by id. */
public final class QualityMeasures {
  private QualityMeasures() {}

  /**
   * All measures, in the order of their ids.
   *
   * @throws IllegalStateException if two measures share an id
   */
  public static List<QualityMeasure> all() {
    return List.copyOf(registered().values());
  }

  /**
   * The measure with this id.
   *
   * @throws BadInput if there is none; the message lists what exists
   * @throws IllegalStateException if two measures share an id
   */
  public static QualityMeasure get(String id) {
    SortedMap<String, QualityMeasure> byId = registered();
    QualityMeasure measure = byId.get(id);
    if (measure == null) {
      throw new BadInput("unknown measure '" + id + "'; " + Spelling.hint(id, byId.keySet()));
    }
    return measure;
  }

  private static SortedMap<String, QualityMeasure> registered() {
    return byId(ServiceLoader.load(QualityMeasure.class, QualityMeasure.class.getClassLoader()));
  }

  static SortedMap<String, QualityMeasure> byId(Iterable<QualityMeasure> measures) {
    SortedMap<String, QualityMeasure> byId = new TreeMap<>();
    for (QualityMeasure measure : measures) {
      QualityMeasure other = byId.putIfAbsent(measure.id(), measure);
      if (other != null) {
        throw new IllegalStateException(
            "two quality measures have the id '"
                + measure.id()
                + "': "
                + other.getClass().getName()
                + " and "
                + measure.getClass().getName());
      }
    }
    return byId;
  }
}
