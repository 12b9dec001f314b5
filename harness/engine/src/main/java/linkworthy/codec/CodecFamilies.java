package linkworthy.codec;

import java.util.List;
import java.util.ServiceLoader;
import java.util.SortedMap;
import java.util.TreeMap;
import linkworthy.input.BadInput;
import linkworthy.input.Spelling;
import linkworthy.input.YamlNode;
import linkworthy.link.Link;

/** The codec families that are installed. */
public final class CodecFamilies {
  private static final SortedMap<String, CodecFamily> INSTALLED =
      byId(ServiceLoader.load(CodecFamily.class));

  private CodecFamilies() {}

  static SortedMap<String, CodecFamily> byId(Iterable<CodecFamily> families) {
    SortedMap<String, CodecFamily> byId = new TreeMap<>();
    for (CodecFamily family : families) {
      CodecFamily other = byId.put(family.id(), family);
      if (other != null) {
        throw new IllegalStateException(
            "two codec families have the id '"
                + family.id()
                + "': "
                + other.getClass().getName()
                + " and "
                + family.getClass().getName());
      }
    }
    return byId;
  }

  /** All families, by id. */
  public static List<CodecFamily> all() {
    return List.copyOf(INSTALLED.values());
  }

  /**
   * Reads one entry of a study's {@code codecs} list. The family is the one whose id is a key of
   * the entry.
   *
   * @throws BadInput if there is none, or the entry is wrong
   */
  public static List<Codec> read(YamlNode entry, Link link) {
    for (String key : entry.keys()) {
      CodecFamily family = INSTALLED.get(key);
      if (family != null) {
        return family.read(entry, link);
      }
    }
    String found = entry.keys().stream().findFirst().orElse("");
    throw entry.refuse(
        "names no codec; one key must be the kind of codec; "
            + Spelling.hint(found, INSTALLED.keySet()));
  }
}
