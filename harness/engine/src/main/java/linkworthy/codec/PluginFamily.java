package linkworthy.codec;

import java.util.List;
import java.util.Objects;
import java.util.Optional;
import linkworthy.input.BadInput;
import linkworthy.input.KeyGroup;
import linkworthy.input.Unavailable;
import linkworthy.input.YamlNode;
import linkworthy.link.Link;

/** A family from a plugin jar: whatever goes wrong in it is said in one line with its name. */
final class PluginFamily implements CodecFamily {
  private static final String ID = "[a-z][a-z0-9-]*";

  private final CodecFamily family;
  private final String origin;
  private final String id;

  /**
   * @param origin jar and class, as in {@code thumbnail.jar, class example.Thumbnail}
   * @throws BadInput if the family has no proper id
   */
  PluginFamily(CodecFamily family, String origin) {
    this.family = family;
    this.origin = origin;
    this.id = guarded("id()", family::id);
    if (!id.matches(ID)) {
      throw new BadInput(
          origin + " has the id '" + id + "'; accepted: small letters, digits and dashes");
    }
  }

  String origin() {
    return origin;
  }

  @Override
  public String id() {
    return id;
  }

  @Override
  public Optional<KeyGroup> keys() {
    return guarded("keys()", family::keys);
  }

  @Override
  public String help() {
    return guarded("help()", family::help);
  }

  @Override
  public List<Codec> read(YamlNode entry, Link link) {
    return guarded(
        "read()",
        () -> complete(Objects.requireNonNull(family.read(entry, link), "it returned null")));
  }

  /** The codecs, each having said what the record needs to know before anything runs. */
  private static List<Codec> complete(List<Codec> codecs) {
    if (codecs.isEmpty()) {
      throw new IllegalStateException("no codec for an entry");
    }
    for (Codec codec : codecs) {
      if (codec.label().isBlank()) {
        throw new IllegalStateException("a codec has an empty label");
      }
      Codec.Description description = codec.description();
      Objects.requireNonNull(description.transform(), "transform of a description");
      Objects.requireNonNull(description.over(), "over of a description");
      Objects.requireNonNull(description.step(), "step of a description");
      Objects.requireNonNull(codec.settings(), "settings of a codec");
      Objects.requireNonNull(codec.programs(), "programs of a codec");
    }
    return List.copyOf(codecs);
  }

  private interface Work<T> {
    T result();
  }

  private <T> T guarded(String method, Work<T> work) {
    try {
      return Objects.requireNonNull(work.result(), "it returned null");
    } catch (BadInput | Unavailable e) {
      throw e;
    } catch (RuntimeException | LinkageError | AssertionError | StackOverflowError e) {
      throw new BadInput(origin + " failed in " + method + ": " + e, e);
    }
  }
}
