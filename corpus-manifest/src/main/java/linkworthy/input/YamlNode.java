package linkworthy.input;

import java.io.IOException;
import java.io.InputStream;
import java.nio.ByteBuffer;
import java.nio.charset.CharacterCodingException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.NoSuchFileException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Iterator;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.Set;
import org.jspecify.annotations.Nullable;
import org.snakeyaml.engine.v2.api.LoadSettings;
import org.snakeyaml.engine.v2.api.lowlevel.Parse;
import org.snakeyaml.engine.v2.events.CollectionStartEvent;
import org.snakeyaml.engine.v2.events.Event;
import org.snakeyaml.engine.v2.events.MappingStartEvent;
import org.snakeyaml.engine.v2.events.NodeEvent;
import org.snakeyaml.engine.v2.events.ScalarEvent;
import org.snakeyaml.engine.v2.events.SequenceStartEvent;
import org.snakeyaml.engine.v2.exceptions.MarkedYamlEngineException;
import org.snakeyaml.engine.v2.exceptions.YamlEngineException;

/**
 * A value in a YAML file that knows where it stands, so that every error can say file, line and
 * key. Anchors, aliases, tags, repeated keys, files above 1 MiB, more than 100 000 values and
 * nesting deeper than 32 are refused. Numbers are plain decimals as {@code 8}, {@code .5} or {@code
 * 1e-3}; quoted ones are text.
 */
