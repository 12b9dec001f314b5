package linkworthy.cluster;

import java.io.PrintWriter;
import java.lang.management.ManagementFactory;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.time.Clock;
import java.util.List;
import java.util.Objects;
import java.util.concurrent.Callable;
import java.util.concurrent.CountDownLatch;
import java.util.concurrent.TimeUnit;
import linkworthy.codec.CodecFamilies;
import linkworthy.codec.PluginFolder;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;
import linkworthy.input.YamlNode;
import linkworthy.results.ResultsFolder;
import linkworthy.study.Study;
import linkworthy.study.StudyReader;
import linkworthy.trial.Plan;
import org.apache.spark.SparkConf;
import org.apache.spark.api.java.JavaSparkContext;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine;
import picocli.CommandLine.Command;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;

/** The driver: what spark-submit starts, by hand or for the command {@code assess --on}. */
@Command(
    name = "linkworthy-cluster",
    description = {
      "Run a study on Apache Spark: write a results folder, all but its report.",
      "Submit it in client mode: the results folder is on the driver's machine."
    },
    mixinStandardHelpOptions = true,
    footer = {
      "",
      "Example:",
      "  spark-submit --master spark://HOST:PORT linkworthy-cluster.jar yard.yaml --out results/a",
      "  linkworthy report results/a"
    })
public final class ClusterJob implements Callable<Integer> {
  private static final int DONE = 0;
  private static final int BAD_INPUT = 2;
  private static final int ENVIRONMENT = 3;

  /** From the start of this process until the master of a standalone cluster has let it in. */
  private static final long PATIENCE_MS = 15_000;

  /** What a master has at least, however long this process took to start. */
  private static final long LEAST_PATIENCE_MS = 5_000;

  @Parameters(arity = "0..1", paramLabel = "STUDY", description = "Study file.")
  private @Nullable Path file;

  @Option(names = "--out", paramLabel = "DIR", description = "Results folder, new or empty.")
  private @Nullable Path out;

  @Option(
      names = "--resume",
      paramLabel = "DIR",
      description = "Complete the results folder of a run that was stopped, to the same bytes.")
  private @Nullable Path resume;

  @Option(names = "--overwrite", description = "Replace the record in the results folder.")
  private boolean overwrite;

  @Option(
      names = "--set",
      paramLabel = "KEY.PATH=VALUE",
      arity = "1",
      description = "Set a value of the study. Repeatable.")
  private List<String> settings = List.of();

  @Option(names = "--plugins", paramLabel = "DIR", description = "Folder with jars of codecs.")
  private @Nullable Path plugins;

  @Option(
      names = "--parts",
      paramLabel = "URI",
      description =
          "Folder that driver and executors share, on any file system that Hadoop knows, for the"
              + " rows on their way (default: the folder 'parts' in the results folder).")
  private @Nullable String parts;

  @Option(
      names = "--partitions",
      paramLabel = "N",
      description = "Tasks to cut the study into (default: as suits the study and the cores).")
  private int partitions;

  @Option(names = "--quiet", description = "Say nothing of progress.")
  private boolean quiet;

  private final PrintWriter err;

  private ClusterJob(PrintWriter err) {
    this.err = err;
  }

  public static void main(String[] arguments) {
    PrintWriter out = new PrintWriter(System.out, true, StandardCharsets.UTF_8);
    PrintWriter err = new PrintWriter(System.err, true, StandardCharsets.UTF_8);
    System.exit(
        new CommandLine(new ClusterJob(err))
            .setOut(out)
            .setErr(err)
            .setExpandAtFiles(false)
            .setParameterExceptionHandler(
                (e, given) -> say(err, String.valueOf(e.getMessage()), BAD_INPUT))
            .setExecutionExceptionHandler((e, command, result) -> explain(err, e))
            .execute(arguments));
  }

  private static int explain(PrintWriter err, Exception e) {
    if (e instanceof BadInput) {
      return say(err, String.valueOf(e.getMessage()), BAD_INPUT);
    }
    return say(
        err, e instanceof Unavailable ? String.valueOf(e.getMessage()) : e.toString(), ENVIRONMENT);
  }

  private static int say(PrintWriter err, String message, int code) {
    err.println("linkworthy: " + message.lines().findFirst().orElse(message));
    return code;
  }

