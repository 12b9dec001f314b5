package linkworthy.decision;

import java.util.ArrayList;
import java.util.List;
import java.util.Set;
import java.util.stream.Collectors;
import linkworthy.input.BadInput;
import linkworthy.input.Key;
import linkworthy.input.KeyGroup;
import linkworthy.input.Kind;
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
  private static final Kind.Real LEVEL = Kind.Real.any("a number, in the unit of the measure");
  private static final Kind.Real SHARE =
      new Kind.Real(
          0,
          true,
          1,
          true,
          "a share above 0 and below 1 (no sample shows that every picture does)");
  private static final Kind.Real LIKELY =
      new Kind.Real(0.5, true, 1, true, "a number above 0.5 and below 1, such as 0.95");

  private static final KeyGroup NEED =
      KeyGroup.of(
              "need",
              Key.required(
                  "measure",
                  Kind.Text.any(
                      "a column of numbers in `trials.csv`, with dashes for underscores, or"
                          + " `outage-rate`"),
                  "what is to be good enough"),
              level("at-least", "lowest accepted"),
              level("at-most", "highest accepted"),
              level("mean-at-least", "lowest accepted mean over pictures"),
              level("mean-at-most", "highest accepted mean over pictures"),
              Key.optional(
                  "for",
                  SHARE,
                  "the mean must reach the level",
                  "share of pictures that must reach the level, with at-least or at-most; a"
                      + " picture's figure is the mean over its replicates"),
              Key.optional(
                  "where",
                  new Kind.AnyKeys(
                      new Kind.OneOrMore(
                          Kind.Text.any(
                              "a word, a number, a comparison such as `\"<= 0.05\"`, or a range"
                                  + " such as `\"10 to 20\"`"))),
                  "every noisy condition",
                  "conditions in which the need must hold, in each of them: `impairment`, `acts-on`"
                      + " and any key by which the study gave a severity"))
          .exactlyOne("level", LEVELS);

  /** What a file of needs holds. */
  public static final KeyGroup KEYS =
      KeyGroup.of(
          "needs",
          Key.optional(
              "confidence",
              LIKELY,
              Plain.number(CONFIDENCE),
              "with which every statement together shall be right"),
          Key.required("needs", new Kind.Items(NEED), "all of which must be met"));

  private static Key level(String name, String what) {
    return Key.optional(name, LEVEL, "one of the four must be given", what);
  }

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
   * The measures that needs are about, whether or not a run has figures of them.
   *
   * @throws BadInput if a key is unknown, or a value out of range
   */
  public static Set<String> measures(YamlNode root) {
    KEYS.check(root);
    return root.get("needs").items().stream()
        .map(need -> need.get("measure").text())
        .collect(Collectors.toSet());
  }

  /**
   * Reads needs that are to be judged by these measurements.
   *
   * @throws BadInput if a key, measure or word is unknown, a value out of range, or a {@code where}
   *     picks nothing
   */
  public static Needs read(YamlNode root, Measurements measured) {
    KEYS.check(root);
    double level = root.find("confidence").map(LIKELY::read).orElse(CONFIDENCE);
    List<Need> needs = new ArrayList<>();
    for (YamlNode need : root.get("needs").items()) {
      needs.add(need(need, measured));
    }
    return new Needs(level, needs);
  }

  private static Need need(YamlNode node, Measurements measured) {
    YamlNode measure = node.get("measure");
    if (!measured.measures().contains(measure.text())) {
      throw Where.unknownMeasure(measure, measured.measures());
    }
    String key = LEVELS.stream().filter(k -> node.find(k).isPresent()).findFirst().orElseThrow();
    double level = LEVEL.read(node.get(key));
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
    return SHARE.read(share);
  }
}
