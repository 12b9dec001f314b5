package linkworthy.input;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.charset.CharacterCodingException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.NoSuchFileException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import tools.jackson.core.JacksonException;
import tools.jackson.core.JsonParser;
import tools.jackson.core.JsonToken;
import tools.jackson.dataformat.yaml.YAMLMapper;

/**
 * A value in a YAML file that knows where it stands, so that every error can say file, line and
 * key. Anchors, aliases, tags, repeated keys, files above 1 MiB and nesting deeper than 32 are
 * refused.
 */
public final class YamlNode {
  private static final int MAX_BYTES = 1 << 20;
  private static final int MAX_DEPTH = 32;
  private static final int MAX_NODES = 100_000;

  private final String source;
  private final int line;
  private final String path;
  private final Object value;

  private YamlNode(String source, int line, String path, Object value) {
    this.source = source;
    this.line = line;
    this.path = path;
    this.value = value;
  }

  /**
   * Reads a file.
   *
   * @throws BadInput if it is missing, too large, not UTF-8 or not the YAML accepted here
   * @throws Unavailable if it exists and cannot be read
   */
  public static YamlNode read(Path file) {
    try {
      if (Files.isDirectory(file)) {
        throw new BadInput(file + " is a folder; accepted: a YAML file");
      }
      if (Files.size(file) > MAX_BYTES) {
        throw new BadInput(file + " is larger than 1 MiB; accepted: a YAML file up to 1 MiB");
      }
      byte[] bytes = Files.readAllBytes(file);
      return parse(
          file.toString(),
          StandardCharsets.UTF_8.newDecoder().decode(ByteBuffer.wrap(bytes)).toString());
    } catch (NoSuchFileException e) {
      throw new BadInput(file + " does not exist", e);
    } catch (CharacterCodingException e) {
      throw new BadInput(file + " is not UTF-8 text; accepted: a YAML file in UTF-8", e);
    } catch (IOException e) {
      throw new Unavailable("cannot read " + file + ": " + e.getMessage(), e);
    }
  }

  /**
   * Parses text; {@code source} names it in messages.
   *
   * @throws BadInput if the text is not the YAML accepted here
   */
  public static YamlNode parse(String source, String text) {
    return new Parser(source, text).document();
  }

  /** The same document with the value at a dotted path replaced or added, as {@code --set} does. */
  public YamlNode with(String dottedPath, String yamlValue) {
    String label = "--set " + dottedPath;
    YamlNode replacement = parse(label, yamlValue);
    return replace(List.of(dottedPath.split("\\.", -1)), replacement, label);
  }

  private YamlNode replace(List<String> steps, YamlNode replacement, String label) {
    if (steps.isEmpty()) {
      return replacement.at(path);
    }
    String step = steps.get(0);
    List<String> rest = steps.subList(1, steps.size());
    if (value instanceof Sequence sequence) {
      List<YamlNode> items = new ArrayList<>(sequence.items);
      int index = step.matches("\\d{1,6}") ? Integer.parseInt(step) : -1;
      if (index < 0 || index >= items.size()) {
        throw new BadInput(
            label
                + ": '"
                + step
                + "' is no item of "
                + describePath()
                + "; accepted: 0 to "
                + (items.size() - 1));
      }
      items.set(index, items.get(index).replace(rest, replacement, label));
      return new YamlNode(source, line, path, new Sequence(items));
    }
    if (value instanceof Mapping mapping && !step.isEmpty()) {
      Map<String, YamlNode> entries = new LinkedHashMap<>(mapping.entries);
      YamlNode child = entries.get(step);
      if (child == null) {
        child =
            new YamlNode(
                label, 1, path.isEmpty() ? step : path + "." + step, new Mapping(Map.of()));
      }
      entries.put(step, child.replace(rest, replacement, label));
      return new YamlNode(source, line, path, new Mapping(entries));
    }
    throw new BadInput(label + ": " + describePath() + " has no keys; accepted: a path to a value");
  }

  private YamlNode at(String newPath) {
    return new YamlNode(source, line, newPath, value);
  }

  private String describePath() {
    return path.isEmpty() ? "the document" : "'" + path + "'";
  }

  /** Keys of a mapping, in file order. */
  public Set<String> keys() {
    return mapping().entries.keySet();
  }

  public boolean isMapping() {
    return value instanceof Mapping;
  }

