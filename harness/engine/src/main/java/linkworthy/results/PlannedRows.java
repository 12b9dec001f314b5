package linkworthy.results;

import java.nio.file.Path;
import java.util.List;
import linkworthy.input.BadInput;
import linkworthy.study.CodecChoice;
import linkworthy.study.ImpairmentChoice;
import linkworthy.trial.Plan;
import linkworthy.trial.Timing;
import linkworthy.trial.Trial;
import linkworthy.trial.WorkUnit;

/** Holds rows of a record against the plan that they are to be of. */
final class PlannedRows {
  private final Plan plan;
  private final Path trialsFile;
  private final Path timingsFile;

  PlannedRows(Plan plan, Path trialsFile, Path timingsFile) {
    this.plan = plan;
    this.trialsFile = trialsFile;
    this.timingsFile = timingsFile;
  }

  /** By their ids, in which everything is hashed that a trial depends on. */
  void trials(int index, List<? extends Trial> rows, long line) {
    WorkUnit unit = plan.unit(index);
    for (int i = 0; i < rows.size(); i++) {
      String expected = plan.trialId(unit, plan.study().codecs().get(i));
      if (!rows.get(i).trial().equals(expected)) {
        throw otherStudy(trialsFile, line + i, rows.get(i).trial(), expected);
      }
    }
  }

  void timings(int index, List<? extends Timing> rows, long line) {
    WorkUnit unit = plan.unit(index);
    WorkUnit.Condition condition = unit.condition();
    for (int i = 0; i < rows.size(); i++) {
      CodecChoice codec = plan.study().codecs().get(i);
      Timing found = rows.get(i);
      Timing expected =
          new Timing(
              unit.entry().id(),
              condition == null ? ImpairmentChoice.CLEAN : condition.impairment().label(),
              condition == null ? Double.NaN : condition.severity().value(),
              unit.replicate(),
              codec.label(),
              found.encodeMs(),
              found.decodeMs());
      if (!found.equals(expected)) {
        throw otherStudy(timingsFile, line + i, key(found), key(expected));
      }
    }
  }

  private static String key(Timing timing) {
    return String.join(
        " ",
        timing.picture(),
        timing.impairment(),
        Double.toString(timing.severity()),
        Integer.toString(timing.replicate()),
        timing.codec());
  }

  private static BadInput otherStudy(Path file, long line, String found, String expected) {
    return new BadInput(
        file
            + ", line "
            + line
            + " is of the trial "
            + found
            + "; accepted: "
            + expected
            + ", which the study has there (are these rows of another study?)");
  }
}
