package linkworthy.app;

import java.math.BigDecimal;
import java.math.MathContext;
import java.math.RoundingMode;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import linkworthy.decision.CellDrift;
import linkworthy.decision.CellKey;
import linkworthy.decision.Change;
import linkworthy.decision.Drift;
import linkworthy.decision.History;
import linkworthy.decision.Movement;
import linkworthy.input.Decimal;
import linkworthy.report.ComparisonPage;
import linkworthy.report.Fact;
import linkworthy.results.ResultsFolder;

/** What a comparison of runs says, as sentences and tables for the console and the page alike. */
final class DriftWords {
  private static final String NOT_AVAILABLE = "n/a";
  private static final int SHORT_HASH = 8;

  private DriftWords() {}

  /** The answer in one line. */
  static String answer(Drift drift, double toleranceDb) {
    int cells = drift.cells().size();
    if (drift.sameBytes()) {
      return "identical: trials.csv is the same bytes in both runs ("
          + count(cells, "cell", "cells")
          + ")";
    }
    long moved = drift.count(Movement.MOVED);
    return count(cells, "cell", "cells")
        + ": "
        + moved
        + " moved ("
        + drift.worse()
        + " for the worse), "
        + drift.count(Movement.SAME)
        + " same, "
        + drift.count(Movement.UNDECIDED)
        + " undecided; tolerance "
        + plain(toleranceDb)
        + " dB; bits per pixel differ by more than 0.1 % in "
        + drift.bitsMoved();
  }

  private static String count(long number, String one, String many) {
    return number + " " + (number == 1 ? one : many);
  }

  /** The tables: changes, cells, and the cells of one run only; empty ones are left out. */
  static List<ComparisonPage.Table> tables(Drift drift, boolean all) {
    List<ComparisonPage.Table> tables = new ArrayList<>();
    if (!drift.changes().isEmpty()) {
      tables.add(changes(drift.changes()));
    }
    List<CellDrift> shown = drift.cells().stream().filter(cell -> all || cell.isOfNote()).toList();
    if (!shown.isEmpty()) {
      tables.add(cells(shown, all ? "all" : "moved or undecided"));
    }
    addKeys(tables, "Cells of the old run only", drift.onlyOld());
    addKeys(tables, "Cells of the new run only", drift.onlyNew());
    return tables;
  }

  /** The tables of a page: those of the console, then every cell if they do not hold all. */
  static List<ComparisonPage.Table> pageTables(Drift drift) {
    List<ComparisonPage.Table> tables = tables(drift, false);
    if (drift.cells().stream().anyMatch(cell -> !cell.isOfNote())) {
      tables.add(cells(drift.cells(), "all"));
    }
    return tables;
  }

  /** What the answer leaves open, for a page. */
  static List<String> remarks(Drift drift) {
    List<String> remarks = new ArrayList<>();
    if (drift.changes().isEmpty()) {
      remarks.add("Nothing that the records name changed in between.");
    }
    if (drift.count(Movement.UNDECIDED) > 0) {
      remarks.add("Undecided does not mean unchanged: more pictures or replicates would tell.");
    }
    return remarks;
  }

  private static ComparisonPage.Table changes(List<Change> changes) {
    return new ComparisonPage.Table(
        "What changed in between",
        "",
        List.of(words("what"), words("old"), words("new")),
        changes.stream()
            .map(c -> List.of(c.what(), absent(c.before()), absent(c.after())))
            .toList());
  }

  private static String absent(String text) {
    return text.isEmpty() ? "-" : text;
  }

  private static ComparisonPage.Table cells(List<CellDrift> cells, String which) {
    return new ComparisonPage.Table(
        which.equals("all") ? "All cells" : "Cells that moved or are undecided",
        "mean PSNR in dB, difference new minus old with its 95 % interval",
        List.of(
            words("condition"),
            new ComparisonPage.Column("codec", ComparisonPage.Style.NAMES),
            words("verdict"),
            number("old"),
            number("new"),
            number("difference"),
            number("interval"),
            number("adjusted p"),
            number("bits/px old"),
            number("change"),
            words("test")),
        cells.stream().map(DriftWords::row).toList());
  }

