package linkworthy.report;

import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;

/** Predictions laid out for the template; no rows where nothing is predicted. */
record PredictionView(String tolerance, String sentence, List<Row> rows, List<Fact> refusals) {
  /** A codec under a severity. */
  record Row(
      String noise,
      String given,
      String codec,
      String predicted,
      String measured,
      String gap,
      boolean finding,
      String note) {}

  static PredictionView of(List<Predicted> all) {
    List<Row> rows = new ArrayList<>();
    Map<String, List<String>> refused = new LinkedHashMap<>();
    for (Predicted one : all) {
      if (one.refusal().isEmpty()) {
        rows.add(row(one));
      } else {
        List<String> codecs =
            refused.computeIfAbsent(
                title(one.condition()) + ": " + one.refusal(), key -> new ArrayList<>());
        if (!codecs.contains(one.codec())) {
          codecs.add(one.codec());
        }
      }
    }
    List<Fact> refusals = new ArrayList<>();
    refused.forEach((reason, codecs) -> refusals.add(new Fact(reason, String.join(", ", codecs))));
    return new PredictionView(
        Numbers.typed(Predicted.TOLERANCE_DB), sentence(rows), List.copyOf(rows), refusals);
  }

  private static String sentence(List<Row> rows) {
    long findings = rows.stream().filter(Row::finding).count();
    return findings == 0
        ? "No gap is known to be larger than that."
        : Numbers.count(findings, "gap is", "gaps are")
            + " larger than that, of "
            + Numbers.count(rows.size())
            + ": findings, marked in the table.";
  }

  private static Row row(Predicted one) {
    return new Row(
        title(one.condition()),
        MatrixTable.given(one.condition()),
        one.codec(),
        Numbers.db(one.predictedDb()),
        Numbers.db(one.measuredDb()),
        Numbers.db(one.gapDb()),
        one.isFinding(),
        one.isFinding()
            ? "finding: measured is " + (one.gapDb() > 0 ? "better" : "worse") + " than predicted"
            : one.isUndecided() ? undecided(one) : "as predicted");
  }

  private static String undecided(Predicted one) {
    return Double.isNaN(one.noiseHalfWidthDb())
        ? "undecided: there is no noise interval"
        : "undecided: all replicates came out alike";
  }

  private static String title(Condition condition) {
    return new FigureGrid.Noise(condition.impairment(), condition.actsOn(), List.of(condition))
        .title();
  }
}
