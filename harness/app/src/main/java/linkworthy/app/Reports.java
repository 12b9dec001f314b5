package linkworthy.app;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Iterator;
import java.util.List;
import java.util.Optional;
import java.util.function.Supplier;
import linkworthy.codec.PluginFolder;
import linkworthy.input.Decimal;
import linkworthy.link.NodeProfile;
import linkworthy.report.Answer;
import linkworthy.report.CodecColumn;
import linkworthy.report.Condition;
import linkworthy.report.Costs;
import linkworthy.report.Fact;
import linkworthy.report.Figure;
import linkworthy.report.Particulars;
import linkworthy.report.PictureCredit;
import linkworthy.report.Provenance;
import linkworthy.report.ReportPage;
import linkworthy.report.ReportRenderer;
import linkworthy.report.Standing;
import linkworthy.results.ResultsFolder;
import linkworthy.results.RunRecord;
import linkworthy.statistics.Cell;
import linkworthy.statistics.ShareInterval;
import linkworthy.statistics.StudentT;
import linkworthy.study.EarlyStop;
import linkworthy.study.ImpairmentChoice;
import linkworthy.study.NodeChoice;
import linkworthy.study.Study;
import linkworthy.trial.NodeShare;
import linkworthy.trial.Plan;
import org.jspecify.annotations.Nullable;

/**
 * Makes the report of a results folder: every figure from its recorded cells and trials alone,
 * pictures by repeating the trials that they are of.
 */
final class Reports {
  private Reports() {}

  /**
   * The page of a recorded run as HTML.
   *
   * @param codecs that the run's study may name, with their plugins
   * @param need file of needs that the answer is to be about, or null
   */
  static String html(
      ResultsFolder results, CodecOptions codecs, PluginFolder plugins, @Nullable Path need) {
    return html(
        results, () -> Plan.unchecked(results.unchangedStudy(codecs.families(plugins))), need);
  }

  /**
   * The whole page as HTML.
   *
   * @param plan of the run, if its pictures and codecs are at hand; asked for by {@link
   *     ReportPictures} alone
   * @param need file of needs that the answer is to be about, or null
   */
  static String html(ResultsFolder results, Supplier<Plan> plan, @Nullable Path need) {
    List<Cell> cells = results.cells();
    ReportTrials trials = ReportTrials.of(results, cells);
    List<Figure> figures = cells.stream().map(cell -> figure(cell, trials.typical(cell))).toList();
    RunRecord run = results.run();
    Answer plain = Answer.from(figures);
    ShortlistText needs = need == null ? null : ShortlistText.of(results, need);
    Answer answer = needs == null ? plain : needs.reportAnswer();
    ReportPictures.Made pictures =
        new ReportPictures(
                results, cells, trials, answer.codec().isEmpty() ? plain.codec() : answer.codec())
            .make(plan);
    return new ReportRenderer()
        .render(
            new ReportPage(
                run.study(),
                run.purpose(),
                answer,
                figures,
                StudentT.CONFIDENCE,
                run.pictures().stream().map(Reports::credit).toList(),
                provenance(results),
                costs(results),
                ReportComparisons.of(results),
                ReportPredictions.of(results, trials),
                new Particulars(
                    trials.spreads(),
                    pictures.gallery(),
                    needs == null ? null : needs.page(run),
                    results.studyText(),
                    verified(run, pictures))));
  }

  private static List<String> verified(RunRecord run, ReportPictures.Made pictures) {
    List<String> verified = new ArrayList<>();
    verified.add(
        "The record is complete, "
            + run.trialsDone()
            + " of "
            + run.trialsPlanned()
            + " trials; it was read as a whole for this page, and its cells follow from its"
            + " trials.");
    verified.addAll(pictures.verified());
    return verified;
  }

