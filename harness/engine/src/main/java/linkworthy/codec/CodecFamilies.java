package linkworthy.codec;

import java.util.ArrayList;
import java.util.Collection;
import java.util.List;
import java.util.ServiceLoader;
import java.util.SortedMap;
import java.util.TreeMap;
import java.util.function.Supplier;
import linkworthy.input.BadInput;
import linkworthy.input.ById;
import linkworthy.input.Spelling;
import linkworthy.input.YamlNode;
import linkworthy.link.Link;

/** Codec families by id. Never changes: what adds families gives another object. */
public final class CodecFamilies implements CodecReader {
  private static final CodecFamilies INSTALLED =
      new CodecFamilies(new TreeMap<>()).with(services());

  private final SortedMap<String, CodecFamily> byId;

  private CodecFamilies(SortedMap<String, CodecFamily> byId) {
    this.byId = byId;
  }

  private static List<CodecFamily> services() {
    return ServiceLoader.load(CodecFamily.class).stream().map(ServiceLoader.Provider::get).toList();
  }

  /** The families on the class path; none of them runs programs. */
  public static CodecFamilies installed() {
    return INSTALLED;
  }

  /**
   * These families and more.
   *
   * @throws BadInput if two share an id; one line that names both
   */
  public CodecFamilies with(Collection<? extends CodecFamily> more) {
    List<CodecFamily> all = new ArrayList<>(byId.values());
    all.addAll(more);
    return new CodecFamilies(ById.index(all, CodecFamily::id, CodecFamilies::twice));
  }

  private static BadInput twice(CodecFamily one, CodecFamily other) {
    return new BadInput(
        origin(other)
            + " has the id '"
            + other.id()
            + "', which "
            + origin(one)
            + " has as well; accepted: an id of its own");
  }

  private static String origin(CodecFamily family) {
    return family instanceof PluginFamily plugin
        ? plugin.origin()
        : "class " + family.getClass().getName();
  }

  /** These families, with leave for {@code command} to run programs of this machine. */
  public CodecFamilies allowingCommands() {
    return allowingCommands(Confinement::ofThisMachine);
  }

  /** The same with a confinement that is not this machine's. */
  CodecFamilies allowingCommands(Supplier<Confinement> confinement) {
    SortedMap<String, CodecFamily> all = new TreeMap<>(byId);
    CodecFamily allowed = new CommandCodecFamily(true, confinement);
    all.put(allowed.id(), allowed);
    return new CodecFamilies(all);
  }

  /** All families, by id. */
  public List<CodecFamily> all() {
    return List.copyOf(byId.values());
  }

  /**
   * Reads one entry of a study's {@code codecs} list. The family is the one whose id is a key of
   * the entry.
   *
   * @throws BadInput if there is none, or the entry is wrong
   */
  @Override
  public List<Codec> read(YamlNode entry, Link link) {
    for (String key : entry.keys()) {
      CodecFamily family = byId.get(key);
      if (family != null) {
        return family.read(entry, link);
      }
    }
    String found = entry.keys().stream().findFirst().orElse("");
    throw entry.refuse(
        "names no codec; one key must be the kind of codec; "
            + Spelling.hint(found, byId.keySet()));
  }
}