  private static List<String> row(CellDrift cell) {
    double half = cell.difference().halfWidth();
    double estimate = cell.difference().estimate();
    return List.of(
        condition(cell.key()),
        cell.key().codec(),
        verdict(cell),
        fixed(cell.oldMeanDb(), 2),
        fixed(cell.newMeanDb(), 2),
        signed(estimate, 3),
        Double.isFinite(half)
            ? signed(estimate - half, 3) + " to " + signed(estimate + half, 3)
            : NOT_AVAILABLE,
        p(cell.pAdjusted()),
        fixed(cell.oldBits(), 3),
        cell.bitsChange() == 0 ? "0" : signed(100 * cell.bitsChange(), 2) + " %",
        cell.test().toString());
  }

  private static String verdict(CellDrift cell) {
    if (cell.identical()) {
      return "same (identical)";
    }
    if (cell.verdict() == Movement.MOVED) {
      return cell.isWorse() ? "moved: worse" : "moved: better";
    }
    return cell.verdict().toString();
  }

  private static void addKeys(
      List<ComparisonPage.Table> tables, String heading, List<CellKey> keys) {
    if (!keys.isEmpty()) {
      tables.add(
          new ComparisonPage.Table(
              heading,
              "",
              List.of(
                  words("condition"),
                  new ComparisonPage.Column("codec", ComparisonPage.Style.NAMES)),
              keys.stream().map(key -> List.of(condition(key), key.codec())).toList()));
    }
  }

  /** A cell's row of noise, as in {@code gaussian on samples, snr-db 20}. */
  static String condition(CellKey key) {
    return key.isClean()
        ? "clean"
        : key.impairment()
            + " on "
            + key.actsOn()
            + ", "
            + key.axis()
            + " "
            + plain(key.severity());
  }

  static List<Fact> definitions(double toleranceDb) {
    return List.of(
        new Fact(
            "moved",
            "The p value of no difference, adjusted over all cells by Holm's method, is below 0.05,"
                + " and the mean PSNR differs by more than the tolerance of "
                + plain(toleranceDb)
                + " dB."),
        new Fact(
            "same",
            "Two one-sided tests at 5 % show a difference smaller than the tolerance, or every"
                + " figure of every trial is equal (identical)."),
        new Fact("undecided", "Neither is shown; more pictures or replicates would tell."),
        new Fact(
            "paired by noise, by replicate",
            "Seed, noise model and pictures are the same, so equal replicates met the same noise:"
                + " Student's t over the differences, one for each picture, or for each replicate"
                + " of a single one."),
        new Fact("paired by picture", "The same pictures under other noise: t over picture means."),
        new Fact(
            "Welch", "Nothing to pair: Welch's t test over picture means, or replicates of one."),
        new Fact(
            "bits/px change",
            "Change of the mean of sent bits per pixel; it counts as moved beyond 0.1 %."));
  }

  /** The runs of a history and how each differs from the one before. */
  static ComparisonPage.Table runs(History history, List<String> steps) {
    List<List<String>> rows = new ArrayList<>();
    for (int i = 0; i < history.runs().size(); i++) {
      ResultsFolder run = history.runs().get(i);
      rows.add(
          List.of(
              Integer.toString(i + 1),
              run.run().start().toString(),
              run.run().programVersion(),
              shortly(run.run().studyFingerprint()),
              String.valueOf(run.path().getFileName()),
              steps.get(i)));
    }
    return new ComparisonPage.Table(
        "Runs",
        "oldest first",
        List.of(
            number("run"),
            new ComparisonPage.Column("start", ComparisonPage.Style.SHORT),
            words("version"),
            words("study"),
            words("folder"),
            new ComparisonPage.Column("against the run before", ComparisonPage.Style.PROSE)),
        rows);
  }

  private static String shortly(String fingerprint) {
    return fingerprint.substring(0, Math.min(SHORT_HASH, fingerprint.length()));
  }

