package linkworthy.trial;

import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;

/** Counts the codecs' failures and keeps the first of each kind, for the user to mend. */
public final class Mishaps {
  private final Map<Kind, Mishap> first = new LinkedHashMap<>();
  private final Map<Kind, Long> counts = new LinkedHashMap<>();

  private record Kind(String codec, String word) {}

  public void add(Mishap mishap) {
    Kind kind = new Kind(mishap.codec(), mishap.failure().word());
    first.putIfAbsent(kind, mishap);
    counts.merge(kind, 1L, Long::sum);
  }

  /** A line for each codec and kind of failure. */
  public List<String> lines() {
    return first.entrySet().stream()
        .map(
            entry ->
                "linkworthy: codec '"
                    + entry.getKey().codec()
                    + "' failed in "
                    + counts.get(entry.getKey())
                    + " trials ("
                    + entry.getKey().word()
                    + "), first on picture '"
                    + entry.getValue().picture()
                    + "': "
                    + entry.getValue().failure().detail())
        .toList();
  }
}