  @Override
  public Integer call() {
    SparkVersion.require(
        org.apache.spark.package$.MODULE$.SPARK_VERSION(),
        scala.util.Properties.versionNumberString());
    requireUsage();
    SparkConf conf = new SparkConf();
    requireClientMode(conf);
    Contact.require(conf.get("spark.master", ""));
    try (PluginFolder opened = plugins == null ? PluginFolder.none() : PluginFolder.open(plugins)) {
      CodecFamilies families = CodecFamilies.installed().with(opened.families());
      Study study =
          resume != null
              ? ResultsFolder.openStopped(resume).unchangedStudy(families)
              : study(Objects.requireNonNull(file), families);
      ClusterRun run =
          new ClusterRun(
              Plan.of(study),
              new ClusterRun.Request(
                  Objects.requireNonNull(resume != null ? resume : out),
                  resume != null
                      ? ResultsFolder.Start.RESUME
                      : overwrite ? ResultsFolder.Start.OVERWRITE : ResultsFolder.Start.NEW,
                  parts,
                  partitions,
                  plugins,
                  version(),
                  quiet),
              opened.jars(),
              Clock.systemUTC(),
              line -> err.println("linkworthy: " + line));
      try (JavaSparkContext spark = connect(conf, study.name())) {
        run.run(spark);
      }
    }
    return DONE;
  }

  private void requireUsage() {
    if (resume != null
        ? file != null || out != null || overwrite || !settings.isEmpty()
        : file == null || out == null) {
      throw new BadInput(
          "accepted: STUDY with --out, or --resume alone, as its study is the one in the folder");
    }
    if (partitions < 0) {
      throw new BadInput("--partitions is " + partitions + "; accepted: a number from 1");
    }
  }

  private static void requireClientMode(SparkConf conf) {
    String mode = conf.get("spark.submit.deployMode", "client");
    if (!mode.equals("client")) {
      throw new BadInput(
          "--deploy-mode is "
              + mode
              + ", where the results folder would be left on a machine of the cluster; accepted:"
              + " client");
    }
  }

  private Study study(Path studyFile, CodecFamilies families) {
    Path folder = Objects.requireNonNull(studyFile.toAbsolutePath().normalize().getParent());
    return StudyReader.read(YamlNode.read(studyFile).with(settings), folder, families);
  }

  private static String version() {
    return Objects.requireNonNullElse(
        ClusterJob.class.getPackage().getImplementationVersion(), "development");
  }

  /**
   * Starts Spark. Its own patience with a standalone master is a minute, and cannot be shortened or
   * interrupted: if that takes too long, the process ends here.
   */
  private JavaSparkContext connect(SparkConf conf, String study) {
    CountDownLatch connected = new CountDownLatch(1);
    String master = conf.get("spark.master", "");
    if (Contact.isStandalone(master)) {
      Thread guard = new Thread(() -> giveUpAfterAWhile(connected, master), "guard");
      guard.setDaemon(true);
      guard.start();
    }
    try {
      return new JavaSparkContext(
          conf.setAppName("linkworthy " + study)
              .set("spark.serializer", "org.apache.spark.serializer.JavaSerializer"));
    } catch (RuntimeException e) {
      String words = String.valueOf(e.getMessage());
      throw new Unavailable("Spark does not start: " + words.lines().findFirst().orElse(words), e);
    } finally {
      connected.countDown();
    }
  }

  private void giveUpAfterAWhile(CountDownLatch connected, String master) {
    try {
      long left = PATIENCE_MS - ManagementFactory.getRuntimeMXBean().getUptime();
      if (!connected.await(Math.max(LEAST_PATIENCE_MS, left), TimeUnit.MILLISECONDS)) {
        int code =
            say(
                err,
                "the Spark master at "
                    + master
                    + " is silent, or does not let this application in; accepted: a master of Spark "
                    + org.apache.spark.package$.MODULE$.SPARK_VERSION()
                    + ", with the same spark.authenticate.secret",
                ENVIRONMENT);
        Runtime.getRuntime().halt(code);
      }
    } catch (InterruptedException e) {
      Thread.currentThread().interrupt();
    }
  }
}