  /** What the nodes bear, from the clean cells; null where the study names no node. */
  private static @Nullable Costs costs(ResultsFolder results) {
    NodeChoice node = results.studyOnPaper().node();
    if (node == null) {
      return null;
    }
    NodeProfile profile = node.profile();
    return new Costs(
        "Node '"
            + profile.id()
            + "': "
            + typed(profile.sentNanojoules())
            + " nJ to send a bit, "
            + typed(profile.receivedNanojoules())
            + " nJ to receive one, "
            + typed(profile.macNanojoules())
            + " nJ a multiply-accumulate, "
            + typed(profile.ramKib())
            + " KiB of memory, "
            + typed(profile.kilobitsPerSecond())
            + " kbit/s, a battery of "
            + typed(profile.batteryJoules())
            + " J, a picture every "
            + typed(node.intervalSeconds())
            + " s at "
            + typed(profile.sleepMilliwatts())
            + " mW of sleep. Source: "
            + profile.source(),
        profile.ramKib(),
        results.cells().stream()
            .filter(cell -> cell.axis().isEmpty())
            .map(Reports::codecCost)
            .toList(),
        results.nodes().stream().map(Reports::nodeShare).toList());
  }

  private static Costs.CodecCost codecCost(Cell cell) {
    Iterator<String> columns = Study.COSTS.iterator();
    double[] values = new double[Study.COSTS.size()];
    for (int i = 0; i < values.length; i++) {
      values[i] = cell.furtherMeans().getOrDefault(columns.next(), Double.NaN);
    }
    return new Costs.CodecCost(
        cell.codec(), values[0], values[1], values[2], values[3], values[4], values[5]);
  }

  private static Costs.NodeShare nodeShare(NodeShare share) {
    return new Costs.NodeShare(
        share.codec(),
        share.node() == 0 ? "camera" : "helper " + share.node(),
        share.macs(),
        share.memoryKib(),
        share.rawSentBits(),
        share.rawReceivedBits(),
        share.codedSentBits(),
        share.receivedBits(),
        share.energyMj());
  }

  /** The answer in lines for the console. */
  static List<String> answer(ResultsFolder results) {
    Answer answer = Answer.from(figures(results));
    List<String> lines = new ArrayList<>();
    lines.add(answer.sentence());
    lines.add(answer.confidence());
    lines.addAll(answer.exceptions());
    return lines;
  }

  private static List<Figure> figures(ResultsFolder results) {
    return results.cells().stream().map(cell -> figure(cell, "")).toList();
  }

  /** What a cell was measured under, as the page knows it. */
  static Condition condition(Cell cell) {
    return new Condition(
        cell.impairment(),
        cell.actsOn(),
        cell.axis(),
        cell.severity(),
        cell.equivalentNoiseVariance(),
        cell.realisedNoiseVarianceMean(),
        cell.snrDb());
  }

  private static Figure figure(Cell cell, String typicalTrial) {
    return new Figure(
        condition(cell),
        new CodecColumn(
            cell.codec(),
            cell.transform(),
            cell.over(),
            cell.keep() < 0 ? "" : Integer.toString(cell.keep()),
            cell.step()),
        evidence(cell),
        new Figure.Quality(
            cell.psnrMeanDb(),
            cell.psnrNoiseHalfWidthDb(),
            cell.psnrPictureHalfWidthDb(),
            cell.psnrOfMeanMseDb(),
            cell.psnrP05Db(),
            cell.ssimMean()),
        cell.bitsPerPixelMean(),
        cell.outageRate(),
        new Figure.Comparison(
            cell.behindBestDb(),
            cell.behindBestPAdjusted(),
            Standing.of(cell.standing().toString())),
        typicalTrial);
  }

  private static Figure.Evidence evidence(Cell cell) {
    int trials = Math.toIntExact(cell.trials());
    int outages = (int) Math.round(cell.outageRate() * trials);
    ShareInterval outage = ShareInterval.wilson(outages, trials, StudentT.CONFIDENCE);
    return new Figure.Evidence(
        cell.pictures(), trials, Math.toIntExact(cell.failures()), outage.lower(), outage.upper());
  }

  private static PictureCredit credit(RunRecord.PictureUsed picture) {
    return new PictureCredit(
        picture.id(),
        picture.width(),
        picture.height(),
        picture.licence(),
        picture.attribution(),
        picture.source(),
        picture.sha256());
  }

