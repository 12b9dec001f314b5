package linkworthy.trial;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import linkworthy.codec.Codec;
import linkworthy.codec.PictureShape;
import linkworthy.corpus.Manifest;
import linkworthy.corpus.ManifestEntry;
import linkworthy.corpus.Picture;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;
import linkworthy.noise.Severity;
import linkworthy.noise.SignalStatistics;
import linkworthy.quality.QualityMeasures;
import linkworthy.study.CodecChoice;
import linkworthy.study.ImpairmentChoice;
import linkworthy.study.Study;

/**
 * Everything a study asks for, as numbered work units: picture by picture, the clean one first,
 * then impairment, severity and replicate in the study's order.
 */
public final class Plan {
  private final Study study;
  private final Manifest manifest;
  private final List<ManifestEntry> pictures;
  private final List<WorkUnit.Condition> conditions;

  private Plan(Study study, Manifest manifest, List<ManifestEntry> pictures) {
    this.study = study;
    this.manifest = manifest;
    this.pictures = pictures;
    this.conditions = new ArrayList<>();
    for (ImpairmentChoice impairment : study.impairments()) {
      for (Severity severity : impairment.levels()) {
        conditions.add(new WorkUnit.Condition(impairment, severity));
      }
    }
    double units = pictures.size() * (1.0 + (double) conditions.size() * study.replicates());
    if (units > Integer.MAX_VALUE) {
      throw new BadInput(
          "the study has "
              + (long) units
              + " units of a picture, a severity and a replicate; accepted: up to "
              + Integer.MAX_VALUE
              + " (cut it into several studies)");
    }
  }

  /**
   * Plans a study and checks every picture against every codec, measure and severity before
   * anything runs.
   *
   * @throws BadInput if a picture is not what its manifest says, or something does not go together;
   *     one line that says what
   * @throws linkworthy.input.Unavailable if a picture cannot be read
   */
  public static Plan of(Study study) {
    Plan plan = unchecked(study);
    for (ManifestEntry entry : plan.pictures) {
      plan.check(entry);
    }
    return plan;
  }

  private void check(ManifestEntry entry) {
    List<Picture> planes = planes(entry);
    PictureShape shape = PictureShape.of(planes.get(0));
    try {
      for (Picture coded : new PlaneCoding(study.pictures()).coded(planes)) {
        for (CodecChoice choice : study.codecs()) {
          check(choice.codec(), PictureShape.of(coded));
        }
      }
      for (String measure : study.measures()) {
        QualityMeasures.get(measure).check(shape);
      }
      SignalStatistics signal = Subject.signal(planes, study.pictures().signalPower());
      for (WorkUnit.Condition condition : conditions) {
        condition.at(signal);
      }
    } catch (BadInput e) {
      throw new BadInput("picture '" + entry.id() + "': " + e.getMessage(), e);
    }
  }

  /** Codecs of the user's own may fail here as anywhere; nothing has begun yet, so this is said. */
  private static void check(Codec codec, PictureShape shape) {
    try {
      codec.check(shape);
    } catch (BadInput | Unavailable e) {
      throw e;
    } catch (RuntimeException | LinkageError | AssertionError | StackOverflowError e) {
      throw new BadInput("codec '" + codec.label() + "' failed in check(): " + e, e);
    }
  }

  /**
   * The same plan with no look at pictures beforehand: what does not go together shows when a unit
   * runs.
   *
   * @throws BadInput if the pictures cannot be selected or codecs cannot be trained on them
   */
  public static Plan unchecked(Study study) {
    return unchecked(study, study.pictures().open());
  }

  /**
   * The same with the pictures of a manifest that is open already, whatever the study's own is.
   *
   * @throws BadInput if the pictures cannot be selected or codecs cannot be trained on them
   */
  public static Plan unchecked(Study study, Manifest manifest) {
    List<ManifestEntry> tested = manifest.select(study.pictures().select());
    return new Plan(TrainingSet.of(study, manifest, tested).train(study), manifest, tested);
  }

