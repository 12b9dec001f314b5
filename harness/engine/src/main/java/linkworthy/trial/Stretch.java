package linkworthy.trial;

import java.io.Serializable;
import java.util.ArrayList;
import java.util.List;

/**
 * Units of a plan that follow each other, run and recorded by one task elsewhere. Where replicates
 * may end early, all replicates of a severity are in the same stretch, so that each stretch decides
 * by its own rows alone how many there are.
 *
 * @param first place in the plan of the first unit
 * @param end place of the unit behind the last
 */
public record Stretch(int first, int end) implements Serializable {
  /**
   * @throws IllegalArgumentException if there is no unit in it
   */
  public Stretch {
    if (first < 0 || end <= first) {
      throw new IllegalArgumentException(
          "the stretch is from " + first + " to " + end + "; accepted: at least one unit");
    }
  }

  /** Units, as if no replicates ended early. */
  public int units() {
    return end - first;
  }

  /**
   * About equal parts of a stretch, in order; fewer than asked for where the units that belong
   * together are fewer.
   *
   * @param parts at least 1
   */
  public List<Stretch> split(Plan plan, int parts) {
    List<Stretch> split = new ArrayList<>();
    int from = first;
    for (int part = 1; part <= parts; part++) {
      int at = (int) (first + (long) units() * part / parts);
      int to = plan.study().earlyStop() == null ? at : Math.min(end, plan.groupFrom(at));
      if (to > from) {
        split.add(new Stretch(from, to));
        from = to;
      }
    }
    return split;
  }
}