  public boolean isSequence() {
    return value instanceof Sequence;
  }

  /** The file or option the node came from. */
  public String source() {
    return source;
  }

  /** One-based line in {@link #source()}. */
  public int line() {
    return line;
  }

  /**
   * This mapping, after checking that it has no other keys than these.
   *
   * @throws BadInput if it is no mapping or has another key; the nearest accepted key is named
   */
  public YamlNode onlyKeys(Set<String> accepted) {
    for (Map.Entry<String, YamlNode> entry : mapping().entries.entrySet()) {
      if (!accepted.contains(entry.getKey())) {
        throw new BadInput(
            entry.getValue().where()
                + "unknown key '"
                + entry.getKey()
                + "'"
                + (path.isEmpty() ? "" : " in " + path)
                + "; "
                + Spelling.hint(entry.getKey(), accepted));
      }
    }
    return this;
  }

  /** The value of a key, if the key is there. */
  public Optional<YamlNode> find(String key) {
    return Optional.ofNullable(mapping().entries.get(key));
  }

  /**
   * The value of a key that must be there.
   *
   * @throws BadInput if it is missing
   */
  public YamlNode get(String key) {
    YamlNode child = mapping().entries.get(key);
    if (child == null) {
      throw new BadInput(
          where() + "missing key '" + key + "'" + (path.isEmpty() ? "" : " in " + path));
    }
    return child;
  }

  /**
   * The items of a list that has at least one.
   *
   * @throws BadInput if this is no list, or an empty one
   */
  public List<YamlNode> items() {
    if (!(value instanceof Sequence sequence)) {
      throw bad("a list");
    }
    if (sequence.items.isEmpty()) {
      throw bad("a list with at least one item");
    }
    return sequence.items;
  }

  /** The items of a list, or this value alone where one value was written. */
  public List<YamlNode> oneOrMore() {
    return value instanceof Sequence ? items() : List.of(this);
  }

  /**
   * @throws BadInput if this is no text (a number counts as text)
   */
  public String text() {
    if (value instanceof Scalar scalar && !scalar.text.isBlank() && !scalar.isNull) {
      return scalar.text;
    }
    throw bad("some text");
  }

  /**
   * @throws BadInput if this is no finite number; {@code accepted} says which numbers are
   */
  public double number(String accepted) {
    if (value instanceof Scalar scalar
        && scalar.plain
        && scalar.text.matches("[-+]?(\\d+\\.?\\d*|\\.\\d+)([eE][-+]?\\d+)?")) {
      double number = Double.parseDouble(scalar.text);
      if (Double.isFinite(number)) {
        return number;
      }
    }
    throw bad(accepted);
  }

  /**
   * @throws BadInput if this is no whole number from {@code min} to {@code max}
   */
  public long integer(long min, long max) {
    String accepted = "a whole number from " + min + " to " + max;
    if (value instanceof Scalar scalar && scalar.plain && scalar.text.matches("[-+]?\\d{1,18}")) {
      long number = Long.parseLong(scalar.text);
      if (number >= min && number <= max) {
        return number;
      }
    }
    throw bad(accepted);
  }

  /**
   * @throws BadInput if this is neither true nor false
   */
  public boolean flag() {
    if (value instanceof Scalar scalar && scalar.plain) {
      if (scalar.text.equals("true")) {
        return true;
      }
      if (scalar.text.equals("false")) {
        return false;
      }
    }
    throw bad("true or false");
  }

  /**
   * @throws BadInput if the text is none of these words
   */
  public String oneOf(List<String> accepted) {
    String text = text();
    if (!accepted.contains(text)) {
      throw refuse("is '" + text + "'; " + Spelling.hint(text, accepted));
    }
    return text;
  }

  /** An error at this place: what was found here and what is accepted instead. */
  public BadInput bad(String accepted) {
    return refuse("is " + found() + "; accepted: " + accepted);
  }

  /** An error at this place with a sentence of the caller's own after the key. */
  public BadInput refuse(String complaint) {
    return new BadInput(where() + describePath() + " " + complaint);
  }

  private String found() {
    if (value instanceof Mapping) {
      return "a group of keys";
    }
    if (value instanceof Sequence sequence) {
      return sequence.items.isEmpty() ? "an empty list" : "a list";
    }
    Scalar scalar = (Scalar) value;
    return scalar.isNull ? "empty" : "'" + shortened(scalar.text) + "'";
  }

