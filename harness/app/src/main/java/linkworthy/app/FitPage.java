package linkworthy.app;

import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import linkworthy.noise.MarkovLoss;
import linkworthy.noise.fit.ChainEstimate;
import linkworthy.noise.fit.LossFit;
import linkworthy.noise.fit.LossFitText;
import linkworthy.noise.fit.RunTable;
import linkworthy.report.ComparisonPage;
import linkworthy.report.Fact;

/**
 * A fit of a loss trace as a page: which form, its parameters, and its bursts beside those seen.
 */
final class FitPage {
  private static final String SEEN = "observed";

  /** A tenth of a run is as good as none; lines that go on for ever would flatten the plot. */
  private static final double LEAST_DRAWN = 0.1;

  private FitPage() {}

  static ComparisonPage of(LossFit fit) {
    RunTable table = RunTable.of(fit);
    List<String> answer = LossFitText.answer(fit);
    return new ComparisonPage(
        fit.trace().name(),
        "What kind of losses does this link have?",
        fit.chosen().form().label()
            + ", loss rate "
            + number(fit.chosen().chain().lossRate())
            + ", mean burst "
            + number(fit.chosen().meanBurst())
            + " packets, fitted to "
            + fit.trace().packets()
            + " packets.",
        answer.stream().map(String::strip).toList(),
        List.of(parameters(table, fit), runs(table)),
        List.of(plot(table)),
        definitions(),
        Version.text());
  }

  private static ComparisonPage.Trend plot(RunTable table) {
    List<ComparisonPage.Series> series = new ArrayList<>();
    series.add(
        new ComparisonPage.Series(
            SEEN, table.rows().stream().map(row -> (double) row.observed()).toList()));
    for (int i = 0; i < table.forms().size(); i++) {
      int form = i;
      series.add(
          new ComparisonPage.Series(
              table.forms().get(i).form().label(),
              table.rows().stream()
                  .map(row -> row.expected().get(form))
                  .map(expected -> expected < LEAST_DRAWN ? Double.NaN : expected)
                  .toList()));
    }
    return new ComparisonPage.Trend(
        ComparisonPage.Kind.BURSTS,
        "Observed and fitted (the last point: all longer runs together)",
        table.rows().stream().map(RunTable.Row::length).toList(),
        series);
  }

  private static ComparisonPage.Table runs(RunTable table) {
    List<ComparisonPage.Column> columns = new ArrayList<>();
    columns.add(new ComparisonPage.Column("packets lost in a row", false));
    columns.add(new ComparisonPage.Column(SEEN, true));
    table
        .forms()
        .forEach(form -> columns.add(new ComparisonPage.Column(form.form().label(), true)));
    List<List<String>> rows = new ArrayList<>();
    for (RunTable.Row row : table.rows()) {
      List<String> texts = new ArrayList<>(List.of(row.length(), row.observed() + ""));
      row.expected().forEach(expected -> texts.add(String.format(Locale.ROOT, "%.1f", expected)));
      rows.add(texts);
    }
    return new ComparisonPage.Table("Runs of losses", "numbers of runs", columns, rows);
  }

  private static ComparisonPage.Table parameters(RunTable table, LossFit fit) {
    List<ComparisonPage.Column> columns = new ArrayList<>();
    columns.add(new ComparisonPage.Column("form", false));
    for (String name :
        List.of("loss rate", "p", "r", "h", "mean burst, packets", "log-likelihood")) {
      columns.add(new ComparisonPage.Column(name, true));
    }
    List<List<String>> rows = new ArrayList<>();
    for (ChainEstimate form : table.forms()) {
      MarkovLoss chain = form.chain();
      rows.add(
          List.of(
              form.form().label() + (form.equals(fit.chosen()) ? " (chosen)" : ""),
              withError(chain.lossRate(), form.errorOfLossRate()),
              withError(chain.p(), form.errorOfP()),
              withError(chain.r(), form.errorOfR()),
              withError(chain.h(), form.errorOfH()),
              withError(form.meanBurst(), form.errorOfMeanBurst()),
              String.format(Locale.ROOT, "%.2f", form.logLikelihood())));
    }
    return new ComparisonPage.Table(
        "Fitted forms", "maximum likelihood, with standard errors", columns, rows);
  }

  private static String withError(double value, double error) {
    return number(value) + (Double.isNaN(error) ? "" : " \u00b1 " + number(error));
  }

  private static String number(double value) {
    return String.format(Locale.ROOT, "%.4g", value);
  }

  private static List<Fact> definitions() {
    return List.of(
        new Fact("p, r", "probabilities from the good state to the bad one, and back, per packet"),
        new Fact(
            "h", "share delivered in the bad state; fixed at 0 but for the three-parameter form"),
        new Fact("mean burst", "1/r, the mean stay in the bad state"),
        new Fact("standard error", "from the curvature of the likelihood; with few bursts rough"),
        new Fact(
            "fitted numbers of runs",
            "each form's geometric distribution times the number of runs observed"));
  }
}
