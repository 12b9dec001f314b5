package linkworthy.trial;

import java.util.ArrayList;
import java.util.Comparator;
import java.util.DoubleSummaryStatistics;
import java.util.List;
import java.util.Map;
import java.util.NavigableMap;
import java.util.TreeMap;
import java.util.concurrent.Callable;
import java.util.concurrent.ConcurrentHashMap;
import java.util.concurrent.ExecutorService;
import java.util.concurrent.Executors;
import java.util.concurrent.Future;
import java.util.concurrent.atomic.AtomicLong;

/**
 * A few work units of a plan, run on this machine for their times and rows: of the smallest, the
 * middle and the largest picture the clean unit, and for each impairment the first replicate of its
 * mildest, middle and harshest severity. Every thread runs all of them in the order of the plan,
 * over and over until a time has passed, so that they are timed as in a long run: beside each
 * other, and with code that has been compiled by then. What the compiling cost is kept apart.
 *
 * <p>Where units are slow each is run once. Only where even that takes more than twice the time and
 * 10 % of the plan's units have been run, the rest is taken to be like the others, in proportion to
 * the size of the picture.
 */
public final class Rehearsal {
  private static final int USUAL_PASSES = 4;
  private static final int MOST_PASSES = 5000;

  /** How many times the wanted time is very long. */
  private static final int PATIENCE = 2;

  /** Share of the plan's units that may be run even if it takes very long. */
  private static final double SMALL_SHARE = 0.1;

  private final Plan plan;
  private final int threads;
  private final RehearsalUnits units;
  private final AtomicLong begun = new AtomicLong();
  private final Map<Integer, UnitRunner.Rows> rows = new ConcurrentHashMap<>();
  private final List<Run> runs = new ArrayList<>();

  /** Seconds of each unit with compiled code. */
  private final double[] warm;

  /**
   * One run of a unit.
   *
   * @param start by the clock of {@link System#nanoTime}
   */
  private record Run(int unit, long start, double seconds) {}

  private Rehearsal(Plan plan, int threads) {
    this.plan = plan;
    this.threads = threads;
    this.units = new RehearsalUnits(plan);
    this.warm = new double[units.size()];
  }

  /**
   * Runs them.
   *
   * @param threads that the plan is to be run on
   * @param seconds that it is to take where units are fast
   */
  public static Rehearsal of(Plan plan, int threads, double seconds) {
    Rehearsal rehearsal =
        new Rehearsal(plan, Math.min(threads, Runtime.getRuntime().availableProcessors()));
    rehearsal.run(seconds);
    return rehearsal;
  }

  private void run(double seconds) {
    Callable<List<Run>> task = () -> passes(seconds);
    ExecutorService executor = Executors.newFixedThreadPool(threads);
    List<Run> late = new ArrayList<>();
    try {
      List<Future<List<Run>>> running = new ArrayList<>();
      for (int i = 0; i < threads; i++) {
        running.add(executor.submit(task));
      }
      for (Future<List<Run>> each : running) {
        List<Run> of = Awaited.result(each);
        runs.addAll(of);
        late.addAll(of.size() < 2 * warm.length ? of : of.subList(of.size() / 2, of.size()));
      }
    } finally {
      executor.shutdownNow();
    }
    weigh(late);
  }

  private List<Run> passes(double wanted) {
    List<Run> done = new ArrayList<>();
    long start = System.nanoTime();
    double passed = 0;
    for (int pass = 0;
        pass == 0
            || (pass < MOST_PASSES
                && begun.get() < plan.units()
                && (passed < wanted || (pass < USUAL_PASSES && passed < PATIENCE * wanted)));
        pass++) {
      pass(done, start, PATIENCE * wanted);
      passed = (System.nanoTime() - start) / 1e9;
    }
    return done;
  }

  private void pass(List<Run> done, long start, double most) {
    Subjects subjects = new Subjects(plan, 1);
    for (int unit = 0; unit < warm.length; unit++) {
      long now = System.nanoTime();
      boolean late = (now - start) / 1e9 > most;
      if (late && begun.get() > Math.max(threads, SMALL_SHARE * plan.units())) {
        return;
      }
      begun.incrementAndGet();
      WorkUnit of = units.get(unit);
      UnitRunner.Rows found = new UnitRunner(plan.study(), subjects.get(of), of).run();
      done.add(new Run(unit, now, (System.nanoTime() - now) / 1e9));
      rows.putIfAbsent(unit, found);
    }
  }

