package linkworthy.app;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import linkworthy.decision.Measurements;
import linkworthy.report.Condition;
import linkworthy.report.Particulars;
import linkworthy.results.ResultsFolder;
import linkworthy.results.RunRecord;
import linkworthy.statistics.Cell;
import linkworthy.statistics.Moments;
import linkworthy.statistics.StudentT;
import linkworthy.trial.Prediction;
import linkworthy.trial.Trial;

/**
 * What the report of a run takes from its single trials: for each cell the typical trial, whose
 * PSNR is nearest to the mean of the cell (the first such in the record), for the middle severity
 * of each noise the mean PSNR of every picture, and for each cell that has a prediction how well
 * its mean squared error is known.
 */
final class ReportTrials {
  private final ResultsFolder results;
  private final List<Noise> noises;
  private final Map<Place, Typical> typical = new LinkedHashMap<>();
  private final Map<Place, Map<String, Moments>> pictures = new LinkedHashMap<>();

  /** Squared error over squared peak, by picture. */
  private final Map<Place, Map<String, Moments>> relativeErrors = new LinkedHashMap<>();

  /** One noise of the study: its conditions, mildest first. */
  record Noise(List<Measurements.Condition> conditions) {
    Measurements.Condition middle() {
      return conditions.get((conditions.size() - 1) / 2);
    }

    /** Mildest, middle and harshest, each once. */
    List<Measurements.Condition> three() {
      return List.of(conditions.get(0), middle(), conditions.get(conditions.size() - 1)).stream()
          .distinct()
          .toList();
    }
  }

  /** A condition and a codec. */
  record Place(Measurements.Condition condition, String codec) {
    static Place of(Cell cell) {
      return new Place(ReportTrials.condition(cell), cell.codec());
    }

    static Place of(Prediction prediction) {
      return new Place(
          new Measurements.Condition(
              prediction.impairment(),
              prediction.actsOn(),
              prediction.axis(),
              prediction.severity()),
          prediction.codec());
    }

    static Place of(Trial trial) {
      return new Place(ReportTrials.condition(trial), trial.codec());
    }
  }

  private record Typical(double mean, String trial, double distance) {
    Typical or(Trial other) {
      double away = other.psnrDb() == mean ? 0 : Math.abs(other.psnrDb() - mean);
      return trial.isEmpty() || away < distance ? new Typical(mean, other.trial(), away) : this;
    }
  }

  private ReportTrials(ResultsFolder results, List<Cell> cells) {
    this.results = results;
    this.noises = noises(cells);
    for (Prediction prediction : results.predictions()) {
      if (prediction.refusal().isEmpty()) {
        relativeErrors.put(Place.of(prediction), new LinkedHashMap<>());
      }
    }
    cells.forEach(cell -> typical.put(Place.of(cell), new Typical(cell.psnrMeanDb(), "", 0)));
  }

  /** Reads all trials once. */
  static ReportTrials of(ResultsFolder results, List<Cell> cells) {
    ReportTrials trials = new ReportTrials(results, cells);
    List<Measurements.Condition> middles = trials.noises.stream().map(Noise::middle).toList();
    long unused =
        results.trials(
            trial -> {
              Place place = Place.of(trial);
              trials.typical.computeIfPresent(place, (p, t) -> t.or(trial));
              if (middles.contains(place.condition())) {
                add(
                    trials.pictures.computeIfAbsent(place, p -> new LinkedHashMap<>()),
                    trial,
                    trial.psnrDb());
              }
              Map<String, Moments> errors = trials.relativeErrors.get(place);
              if (errors != null) {
                add(errors, trial, StrictMath.pow(10, -trial.psnrDb() / 10));
              }
            });
    return trials;
  }

  private static void add(Map<String, Moments> byPicture, Trial trial, double figure) {
    byPicture.computeIfAbsent(trial.picture(), p -> new Moments()).add(figure);
  }

  static Measurements.Condition condition(Cell cell) {
    return new Measurements.Condition(
        cell.impairment(), cell.actsOn(), cell.axis(), cell.severity());
  }

  static Measurements.Condition condition(Trial trial) {
    return new Measurements.Condition(
        trial.impairment(), trial.actsOn(), trial.axis(), trial.severity());
  }

  private static List<Noise> noises(List<Cell> cells) {
    Map<List<String>, Map<Measurements.Condition, Double>> variances = new LinkedHashMap<>();
    for (Cell cell : cells) {
      if (!cell.axis().isEmpty()) {
        variances
            .computeIfAbsent(List.of(cell.impairment(), cell.actsOn()), n -> new LinkedHashMap<>())
            .putIfAbsent(condition(cell), cell.equivalentNoiseVariance());
      }
    }
    List<Noise> noises = new ArrayList<>();
    for (Map<Measurements.Condition, Double> of : variances.values()) {
      noises.add(
          new Noise(
              of.entrySet().stream()
                  .sorted(Comparator.comparingDouble(Map.Entry::getValue))
                  .map(Map.Entry::getKey)
                  .toList()));
    }
    return noises;
  }

  /** The noises, in the order of their cells. */
  List<Noise> noises() {
    return noises;
  }

  /** Id of the typical trial of a cell; empty if the cell has no trial. */
  String typical(Cell cell) {
    return typical.getOrDefault(Place.of(cell), new Typical(0, "", 0)).trial();
  }

  /**
   * Half-width of the noise interval of the mean squared error of a cell that has a prediction, in
   * dB: {@code 10 / ln 10} times its half-width over its mean (the delta method). NaN where there
   * is no interval.
   */
  double meanSquaredErrorHalfWidthDb(Cell cell) {
    List<Moments> groups =
        List.copyOf(relativeErrors.getOrDefault(Place.of(cell), Map.of()).values());
    double mean = 0;
    for (Moments group : groups) {
      mean += group.mean() / groups.size();
    }
    return 10 / StrictMath.log(10) * StudentT.halfWidthOfGroups(groups) / mean;
  }

  /** Mean PSNR of each picture in a middle condition, in the order of the record. */
  Map<String, Double> pictures(Measurements.Condition middle, String codec) {
    Map<String, Double> means = new LinkedHashMap<>();
    pictures
        .getOrDefault(new Place(middle, codec), Map.of())
        .forEach((picture, moments) -> means.put(picture, moments.mean()));
    return means;
  }

  /** The means of the pictures for every codec and middle condition. */
  List<Particulars.Spread> spreads() {
    List<String> ids = results.run().pictures().stream().map(RunRecord.PictureUsed::id).toList();
    List<Particulars.Spread> spreads = new ArrayList<>();
    pictures.forEach(
        (place, moments) ->
            spreads.add(
                new Particulars.Spread(
                    shown(place.condition()),
                    place.codec(),
                    ids.stream()
                        .map(id -> moments.containsKey(id) ? moments.get(id).mean() : Double.NaN)
                        .toList())));
    return spreads;
  }

  /** A condition as the page knows it; measured values have no part in it. */
  static Condition shown(Measurements.Condition condition) {
    return new Condition(
        condition.impairment(),
        condition.actsOn(),
        condition.axis(),
        condition.severity(),
        Double.NaN,
        Double.NaN,
        Double.NaN);
  }
}
