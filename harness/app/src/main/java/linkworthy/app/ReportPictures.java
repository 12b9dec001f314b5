package linkworthy.app;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.function.Supplier;
import linkworthy.decision.Measurements;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;
import linkworthy.report.Gallery;
import linkworthy.results.ResultsFolder;
import linkworthy.results.TrialsCsv;
import linkworthy.statistics.Cell;
import linkworthy.study.CodecChoice;
import linkworthy.trial.Plan;
import linkworthy.trial.Repetition;
import linkworthy.trial.Trial;
import org.jspecify.annotations.Nullable;

/**
 * Makes the pictures of a report by repeating the trials that they are of. A trial that does not
 * come out as recorded is not shown.
 */
final class ReportPictures {
  private static final String MISSING =
      "No picture is shown: the pictures of the study, or codecs of your own, were not at hand when"
          + " this page was made. Where they are, './linkworthy report FOLDER' makes this page with"
          + " them.";

  private static final int CODECS = 3;

  private final ResultsFolder results;
  private final List<Cell> cells;
  private final ReportTrials trials;
  private final String reference;
  private int repeated;
  private int differing;

  /**
   * @param reference label of the codec by which pictures are chosen
   */
  ReportPictures(ResultsFolder results, List<Cell> cells, ReportTrials trials, String reference) {
    this.results = results;
    this.cells = cells;
    this.trials = trials;
    this.reference = reference;
  }

  /** The pictures, and what was found out on the way. */
  record Made(Gallery gallery, List<String> verified) {}

  /** Which picture, in which condition, through which codec. */
  private record Wanted(String picture, ReportTrials.Place place) {}

  /** A noise with what is to be seen of it: pictures and codecs, each with the reason. */
  private record Choice(
      ReportTrials.Noise noise, Map<String, String> pictures, Map<String, String> codecs) {}

  /** Repeats the trials, if their pictures are at hand. */
  Made make(Supplier<Plan> plans) {
    if (trials.noises().isEmpty() || reference.isEmpty()) {
      return new Made(Gallery.NONE, List.of());
    }
    List<Choice> choices = trials.noises().stream().map(this::choice).toList();
    Map<Wanted, Trial> recorded = recorded(choices);
    try {
      Plan plan = plans.get();
      Repetition repetition = new Repetition(plan, 1);
      List<Gallery.Shown> shown = new ArrayList<>();
      for (Choice choice : choices) {
        List<Gallery.Subject> subjects = subjects(choice, recorded, plan, repetition);
        if (!subjects.isEmpty()) {
          shown.add(new Gallery.Shown(ReportTrials.shown(choice.noise().middle()), subjects));
        }
      }
      return new Made(new Gallery(rule(), "", shown), verified(plan));
    } catch (BadInput | Unavailable e) {
      return new Made(Gallery.missing(MISSING), List.of());
    }
  }

  private List<String> rule() {
    return List.of(
        "Pictures, for each noise: of the mean PSNR that "
            + reference
            + " (the reference: the codec that the answer names or, where needs are met by none,"
            + " that of the answer without needs) gives them at the middle severity,"
            + " the median one (typical; of an even number the lower), the worst and the best.",
        "Codecs: the one with the best mean PSNR over the noise, the cheapest that no other one"
            + " dominates there, and the reference; where these are fewer than three, the second"
            + " best too. Severities: mildest, middle, harshest. Noise:"
            + " the first replicate.",
        "Crops: of at most "
            + PictureCrop.SIDE
            + " \u00d7 "
            + PictureCrop.SIDE
            + " samples, where the clean picture has most detail (squared differences of"
            + " neighbours); each sample is drawn as a square,"
            + " nothing is smoothed.",
        "Error maps, below each decoded crop: mid-grey (128) is no error, and a grey level of error"
            + " is "
            + PictureCrop.GAIN
            + " levels of the map, so white is +"
            + 128 / PictureCrop.GAIN
            + " or more and black \u2212"
            + 128 / PictureCrop.GAIN
            + " or less, in levels of 8 bits.");
  }

  private List<String> verified(Plan plan) {
    List<String> verified = new ArrayList<>();
    verified.add(
        "The study was read from the record again: its fingerprint is that of the run"
            + (plan.manifest().fingerprint().equals(results.run().corpusFingerprint())
                ? ", and the manifest of the pictures has the fingerprint of the run."
                : "; the manifest of the pictures has changed since the run."));
    verified.add(
        "The trials shown as pictures were repeated, "
            + repeated
            + " of them, on pictures whose checksums were compared with the manifest: "
            + (differing == 0
                ? "every figure equals the recorded one, bit for bit."
                : differing + " differ from the record and are not shown."));
    return verified;
  }

  /** A codec, its PSNR and its sent bits, summed over the conditions of a noise. */
  private record Rank(String codec, double psnr, double bits) {
    Rank and(Rank other) {
      return new Rank(codec, psnr + other.psnr, bits + other.bits);
    }
  }

  private Choice choice(ReportTrials.Noise noise) {
    Map<String, Rank> ranks = new LinkedHashMap<>();
    for (Cell cell : cells) {
      if (noise.conditions().contains(ReportTrials.condition(cell))) {
        Rank rank = new Rank(cell.codec(), cell.psnrMeanDb(), cell.bitsPerPixelMean());
        ranks.merge(cell.codec(), rank, Rank::and);
      }
    }
    Map<String, String> codecs = new LinkedHashMap<>();
    Comparator<Rank> best = Comparator.comparingDouble(rank -> -rank.psnr());
    ranks.values().stream()
        .min(best)
        .ifPresent(rank -> add(codecs, rank.codec(), "best mean PSNR"));
    ranks.values().stream()
        .min(Comparator.comparingDouble(Rank::bits).thenComparing(best))
        .ifPresent(rank -> add(codecs, rank.codec(), "cheapest non-dominated"));
    add(codecs, reference, "reference");
    if (codecs.size() < CODECS) {
      ranks.values().stream()
          .sorted(best)
          .skip(1)
          .limit(1)
          .forEach(rank -> add(codecs, rank.codec(), "second-best mean PSNR"));
    }
    return new Choice(noise, pictures(noise), codecs);
  }

