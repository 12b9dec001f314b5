package linkworthy.statistics;

import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Map;

/** Numbers for names, from 0 in the order in which they first come. */
public final class Numbering {
  private final Map<String, Integer> numbers = new HashMap<>();
  private final List<String> names = new ArrayList<>();

  /** The number of a name, which has one from now on. */
  public int add(String name) {
    Integer known = numbers.get(name);
    if (known != null) {
      return known;
    }
    numbers.put(name, names.size());
    names.add(name);
    return names.size() - 1;
  }

  /** The number of a name; -1 if it has none. */
  int find(String name) {
    return numbers.getOrDefault(name, -1);
  }

  /** The name of a number. */
  String name(int number) {
    return names.get(number);
  }
}
