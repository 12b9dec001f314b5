package linkworthy.results;

import java.nio.file.Path;
import java.util.BitSet;
import java.util.List;
import linkworthy.input.BadInput;
import linkworthy.study.CodecChoice;
import linkworthy.trial.Course;
import linkworthy.trial.Plan;
import linkworthy.trial.Timing;
import linkworthy.trial.Trial;
import linkworthy.trial.WorkUnit;

/** Holds rows of a record against the plan that they are to be of. */
final class PlannedRows {
  private static final String NONE = "none";

  private final Plan plan;
  private final Path trialsFile;
  private final Path timingsFile;

  private final Course course;
  private final BitSet firsts = new BitSet();
  private int nextTimed;
  private int timedUnits;

  PlannedRows(Plan plan, Path trialsFile, Path timingsFile) {
    this.plan = plan;
    this.course = new Course(plan);
    this.trialsFile = trialsFile;
    this.timingsFile = timingsFile;
  }

  /**
   * By their ids, in which everything is hashed that a trial depends on; after the times of the
   * same units.
   */
  void trials(int place, List<? extends Trial> rows, long line) {
    for (int i = 0; i < rows.size(); i++) {
      String expected = course.isAtEnd() ? NONE : course.trialId();
      if (!rows.get(i).trial().equals(expected)) {
        throw otherStudy(trialsFile, line + i, rows.get(i).trial(), expected);
      }
      boolean first = course.unit().replicate() == 0;
      if (place < timedUnits && firsts.get(place) != first) {
        throw new BadInput(
            timingsFile
                + ", line "
                + (line + i)
                + " is not of the trial "
                + expected
                + ", as in "
                + trialsFile
                + "; accepted: times of the same trials");
      }
      course.add(rows.get(i));
    }
  }

  /**
   * By their keys. Times do not tell where replicates were to end early, so they may end anywhere
   * until the trials are seen.
   */
  void timings(int place, List<? extends Timing> rows, long line) {
    boolean mayEnd = plan.study().earlyStop() != null && rows.get(0).replicate() == 0;
    int index = mayEnd ? plan.groupFrom(nextTimed) : nextTimed;
    if (index >= plan.units()) {
      throw otherStudy(timingsFile, line, key(rows.get(0)), NONE);
    }
    WorkUnit unit = plan.unit(index);
    nextTimed = index + 1;
    timedUnits = place + 1;
    firsts.set(place, unit.replicate() == 0);
    for (int i = 0; i < rows.size(); i++) {
      CodecChoice codec = plan.study().codecs().get(i);
      Timing found = rows.get(i);
      Timing expected = Timing.of(unit, codec.label(), found.encodeMs(), found.decodeMs());
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
