package linkworthy.quality;

import java.util.List;
import java.util.ServiceLoader;
import java.util.SortedMap;
import java.util.TreeMap;
import linkworthy.input.BadInput;
import linkworthy.input.Spelling;
import org.jspecify.annotations.Nullable;

/** The measures there are, by id. */
public final class QualityMeasures {
  private QualityMeasures() {}

  /**
   * All measures, in the order of their ids.
   *
   * @throws IllegalStateException if two measures share an id or a column
   */
  public static List<QualityMeasure> all() {
    return List.copyOf(registered().values());
  }

  /**
   * The measure with this id.
   *
   * @throws BadInput if there is none; the message lists what exists
   * @throws IllegalStateException if two measures share an id or a column
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
    SortedMap<String, QualityMeasure> byColumn = new TreeMap<>();
    for (QualityMeasure measure : measures) {
      requireAlone(byId.putIfAbsent(measure.id(), measure), measure, "id '" + measure.id());
      requireAlone(
          byColumn.putIfAbsent(measure.column(), measure), measure, "column '" + measure.column());
    }
    return byId;
  }

  private static void requireAlone(
      @Nullable QualityMeasure other, QualityMeasure measure, String what) {
    if (other != null) {
      throw new IllegalStateException(
          "two quality measures have the "
              + what
              + "': "
              + other.getClass().getName()
              + " and "
              + measure.getClass().getName());
    }
  }
}