  private static void add(Map<String, String> roles, String key, String role) {
    roles.merge(key, role, (before, now) -> before + ", " + now);
  }

  private Map<String, String> pictures(ReportTrials.Noise noise) {
    Map<String, Double> means = trials.pictures(noise.middle(), reference);
    List<String> ranked =
        means.entrySet().stream()
            .sorted(Comparator.comparingDouble(Map.Entry::getValue))
            .map(Map.Entry::getKey)
            .toList();
    Map<String, String> roles = new LinkedHashMap<>();
    if (!ranked.isEmpty()) {
      add(roles, ranked.get((ranked.size() - 1) / 2), "typical");
      add(roles, ranked.get(0), "worst");
      add(roles, ranked.get(ranked.size() - 1), "best");
    }
    return roles;
  }

  /** The first replicate of every trial that is to be seen. */
  private Map<Wanted, Trial> recorded(List<Choice> choices) {
    Map<Wanted, Optional<Trial>> wanted = new LinkedHashMap<>();
    for (Choice choice : choices) {
      for (String picture : choice.pictures().keySet()) {
        for (Measurements.Condition condition : choice.noise().three()) {
          for (String codec : choice.codecs().keySet()) {
            wanted.put(
                new Wanted(picture, new ReportTrials.Place(condition, codec)), Optional.empty());
          }
        }
      }
    }
    long unused =
        results.rows(
            trial ->
                wanted.computeIfPresent(
                    new Wanted(trial.picture(), ReportTrials.Place.of(trial)),
                    (key, before) -> before.or(() -> Optional.of(trial))));
    Map<Wanted, Trial> recorded = new LinkedHashMap<>();
    wanted.forEach((key, trial) -> trial.ifPresent(t -> recorded.put(key, t)));
    return recorded;
  }

  private List<Gallery.Subject> subjects(
      Choice choice, Map<Wanted, Trial> recorded, Plan plan, Repetition repetition) {
    List<Gallery.Subject> subjects = new ArrayList<>();
    choice
        .pictures()
        .forEach(
            (picture, role) -> {
              Shots shots = new Shots(choice.codecs());
              for (Measurements.Condition condition : choice.noise().three()) {
                for (String codec : choice.codecs().keySet()) {
                  Trial trial =
                      recorded.get(new Wanted(picture, new ReportTrials.Place(condition, codec)));
                  if (trial != null) {
                    repeat(trial, plan, repetition).ifPresent(scene -> shots.add(condition, scene));
                  }
                }
              }
              shots.subject(role, picture).ifPresent(subjects::add);
            });
    return subjects;
  }

  /** The trial again, or nothing if it is no longer the same. */
  private Optional<Repetition.Scene> repeat(Trial recorded, Plan plan, Repetition repetition) {
    Optional<CodecChoice> codec =
        plan.study().codecs().stream().filter(c -> c.label().equals(recorded.codec())).findFirst();
    repeated++;
    Optional<Repetition.Scene> scene =
        plan.unitOf(recorded)
            .flatMap(unit -> codec.map(choice -> repetition.scene(unit, choice)))
            .filter(s -> TrialsCsv.differences(recorded, s.trial()).isEmpty());
    differing += scene.isPresent() ? 0 : 1;
    return scene;
  }

  /** The scenes of one picture, as they come. */
  private static final class Shots {
    private final Map<String, String> roles;
    private final Map<Measurements.Condition, List<Gallery.Decoded>> decoded =
        new LinkedHashMap<>();
    private final Map<Measurements.Condition, Gallery.Image> received = new LinkedHashMap<>();
    private @Nullable PictureCrop crops;

    Shots(Map<String, String> roles) {
      this.roles = roles;
    }

    void add(Measurements.Condition condition, Repetition.Scene scene) {
      if (crops == null) {
        crops = new PictureCrop(scene.clean());
      }
      Trial trial = scene.trial();
      if (trial.actsOn().equals("samples")) {
        received.putIfAbsent(condition, crops.of(scene.seen()));
      }
      decoded
          .computeIfAbsent(condition, c -> new ArrayList<>())
          .add(
              new Gallery.Decoded(
                  trial.codec(),
                  roles.getOrDefault(trial.codec(), ""),
                  crops.of(scene.decoded()),
                  crops.error(scene.decoded()),
                  trial.bitsPerPixel(),
                  trial.psnrDb(),
                  trial.ssim(),
                  trial.outage(),
                  trial.trial()));
    }

    Optional<Gallery.Subject> subject(String role, String picture) {
      if (crops == null) {
        return Optional.empty();
      }
      List<Gallery.Scene> scenes = new ArrayList<>();
      decoded.forEach(
          (condition, codecs) ->
              scenes.add(
                  new Gallery.Scene(
                      ReportTrials.shown(condition), received.get(condition), codecs)));
      return Optional.of(
          new Gallery.Subject(role, picture, crops.whole(), crops.frame(), crops.clean(), scenes));
    }
  }
}