  private static String shortened(String text) {
    String oneLine = text.replaceAll("\\s+", " ");
    return oneLine.length() > 60 ? oneLine.substring(0, 57) + "..." : oneLine;
  }

  private String where() {
    return source.startsWith("--set ") ? source + ": " : source + ", line " + line + ": ";
  }

  private Mapping mapping() {
    if (value instanceof Mapping mapping) {
      return mapping;
    }
    throw bad("keys with values");
  }

  private record Mapping(Map<String, YamlNode> entries) {}

  private record Sequence(List<YamlNode> items) {}

  private record Scalar(String text, boolean plain, boolean isNull) {}

  /** Walks the token stream; nothing is expanded. */
  private static final class Parser {
    private static final YAMLMapper MAPPER = new YAMLMapper();

    private final String source;
    private final String text;
    private int nodes;

    Parser(String source, String text) {
      this.source = source;
      this.text = text;
    }

    YamlNode document() {
      try (JsonParser parser = MAPPER.createParser(text)) {
        JsonToken first = parser.nextToken();
        if (first == null) {
          throw new BadInput(source + " is empty; accepted: keys with values");
        }
        YamlNode root = node(parser, first, "", 0);
        if (parser.nextToken() != null) {
          throw new BadInput(source + " holds several documents; accepted: one");
        }
        return root;
      } catch (JacksonException e) {
        int line = e.getLocation() == null ? 1 : Math.max(1, e.getLocation().getLineNr());
        String problem = e.getOriginalMessage().lines().findFirst().orElse("not YAML");
        throw new BadInput(source + ", line " + line + ": not valid YAML: " + problem, e);
      }
    }

    private YamlNode node(JsonParser parser, JsonToken token, String path, int depth) {
      int line = parser.currentTokenLocation().getLineNr();
      if (depth > MAX_DEPTH || ++nodes > MAX_NODES) {
        throw new BadInput(
            source
                + ", line "
                + line
                + ": nested too deep or too long; accepted: depth up to "
                + MAX_DEPTH
                + ", up to "
                + MAX_NODES
                + " values");
      }
      refuseAnchors(parser, line);
      return switch (token) {
        case START_OBJECT -> new YamlNode(source, line, path, mapping(parser, path, depth));
        case START_ARRAY -> new YamlNode(source, line, path, sequence(parser, path, depth));
        default -> new YamlNode(source, line, path, scalar(parser, token));
      };
    }

    private void refuseAnchors(JsonParser parser, int line) {
      Object anchor = parser.getObjectId();
      if (anchor != null || parser.getTypeId() != null || isAlias(parser)) {
        throw new BadInput(
            source + ", line " + line + ": anchors, aliases and tags are not accepted");
      }
    }

    private static boolean isAlias(JsonParser parser) {
      return parser instanceof tools.jackson.dataformat.yaml.YAMLParser yaml
          && yaml.isCurrentAlias();
    }

    private Mapping mapping(JsonParser parser, String path, int depth) {
      Map<String, YamlNode> entries = new LinkedHashMap<>();
      while (parser.nextToken() != JsonToken.END_OBJECT) {
        String key = parser.currentName();
        int line = parser.currentTokenLocation().getLineNr();
        refuseAnchors(parser, line);
        String childPath = path.isEmpty() ? key : path + "." + key;
        YamlNode child = node(parser, parser.nextToken(), childPath, depth + 1);
        if (entries.put(key, new YamlNode(source, line, childPath, child.value)) != null) {
          throw new BadInput(source + ", line " + line + ": key '" + childPath + "' stands twice");
        }
      }
      return new Mapping(entries);
    }

    private Sequence sequence(JsonParser parser, String path, int depth) {
      List<YamlNode> items = new ArrayList<>();
      for (JsonToken t = parser.nextToken(); t != JsonToken.END_ARRAY; t = parser.nextToken()) {
        items.add(node(parser, t, path + "[" + items.size() + "]", depth + 1));
      }
      return new Sequence(items);
    }

    private static Scalar scalar(JsonParser parser, JsonToken token) {
      @Nullable String text = parser.getString();
      boolean plain = token != JsonToken.VALUE_STRING;
      return new Scalar(text == null ? "" : text, plain, token == JsonToken.VALUE_NULL);
    }
  }
}
