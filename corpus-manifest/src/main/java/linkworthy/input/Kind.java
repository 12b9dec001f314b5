package linkworthy.input;

import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.function.Function;
import java.util.regex.Pattern;

/**
 * What the value of a key may be. One description checks a value, says in words what is accepted,
 * and says it as JSON Schema (draft 2020-12), so that the three cannot differ.
 */
public interface Kind {
  /**
   * @throws BadInput if the value is not of this kind; one line with file, line and key
   */
  void check(YamlNode node);

  /** What is accepted, in words. */
  String words();

  /**
   * The same as JSON Schema.
   *
   * @param shared where groups that have a name put themselves, to be referred to
   */
  Map<String, Object> schema(Map<String, Object> shared);

  /** A whole number from {@code min} to {@code max}. */
  record Whole(long min, long max) implements Kind {
    public int read(YamlNode node) {
      return Math.toIntExact(readLong(node));
    }

    public long readLong(YamlNode node) {
      return node.integer(min, max);
    }

    @Override
    public void check(YamlNode node) {
      long unused = readLong(node);
    }

    @Override
    public String words() {
      return "whole number, " + min + " to " + max;
    }

    @Override
    public Map<String, Object> schema(Map<String, Object> shared) {
      return inOrder("type", "integer", "minimum", min, "maximum", max);
    }
  }

  /**
   * A number.
   *
   * @param min smallest accepted, or the largest that is not if {@code above}
   * @param below whether {@code max} itself is refused
   * @param accepted words for messages
   */
  record Real(double min, boolean above, double max, boolean below, String accepted)
      implements Kind {
    public static Real any(String accepted) {
      return new Real(-Double.MAX_VALUE, false, Double.MAX_VALUE, false, accepted);
    }

    public static Real from(double min, double max, String accepted) {
      return new Real(min, false, max, false, accepted);
    }

    public static Real above(double min, double max, String accepted) {
      return new Real(min, true, max, false, accepted);
    }

    public double read(YamlNode node) {
      double value = node.number(accepted);
      if (!(above ? value > min : value >= min) || !(below ? value < max : value <= max)) {
        throw node.bad(accepted);
      }
      return value;
    }

    @Override
    public void check(YamlNode node) {
      double unused = read(node);
    }

    @Override
    public String words() {
      return accepted;
    }

    @Override
    public Map<String, Object> schema(Map<String, Object> shared) {
      Map<String, Object> schema = inOrder("type", "number");
      if (min != -Double.MAX_VALUE) {
        schema.put(above ? "exclusiveMinimum" : "minimum", plain(min));
      }
      if (max != Double.MAX_VALUE) {
        schema.put(below ? "exclusiveMaximum" : "maximum", plain(max));
      }
      return schema;
    }

    private static Object plain(double value) {
      return value == Math.rint(value) && Math.abs(value) < 1e15
          ? (Object) (long) value
          : (Object) value;
    }
  }

  /** One of two numbers. */
  record Numbers(int one, int other) implements Kind {
    @Override
    public void check(YamlNode node) {
      double value = node.number(words());
      if (value != one && value != other) {
        throw node.bad(words());
      }
    }

    @Override
    public String words() {
      return one + " or " + other;
    }

    @Override
    public Map<String, Object> schema(Map<String, Object> shared) {
      return inOrder("enum", List.of(one, other));
    }
  }

  /** One of some words. */
  record Words(List<String> accepted) implements Kind {
    public Words {
      accepted = List.copyOf(accepted);
    }

    public static Words of(String... accepted) {
      return new Words(List.of(accepted));
    }

    public String read(YamlNode node) {
      return node.oneOf(accepted);
    }

    @Override
    public void check(YamlNode node) {
      String unused = read(node);
    }

    @Override
    public String words() {
      return code(accepted);
    }

    @Override
    public Map<String, Object> schema(Map<String, Object> shared) {
      return inOrder("enum", accepted);
    }
  }

  /**
   * Text; a number or a flag counts as the text it is written as.
   *
   * @param pattern what all of it must match; without look-around, which editors may lack
   * @param accepted words for messages
   */
  record Text(String pattern, String accepted) implements Kind {
    private static final String LINE = "[^\\u0000-\\u001f\\u007f-\\u009f\\u2028\\u2029]";

    /** Text that is not blank. */
    public static Text any() {
      return new Text("[\\s\\S]*\\S[\\s\\S]*", "some text");
    }

    /** Any text, with other words for the handbook and in messages. */
    public static Text any(String accepted) {
      return new Text(any().pattern(), accepted);
    }

    /** One line without control characters. */
    public static Text line(int longest) {
      return new Text(LINE + "{1," + longest + "}", "one line of up to " + longest + " characters");
    }

    public String read(YamlNode node) {
      String text = node.text();
      if (!Pattern.matches(pattern, text)) {
        throw node.bad(accepted);
      }
      return text;
    }

    @Override
    public void check(YamlNode node) {
      String unused = read(node);
    }

    @Override
    public String words() {
      return accepted;
    }

    @Override
    public Map<String, Object> schema(Map<String, Object> shared) {
      List<String> types = new ArrayList<>(List.of("string"));
      boolean hasNumbers = Pattern.matches(pattern, "7");
      boolean hasSigns = Pattern.matches(pattern, "-7");
      if (hasNumbers) {
        types.add("number");
      }
      if (Pattern.matches(pattern, "true")) {
        types.add("boolean");
      }
      Map<String, Object> schema = inOrder("type", types.size() == 1 ? types.get(0) : types);
      if (hasNumbers && !hasSigns) {
        schema.put("minimum", 0);
      }
      schema.put("pattern", "^(?:" + pattern + ")$");
      return schema;
    }
  }

