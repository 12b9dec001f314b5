package linkworthy.trial;

import java.util.ArrayList;
import java.util.List;
import linkworthy.study.CodecChoice;
import linkworthy.study.EarlyStop;

/**
 * The way through a plan, trial by trial in the canonical order: which trial comes next, given the
 * trials so far.
 *
 * <p>With a fixed number of replicates every unit of the plan comes. Where a study has an {@link
 * EarlyStop}, the replicates of a picture under a severity end with the first one of number n (from
 * 1) for which n is {@code at-most}, or n is at least {@code at-least} and for every codec the
 * {@link NoiseWidth} over the n PSNR of this picture, which leaves ten of them out of account, is
 * at most {@code half-width-db * sqrt(P)}, with P the number of pictures of the study: the mean
 * over P pictures of equal spread then has {@code half-width-db} or less. Equal values, infinite
 * ones included, have width 0; otherwise an infinite value is never narrow enough. Fewer than five
 * never are. The units behind that replicate are left out. So the rows of one picture under one
 * severity alone decide how many they are.
 */
public final class Course {
  private final Plan plan;
  private final List<NoiseWidth> widths = new ArrayList<>();
  private final int end;
  private int next;
  private int codec;

  /** The course from the first trial of the plan. */
  public Course(Plan plan) {
    this(plan, 0);
  }

  /** The course through a part of a plan. */
  public Course(Plan plan, Stretch stretch) {
    this(plan, stretch.first(), stretch.end());
    requireFirst(plan, stretch.end());
  }

  /**
   * @param firstUnit with replicates that end early, one that no replicate precedes
   */
  Course(Plan plan, int firstUnit) {
    this(plan, firstUnit, plan.units());
  }

  private Course(Plan plan, int firstUnit, int end) {
    this.plan = plan;
    this.next = firstUnit;
    this.end = end;
    plan.study().codecs().forEach(choice -> widths.add(new NoiseWidth()));
    requireFirst(plan, firstUnit);
  }

  private static void requireFirst(Plan plan, int unit) {
    if (plan.study().earlyStop() != null && plan.groupFrom(unit) != unit) {
      throw new IllegalArgumentException(
          "unit " + unit + " has replicates before it; accepted: a first replicate");
    }
  }

  /** A course of its own that stands where this one does. */
  Course copy() {
    Course copy = new Course(plan, end, end);
    copy.next = next;
    copy.codec = codec;
    copy.widths.clear();
    widths.forEach(width -> copy.widths.add(width.copy()));
    return copy;
  }

  /** Whether every trial that the plan comes to has been given. */
  public boolean isAtEnd() {
    return next >= end;
  }

  /** Place in the plan of the unit behind the last one of this course. */
  int end() {
    return end;
  }

  /** Place in the plan of the unit of the next trial; {@link #end} at the end. */
  public int next() {
    return next;
  }

  /** The unit of the next trial. */
  public WorkUnit unit() {
    return plan.unit(next);
  }

  /** The codec of the next trial, by its place in the study. */
  public int codec() {
    return codec;
  }

  /** The id of the next trial. */
  public String trialId() {
    CodecChoice choice = plan.study().codecs().get(codec);
    return plan.trialId(unit(), choice);
  }

  /** Where the units end whose number depends on each other, as if none were left out. */
  int groupEnd() {
    return plan.study().earlyStop() == null ? next + 1 : plan.groupFrom(next + 1);
  }

  /** Takes the next trial. */
  public void add(Trial trial) {
    EarlyStop rule = plan.study().earlyStop();
    if (rule != null) {
      widths.get(codec).add(trial.psnrDb());
    }
    codec++;
    if (codec == widths.size()) {
      codec = 0;
      next = rule == null ? next + 1 : afterReplicate(rule);
    }
  }

  private int afterReplicate(EarlyStop rule) {
    int replicates = unit().replicate() + 1;
    int end = groupEnd();
    boolean enough = replicates >= rule.atLeast() && isNarrow(rule);
    if (!enough && next + 1 < end) {
      return next + 1;
    }
    widths.replaceAll(width -> new NoiseWidth());
    return end;
  }

  private boolean isNarrow(EarlyStop rule) {
    double accepted = rule.halfWidthDb() * Math.sqrt(plan.pictures().size());
    return widths.stream().allMatch(width -> width.halfWidth() <= accepted);
  }
}
