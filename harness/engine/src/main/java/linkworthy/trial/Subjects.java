package linkworthy.trial;

import java.util.LinkedHashMap;
import java.util.Map;

/** The pictures in use, the oldest dropped first. Safe for several threads. */
final class Subjects {
  private final Plan plan;
  private final int most;
  private final Map<Integer, Subject> inUse = new LinkedHashMap<>();

  /**
   * @param most pictures that are kept; one for each thread and one to come are enough
   */
  Subjects(Plan plan, int most) {
    this.plan = plan;
    this.most = most;
  }

  synchronized Subject get(WorkUnit unit) {
    Subject known = inUse.get(unit.picture());
    if (known != null) {
      return known;
    }
    Subject subject = new Subject(plan.planes(unit.entry()), plan.study());
    inUse.put(unit.picture(), subject);
    if (inUse.size() > most) {
      inUse.remove(inUse.keySet().iterator().next());
    }
    return subject;
  }
}
