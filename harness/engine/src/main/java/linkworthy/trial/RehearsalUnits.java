package linkworthy.trial;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.stream.IntStream;
import java.util.stream.Stream;
import linkworthy.corpus.ManifestEntry;
import linkworthy.noise.SignalStatistics;
import linkworthy.study.ImpairmentChoice;
import linkworthy.study.PictureChoice;

/**
 * The units of a plan that a {@link Rehearsal} runs, and which of them stand for the others. They
 * are numbered in the order of three pictures by size, and within a picture in that of the plan.
 */
final class RehearsalUnits {
  static final int CLEAN = -1;

  private final Plan plan;

  /** Places in the plan, by size. */
  private final List<Integer> pictures;

  /** Of every condition of the plan, on the first of the pictures. */
  private final double[] variances;

  /** Places in the plan, the clean picture first. */
  private final List<Integer> conditions;

  /**
   * For every condition of the plan the places in {@link #conditions} of those on both sides of it,
   * the milder first.
   */
  private final int[][] sides;

  RehearsalUnits(Plan plan) {
    this.plan = plan;
    this.pictures =
        three(
            IntStream.range(0, plan.pictures().size())
                .boxed()
                .sorted(Comparator.comparingDouble(this::samples))
                .toList());
    this.variances = variances(plan, pictures.get(0));
    List<List<Integer>> impairments = impairments();
    this.conditions =
        Stream.concat(
                Stream.of(CLEAN),
                impairments.stream().flatMap(severities -> three(severities).stream()))
            .sorted()
            .toList();
    this.sides = new int[variances.length][];
    impairments.forEach(this::findSides);
  }

  /** The first, the middle and the last. */
  private static List<Integer> three(List<Integer> all) {
    int last = all.size() - 1;
    return Stream.of(0, last / 2, last).distinct().map(all::get).toList();
  }

  private static double[] variances(Plan plan, int picture) {
    SignalStatistics signal =
        Subject.signal(
            plan.planes(plan.pictures().get(picture)), plan.study().pictures().signalPower());
    return plan.conditions().stream()
        .mapToDouble(condition -> condition.at(signal).equivalentNoiseVariance())
        .toArray();
  }

  /** The conditions of each impairment, mildest first. */
  private List<List<Integer>> impairments() {
    Map<List<String>, List<Integer>> found = new LinkedHashMap<>();
    for (int i = 0; i < variances.length; i++) {
      ImpairmentChoice impairment = plan.conditions().get(i).impairment();
      found
          .computeIfAbsent(
              List.of(impairment.label(), impairment.site().id()), k -> new ArrayList<>())
          .add(i);
    }
    found.values().forEach(of -> of.sort(Comparator.comparingDouble(i -> variances[i])));
    return List.copyOf(found.values());
  }

  private void findSides(List<Integer> severities) {
    int last = severities.size() - 1;
    int middle = last / 2;
    for (int i = 0; i <= last; i++) {
      int milder = i < middle ? 0 : i < last ? middle : last;
      int harsher = i == 0 ? 0 : i <= middle ? middle : last;
      sides[severities.get(i)] =
          new int[] {
            conditions.indexOf(severities.get(milder)), conditions.indexOf(severities.get(harsher))
          };
    }
  }

  int size() {
    return pictures.size() * conditions.size();
  }

  WorkUnit get(int unit) {
    return plan.unit(
        pictures.get(unit / conditions.size()), conditions.get(unit % conditions.size()), 0);
  }

  /** Places in the plan of the pictures, by size. */
  List<Integer> pictures() {
    return pictures;
  }

  /** Samples of a picture of the plan as they are coded. */
  double samples(int picture) {
    ManifestEntry entry = plan.pictures().get(picture);
    PictureChoice choice = plan.study().pictures();
    double longest = Math.max(entry.width(), entry.height());
    double scale = Math.min(1, choice.longestSide().orElse((int) longest) / longest);
    return scale * scale * entry.width() * entry.height() * choice.codedSamples(entry);
  }

  double equivalentNoiseVariance(int condition) {
    return variances[condition];
  }

  /**
   * The unit of a condition of the plan, or of the next milder one that is run.
   *
   * @param picture one of {@link #pictures}
   */
  int milder(int picture, int condition) {
    return of(picture, condition == CLEAN ? conditions.indexOf(CLEAN) : sides[condition][0]);
  }

  /** The unit of a condition of the plan, or of the next harsher one that is run. */
  int harsher(int picture, int condition) {
    return of(picture, sides[condition][1]);
  }

  private int of(int picture, int condition) {
    return pictures.indexOf(picture) * conditions.size() + condition;
  }

  /**
   * The same condition of the next smaller picture, of the smallest picture the condition before.
   */
  int before(int unit) {
    return unit < conditions.size() ? unit - 1 : unit - conditions.size();
  }
}
