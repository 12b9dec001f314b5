package linkworthy.noise;

import java.util.ServiceLoader;
import java.util.SortedMap;
import linkworthy.input.BadInput;
import linkworthy.input.ById;
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
    return ById.index(
        processes,
        NoiseProcess::id,
        (one, other) ->
            new IllegalStateException(
                "noise process id '%s' is used twice: by %s and by %s"
                    .formatted(one.id(), one.getClass().getName(), other.getClass().getName())));
  }
}