  /** The mean over the later half of the runs of each unit; of units not run, one that is alike. */
  private void weigh(List<Run> late) {
    double[] sums = new double[warm.length];
    int[] numbers = new int[warm.length];
    for (Run run : late) {
      sums[run.unit] += run.seconds;
      numbers[run.unit]++;
    }
    for (int unit = 0; unit < warm.length; unit++) {
      int like = like(unit);
      double sizes =
          units.samples(units.get(unit).picture()) / units.samples(units.get(like).picture());
      warm[unit] = sizes * sums[like] / numbers[like];
    }
  }

  /** The same condition of a smaller picture, or the last one that was run. */
  private int like(int unit) {
    int like = unit;
    while (!rows.containsKey(like)) {
      like = units.before(like);
    }
    return like;
  }

  /** Whether each of the units was run. */
  public boolean isWhole() {
    return rows.size() == warm.length;
  }

  /** How many different units were run. */
  public int units() {
    return rows.size();
  }

  /** How often units were run, on all threads together. */
  public int runs() {
    return runs.size();
  }

  /** Places in the plan of the pictures, ascending. */
  public List<Integer> pictures() {
    return units.pictures().stream().sorted().toList();
  }

  /** Equivalent noise variance of a condition of the plan on one of the pictures. */
  public double equivalentNoiseVariance(int condition) {
    return units.equivalentNoiseVariance(condition);
  }

  /**
   * The rows of a unit, or if it was not run of one that is like it.
   *
   * @param picture one of {@link #pictures}
   * @param condition in the order of the plan; -1 for the clean picture
   */
  public List<Trial> trials(int picture, int condition) {
    return rowsLike(picture, condition).trials();
  }

  /** The times of {@link #trials}. */
  public List<Timing> timings(int picture, int condition) {
    return rowsLike(picture, condition).timings();
  }

  private UnitRunner.Rows rowsLike(int picture, int condition) {
    UnitRunner.Rows found = rows.get(like(units.milder(picture, condition)));
    if (found == null) {
      throw new IllegalStateException("no unit was run");
    }
    return found;
  }

  /**
   * Seconds that the plan's units take on the threads, with the compiling of code.
   *
   * @param replicates of each severity
   * @param perUnit seconds that another thread takes to write the rows of a unit
   */
  public double seconds(int replicates, double perUnit) {
    NavigableMap<Double, DoubleSummaryStatistics> bySize = new TreeMap<>();
    for (int picture : units.pictures()) {
      bySize
          .computeIfAbsent(units.samples(picture), size -> new DoubleSummaryStatistics())
          .accept(ofPicture(picture, replicates));
    }
    double work = 0;
    for (int picture = 0; picture < plan.pictures().size(); picture++) {
      work += between(bySize, units.samples(picture));
    }
    double all = plan.pictures().size() * (1 + (double) plan.conditions().size() * replicates);
    work += warmingUp((long) all);
    double writing = perUnit * all;
    int processors = Runtime.getRuntime().availableProcessors();
    return Math.max(
        writing, Math.max(work / threads, (work + writing) / Math.max(threads, processors)));
  }

  /** Seconds of all units of one of the pictures. */
  private double ofPicture(int picture, int replicates) {
    double sum = warm[units.milder(picture, RehearsalUnits.CLEAN)];
    for (int condition = 0; condition < plan.conditions().size(); condition++) {
      double milder = warm[units.milder(picture, condition)];
      sum += replicates * (milder + warm[units.harsher(picture, condition)]) / 2;
    }
    return sum;
  }

  /**
   * Between two sizes on a straight line of logarithms; of pictures of the same size the mean;
   * outside in proportion.
   */
  private static double between(NavigableMap<Double, DoubleSummaryStatistics> bySize, double size) {
    var below = bySize.floorEntry(size);
    var above = bySize.ceilingEntry(size);
    if (below == null || above == null || below.getKey().equals(above.getKey())) {
      var near = below == null ? above : below;
      return near == null ? 0 : near.getValue().getAverage() * size / near.getKey();
    }
    double share =
        StrictMath.log(size / below.getKey()) / StrictMath.log(above.getKey() / below.getKey());
    return StrictMath.pow(below.getValue().getAverage(), 1 - share)
        * StrictMath.pow(above.getValue().getAverage(), share);
  }

  /** What the first so many runs took more than warm ones. */
  private double warmingUp(long all) {
    double excess =
        runs.stream()
            .sorted(Comparator.comparingLong(Run::start))
            .limit(all)
            .mapToDouble(run -> run.seconds - warm[run.unit])
            .sum();
    return Math.max(0, excess);
  }
}
