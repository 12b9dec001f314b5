package linkworthy.app;

import java.io.BufferedReader;
import java.io.File;
import java.io.IOException;
import java.io.InputStream;
import java.io.InputStreamReader;
import java.io.PrintWriter;
import java.io.UncheckedIOException;
import java.net.URISyntaxException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Objects;
import java.util.concurrent.TimeUnit;
import linkworthy.codec.PluginFolder;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;
import linkworthy.results.ResultsFolder;
import linkworthy.results.ResultsWriter;

/**
 * One run of a study on Apache Spark: the driver is a process of its own, the report is made here.
 */
final class ClusterAssessment {
  private static final String JAR = "linkworthy-cluster.jar";
  private static final String MASTERS = "local(\\[[^]]+\\])?|spark://.+|yarn|k8s://.+";

  /** How long the driver may take to let go when this process is told to stop. */
  private static final long PATIENCE_S = 10;

  private final Surroundings surroundings;
  private final String master;
  private final CodecOptions codecs;

  /**
   * @param master as spark-submit takes it
   * @throws BadInput if it is none
   */
  ClusterAssessment(Surroundings surroundings, String master, CodecOptions codecs) {
    if (!master.matches(MASTERS)) {
      throw new BadInput(
          "--on is '" + master + "'; accepted: spark://HOST:PORT, local[N], yarn, k8s://...");
    }
    this.surroundings = surroundings;
    this.master = master;
    this.codecs = codecs;
  }

  /**
   * Runs it, then writes the report and prints the summary.
   *
   * @param arguments of the driver
   * @param goOn the command that takes the run up again once it has been stopped
   * @return the exit code
   * @throws Unavailable if there is no Spark, or no driver for it
   */
  int run(Path folder, List<String> arguments, Ending ending, String goOn) {
    SparkHome spark = SparkHome.of(System.getenv("SPARK_HOME"));
    int code = execute(spark.submit(java(), master, jar(), arguments));
    if (code == Main.BAD_INPUT || code == Main.ENVIRONMENT) {
      return code;
    }
    if (code != Main.DONE) {
      surroundings
          .err()
          .println("linkworthy: the driver ended with exit code " + code + "; go on with: " + goOn);
      return Main.ENVIRONMENT;
    }
    try (ResultsWriter writer = ResultsFolder.openStopped(folder).tidy();
        PluginFolder plugins = codecs.open()) {
      ResultsFolder results = ResultsFolder.open(folder);
      writer.writeReport(Reports.html(results, codecs, plugins, null));
      ending.print(results, surroundings.out());
    }
    return Main.DONE;
  }

  private int execute(ProcessBuilder driver) {
    try {
      Process process = driver.redirectInput(ProcessBuilder.Redirect.from(nothing())).start();
      Thread onSignal = new Thread(() -> end(process), "stop");
      Runtime.getRuntime().addShutdownHook(onSignal);
      try {
        Thread out = passOn(process.getInputStream(), surroundings.err());
        Thread err = passOn(process.getErrorStream(), surroundings.err());
        int code = process.waitFor();
        out.join();
        err.join();
        return code;
      } finally {
        Assessment.release(onSignal);
      }
    } catch (IOException e) {
      throw Unavailable.cannot("start Spark", e);
    } catch (InterruptedException e) {
      Thread.currentThread().interrupt();
      throw new Unavailable("told to stop", e);
    }
  }

  private static File nothing() {
    return new File(System.getProperty("os.name", "").startsWith("Windows") ? "NUL" : "/dev/null");
  }

  private static void end(Process process) {
    process.destroy();
    try {
      boolean unused = process.waitFor(PATIENCE_S, TimeUnit.SECONDS);
    } catch (InterruptedException e) {
      Thread.currentThread().interrupt();
    }
  }

  private static Thread passOn(InputStream from, PrintWriter to) {
    Thread thread =
        new Thread(
            () -> {
              try (BufferedReader lines =
                  new BufferedReader(new InputStreamReader(from, StandardCharsets.UTF_8))) {
                lines.lines().forEach(to::println);
              } catch (IOException | UncheckedIOException e) {
                to.println("linkworthy: the driver's words broke off: " + e.getMessage());
              }
            },
            "driver");
    thread.setDaemon(true);
    thread.start();
    return thread;
  }

  private static Path java() {
    return Path.of(System.getProperty("java.home", ""), "bin", "java");
  }

  /** The driver's jar: beside this program's, or where the project's build puts it. */
  private Path jar() {
    Path built =
        surroundings.home().resolve("harness/cluster/target").resolve(JAR).toAbsolutePath();
    for (Path jar : List.of(ownFolder().resolve(JAR), built)) {
      if (Files.isRegularFile(jar)) {
        return jar;
      }
    }
    throw new Unavailable(
        "--on needs "
            + built
            + ", which is not there; make it with: mvn -q -pl harness/cluster -am package -DskipTests");
  }

  private static Path ownFolder() {
    try {
      Path own =
          Path.of(
              ClusterAssessment.class.getProtectionDomain().getCodeSource().getLocation().toURI());
      return Objects.requireNonNull(own.toAbsolutePath().getParent());
    } catch (URISyntaxException e) {
      throw new IllegalStateException(e);
    }
  }
}
