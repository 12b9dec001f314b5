package linkworthy.cluster;

import com.sun.management.OperatingSystemMXBean;
import java.io.ByteArrayInputStream;
import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.io.PrintWriter;
import java.io.UncheckedIOException;
import java.lang.management.ManagementFactory;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Clock;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Locale;
import java.util.PriorityQueue;
import java.util.SplittableRandom;
import java.util.stream.IntStream;
import linkworthy.results.PartFile;
import linkworthy.results.ResultsFolder;
import linkworthy.results.ResultsWriter;
import linkworthy.results.RunRecord;
import linkworthy.statistics.Cells;
import linkworthy.study.StudyReader;
import linkworthy.trial.Course;
import linkworthy.trial.LocalRunner;
import linkworthy.trial.Plan;
import linkworthy.trial.Repetition;
import linkworthy.trial.Stretch;
import linkworthy.trial.WorkUnit;
import org.apache.spark.SparkConf;
import org.apache.spark.api.java.JavaSparkContext;

/**
 * Measures what a model of large runs needs, checks the model against runs of this machine, and
 * prints both, as the handbook's page on scale has them. Arguments: a study and a folder for its
 * records, which is emptied of nothing: it must be new.
 *
 * <p>The model: tasks are handed out one by one, each to the core that is free first; a task takes
 * its overhead and the times of its units, drawn from those measured; the driver reads the rows of
 * one task after the other, each as soon as it is there.
 */
public final class ScaleFigures {
  private static final long SEED = 7;
  private static final int EMPTY_TASKS = 2000;
  private static final int[] PARTITIONS = {2, 8, 32, 128};
  private static final double TASK_SECONDS = 20;
  private static final int MOST_TASKS = 100_000;

  private final JavaSparkContext spark;
  private final int cores;
  private final Plan plan;
  private final Path folder;
  private final PrintWriter out;

  private ScaleFigures(JavaSparkContext spark, Plan plan, Path folder, PrintWriter out) {
    this.spark = spark;
    this.cores = spark.defaultParallelism();
    this.plan = plan;
    this.folder = folder;
    this.out = out;
  }

  public static void main(String[] arguments) throws IOException {
    PrintWriter out = new PrintWriter(System.out, true, StandardCharsets.UTF_8);
    Plan plan = Plan.of(StudyReader.read(Path.of(arguments[0])));
    Path folder = Files.createDirectory(Path.of(arguments[1]));
    long start = System.nanoTime();
    try (JavaSparkContext spark =
        new JavaSparkContext(new SparkConf().setAppName("linkworthy scale"))) {
      double started = seconds(start);
      new ScaleFigures(spark, plan, folder, out).print(started);
    }
  }

  private static double seconds(long since) {
    return (System.nanoTime() - since) / 1e9;
  }

  /** Processor time of this thread, in nanoseconds: what else the machine does is not in it. */
  private static long threadTime() {
    return ManagementFactory.getThreadMXBean().getCurrentThreadCpuTime();
  }

  private static double threadSeconds(long since) {
    return (threadTime() - since) / 1e9;
  }

  /**
   * What a run took.
   *
   * @param wall seconds
   * @param processor seconds of all threads of this process together
   */
  private record Took(double wall, double processor) {
    static Took by(Runnable work) {
      OperatingSystemMXBean system =
          (OperatingSystemMXBean) ManagementFactory.getOperatingSystemMXBean();
      long start = System.nanoTime();
      long before = system.getProcessCpuTime();
      work.run();
      return new Took(seconds(start), (system.getProcessCpuTime() - before) / 1e9);
    }
  }

  /**
   * What the model is made of.
   *
   * @param unitSeconds measured processor times of units, ascending
   * @param mean their mean
   * @param start seconds until tasks can run
   * @param task processor seconds that a task takes besides its units
   * @param handOut seconds between two tasks that are handed out
   * @param merge processor seconds that the driver takes for a row
   */
  private record Constants(
      List<Double> unitSeconds,
      double mean,
      double start,
      double task,
      double handOut,
      double merge) {
    /** Processor seconds of a job. */
    double processor(long units, int tasks, int codecs) {
      return units * mean + tasks * task + units * codecs * merge;
    }

    /** Seconds of a job without its start, by list scheduling of tasks of drawn units. */
    double job(long units, int tasks, int cores, int codecs) {
      SplittableRandom random = new SplittableRandom(SEED);
      PriorityQueue<Double> free = new PriorityQueue<>();
      IntStream.range(0, cores).forEach(core -> free.add(0.0));
      double end = 0;
      for (int i = 0; i < tasks; i++) {
        long own = units * (i + 1) / tasks - units * i / tasks;
        double begin = Math.max(free.remove(), i * handOut);
        double done = begin + task + work(own, random);
        free.add(done);
        end = Math.max(end, done) + merge * own * codecs;
      }
      return end;
    }

    /** Sum of the times of so many units; of very many, their mean and spread are enough. */
    private double work(long units, SplittableRandom random) {
      long drawn = Math.min(units, 100);
      double sum = 0;
      for (long i = 0; i < drawn; i++) {
        sum += unitSeconds.get(random.nextInt(unitSeconds.size()));
      }
      double spread = drawn == 0 ? 0 : (sum - drawn * mean) * Math.sqrt((double) units / drawn);
      return drawn == units ? sum : Math.max(0, units * mean + spread);
    }
  }

