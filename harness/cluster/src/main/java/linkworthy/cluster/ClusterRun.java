package linkworthy.cluster;

import java.io.IOException;
import java.io.InputStream;
import java.net.InetAddress;
import java.net.UnknownHostException;
import java.nio.file.Path;
import java.time.Clock;
import java.util.ArrayList;
import java.util.List;
import java.util.SortedSet;
import java.util.function.Consumer;
import linkworthy.codec.PluginFolder;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;
import linkworthy.results.PartFile;
import linkworthy.results.ResultsFolder;
import linkworthy.results.ResultsWriter;
import linkworthy.results.RunRecord;
import linkworthy.statistics.Cells;
import linkworthy.trial.Course;
import linkworthy.trial.Estimate;
import linkworthy.trial.Mishaps;
import linkworthy.trial.Plan;
import linkworthy.trial.Stretch;
import org.apache.spark.api.java.JavaSparkContext;
import org.jspecify.annotations.Nullable;

/**
 * One run of a plan into a results folder: the executors write parts, the driver puts them together
 * and writes everything else but the report.
 */
final class ClusterRun {
  /** What a task should take, in seconds, so that starting it costs little and losing it too. */
  private static final double SECONDS_OF_TASK = 20;

  /** Tasks for each core at least, so that the last ones even out. */
  private static final int TASKS_PER_CORE = 3;

  private static final int MOST_TASKS = 100_000;

  private final Plan plan;
  private final Request request;
  private final List<PluginFolder.Jar> jars;
  private final Clock clock;
  private final Consumer<String> lines;

  /**
   * What is asked for.
   *
   * @param out results folder
   * @param parts address of a folder that driver and executors share, or null for one in the
   *     results folder
   * @param partitions how many parts the plan is run in, or 0 for as many as suit it
   * @param plugins folder of plugins, or null
   * @param program version of this program
   * @param quiet whether nothing is said of progress
   */
  record Request(
      Path out,
      ResultsFolder.Start start,
      @Nullable String parts,
      int partitions,
      @Nullable Path plugins,
      String program,
      boolean quiet) {
    String partsAddress() {
      return parts != null ? parts : out.toAbsolutePath().resolve("parts").toUri().toString();
    }
  }

  /**
   * @param jars the plugins
   * @param lines takes what is to be said, line by line
   */
  ClusterRun(
      Plan plan,
      Request request,
      List<PluginFolder.Jar> jars,
      Clock clock,
      Consumer<String> lines) {
    this.plan = plan;
    this.request = request;
    this.jars = jars;
    this.clock = clock;
    this.lines = lines;
  }

  /**
   * Runs it all.
   *
   * @throws BadInput if the results folder or the parts are another run's, or a picture is not what
   *     its manifest says
   * @throws Unavailable if something cannot be written, or the job failed
   */
  void run(JavaSparkContext spark) {
    Cells cells = new Cells();
    Course course = new Course(plan);
    RunRecord now = RunRecord.begin(plan, request.program(), clock).withPlugins(jars);
    try (ResultsWriter writer =
        ResultsFolder.open(
            request.out(),
            request.start(),
            plan,
            now,
            trial -> {
              cells.add(trial);
              course.add(trial);
            })) {
      Freight freight = Freight.pack(spark, request.program(), plan, request.plugins(), jars);
      PartsFolder parts =
          PartsFolder.at(request.partsAddress(), freight.checksum(), spark.hadoopConfiguration());
      parts.hold(holder());
      int units = writer.unitsAtStart() + run(spark, freight, parts, course, writer, cells);
      long done = (long) units * plan.study().codecs().size();
      writer.complete(plan, cells.toList(), writer.run().complete(done, clock));
      parts.remove();
      freight.unload();
    }
  }

  /** The results folder on this machine. */
  private String holder() {
    String host;
    try {
      host = InetAddress.getLocalHost().getHostName();
    } catch (UnknownHostException e) {
      host = "localhost";
    }
    return host + ":" + request.out().toAbsolutePath().normalize();
  }