public final class YamlNode {
  private static final int MAX_BYTES = 1 << 20;
  private static final int MAX_DEPTH = 32;
  private static final int MAX_NODES = 100_000;
  private static final String OPTION = "--set ";
  private static final Set<String> NULLS = Set.of("", "~", "null", "Null", "NULL");

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
      byte[] bytes;
      try (InputStream in = Files.newInputStream(file)) {
        bytes = in.readNBytes(MAX_BYTES + 1);
      }
      if (bytes.length > MAX_BYTES) {
        throw new BadInput(file + " is larger than 1 MiB; accepted: a YAML file up to 1 MiB");
      }
      return parse(
          file.toString(),
          StandardCharsets.UTF_8.newDecoder().decode(ByteBuffer.wrap(bytes)).toString());
    } catch (NoSuchFileException e) {
      throw new BadInput(file + " does not exist", e);
    } catch (CharacterCodingException e) {
      throw new BadInput(file + " is not UTF-8 text; accepted: a YAML file in UTF-8", e);
    } catch (IOException e) {
      throw Unavailable.cannot("read " + file, e);
    }
  }

  /**
   * Parses text; {@code source} names it in messages.
   *
   * @throws BadInput if the text is not the YAML accepted here
   */
  public static YamlNode parse(String source, String text) {
    return new Parser(source, text).document("");
  }

  /**
   * The same document with the value at a dotted path replaced or added, as {@code --set} does. A
   * step is a key, or an item's number from 0 where the document has a list.
   *
   * @throws BadInput if the path leads nowhere or the value is not the YAML accepted here
   */
  public YamlNode with(String dottedPath, String yamlValue) {
    String label = OPTION + dottedPath;
    return replace(List.of(dottedPath.split("\\.", -1)), yamlValue, label);
  }

  /**
   * This document with several values set, one after the other.
   *
   * @param settings each {@code key.path=value}
   * @throws BadInput as the other method, or if a setting is none
   */
  public YamlNode with(List<String> settings) {
    YamlNode root = this;
    for (String setting : settings) {
      int equals = setting.indexOf('=');
      if (equals < 1) {
        throw new BadInput(OPTION.strip() + " is '" + setting + "'; accepted: key.path=value");
      }
      root = root.with(setting.substring(0, equals), setting.substring(equals + 1));
    }
    return root;
  }

  private YamlNode replace(List<String> steps, String yamlValue, String label) {
    if (steps.isEmpty()) {
      return new Parser(label, yamlValue).document(path);
    }
    String step = steps.get(0);
    List<String> rest = steps.subList(1, steps.size());
    if (value instanceof Sequence sequence) {
      List<YamlNode> items = new ArrayList<>(sequence.items);
      int index = step.matches("[0-9]{1,6}") ? Integer.parseInt(step) : -1;
      if (index < 0 || index >= items.size()) {
        throw new BadInput(
            label
                + ": '"
                + step
                + "' is no item of "
                + describePath()
                + "; accepted: "
                + indices(items));
      }
      items.set(index, items.get(index).replace(rest, yamlValue, label));
      return new YamlNode(source, line, path, new Sequence(items));
    }
    if (value instanceof Mapping mapping && !step.isBlank()) {
      Map<String, YamlNode> entries = new LinkedHashMap<>(mapping.entries);
      String childPath = path.isEmpty() ? step : path + "." + step;
      YamlNode missing = new YamlNode(label, 1, childPath, new Mapping(Map.of()));
      YamlNode child = entries.getOrDefault(step, missing);
      entries.put(step, child.replace(rest, yamlValue, label));
      return new YamlNode(source, line, path, new Mapping(entries));
    }
    throw new BadInput(
        label
            + (step.isBlank() ? ": an empty key" : ": " + describePath() + " has no keys")
            + "; accepted: a path to a value");
  }

  private static String indices(List<YamlNode> items) {
    return items.isEmpty() ? "nothing, the list is empty" : "0 to " + (items.size() - 1);
  }

  private String describePath() {
    return path.isEmpty() ? "the document" : "'" + shortened(path) + "'";
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

  /** Whether the key has no value at all. */
  public boolean isEmpty() {
    return value instanceof Scalar scalar && (scalar.isNull || scalar.text.isBlank());
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
                + shortened(entry.getKey())
                + "'"
                + (path.isEmpty() ? "" : " in " + shortened(path))
                + "; "
                + Spelling.hint(entry.getKey(), withThoseElsewhere(accepted)));
      }
    }
    return this;
  }

  private Set<String> withThoseElsewhere(Set<String> accepted) {
    Set<String> all = new LinkedHashSet<>(accepted);
    all.addAll(mapping().elsewhere);
    return all;
  }

  /**
   * The same group without a key that another reader takes care of; {@link #onlyKeys} still names
   * it among the accepted ones.
   */
  public YamlNode without(String key) {
    Map<String, YamlNode> entries = new LinkedHashMap<>(mapping().entries);
    entries.remove(key);
    Set<String> elsewhere = new LinkedHashSet<>(mapping().elsewhere);
    elsewhere.add(key);
    return new YamlNode(source, line, path, new Mapping(entries, elsewhere));
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
          where() + "missing key '" + key + "'" + (path.isEmpty() ? "" : " in " + shortened(path)));
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
    String text = textOrNull();
    if (text == null) {
      throw bad("some text");
    }
    return text;
  }

  private @Nullable String textOrNull() {
    return value instanceof Scalar scalar && !scalar.text.isBlank() && !scalar.isNull
        ? scalar.text
        : null;
  }

  /**
   * Text for a heading or a name in a table, without blanks at its ends.
   *
   * @throws BadInput if this is no text, longer than {@code longest} characters, or has a line
   *     break or another control character
   */
  public String line(int longest) {
    String line = text().strip();
    if (line.length() > longest
        || line.chars().anyMatch(c -> Character.isISOControl(c) || c == 0x2028 || c == 0x2029)) {
      throw bad("one line of up to " + longest + " characters");
    }
    return line;
  }

  /**
   * @throws BadInput if this is no finite number; {@code accepted} says which numbers are
   */
  public double number(String accepted) {
    if (value instanceof Scalar scalar
        && scalar.plain
        && scalar.text.matches("[-+]?([0-9]+\\.?[0-9]*|\\.[0-9]+)([eE][-+]?[0-9]+)?")) {
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
    if (value instanceof Scalar scalar && scalar.plain && scalar.text.matches("[-+]?[0-9]{1,18}")) {
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
    String text = textOrNull();
    if (text == null) {
      throw refuse("is " + found() + "; " + Spelling.hint("", accepted));
    }
    if (!accepted.contains(text)) {
      throw refuse("is '" + shortened(text) + "'; " + Spelling.hint(text, accepted));
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
    return place(source, line);
  }

  private static String place(String source, int line) {
    return isOption(source) ? source + ": " : source + ", line " + line + ": ";
  }

  private static boolean isOption(String source) {
    return source.startsWith(OPTION);
  }

  private Mapping mapping() {
    if (value instanceof Mapping mapping) {
      return mapping;
    }
    throw bad("keys with values");
  }

  /**
   * @param elsewhere keys that are accepted but read by others
   */
  private record Mapping(Map<String, YamlNode> entries, Set<String> elsewhere) {
    Mapping(Map<String, YamlNode> entries) {
      this(entries, Set.of());
    }
  }

  private record Sequence(List<YamlNode> items) {}

  private record Scalar(String text, boolean plain, boolean isNull) {}

  /** Walks the event stream; nothing is expanded. */
  private static final class Parser {
    private static final LoadSettings SETTINGS =
        LoadSettings.builder().setCodePointLimit(MAX_BYTES).build();

    private final String source;
    private final Iterator<Event> events;
    private int nodes;

    Parser(String source, String text) {
      this.source = source;
      this.events = new Parse(SETTINGS).parseString(text).iterator();
    }

    YamlNode document(String path) {
      try {
        events.next();
        if (events.next().getEventId() == Event.ID.StreamEnd) {
          throw empty();
        }
        Event first = events.next();
        if (first instanceof ScalarEvent scalar
            && scalar.isPlain()
            && scalar.getValue().isEmpty()) {
          throw empty();
        }
        YamlNode root = node(first, path, 0);
        events.next();
        if (events.next().getEventId() != Event.ID.StreamEnd) {
          throw new BadInput(source + " holds several documents; accepted: one");
        }
        return root;
      } catch (MarkedYamlEngineException e) {
        int line = e.getProblemMark().map(mark -> mark.getLine() + 1).orElse(1);
        throw new BadInput(place(source, line) + "not valid YAML: " + e.getProblem(), e);
      } catch (YamlEngineException e) {
        String problem = String.valueOf(e.getMessage()).lines().findFirst().orElse("");
        throw new BadInput(source + ": not valid YAML: " + problem, e);
      }
    }

    private BadInput empty() {
      return new BadInput(
          source + " is empty; accepted: " + (isOption(source) ? "a value" : "keys with values"));
    }

    private YamlNode node(Event event, String path, int depth) {
      int line = line(event);
      if (depth > MAX_DEPTH || ++nodes > MAX_NODES) {
        throw new BadInput(
            place(source, line)
                + "nested too deep or too long; accepted: depth up to "
                + MAX_DEPTH
                + ", up to "
                + MAX_NODES
                + " values");
      }
      refuseAnchorsAndTags(event, line);
      if (event instanceof MappingStartEvent) {
        return new YamlNode(source, line, path, mapping(path, depth));
      }
      if (event instanceof SequenceStartEvent) {
        return new YamlNode(source, line, path, sequence(path, depth));
      }
      return new YamlNode(source, line, path, scalar((ScalarEvent) event));
    }

    private static int line(Event event) {
      return event.getStartMark().map(mark -> mark.getLine() + 1).orElse(1);
    }

    private void refuseAnchorsAndTags(Event event, int line) {
      boolean tagged =
          (event instanceof ScalarEvent scalar && scalar.getTag().isPresent())
              || (event instanceof CollectionStartEvent start && start.getTag().isPresent());
      boolean anchored = event instanceof NodeEvent node && node.getAnchor().isPresent();
      if (tagged || anchored) {
        throw new BadInput(
            place(source, line)
                + "anchors, aliases and tags are not accepted; write the value out");
      }
    }

    private Mapping mapping(String path, int depth) {
      Map<String, YamlNode> entries = new LinkedHashMap<>();
      for (Event e = events.next(); e.getEventId() != Event.ID.MappingEnd; e = events.next()) {
        int line = line(e);
        refuseAnchorsAndTags(e, line);
        if (!(e instanceof ScalarEvent scalar) || scalar.getValue().isBlank()) {
          throw new BadInput(
              place(source, line) + "a key is a list, a group or empty; accepted: a word");
        }
        String key = scalar.getValue();
        String childPath = path.isEmpty() ? key : path + "." + key;
        YamlNode child = node(events.next(), childPath, depth + 1);
        if (entries.put(key, new YamlNode(source, line, childPath, child.value)) != null) {
          throw new BadInput(
              place(source, line) + "key '" + shortened(childPath) + "' stands twice");
        }
      }
      return new Mapping(entries);
    }

    private Sequence sequence(String path, int depth) {
      List<YamlNode> items = new ArrayList<>();
      for (Event e = events.next(); e.getEventId() != Event.ID.SequenceEnd; e = events.next()) {
        items.add(node(e, path + "[" + items.size() + "]", depth + 1));
      }
      return new Sequence(items);
    }

    private static Scalar scalar(ScalarEvent event) {
      String text = event.getValue();
      boolean plain = event.isPlain();
      return new Scalar(text, plain, plain && NULLS.contains(text));
    }
  }
}
