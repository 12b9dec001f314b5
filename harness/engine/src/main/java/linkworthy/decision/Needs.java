package linkworthy.decision;

import java.util.ArrayList;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Set;
import linkworthy.input.BadInput;
import linkworthy.input.YamlNode;

/**
 * What a codec must achieve to be chosen.
 *
 * @param confidence with which every statement of the shortlist together shall be right, above 0.5
 *     and below 1
 * @param needs all of which must be met
 */
public record Needs(double confidence, List<Need> needs) {
  /** Confidence where none is given. */
  public static final double CONFIDENCE = 0.95;

  private static final List<String> LEVELS =
      List.of("at-least", "at-most", "mean-at-least", "mean-at-most");

  /**
   * @throws IllegalArgumentException if the confidence is out of range or there is no need
   */
  public Needs {
    if (!(confidence > 0.5 && confidence < 1)) {
      throw new IllegalArgumentException(
          "confidence is " + confidence + "; accepted: above 0.5 and below 1");
    }
    if (needs.isEmpty()) {
      throw new IllegalArgumentException("there is no need; accepted: at least one");
    }
    needs = List.copyOf(needs);
  }

  /**
   * Reads needs that are to be judged by these measurements.
   *
   * @throws BadInput if a key, measure or word is unknown, a value out of range, or a {@code where}
   *     picks nothing
   */
  public static Needs read(YamlNode root, Measurements measured) {
    root.onlyKeys(inOrder("confidence", "needs"));
    YamlNode confidence = root.find("confidence").orElse(null);
    double level =
        confidence == null
            ? CONFIDENCE
            : between(confidence, 0.5, "a number above 0.5 and below 1, such as 0.95");
    List<Need> needs = new ArrayList<>();
    for (YamlNode need : root.get("needs").items()) {
      needs.add(need(need, measured));
    }
    return new Needs(level, needs);
  }

  private static Set<String> inOrder(String... keys) {
    return new LinkedHashSet<>(List.of(keys));
  }

  private static Need need(YamlNode node, Measurements measured) {
    node.onlyKeys(
        inOrder("measure", "at-least", "at-most", "mean-at-least", "mean-at-most", "for", "where"));
    YamlNode measure = node.get("measure");
    if (!measured.measures().contains(measure.text())) {
      throw Where.unknownMeasure(measure, measured.measures());
    }
    String key = level(node);
    double level = node.get(key).number("a number, in the unit of the measure");
    boolean atLeast = key.endsWith("at-least");
    double share = share(node, key, measure.text());
    YamlNode where = node.find("where").filter(w -> !w.keys().isEmpty()).orElse(null);
    String subject = Double.isNaN(share) ? "mean " + measure.text() : measure.text();
    return new Need(
        measure.text(),
        atLeast,
        level,
        share,
        where == null ? measured.noisyConditions() : new Where(measured).read(where),
        subject
            + (atLeast ? " at least " : " at most ")
            + Plain.number(level)
            + (Double.isNaN(share) ? "" : " for " + Plain.number(share * 100) + " % of pictures")
            + (where == null ? "" : ", where " + Where.text(where)));
  }

  private static String level(YamlNode node) {
    List<String> given = LEVELS.stream().filter(key -> node.find(key).isPresent()).toList();
    if (given.size() != 1) {
      throw node.refuse(
          "has "
              + (given.isEmpty() ? "no level" : String.join(" and ", given))
              + "; accepted: one of "
              + String.join(", ", LEVELS));
    }
    return given.get(0);
  }

  private static double share(YamlNode node, String key, String measure) {
    YamlNode share = node.find("for").orElse(null);
    if (share == null) {
      return Double.NaN;
    }
    if (key.startsWith("mean-")) {
      throw share.refuse("stands beside " + key + "; accepted: with at-least or at-most only");
    }
    if (measure.equals(Measurements.OUTAGE_RATE)) {
      throw share.refuse("stands with outage-rate; accepted: with measures of a picture only");
    }
    return between(
        share, 0, "a share above 0 and below 1 (no sample shows that every picture does)");
  }

  private static double between(YamlNode node, double low, String accepted) {
    double value = node.number(accepted);
    if (!(value > low && value < 1)) {
      throw node.bad(accepted);
    }
    return value;
  }
}