  /**
   * Runs what is missing, and takes part after part into the record as soon as it is there.
   *
   * @return the number of units taken
   */
  private int run(
      JavaSparkContext spark,
      Freight freight,
      PartsFolder parts,
      Course course,
      ResultsWriter writer,
      Cells cells) {
    SortedSet<Stretch> there = parts.whole();
    int partitions =
        request.partitions() > 0 ? request.partitions() : partitions(spark.defaultParallelism());
    List<Stretch> missing = missing(there, course.next(), partitions);
    if (!there.isEmpty()) {
      lines.accept(
          "going on with " + there.size() + " parts that are there, " + missing.size() + " to run");
    }
    List<Stretch> all = new ArrayList<>(there);
    all.addAll(missing);
    all.sort((a, b) -> Integer.compare(a.first(), b.first()));
    if (missing.isEmpty()) {
      return merge(all, parts, stretch -> {}, course, writer, cells);
    }
    TaskProgress progress = new TaskProgress(spark, missing.size(), request.quiet(), lines);
    try (RunningJob job = new RunningJob(spark, freight, parts, missing, progress)) {
      return merge(
          all, parts, stretch -> job.await(() -> parts.isThere(stretch)), course, writer, cells);
    }
  }

  /** As many as suit the plan and the cores. */
  private int partitions(int cores) {
    double wanted = Math.ceil(Estimate.of(plan, 1).seconds() / SECONDS_OF_TASK);
    return (int)
        Math.min(MOST_TASKS, Math.max(wanted, Math.min(plan.units(), TASKS_PER_CORE * cores)));
  }

  /**
   * Stretches to run so that with those that are there every unit from one on is covered. What the
   * others of a severity decide is found out with them, so a stretch may begin before that unit.
   */
  private List<Stretch> missing(SortedSet<Stretch> there, int next, int partitions) {
    List<Stretch> missing = new ArrayList<>();
    int at = firstOfGroup(next);
    for (Stretch part : there) {
      if (part.first() > at) {
        missing.addAll(split(new Stretch(at, part.first()), partitions));
      }
      at = Math.max(at, part.end());
    }
    if (at < plan.units()) {
      missing.addAll(split(new Stretch(at, plan.units()), partitions));
    }
    return missing;
  }

  private int firstOfGroup(int unit) {
    int first = unit;
    while (plan.study().earlyStop() != null && plan.groupFrom(first) != first) {
      first--;
    }
    return first;
  }

  private List<Stretch> split(Stretch gap, int partitions) {
    long share = ((long) gap.units() * partitions + plan.units() - 1) / plan.units();
    return gap.split(plan, (int) Math.max(1, share));
  }

  private int merge(
      List<Stretch> stretches,
      PartsFolder parts,
      Consumer<Stretch> await,
      Course course,
      ResultsWriter writer,
      Cells cells) {
    Mishaps mishaps = new Mishaps();
    int[] units = {0};
    for (Stretch stretch : stretches) {
      await.accept(stretch);
      try {
        if (!parts.isWhole(stretch)) {
          throw new Unavailable(
              "the part "
                  + parts.path(stretch)
                  + " is missing or damaged (do driver and executors share that folder?); accepted:"
                  + " --parts on a file system that all machines share, then --resume");
        }
        try (InputStream in = parts.open(stretch)) {
          PartFile.read(
              Path.of(parts.path(stretch).getName()),
              in,
              plan,
              course,
              mishaps::add,
              (unit, trials, timings) -> {
                writer.append(trials, timings);
                trials.forEach(cells::add);
                units[0]++;
              });
        }
      } catch (IOException e) {
        throw Unavailable.cannot("read " + parts.path(stretch), e);
      }
    }
    mishaps.lines().forEach(line -> lines.accept(line.replaceFirst("^linkworthy: ", "")));
    if (!course.isAtEnd()) {
      throw new Unavailable("the parts in " + parts + " end before the plan; go on with --resume");
    }
    return units[0];
  }
}