  /** A table for each noise, mean PSNR of every cell in every run, with its plot. */
  static List<ComparisonPage.Table> tables(History history) {
    List<ComparisonPage.Table> tables = new ArrayList<>();
    groups(history)
        .forEach(
            (heading, keys) -> {
              List<ComparisonPage.Column> columns =
                  new ArrayList<>(
                      List.of(
                          words("severity"),
                          new ComparisonPage.Column("codec", ComparisonPage.Style.NAMES)));
              runLabels(history).forEach(label -> columns.add(number(label)));
              columns.add(number("last - first"));
              tables.add(
                  new ComparisonPage.Table(
                      heading,
                      "mean PSNR in dB of each run",
                      columns,
                      keys.stream().map(key -> row(history, key)).toList(),
                      List.of(trend(history, heading, keys))));
            });
    return tables;
  }

  private static List<String> row(History history, CellKey key) {
    List<String> row = new ArrayList<>();
    row.add(key.isClean() ? "clean" : key.axis() + " " + plain(key.severity()));
    row.add(key.codec());
    double[] means = history.psnrMeanDb(key);
    for (double mean : means) {
      row.add(Double.isNaN(mean) ? "-" : fixed(mean, 2));
    }
    double last = means[means.length - 1];
    row.add(signed(last == means[0] ? 0 : last - means[0], 3));
    return row;
  }

  /** A line for each codec, its mean over the severities. */
  private static ComparisonPage.Trend trend(History history, String heading, List<CellKey> keys) {
    Map<String, List<double[]>> byCodec = new LinkedHashMap<>();
    keys.forEach(
        key ->
            byCodec
                .computeIfAbsent(key.codec(), codec -> new ArrayList<>())
                .add(history.psnrMeanDb(key)));
    List<ComparisonPage.Series> series = new ArrayList<>();
    byCodec.forEach((codec, rows) -> series.add(new ComparisonPage.Series(codec, mean(rows))));
    long severities = keys.stream().map(CellKey::severity).distinct().count();
    return new ComparisonPage.Trend(
        heading + (severities > 1 ? ", mean over " + severities + " severities" : ""),
        runLabels(history),
        series);
  }

  private static List<Double> mean(List<double[]> rows) {
    List<Double> means = new ArrayList<>();
    for (int run = 0; run < rows.get(0).length; run++) {
      int at = run;
      means.add(rows.stream().mapToDouble(row -> row[at]).average().orElse(Double.NaN));
    }
    return means;
  }

  private static Map<String, List<CellKey>> groups(History history) {
    Map<String, List<CellKey>> groups = new LinkedHashMap<>();
    for (CellKey key : history.cells()) {
      String heading = key.isClean() ? "clean" : key.impairment() + " on " + key.actsOn();
      groups.computeIfAbsent(heading, h -> new ArrayList<>()).add(key);
    }
    return groups;
  }

  private static List<String> runLabels(History history) {
    List<String> labels = new ArrayList<>();
    for (int i = 1; i <= history.runs().size(); i++) {
      labels.add(Integer.toString(i));
    }
    return labels;
  }

  private static ComparisonPage.Column words(String name) {
    return new ComparisonPage.Column(name, false);
  }

  private static ComparisonPage.Column number(String name) {
    return new ComparisonPage.Column(name, true);
  }

  /** A number as a person types it. */
  static String plain(double value) {
    return new BigDecimal(Decimal.shortest(value)).stripTrailingZeros().toPlainString();
  }

  private static String p(double p) {
    if (Double.isNaN(p)) {
      return NOT_AVAILABLE;
    }
    if (p == 0 || p >= 0.0001) {
      return p == 0 ? "0" : fixed(p, 4);
    }
    return String.format(
        Locale.ROOT, "%.1e", new BigDecimal(p).round(new MathContext(2, RoundingMode.HALF_EVEN)));
  }

  /** A difference with its sign. */
  static String signed(double value, int decimals) {
    return (value > 0 ? "+" : "") + fixed(value, decimals);
  }

  private static String fixed(double value, int decimals) {
    if (Double.isNaN(value)) {
      return NOT_AVAILABLE;
    }
    if (Double.isInfinite(value)) {
      return value > 0 ? "inf" : "-inf";
    }
    return new BigDecimal(value).setScale(decimals, RoundingMode.HALF_EVEN).toPlainString();
  }
}
