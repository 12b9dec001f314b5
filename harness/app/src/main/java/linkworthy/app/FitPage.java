package linkworthy.app;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Locale;
import linkworthy.noise.MarkovLoss;
import linkworthy.noise.fit.ChainEstimate;
import linkworthy.noise.fit.LossFit;
import linkworthy.noise.fit.LossFitText;
import linkworthy.noise.fit.PicturesFit;
import linkworthy.noise.fit.RunTable;
import linkworthy.noise.fit.SensorFit;
import linkworthy.report.ComparisonPage;
import linkworthy.report.Fact;
import org.jspecify.annotations.Nullable;

/**
 * A fit as a page: of a loss trace which form, its parameters, and its bursts beside those seen; of
 * pictures the noise variance of each level, and the line through them.
 */
final class FitPage {
  private static final String SEEN = "observed";

  /** A tenth of a run is as good as none; lines that go on for ever would flatten the plot. */
  private static final double LEAST_DRAWN = 0.1;

  private FitPage() {}

  static ComparisonPage of(LossFit fit, Path trace, @Nullable String column) {
    RunTable table = RunTable.of(fit);
    List<Object> again = new ArrayList<>(List.of("noise", "fit", trace));
    if (column != null) {
      again.addAll(List.of("--column", column));
    }
    return page(
        fit.trace().name(),
        "What kind of losses does this link have?",
        sentence(
            fit.chosen().form().label()
                + ", loss rate "
                + number(fit.chosen().chain().lossRate())
                + ", mean burst "
                + number(fit.chosen().meanBurst())
                + " packets, fitted to "
                + fit.trace().packets()
                + " packets"),
        LossFitText.answer(fit),
        List.of(parameters(table, fit), runs(table)),
        definitions(),
        again);
  }

  static ComparisonPage of(PicturesFit fit, Path folder, PicturesFit.Kind kind) {
    List<Object> again = new ArrayList<>(List.of("noise", "fit", "--pictures", folder));
    switch (kind) {
      case REPEATED -> again.add("--repeated");
      case SINGLE -> again.add("--single");
      case TOLD_BY_PICTURES -> {}
    }
    List<String> lines = fit.lines();
    return page(
        String.valueOf(folder.toAbsolutePath().normalize().getFileName()),
        "How much noise does this sensor add, and does it grow with the light?",
        sentence(lines.get(lines.size() - 1))
            + fit.repeated()
                .flatMap(SensorFit::line)
                .map(
                    line ->
                        " Fitted: noise variance = "
                            + number(line.gain())
                            + " x mean level + "
                            + number(line.offset())
                            + " grey levels squared.")
                .orElse(""),
        lines.subList(0, lines.size() - 1),
        fit.repeated().map(FitPage::levels).orElseGet(() -> singles(fit)),
        fit.repeated().isPresent() ? DEFINITIONS_OF_FRAMES : DEFINITIONS_OF_SINGLES,
        again);
  }

  private static String sentence(String line) {
    return line.substring(0, 1).toUpperCase(Locale.ROOT) + line.substring(1) + ".";
  }

  private static ComparisonPage page(
      String title,
      String question,
      String answer,
      List<String> remarks,
      List<ComparisonPage.Table> tables,
      List<Fact> definitions,
      List<Object> again) {
    List<Object> withModel = new ArrayList<>(again);
    withModel.addAll(List.of("--out", "my-model.yaml"));
    return new ComparisonPage(
        title,
        "noise fit",
        question,
        answer,
        remarks.stream().map(String::strip).toList(),
        tables,
        definitions,
        List.of(
            PageOption.command("this fit", again.toArray()),
            PageOption.command("a model file of it, for studies", withModel.toArray())),
        Version.text());
  }

