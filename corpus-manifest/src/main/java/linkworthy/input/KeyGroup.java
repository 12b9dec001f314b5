package linkworthy.input;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;

/**
 * A group of keys: which there are, which must be there, what each may be.
 *
 * @param name unique within a document; its schema is referred to by it
 * @param keys in the order of tables and messages
 * @param exactlyOneOf keys of which one and only one must be there; empty for no such rule
 * @param subject what those keys give, for messages, as in {@code severity}
 */
public record KeyGroup(String name, List<Key> keys, List<String> exactlyOneOf, String subject)
    implements Kind {
  public KeyGroup {
    keys = List.copyOf(keys);
    exactlyOneOf = List.copyOf(exactlyOneOf);
  }

  public static KeyGroup of(String name, Key... keys) {
    return new KeyGroup(name, Arrays.asList(keys), List.of(), "");
  }

  /** The same group, in which one and only one of some keys must be there. */
  public KeyGroup exactlyOne(String what, List<String> names) {
    return new KeyGroup(name, keys, names, what);
  }

  /** The same group with further keys. */
  public KeyGroup with(Key... further) {
    List<Key> all = new ArrayList<>(keys);
    all.addAll(Arrays.asList(further));
    return new KeyGroup(name, all, exactlyOneOf, subject);
  }

  /** The names of all keys, in order. */
  public Set<String> names() {
    Set<String> names = new LinkedHashSet<>();
    keys.forEach(key -> names.add(key.name()));
    return names;
  }

  /**
   * What a key of this group may be.
   *
   * @throws IllegalArgumentException if there is no such key
   */
  public Kind kind(String key) {
    return keys.stream()
        .filter(k -> k.name().equals(key))
        .findFirst()
        .orElseThrow(() -> new IllegalArgumentException(name + " has no key " + key))
        .kind();
  }

  @Override
  public void check(YamlNode node) {
    if (keys.isEmpty() && !node.keys().isEmpty()) {
      throw node.refuse("has keys; accepted: no keys");
    }
    YamlNode unused = node.onlyKeys(names());
    for (Key key : keys) {
      if (key.isRequired()) {
        key.kind().check(node.get(key.name()));
      } else {
        node.find(key.name()).ifPresent(key.kind()::check);
      }
    }
    List<String> given = exactlyOneOf.stream().filter(key -> node.find(key).isPresent()).toList();
    if (!exactlyOneOf.isEmpty() && given.size() != 1) {
      throw node.refuse(
          "has "
              + (given.isEmpty() ? "no " + subject : "several: " + String.join(", ", given))
              + "; accepted: one of "
              + String.join(", ", exactlyOneOf));
    }
  }

  @Override
  public String words() {
    return "a group";
  }

  @Override
  public Map<String, Object> schema(Map<String, Object> shared) {
    if (!shared.containsKey(name)) {
      shared.put(name, Map.of());
      shared.put(name, own(shared));
    }
    return Kind.inOrder("$ref", "#/$defs/" + name);
  }

  private Map<String, Object> own(Map<String, Object> shared) {
    Map<String, Object> properties = new LinkedHashMap<>();
    List<String> required = new ArrayList<>();
    for (Key key : keys) {
      Map<String, Object> property = new LinkedHashMap<>();
      property.put("description", description(key));
      property.putAll(key.kind().schema(shared));
      properties.put(key.name(), property);
      if (key.isRequired()) {
        required.add(key.name());
      }
    }
    Map<String, Object> schema =
        Kind.inOrder("type", "object", "properties", properties, "additionalProperties", false);
    if (!required.isEmpty()) {
      schema.put("required", required);
    }
    if (!exactlyOneOf.isEmpty()) {
      schema.put(
          "oneOf",
          exactlyOneOf.stream().map(key -> Kind.inOrder("required", List.of(key))).toList());
    }
    return schema;
  }

  /** What the key is, as plain text. */
  private static String description(Key key) {
    String text =
        (key.what().isEmpty() ? "" : key.what() + ": ")
            + key.kind().words()
            + (key.isRequired() ? "" : "; default: " + key.usual());
    return text.replaceAll("\\[([^\\]]+)\\]\\([^)]*#[^)]*\\)", "$1").replace("`", "");
  }
}
