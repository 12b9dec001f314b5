package linkworthy.trial;

import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import linkworthy.codec.ExpectedError;
import linkworthy.codec.Memo;
import linkworthy.corpus.ManifestEntry;
import linkworthy.corpus.Picture;
import linkworthy.noise.BurstLoss;
import linkworthy.noise.MarkovLoss;
import linkworthy.noise.NoiseModel;
import linkworthy.noise.Severity;
import linkworthy.noise.SignalStatistics;
import linkworthy.noise.Site;
import linkworthy.study.CodecChoice;
import linkworthy.study.ImpairmentChoice;
import linkworthy.study.Study;

/**
 * What {@link ExpectedError} says of every codec under Gaussian noise on samples and under burst
 * loss of packets; other noises have no rows. Depends on the study and its clean pictures alone.
 */
public final class PredictionTable {
  private final Study study;
  private final List<Row> rows = new ArrayList<>();

  private PredictionTable(Study study) {
    this.study = study;
    for (ImpairmentChoice impairment : study.impairments()) {
      if (isNoise(impairment) || isLoss(impairment)) {
        for (Severity severity : impairment.levels()) {
          WorkUnit.Condition condition = new WorkUnit.Condition(impairment, severity);
          study
              .codecs()
              .forEach(codec -> rows.add(new Row(condition, codec, refusal(condition, codec))));
        }
      }
    }
  }

  /** A row for each such severity and codec, in the order of the study. */
  public static List<Prediction> of(Plan plan) {
    PredictionTable table = new PredictionTable(plan.study());
    if (table.rows.stream().anyMatch(Row::isOpen)) {
      for (ManifestEntry entry : plan.pictures()) {
        table.add(plan.planes(entry));
      }
    }
    return table.rows.stream().map(row -> row.prediction(plan.pictures().size())).toList();
  }

  private static boolean isNoise(ImpairmentChoice impairment) {
    return impairment.model().process().equals("gaussian") && impairment.site() == Site.SAMPLES;
  }

  private static boolean isLoss(ImpairmentChoice impairment) {
    return impairment.model().process().equals("burst-loss") && impairment.site() == Site.PACKETS;
  }

  private String refusal(WorkUnit.Condition condition, CodecChoice choice) {
    if (study.pictures().hasAllPlanes()) {
      return "luma alone is predicted";
    }
    if (isNoise(condition.impairment())) {
      return ExpectedError.refusalUnderNoise(choice.codec());
    }
    return choice.protection().isNone()
        ? ExpectedError.refusalUnderLoss(choice.codec())
        : "its packets are protected";
  }

  private void add(List<Picture> planes) {
    Picture picture = planes.get(0);
    SignalStatistics signal = Subject.signal(planes, study.pictures().signalPower());
    Memo memo = new Memo();
    for (Row row : rows) {
      if (row.isOpen()) {
        double variance = row.condition.at(signal).equivalentNoiseVariance();
        if (isNoise(row.condition.impairment())) {
          row.add(
              picture,
              ExpectedError.underNoise(row.choice.codec(), picture, memo, variance),
              "the noise is below half a grey level, where rounding removes it");
        } else {
          row.add(
              picture,
              ExpectedError.underLoss(
                  row.choice.codec(), picture, memo, chain(row.condition, variance, signal)),
              "its means travel in more than " + ExpectedError.MOST_PACKETS + " packets");
        }
      }
    }
  }

  private static MarkovLoss chain(
      WorkUnit.Condition condition, double variance, SignalStatistics signal) {
    NoiseModel model = condition.impairment().model();
    Severity severity = condition.severity();
    double lossRate =
        severity.axis().equals(BurstLoss.LOSS_RATE)
            ? severity.value()
            : variance == 0 ? 0 : variance / signal.variance();
    Map<String, Double> parameters = model.parameters();
    return MarkovLoss.of(
        lossRate,
        parameters.getOrDefault(BurstLoss.MEAN_BURST, Double.NaN),
        parameters.getOrDefault(BurstLoss.DELIVERY_GOOD, Double.NaN),
        parameters.getOrDefault(BurstLoss.DELIVERY_BAD, Double.NaN));
  }

  /** A codec under a severity, picture after picture. */
  private static final class Row {
    private final WorkUnit.Condition condition;
    private final CodecChoice choice;
    private String refusal;
    private double sum;

    Row(WorkUnit.Condition condition, CodecChoice choice, String refusal) {
      this.condition = condition;
      this.choice = choice;
      this.refusal = refusal;
    }

    boolean isOpen() {
      return refusal.isEmpty();
    }

    void add(Picture picture, double error, String ifNone) {
      double peak = picture.peak();
      sum += error / (peak * peak);
      refusal = Double.isNaN(error) ? ifNone : "";
    }

    Prediction prediction(int pictures) {
      return new Prediction(
          condition.impairment().label(),
          condition.impairment().site().id(),
          condition.severity().axis(),
          condition.severity().value(),
          choice.label(),
          isOpen() ? -10 * StrictMath.log10(sum / pictures) : Double.NaN,
          refusal);
    }
  }
}
