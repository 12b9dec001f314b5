package linkworthy.quality;

import java.util.List;
import java.util.ServiceLoader;
import java.util.SortedMap;
import linkworthy.input.BadInput;
import linkworthy.input.ById;
import linkworthy.input.Spelling;

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
    SortedMap<String, QualityMeasure> byId =
        ById.index(
            measures, QualityMeasure::id, (one, other) -> twice("id '" + one.id(), one, other));
    SortedMap<String, QualityMeasure> unused =
        ById.index(
            measures,
            QualityMeasure::column,
            (one, other) -> twice("column '" + one.column(), one, other));
    return byId;
  }

  private static IllegalStateException twice(
      String what, QualityMeasure one, QualityMeasure other) {
    return new IllegalStateException(
        "two quality measures have the "
            + what
            + "': "
            + one.getClass().getName()
            + " and "
            + other.getClass().getName());
  }
}
