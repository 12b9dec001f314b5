package linkworthy.noise;

import java.util.Collections;
import java.util.ServiceLoader;
import java.util.SortedMap;
import java.util.TreeMap;
import linkworthy.input.BadInput;
import linkworthy.input.Spelling;
import org.jspecify.annotations.Nullable;

/** The noise processes on the class path, by id. */
public final class NoiseProcesses {
  private static @Nullable SortedMap<String, NoiseProcess> found;

  private NoiseProcesses() {}

  /**
   * Every process, in the order of the ids.
   *
   * @throws IllegalStateException if two share an id; it names both classes
   */
  public static synchronized SortedMap<String, NoiseProcess> all() {
    SortedMap<String, NoiseProcess> known = found;
    if (known == null) {
      known = index(ServiceLoader.load(NoiseProcess.class, NoiseProcess.class.getClassLoader()));
      found = known;
    }
    return known;
  }

  /**
   * The process with an id.
   *
   * @throws BadInput if there is none; it lists what exists and the nearest spelling
   */
  public static NoiseProcess find(String id) {
    NoiseProcess process = all().get(id);
    if (process == null) {
      throw new BadInput("no noise process '" + id + "'; " + Spelling.hint(id, all().keySet()));
    }
    return process;
  }

  static SortedMap<String, NoiseProcess> index(Iterable<NoiseProcess> processes) {
    SortedMap<String, NoiseProcess> byId = new TreeMap<>();
    for (NoiseProcess process : processes) {
      NoiseProcess other = byId.put(process.id(), process);
      if (other != null) {
        throw new IllegalStateException(
            "noise process id '%s' is used twice: by %s and by %s"
                .formatted(process.id(), other.getClass().getName(), process.getClass().getName()));
      }
    }
    return Collections.unmodifiableSortedMap(byId);
  }
}
