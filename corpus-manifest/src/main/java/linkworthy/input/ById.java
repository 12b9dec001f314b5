package linkworthy.input;

import java.util.Collections;
import java.util.SortedMap;
import java.util.TreeMap;
import java.util.function.BiFunction;
import java.util.function.Function;

/** Things that are found by an id of their own. */
public final class ById {
  private ById() {}

  /**
   * An index in the order of the ids, not to be changed.
   *
   * @param twice what is thrown where two share an id, of the earlier and the later one
   */
  public static <T> SortedMap<String, T> index(
      Iterable<? extends T> things,
      Function<? super T, String> id,
      BiFunction<? super T, ? super T, ? extends RuntimeException> twice) {
    SortedMap<String, T> byId = new TreeMap<>();
    for (T thing : things) {
      T other = byId.putIfAbsent(id.apply(thing), thing);
      if (other != null) {
        throw twice.apply(other, thing);
      }
    }
    return Collections.unmodifiableSortedMap(byId);
  }
}
