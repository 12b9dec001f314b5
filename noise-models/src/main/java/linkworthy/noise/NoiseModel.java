package linkworthy.noise;

import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Collection;
import java.util.Collections;
import java.util.Comparator;
import java.util.HexFormat;
import java.util.List;
import java.util.Map;
import java.util.TreeMap;
import java.util.function.UnaryOperator;
import java.util.regex.Pattern;
import java.util.stream.Collectors;
import linkworthy.input.BadInput;
import linkworthy.input.Decimal;
import linkworthy.input.Key;
import linkworthy.input.KeyGroup;
import linkworthy.input.Kind;
import linkworthy.input.Require;
import linkworthy.input.Spelling;
import linkworthy.input.YamlNode;

/**
 * A noise process with its parameters set, as a model file says. The file's keys are described in
 * the package comment.
 *
 * @param id lower-case letters, digits and hyphens, starting with a letter, at most 64
 * @param version from 1; counts up when the model is changed
 * @param implementation the process that draws this model's noise, set up as the model says
 * @param actsOn where the model may act, the usual place first
 * @param parameters every parameter of the process, in the order of the names; those not given take
 *     the process's default
 * @param axes severity axes the model may be set by
 * @param source where the numbers come from
 * @param notes anything else a reader should know, or empty
 */