  /** {@code true} or {@code false}. */
  record Flag() implements Kind {
    @Override
    public void check(YamlNode node) {
      boolean unused = node.flag();
    }

    @Override
    public String words() {
      return "`true` or `false`";
    }

    @Override
    public Map<String, Object> schema(Map<String, Object> shared) {
      return inOrder("type", "boolean");
    }
  }

  /** A value, or a list of at least one. */
  record OneOrMore(Kind item) implements Kind {
    @Override
    public void check(YamlNode node) {
      node.oneOrMore().forEach(item::check);
    }

    @Override
    public String words() {
      return item.words() + "; or a list";
    }

    @Override
    public Map<String, Object> schema(Map<String, Object> shared) {
      return inOrder("anyOf", List.of(item.schema(shared), new Items(item).schema(shared)));
    }
  }

  /** A list of at least one value. */
  record Items(Kind item) implements Kind {
    @Override
    public void check(YamlNode node) {
      node.items().forEach(item::check);
    }

    @Override
    public String words() {
      return "a list, each " + item.words();
    }

    @Override
    public Map<String, Object> schema(Map<String, Object> shared) {
      return inOrder("type", "array", "minItems", 1, "items", item.schema(shared));
    }
  }

  /**
   * A word that stands for itself, or else a value of another kind.
   *
   * @param accepted words for messages about a single value that is neither
   */
  record WordOr(String word, Kind other, String accepted) implements Kind {
    /** Whether it is the word. */
    public boolean isWord(YamlNode node) {
      return isSingle(node) && !node.isEmpty() && node.text().equals(word);
    }

    @Override
    public void check(YamlNode node) {
      boolean goesInside =
          node.isSequence() ? other instanceof OneOrMore : node.isMapping() && hasGroups();
      if (goesInside) {
        other.check(node);
      } else if (!isWord(node)) {
        try {
          other.check(node);
        } catch (BadInput e) {
          throw node.bad(accepted);
        }
      }
    }

    private boolean hasGroups() {
      return other instanceof KeyGroup
          || (other instanceof OneOrMore list && list.item() instanceof KeyGroup);
    }

    private static boolean isSingle(YamlNode node) {
      return !node.isMapping() && !node.isSequence();
    }

    @Override
    public String words() {
      return accepted;
    }

    @Override
    public Map<String, Object> schema(Map<String, Object> shared) {
      return inOrder("anyOf", List.of(wordSchema(), other.schema(shared)));
    }

    private Map<String, Object> wordSchema() {
      return word.equals("true") ? inOrder("enum", List.of("true", true)) : inOrder("const", word);
    }
  }

  /** A group of keys, or else a single value. */
  record GroupOr(Kind group, Kind single) implements Kind {
    @Override
    public void check(YamlNode node) {
      (node.isMapping() ? group : single).check(node);
    }

    @Override
    public String words() {
      return single.words() + "; or a group";
    }

    @Override
    public Map<String, Object> schema(Map<String, Object> shared) {
      return inOrder("anyOf", List.of(single.schema(shared), group.schema(shared)));
    }
  }

  /**
   * One of several groups of keys.
   *
   * @param all every group; no value fits two of them
   * @param chosen the group that a value claims to be
   */
  record Choice(List<? extends Kind> all, Function<YamlNode, ? extends Kind> chosen)
      implements Kind {
    @Override
    public void check(YamlNode node) {
      chosen.apply(node).check(node);
    }

    @Override
    public String words() {
      return "a group";
    }

    @Override
    public Map<String, Object> schema(Map<String, Object> shared) {
      return inOrder("anyOf", all.stream().map(kind -> kind.schema(shared)).toList());
    }
  }

  /** A value, or none: {@code null} in JSON. */
  record OrNull(Kind other) implements Kind {
    @Override
    public void check(YamlNode node) {
      if (!node.isEmpty()) {
        other.check(node);
      }
    }

    @Override
    public String words() {
      return other.words() + ", or null";
    }

    @Override
    public Map<String, Object> schema(Map<String, Object> shared) {
      return inOrder("anyOf", List.of(inOrder("type", "null"), other.schema(shared)));
    }
  }

  /** A group whose keys are not known beforehand, all of one kind. */
  record AnyKeys(Kind each) implements Kind {
    @Override
    public void check(YamlNode node) {
      node.keys().forEach(key -> each.check(node.get(key)));
    }

    @Override
    public String words() {
      return "a group, each " + each.words();
    }

    @Override
    public Map<String, Object> schema(Map<String, Object> shared) {
      return inOrder("type", "object", "additionalProperties", each.schema(shared));
    }
  }

  /** A group of keys that another reader checks. */
  record Elsewhere() implements Kind {
    @Override
    public void check(YamlNode node) {
      int unused = node.keys().size();
    }

    @Override
    public String words() {
      return "a group";
    }

    @Override
    public Map<String, Object> schema(Map<String, Object> shared) {
      return inOrder("type", "object");
    }
  }

  /** Words as code, for a table of the handbook. */
  static String code(List<String> words) {
    return "`" + String.join("`, `", words) + "`";
  }

  /** A map that keeps the order: key, value, key, value and so on. */
  static Map<String, Object> inOrder(Object... entries) {
    Map<String, Object> map = new LinkedHashMap<>();
    for (int i = 0; i < entries.length; i += 2) {
      map.put((String) entries[i], entries[i + 1]);
    }
    return map;
  }
}