  private void print(double started) throws IOException {
    double[] units = unitSeconds();
    Took local = Took.by(this::localRun);
    int rowBytes = (int) (Files.size(folder.resolve("local/trials.csv")) / plan.trials());
    double merge = mergeSeconds();
    double empty = emptyTasks();
    Took first = Took.by(() -> clusterRun(PARTITIONS[0]));
    List<Took> measured = new ArrayList<>();
    for (int partitions : PARTITIONS) {
      measured.add(Took.by(() -> clusterRun(partitions)));
    }
    int last = PARTITIONS.length - 1;
    double task =
        Math.max(
            0,
            (measured.get(last).processor() - measured.get(0).processor())
                / (PARTITIONS[last] - PARTITIONS[0]));
    Arrays.sort(units);
    double mean = Arrays.stream(units).average().orElse(0);
    Constants constants =
        new Constants(Arrays.stream(units).boxed().toList(), mean, started, task, empty, merge);
    printConstants(constants, rowBytes);
    out.println();
    printRuns(constants, local, first, measured);
    out.println();
    predict(constants, rowBytes);
  }

  private void printConstants(Constants constants, int rowBytes) {
    List<Double> units = constants.unitSeconds();
    out.println("| constant | measured |");
    out.println("|---|---|");
    out.printf(
        Locale.ROOT, "| units, trials of the study | %d, %d |\n", plan.units(), plan.trials());
    out.printf(
        Locale.ROOT,
        "| processor time of a unit: mean, median, 95 percent, longest | %.1f, %.1f, %.1f, %.1f ms |\n",
        1e3 * constants.mean(),
        1e3 * units.get(units.size() / 2),
        1e3 * units.get((int) (units.size() * 0.95)),
        1e3 * units.get(units.size() - 1));
    out.printf(Locale.ROOT, "| Spark's start | %.1f s |\n", constants.start());
    out.printf(
        Locale.ROOT,
        "| an empty task, as %d in a row go on %d cores | %.2f ms |\n",
        EMPTY_TASKS,
        cores,
        1e3 * constants.handOut());
    out.printf(
        Locale.ROOT,
        "| processor time of a task besides its units | %.0f ms |\n",
        1e3 * constants.task());
    out.printf(
        Locale.ROOT,
        "| processor time of a row in the driver | %.3f ms |\n",
        1e3 * constants.merge());
    out.printf(Locale.ROOT, "| a row of trials.csv | %d bytes |\n", rowBytes);
  }

  private void printRuns(Constants constants, Took local, Took first, List<Took> measured) {
    int codecs = plan.study().codecs().size();
    out.println(
        "| run | wall s | processor s | model: processor s | model/measured | model: wall s on idle"
            + " cores |");
    out.println("|---|---|---|---|---|---|");
    out.printf(
        Locale.ROOT,
        "| plain, %d threads | %.2f | %.2f | | | |\n",
        cores,
        local.wall(),
        local.processor());
    out.printf(
        Locale.ROOT,
        "| local[%d], %d tasks, the first job | %.2f | %.2f | | | |\n",
        cores,
        PARTITIONS[0],
        first.wall(),
        first.processor());
    for (int i = 0; i < PARTITIONS.length; i++) {
      Took run = measured.get(i);
      double model = constants.processor(plan.units(), PARTITIONS[i], codecs);
      out.printf(
          Locale.ROOT,
          "| local[%d], %d tasks | %.2f | %.2f | %.2f | %.2f | %.2f |\n",
          cores,
          PARTITIONS[i],
          run.wall(),
          run.processor(),
          model,
          model / run.processor(),
          constants.job(plan.units(), PARTITIONS[i], cores, codecs));
    }
  }