  /** The planes of a picture as the study wants them, luma first. */
  List<Picture> planes(ManifestEntry entry) {
    return study.pictures().planes(manifest, entry);
  }

  public Study study() {
    return study;
  }

  public Manifest manifest() {
    return manifest;
  }

  /** The pictures of the study, in the order of the manifest. */
  public List<ManifestEntry> pictures() {
    return pictures;
  }

  /** Units of one picture. */
  private int unitsOfPicture() {
    return Math.addExact(1, Math.multiplyExact(conditions.size(), study.replicates()));
  }

  /** Number of work units, as if no replicates ended early. */
  public int units() {
    return Math.multiplyExact(pictures.size(), unitsOfPicture());
  }

  /** Number of trials, units times codecs; where replicates may end early, at most so many. */
  public long trials() {
    return (long) units() * study.codecs().size();
  }

  /** The unit at a place in the canonical order. */
  public WorkUnit unit(int index) {
    int picture = index / unitsOfPicture();
    int rest = index % unitsOfPicture();
    ManifestEntry entry = pictures.get(picture);
    if (rest == 0) {
      return new WorkUnit(index, picture, entry, null, 0);
    }
    return new WorkUnit(
        index,
        picture,
        entry,
        conditions.get((rest - 1) / study.replicates()),
        (rest - 1) % study.replicates());
  }

  /**
   * A replicate of a picture in a condition.
   *
   * @param condition its place, -1 for the clean picture, which has replicate 0 alone
   */
  public WorkUnit unit(int picture, int condition, int replicate) {
    int rest = condition < 0 ? 0 : 1 + condition * study.replicates() + replicate;
    return unit(picture * unitsOfPicture() + rest);
  }

  /** The severities of all impairments, in the order of the study. */
  public List<WorkUnit.Condition> conditions() {
    return List.copyOf(conditions);
  }

  /**
   * The same plan for some of its pictures.
   *
   * @param places of the pictures, ascending
   */
  public Plan of(List<Integer> places) {
    return new Plan(study, manifest, places.stream().map(pictures::get).toList());
  }

  /** The id of the trial of one codec of the study in a unit. */
  public String trialId(WorkUnit unit, CodecChoice codec) {
    return new TrialKey(study, unit, codec).id();
  }

  /** The first unit at or after a place that is the first replicate of its severity. */
  public int groupFrom(int index) {
    int rest = index % unitsOfPicture();
    int into = rest == 0 ? 0 : (rest - 1) % study.replicates();
    return into == 0 ? index : index - into + study.replicates();
  }

  /**
   * The unit that a recorded trial says it is of, found by its key columns; empty if the plan has
   * none such.
   */
  public Optional<WorkUnit> unitOf(Trial trial) {
    for (int picture = 0; picture < pictures.size(); picture++) {
      if (pictures.get(picture).id().equals(trial.picture())) {
        int first = picture * unitsOfPicture();
        if (trial.impairment().equals(ImpairmentChoice.CLEAN)) {
          return trial.replicate() == 0 ? Optional.of(unit(first)) : Optional.empty();
        }
        return place(trial).map(rest -> unit(first + 1 + rest));
      }
    }
    return Optional.empty();
  }

  private Optional<Integer> place(Trial trial) {
    for (int i = 0; i < conditions.size(); i++) {
      ImpairmentChoice impairment = conditions.get(i).impairment();
      Severity severity = conditions.get(i).severity();
      if (impairment.label().equals(trial.impairment())
          && impairment.site().id().equals(trial.actsOn())
          && severity.axis().equals(trial.axis())
          && severity.value() == trial.severity()
          && trial.replicate() < study.replicates()) {
        return Optional.of(i * study.replicates() + trial.replicate());
      }
    }
    return Optional.empty();
  }
}