  private static final List<Fact> DEFINITIONS_OF_FRAMES =
      List.of(
          new Fact(
              "variance",
              "of a sample over the frames of one scene, averaged over samples of nearly equal"
                  + " mean; in grey levels squared, 1/12 taken off for rounding to whole levels"),
          new Fact(
              "fitted line",
              "variance = gain x mean + offset, by weighted least squares: photons that are"
                  + " counted make a variance that grows with the light, reading them out adds a"
                  + " constant (Foi, Trimeche, Katkovnik and Egiazarian 2008)"),
          new Fact("gain", "noise variance for each grey level of the mean"),
          new Fact("read noise", "root of the offset, the standard deviation at black"),
          new Fact(
              "standard error",
              "for normal noise; of the line widened where the levels scatter more than that"),
          new Fact(
              "levels left out",
              "those with fewer than 100 samples, or with one sample in 1000 black or white"));

  private static final List<Fact> DEFINITIONS_OF_SINGLES =
      List.of(
          new Fact(
              "noise deviation",
              "median absolute value of the finest diagonal detail over 0.6745 (Donoho and"
                  + " Johnstone 1994); fine texture counts as noise, so it is an upper bound in"
                  + " busy pictures"),
          new Fact("standard error", "for normal noise"));

  /** Every level's variance with the line; without a line the points alone. */
  private static List<ComparisonPage.Table> levels(SensorFit fit) {
    List<SensorFit.Level> levels = fit.levels();
    List<Double> fitted =
        levels.stream()
            .map(
                level ->
                    fit.line()
                        .map(line -> line.gain() * level.mean() + line.offset())
                        .orElse(Double.NaN))
            .toList();
    List<List<String>> rows = new ArrayList<>();
    for (int i = 0; i < levels.size(); i++) {
      SensorFit.Level level = levels.get(i);
      rows.add(
          List.of(
              String.format(Locale.ROOT, "%.1f", level.mean()),
              Long.toString(level.samples()),
              number(level.variance()),
              number(level.error()),
              Double.isNaN(fitted.get(i)) ? "n/a" : number(fitted.get(i))));
    }
    List<ComparisonPage.Series> series = new ArrayList<>();
    series.add(
        new ComparisonPage.Series(
            "measured, \u00b1 2 standard errors",
            ComparisonPage.Drawn.POINTS,
            levels.stream().map(SensorFit.Level::variance).toList(),
            levels.stream().map(level -> 2 * level.error()).toList()));
    fit.line()
        .ifPresent(
            line ->
                series.add(
                    new ComparisonPage.Series(
                        "fitted: " + number(line.gain()) + " x mean + " + number(line.offset()),
                        ComparisonPage.Drawn.LINE,
                        fitted,
                        List.of())));
    return List.of(
        new ComparisonPage.Table(
            "Noise variance by mean level",
            "grey levels squared; a row for each class of samples of nearly equal mean",
            List.of(
                new ComparisonPage.Column("mean level", true),
                new ComparisonPage.Column("samples", true),
                new ComparisonPage.Column("variance", true),
                new ComparisonPage.Column("standard error", true),
                new ComparisonPage.Column("fitted", true)),
            rows,
            List.of(
                new ComparisonPage.Trend(
                    ComparisonPage.Kind.LEVELS,
                    "Measured variance and the fitted line",
                    List.of(),
                    levels.stream().map(SensorFit.Level::mean).toList(),
                    series))));
  }

  private static List<ComparisonPage.Table> singles(PicturesFit fit) {
    List<List<String>> rows = new ArrayList<>();
    for (int i = 0; i < fit.singles().size(); i++) {
      rows.add(
          List.of(
              fit.names().get(i),
              number(fit.singles().get(i).deviation()),
              number(fit.singles().get(i).error())));
    }
    return List.of(
        new ComparisonPage.Table(
            "Noise of each picture",
            "grey levels",
            List.of(
                new ComparisonPage.Column("picture", false),
                new ComparisonPage.Column("noise deviation", true),
                new ComparisonPage.Column("standard error", true)),
            rows));
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
    return new ComparisonPage.Table(
        "Runs of losses", "numbers of runs", columns, rows, List.of(plot(table)));
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