  private void predict(Constants constants, int rowBytes) {
    int codecs = plan.study().codecs().size();
    out.println(
        "| trials | cores | tasks | job | the driver's reading alone | core hours | rows, GB | driver's"
            + " memory, GB |");
    out.println("|---|---|---|---|---|---|---|---|");
    for (long trials : new long[] {1_000_000, 100_000_000}) {
      for (int many : new int[] {10, 100, 1000}) {
        long units = trials / codecs;
        double work = units * constants.mean();
        int tasks =
            (int) Math.min(MOST_TASKS, Math.max(3.0 * many, Math.ceil(work / TASK_SECONDS)));
        double job = constants.start() + constants.job(units, tasks, many, codecs);
        double merge = constants.merge() * trials;
        out.printf(
            Locale.ROOT,
            "| %.0e | %d | %d | %s | %s | %.1f | %.1f | %.1f |\n",
            (double) trials,
            many,
            tasks,
            time(job),
            time(merge),
            constants.processor(units, tasks, 0) / 3600,
            trials * (double) rowBytes / 1e9,
            0.5 + trials * 12.0 / 1e9);
      }
    }
  }

  private static String time(double seconds) {
    return seconds < 120
        ? String.format(Locale.ROOT, "%.0f s", seconds)
        : seconds < 7200
            ? String.format(Locale.ROOT, "%.0f min", seconds / 60)
            : String.format(Locale.ROOT, "%.1f h", seconds / 3600);
  }

  /** Every unit alone, after all have been run once for the JIT. */
  private double[] unitSeconds() {
    double[] seconds = new double[plan.units()];
    for (int round = 0; round < 2; round++) {
      Repetition repetition = new Repetition(plan, 1);
      for (int i = 0; i < seconds.length; i++) {
        WorkUnit unit = plan.unit(i);
        long start = threadTime();
        int rows = repetition.trials(unit, plan.study().codecs()).size();
        seconds[i] = rows == 0 ? 0 : threadSeconds(start);
      }
    }
    return seconds;
  }

  private RunRecord begin() {
    return RunRecord.begin(plan, "scale", Clock.systemUTC());
  }

  private void localRun() {
    Cells cells = new Cells();
    try (ResultsWriter writer = ResultsFolder.create(folder.resolve("local"), false)) {
      writer.begin(plan.study(), begin());
      int units =
          new LocalRunner(plan, cores)
              .run(
                  0,
                  (unit, trials, timings) -> {
                    writer.append(trials, timings);
                    trials.forEach(cells::add);
                  });
      long done = (long) units * plan.study().codecs().size();
      writer.complete(plan, cells.toList(), writer.run().complete(done, Clock.systemUTC()));
    }
  }

  private void clusterRun(int partitions) {
    Path results = folder.resolve("on-" + partitions + "-" + System.nanoTime());
    new ClusterRun(
            plan,
            new ClusterRun.Request(
                results, ResultsFolder.Start.NEW, null, partitions, null, "scale", true),
            List.of(),
            Clock.systemUTC(),
            out::println)
        .run(spark);
  }

  /** Seconds between empty tasks of one job, after one such job for the JIT. */
  private double emptyTasks() {
    double seconds = 0;
    for (int round = 0; round < 2; round++) {
      long start = System.nanoTime();
      List<Integer> items = IntStream.range(0, EMPTY_TASKS).boxed().toList();
      long count = spark.parallelize(items, EMPTY_TASKS).count();
      seconds = seconds(start) / count;
    }
    return seconds;
  }

  /** Seconds for a row of a part, from the rows of the local run, recorded anew. */
  private double mergeSeconds() throws IOException {
    Stretch all = new Stretch(0, plan.units());
    ByteArrayOutputStream part = new ByteArrayOutputStream();
    PartFile.Writer writer = new PartFile.Writer(part, plan, "scale", all);
    int unused =
        new LocalRunner(plan, cores)
            .run(
                0,
                (unit, trials, timings) -> {
                  try {
                    writer.append(unit, trials, timings, List.of());
                  } catch (IOException e) {
                    throw new UncheckedIOException(e);
                  }
                });
    writer.end();
    double seconds = 0;
    for (int round = 0; round < 3; round++) {
      long start = threadTime();
      if (!PartFile.isWhole(new ByteArrayInputStream(part.toByteArray()), "scale", all)) {
        throw new IllegalStateException("the part is not whole");
      }
      Cells cells = new Cells();
      try (ResultsWriter record = ResultsFolder.create(folder.resolve("merged-" + round), false)) {
        record.begin(plan.study(), begin());
        PartFile.read(
            Path.of("part"),
            new ByteArrayInputStream(part.toByteArray()),
            plan,
            new Course(plan),
            mishap -> {},
            (unit, trials, timings) -> {
              record.append(trials, timings);
              trials.forEach(cells::add);
            });
      }
      seconds = threadSeconds(start) / plan.trials();
    }
    return seconds;
  }
}
