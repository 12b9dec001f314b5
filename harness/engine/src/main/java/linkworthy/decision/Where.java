package linkworthy.decision;

import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.function.DoublePredicate;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import java.util.stream.Collectors;
import linkworthy.input.BadInput;
import linkworthy.input.Spelling;
import linkworthy.input.YamlNode;

/**
 * Reads in which conditions a need must be met. Keys: {@code impairment} and {@code acts-on} with a
 * word or a list of words, and any key by which a severity of the run was given, with a number or a
 * comparison such as {@code "<= 0.05"}, {@code "> 3"} or {@code "10 to 20"}, or a list of those.
 * {@code snr-db} also picks conditions whose severity was given by another key, by their mean
 * signal-to-noise ratio; the other keys pick only conditions given by them.
 */
final class Where {
  private static final String SNR = "snr-db";
  private static final String NUMBER = "([+-]?(?:\\d+\\.?\\d*|\\.\\d+)(?:[eE][+-]?\\d+)?)";
  private static final Pattern COMPARISON = Pattern.compile("(<=|>=|<|>|=)?\\s*" + NUMBER);
  private static final Pattern RANGE = Pattern.compile(NUMBER + "\\s+to\\s+" + NUMBER);

  private final Measurements measured;

  Where(Measurements measured) {
    this.measured = measured;
  }

  /**
   * The conditions that a {@code where} picks, in the order of the run.
   *
   * @throws BadInput if a key or a word is unknown, or nothing is picked
   */
  List<Measurements.Condition> read(YamlNode where) {
    Set<String> axes = axes();
    Set<String> keys = new LinkedHashSet<>(List.of("impairment", "acts-on"));
    keys.addAll(axes);
    where.onlyKeys(keys);
    List<Measurements.Condition> picked = measured.conditions();
    for (String key : keys) {
      YamlNode node = where.find(key).orElse(null);
      if (node != null) {
        List<Measurements.Condition> before = picked;
        picked = axes.contains(key) ? severities(before, key, node) : words(before, key, node);
        if (picked.isEmpty()) {
          throw node.refuse("picks no condition of the run; " + there(before, key));
        }
      }
    }
    return picked;
  }

  /** What the reader wrote, on one line. */
  static String text(YamlNode where) {
    return where.keys().stream()
        .map(
            key ->
                key
                    + " "
                    + where.get(key).oneOrMore().stream()
                        .map(YamlNode::text)
                        .collect(Collectors.joining(" or ")))
        .collect(Collectors.joining(", "));
  }

  private Set<String> axes() {
    Set<String> axes = new LinkedHashSet<>();
    measured.conditions().stream()
        .map(Measurements.Condition::axis)
        .filter(axis -> !axis.isEmpty())
        .forEach(axes::add);
    if (!axes.isEmpty()) {
      axes.add(SNR);
    }
    return axes;
  }

  private List<Measurements.Condition> words(
      List<Measurements.Condition> from, String key, YamlNode node) {
    Set<String> known =
        measured.conditions().stream()
            .map(condition -> word(condition, key))
            .filter(word -> !word.isEmpty())
            .collect(Collectors.toCollection(LinkedHashSet::new));
    List<String> wanted =
        node.oneOrMore().stream().map(word -> word.oneOf(List.copyOf(known))).toList();
    return from.stream().filter(condition -> wanted.contains(word(condition, key))).toList();
  }

  private static String word(Measurements.Condition condition, String key) {
    return key.equals("impairment") ? condition.impairment() : condition.actsOn();
  }

  private List<Measurements.Condition> severities(
      List<Measurements.Condition> from, String axis, YamlNode node) {
    List<DoublePredicate> wanted = node.oneOrMore().stream().map(Where::comparison).toList();
    return from.stream()
        .filter(condition -> wanted.stream().anyMatch(w -> w.test(value(condition, axis))))
        .toList();
  }

  /** NaN, which no comparison admits, where the condition has no such value. */
  private double value(Measurements.Condition condition, String axis) {
    if (condition.axis().equals(axis)) {
      return condition.severity();
    }
    return axis.equals(SNR) ? measured.snrDb(condition) : Double.NaN;
  }

  private static DoublePredicate comparison(YamlNode node) {
    String text = node.text().strip();
    Matcher range = RANGE.matcher(text);
    if (range.matches()) {
      double low = Double.parseDouble(range.group(1));
      double high = Double.parseDouble(range.group(2));
      return value -> value >= low && value <= high;
    }
    Matcher comparison = COMPARISON.matcher(text);
    if (!comparison.matches()) {
      throw node.bad("a number, a comparison as in \"<= 0.05\", or a range as in \"10 to 20\"");
    }
    double limit = Double.parseDouble(comparison.group(2));
    return switch (comparison.group(1) == null ? "=" : comparison.group(1)) {
      case "<=" -> value -> value <= limit;
      case ">=" -> value -> value >= limit;
      case "<" -> value -> value < limit;
      case ">" -> value -> value > limit;
      default -> value -> value == limit;
    };
  }

  private String there(List<Measurements.Condition> from, String key) {
    Map<String, Boolean> values = new LinkedHashMap<>();
    for (Measurements.Condition condition : from) {
      String value =
          axes().contains(key) ? Plain.number(value(condition, key)) : word(condition, key);
      values.put(value, true);
    }
    values.remove("n/a");
    values.remove("");
    return values.isEmpty()
        ? "the other keys leave none that has it"
        : "there are: " + String.join(", ", values.keySet());
  }

  /** The complaint about a measure that the run has not. */
  static BadInput unknownMeasure(YamlNode node, List<String> measures) {
    String found = node.line(80);
    List<String> longer = measures.stream().filter(m -> m.startsWith(found + "-")).toList();
    String hint =
        longer.isEmpty()
            ? Spelling.hint(found, measures)
            : "did you mean '" + longer.get(0) + "'? accepted: " + String.join(", ", measures);
    return node.refuse("is '" + found + "', of which the run has no figures; " + hint);
  }
}