  private static Provenance provenance(ResultsFolder results) {
    RunRecord run = results.run();
    return new Provenance(
        new Provenance.Program(
            run.programVersion(),
            run.javaVersion() + " (" + run.javaVendor() + ")",
            run.operatingSystem()),
        new Provenance.Fingerprints(run.studyFingerprint(), run.corpusFingerprint()),
        run.noiseModels().stream()
            .map(
                model ->
                    new Provenance.NoiseModel(
                        model.id(), Integer.toString(model.version()), model.fingerprint()))
            .toList(),
        run.seed(),
        new Provenance.Run(
            run.start().toString(),
            run.end() == null ? "" : run.end().toString(),
            run.trialsPlanned(),
            run.trialsDone()),
        facts(results));
  }

  /** The settings, then what of the user's own took part. */
  private static List<Fact> facts(ResultsFolder results) {
    List<Fact> facts = new ArrayList<>(settings(results.studyOnPaper()));
    widths(results).ifPresent(text -> facts.add(new Fact("noise half-width", text)));
    for (RunRecord.PluginUsed plugin : results.run().plugins()) {
      facts.add(new Fact("plugin " + plugin.jar(), "SHA-256 " + plugin.sha256()));
    }
    for (RunRecord.ProgramUsed program : results.run().programs()) {
      facts.add(
          new Fact(
              "codec " + program.codec(),
              "runs an external program, "
                  + program.program()
                  + (program.confinement().equals("none")
                      ? ""
                      : ", confined by " + program.confinement())
                  + "; the same study may give other numbers on another machine or day"));
    }
    return facts;
  }

  /** A number as a person types it: whole ones without a decimal point. */
  private static String typed(double number) {
    String text = Decimal.shortest(number);
    return text.endsWith(".0") ? text.substring(0, text.length() - 2) : text;
  }

  private static String replicates(Study study) {
    EarlyStop rule = study.earlyStop();
    return rule == null
        ? Integer.toString(study.replicates())
        : rule.atLeast()
            + " to "
            + rule.atMost()
            + ", until the noise half-width is "
            + Decimal.shortest(rule.halfWidthDb())
            + " dB";
  }

  /**
   * In how many cells with noise the half-width that the study wants was not reached; empty without
   * such a wish, or while there are no cells.
   */
  static Optional<String> widths(ResultsFolder results) {
    EarlyStop rule = results.studyOnPaper().earlyStop();
    if (rule == null || !results.run().complete()) {
      return Optional.empty();
    }
    List<Double> widths =
        results.cells().stream()
            .filter(cell -> !cell.impairment().equals(ImpairmentChoice.CLEAN))
            .map(Cell::psnrNoiseHalfWidthDb)
            .toList();
    long wide = widths.stream().filter(width -> width > rule.halfWidthDb()).count();
    long none = widths.stream().filter(width -> width.isNaN()).count();
    String wanted = "wanted noise half-width " + Decimal.shortest(rule.halfWidthDb()) + " dB ";
    String most = " (" + rule.atMost() + " replicates at most)";
    String infinite = none == 0 ? "" : "; infinite PSNR, so no half-width, in " + none;
    return Optional.of(
        wide == 0
            ? wanted
                + "reached in "
                + (widths.size() - none)
                + " of "
                + widths.size()
                + " cells"
                + most
                + infinite
            : wanted
                + "not reached in "
                + wide
                + " of "
                + widths.size()
                + " cells"
                + most
                + infinite);
  }

  private static List<Fact> settings(Study study) {
    List<Fact> facts = new ArrayList<>();
    facts.add(new Fact("pictures", String.join(", ", study.pictures().select())));
    if (!study.pictures().train().isEmpty()) {
      facts.add(new Fact("training pictures", String.join(", ", study.pictures().train())));
    }
    facts.addAll(
        List.of(
            new Fact(
                "longest side",
                study.pictures().longestSide().isPresent()
                    ? study.pictures().longestSide().getAsInt() + " samples"
                    : "as in the manifest"),
            new Fact(
                "planes",
                study.pictures().hasAllPlanes()
                    ? "all, chroma " + study.pictures().chroma()
                    : study.pictures().planes()),
            new Fact("signal power", study.pictures().signalPower().id()),
            new Fact("packet payload", study.link().payloadBytes() + " bytes at most"),
            new Fact("packet overhead", study.link().headerBytes() + " bytes each"),
            new Fact("packet order", study.link().order().id()),
            new Fact("replicates", replicates(study)),
            new Fact("measures", String.join(", ", study.measures()))));
    return facts;
  }
}