public record NoiseModel(
    String id,
    int version,
    NoiseProcess implementation,
    List<Site> actsOn,
    Map<String, Double> parameters,
    List<String> axes,
    String source,
    String notes) {
  private static final Pattern ID = Pattern.compile("[a-z][a-z0-9-]{0,63}");
  private static final String ID_ACCEPTED =
      "lower-case letters, digits and hyphens, starting with a letter, at most 64";
  private static final int MAX_VERSION = 1_000_000;
  private static final Kind.Whole VERSION = new Kind.Whole(1, MAX_VERSION);
  private static final Kind.Text TEXT = Kind.Text.any();
  private static final Kind.Choice KIND =
      new Kind.Choice(
          NoiseProcesses.all().values().stream().map(NoiseModel::group).toList(),
          node -> {
            List<String> ids = List.copyOf(NoiseProcesses.all().keySet());
            return group(NoiseProcesses.find(node.get("process").oneOf(ids)));
          });

  /**
   * @throws BadInput if the process does not allow a site, an axis or a parameter, or a parameter
   *     lies outside its range
   * @throws IllegalArgumentException if the id, the version or the source is not as described, or a
   *     list is empty
   */
  public NoiseModel {
    if (!ID.matcher(id).matches()) {
      throw new IllegalArgumentException("model id is '" + id + "'; accepted: " + ID_ACCEPTED);
    }
    Require.inRange(version, 1, MAX_VERSION, "model version");
    Require.notBlank(source, "model source");
    actsOn = List.copyOf(actsOn);
    axes = List.copyOf(axes);
    Require.inRange(actsOn.size(), 1, Site.values().length, "number of sites");
    Require.inRange(axes.size(), 1, implementation.axes().size(), "number of severity axes");
    Map<String, Double> effective = new TreeMap<>(implementation.parameters());
    effective.putAll(parameters);
    effective.replaceAll((name, value) -> value + 0.0);
    parameters = Collections.unmodifiableMap(effective);
    for (String axis : axes) {
      SeverityChecks.axis(implementation, axis);
    }
    for (Site site : actsOn) {
      implementation.checkParameters(parameters, site);
    }
  }

  /**
   * A model of a process that needs no settings.
   *
   * @param process id of the noise process
   * @throws BadInput as the other constructor, or if there is no such process
   */
  public NoiseModel(
      String id,
      int version,
      String process,
      List<Site> actsOn,
      Map<String, Double> parameters,
      List<String> axes,
      String source,
      String notes) {
    this(id, version, NoiseProcesses.find(process), actsOn, parameters, axes, source, notes);
  }

  /**
   * Reads a model file.
   *
   * @throws BadInput if it is no valid model; the line, what was found and what is accepted
   */
  public static NoiseModel read(Path file) {
    return parse(YamlNode.read(file), name -> SettingFiles.read(file, name));
  }

  /**
   * Reads a model from YAML that stands alone.
   *
   * @throws BadInput if it is no valid model or names another file; the line, what was found and
   *     what is accepted
   */
  public static NoiseModel parse(YamlNode node) {
    return parse(
        node,
        name -> {
          throw new BadInput("it names a file, and this model is in no folder");
        });
  }

  /**
   * Reads a model from YAML.
   *
   * @param files content of a file by its name relative to the model
   */
  static NoiseModel parse(YamlNode node, UnaryOperator<String> files) {
    KIND.check(node);
    YamlNode id = node.get("id");
    int version = VERSION.read(node.get("version"));
    NoiseProcess process = setUp(node, NoiseProcesses.find(node.get("process").text()), files);
    List<Site> actsOn = sites(node.get("acts-on"), process);
    List<String> axes = distinct(node.get("severity"), process.axes());
    Map<String, Double> parameters =
        node.find("parameters").map(given -> parameters(given, process)).orElse(Map.of());
    String source = node.get("source").text();
    String notes = node.find("notes").map(YamlNode::text).orElse("");
    try {
      return new NoiseModel(id.text(), version, process, actsOn, parameters, axes, source, notes);
    } catch (BadInput e) {
      throw node.find("parameters").orElse(node).refuse("cannot be used: " + e.getMessage());
    }
  }

  /** What a model file may hold: a group of keys for each process. */
  public static Kind.Choice kind() {
    return KIND;
  }

  /** What a model file of a process may hold. */
  public static KeyGroup group(NoiseProcess process) {
    List<Key> keys =
        new ArrayList<>(
            List.of(
                Key.required(
                    "id", new Kind.Text(ID.pattern(), ID_ACCEPTED), "name in studies and results"),
                Key.required("version", VERSION, "counts up when the model changes"),
                Key.required("process", Kind.Words.of(process.id()), "noise process that draws it"),
                Key.required(
                    "acts-on",
                    words(process.sites().stream().map(Site::id).toList()),
                    "where it hurts, the usual place first"),
                Key.optional(
                    "parameters",
                    new KeyGroup(
                        process.id() + "-parameters", parameterKeys(process), List.of(), ""),
                    "the process's defaults",
                    "parameters of the process"),
                Key.required(
                    "severity",
                    words(axisKeys(process).stream().map(Key::name).toList()),
                    "keys by which a study may give the severity"),
                Key.required("source", TEXT, "where the numbers come from"),
                Key.optional("notes", TEXT, "none", "what else a reader should know")));
    process.keys().stream()
        .filter(key -> process.settingKeys().contains(key.name()))
        .forEach(keys::add);
    return new KeyGroup(process.id(), keys, List.of(), "");
  }

  private static Kind words(List<String> accepted) {
    return new Kind.OneOrMore(new Kind.Words(accepted));
  }

  /** The keys by which severities of a process are given, whatever its settings. */
  public static List<Key> axisKeys(NoiseProcess process) {
    List<Key> keys = new ArrayList<>();
    if (process.axes().contains(Severity.VARIANCE)) {
      keys.addAll(SeverityChecks.COMMON_AXES);
    }
    process.keys().stream()
        .filter(key -> !process.parameters().containsKey(key.name()))
        .filter(key -> !process.settingKeys().contains(key.name()))
        .forEach(keys::add);
    return keys;
  }

  /** The keys of the parameters of a process. */
  public static List<Key> parameterKeys(NoiseProcess process) {
    return process.keys().stream()
        .filter(key -> process.parameters().containsKey(key.name()))
        .toList();
  }

  /** What a study may write for each parameter of this model, with the model's own values. */
  public List<Key> parameterKeys() {
    return implementation.keys().stream()
        .filter(key -> parameters.containsKey(key.name()))
        .map(key -> Key.optional(key.name(), key.kind(), written(key.name()), key.what()))
        .toList();
  }

  private String written(String parameter) {
    double value = parameters.getOrDefault(parameter, Double.NaN);
    return implementation.flags().contains(parameter)
        ? Boolean.toString(value != 0)
        : value == Math.rint(value) ? Long.toString((long) value) : Decimal.shortest(value);
  }

  /** What a study may write for each severity axis of this model. */
  public List<Key> axisKeys() {
    return axisKeys(implementation).stream().filter(key -> axes.contains(key.name())).toList();
  }

  private static NoiseProcess setUp(
      YamlNode node, NoiseProcess plain, UnaryOperator<String> files) {
    Map<String, String> settings = new TreeMap<>();
    for (String key : plain.settingKeys()) {
      node.find(key)
          .ifPresent(
              value -> {
                try {
                  String text = value.text();
                  boolean isFile = plain.fileKeys().contains(key);
                  settings.put(key, isFile ? files.apply(text) : text);
                  plain.with(Map.copyOf(settings));
                } catch (BadInput e) {
                  throw value.refuse("cannot be used: " + e.getMessage());
                }
              });
    }
    return plain.with(settings);
  }

  private static List<Site> sites(YamlNode node, NoiseProcess process) {
    List<String> words =
        distinct(node, process.sites().stream().map(Site::id).collect(Collectors.toList()));
    return process.sites().stream()
        .filter(site -> words.contains(site.id()))
        .sorted(Comparator.comparingInt(site -> words.indexOf(site.id())))
        .toList();
  }

  private static List<String> distinct(YamlNode node, Collection<String> accepted) {
    List<String> words = new ArrayList<>();
    for (YamlNode item : node.oneOrMore()) {
      String word = item.oneOf(List.copyOf(accepted));
      if (words.contains(word)) {
        throw item.refuse("is '" + word + "' a second time; accepted: each word once");
      }
      words.add(word);
    }
    return words;
  }

  private static Map<String, Double> parameters(YamlNode node, NoiseProcess process) {
    Map<String, Double> values = new TreeMap<>();
    for (String name : node.keys()) {
      YamlNode value = node.get(name);
      boolean isFlag = process.flags().contains(name);
      values.put(name, isFlag ? (value.flag() ? 1.0 : 0.0) : value.number("a number"));
    }
    return values;
  }

  /** The parameters without {@link NoiseProcess#laterParameters} at their default. */
  public Map<String, Double> recordedParameters() {
    Map<String, Double> recorded = new TreeMap<>(parameters);
    implementation
        .laterParameters()
        .forEach(name -> recorded.remove(name, implementation.parameters().get(name)));
    return recorded;
  }

  /** Id of the noise process. */
  public String process() {
    return implementation.id();
  }

  /**
   * The same model with some parameters replaced.
   *
   * @throws BadInput if the model has no such parameter, or a value lies outside its range
   */
  public NoiseModel with(Map<String, Double> overrides) {
    for (String name : overrides.keySet()) {
      requireKnown(name, parameters.keySet(), "parameter");
    }
    Map<String, Double> merged = new TreeMap<>(parameters);
    merged.putAll(overrides);
    try {
      return new NoiseModel(id, version, implementation, actsOn, merged, axes, source, notes);
    } catch (BadInput e) {
      throw new BadInput("noise model '" + id + "': " + e.getMessage(), e);
    }
  }

  /**
   * Checks what can be checked without a picture: that the model may be set by this axis at this
   * site, and the value's range.
   *
   * @throws BadInput if not
   */
  public void check(Severity severity, Site site) {
    requireKnown(site.id(), actsOn.stream().map(Site::id).toList(), "site");
    requireKnown(severity.axis(), axes, "severity axis");
    implementation.check(severity, parameters, site);
  }

  /**
   * Resolves a severity for one picture.
   *
   * @throws BadInput as {@link #check}, or if the severity cannot be reached on this picture
   */
  public Impairment at(Severity severity, Site site, SignalStatistics signal) {
    check(severity, site);
    return implementation.at(severity, parameters, site, signal);
  }

  /**
   * All that decides the numbers and the model's identity, one {@code key: value} a line: not the
   * source and the notes, but the process's revision and the SHA-256 of files it uses. Numbers are
   * in hexadecimal, which no Java version writes differently.
   */
  public String canonical() {
    StringBuilder text = new StringBuilder();
    line(text, "id", id);
    line(text, "version", Integer.toString(version));
    line(text, "process", process());
    line(text, "revision", Integer.toString(implementation.revision()));
    line(text, "acts-on", actsOn.stream().map(Site::id).collect(Collectors.joining(", ")));
    recordedParameters()
        .forEach((name, value) -> line(text, "parameters." + name, Double.toHexString(value)));
    new TreeMap<>(implementation.settings())
        .forEach(
            (key, value) ->
                line(
                    text,
                    "setting." + key,
                    implementation.fileKeys().contains(key) ? "sha256 " + digest(value) : value));
    line(text, "severity", String.join(", ", axes));
    return text.toString();
  }

  /** SHA-256 of {@link #canonical()} in UTF-8, as 64 lower-case hexadecimal digits. */
  public String fingerprint() {
    return digest(canonical());
  }

  private static String digest(String text) {
    return HexFormat.of().formatHex(NoiseStreams.sha256(text.getBytes(StandardCharsets.UTF_8)));
  }

  private static void line(StringBuilder text, String key, String value) {
    text.append(key).append(": ").append(value).append('\n');
  }

  private void requireKnown(String found, Collection<String> accepted, String what) {
    if (!accepted.contains(found)) {
      throw new BadInput(
          "noise model '%s' has no %s '%s'; %s"
              .formatted(
                  id,
                  what,
                  found,
                  accepted.isEmpty() ? "it has none" : Spelling.hint(found, accepted)));
    }
  }
}
