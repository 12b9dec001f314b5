package linkworthy.decision;

import java.util.HashMap;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.Set;
import java.util.function.Predicate;
import linkworthy.statistics.Moments;
import linkworthy.trial.Trial;

/**
 * The trials of a run, gathered for decisions: of every measure the mean and variance over
 * replicates, for each picture, condition and codec. Takes trials in the order of the plan; keeps
 * about 20 bytes for each picture, condition, codec and measure that is kept.
 */
public final class Measurements {
  /** Name of the share of trials in which nothing usable arrived. */
  static final String OUTAGE_RATE = "outage-rate";

  static final String PSNR = "psnr-db";
  static final String BITS = "bits-per-pixel";

  private final Map<Condition, Map<String, Sample>> samples = new LinkedHashMap<>();
  private final Map<Condition, Moments> snrDb = new LinkedHashMap<>();
  private final Set<String> codecs = new LinkedHashSet<>();
  private final Set<String> measures = new LinkedHashSet<>();
  private final Map<String, Picture> pictures = new HashMap<>();
  private final Predicate<String> kept;
  private long trials;

  /** One id for all samples, and its number. */
  private record Picture(int number, String id) {}

  /** All measures. */
  public Measurements() {
    this(measure -> true);
  }

  private Measurements(Predicate<String> kept) {
    this.kept = kept;
  }

  /** PSNR and sent bits per pixel alone, as comparisons of codecs need them. */
  public static Measurements ofPsnrAndBits() {
    return new Measurements(List.of(PSNR, BITS)::contains);
  }

  /** What a {@link Shortlist} needs that is about these measures. */
  public static Measurements forShortlist(Set<String> named) {
    return new Measurements(
        measure -> measure.equals(PSNR) || measure.equals(BITS) || named.contains(measure));
  }

  /**
   * What hurt the pictures, and how strongly.
   *
   * @param impairment name of the noise model, {@code none} for clean
   * @param actsOn {@code samples}, {@code packets}, {@code bits}, or empty for clean
   * @param axis key the severity was given by, or empty for clean
   * @param severity value on that axis; NaN for clean
   */
  public record Condition(String impairment, String actsOn, String axis, double severity) {
    /** As a reader would say it. */
    public String text() {
      return axis.isEmpty()
          ? "clean"
          : impairment + " on " + actsOn + ", " + axis + " " + Plain.number(severity);
    }
  }

  /**
   * Takes one more trial. Every number of a trial is a measure, by the name of its column with
   * dashes; a column that is empty throughout is none.
   */
  public void add(Trial trial) {
    Condition condition =
        new Condition(trial.impairment(), trial.actsOn(), trial.axis(), trial.severity());
    Map<String, Double> figures = new LinkedHashMap<>();
    put(figures, PSNR, trial.psnrDb());
    put(figures, "ssim", trial.ssim());
    put(figures, "mse", trial.mse());
    put(figures, BITS, trial.bitsPerPixel());
    put(figures, "payload-bits", (double) trial.payloadBits());
    put(figures, "sent-bits", (double) trial.sentBits());
    put(figures, "packets-sent", trial.packetsSent());
    put(figures, "packets-lost", trial.packetsLost());
    put(figures, OUTAGE_RATE, trial.outage() ? 1 : 0);
    trial.further().forEach((column, figure) -> put(figures, column.replace('_', '-'), figure));
    measures.addAll(figures.keySet());
    figures.keySet().removeIf(kept.negate());
    Picture picture =
        pictures.computeIfAbsent(trial.picture(), id -> new Picture(pictures.size(), id));
    samples
        .computeIfAbsent(condition, c -> new LinkedHashMap<>())
        .computeIfAbsent(trial.codec(), codec -> new Sample())
        .add(picture.number(), picture.id(), figures);
    snrDb.computeIfAbsent(condition, c -> new Moments()).add(trial.snrDb());
    codecs.add(trial.codec());
    trials++;
  }

  private static void put(Map<String, Double> figures, String name, double figure) {
    if (!Double.isNaN(figure)) {
      figures.put(name, figure);
    }
  }

  /** All conditions, in the order of their first trials. */
  public List<Condition> conditions() {
    return List.copyOf(samples.keySet());
  }

  /** The conditions without the clean one, or that alone if there is no other. */
  List<Condition> noisyConditions() {
    List<Condition> noisy = conditions().stream().filter(c -> !c.axis().isEmpty()).toList();
    return noisy.isEmpty() ? conditions() : noisy;
  }

  /** All codecs, in the order of their first trials. */
  public List<String> codecs() {
    return List.copyOf(codecs);
  }

  /** Names of all measures that have a figure, kept or not. */
  public List<String> measures() {
    return List.copyOf(measures);
  }

  /** Number of pictures. */
  public int pictures() {
    return pictures.size();
  }

  /** Number of trials. */
  public long trials() {
    return trials;
  }

  /** Mean signal-to-noise ratio of a condition, in dB; NaN for clean. */
  double snrDb(Condition condition) {
    return snrDb.getOrDefault(condition, new Moments()).mean();
  }

  Optional<Sample> find(Condition condition, String codec) {
    return Optional.ofNullable(samples.getOrDefault(condition, Map.of()).get(codec));
  }
}
