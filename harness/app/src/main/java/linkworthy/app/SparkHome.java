package linkworthy.app;

import java.io.File;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import java.util.stream.Stream;
import linkworthy.input.Unavailable;
import org.jspecify.annotations.Nullable;

/** An installation of Apache Spark, from which a job is submitted by a process of its own. */
final class SparkHome {
  private static final String ACCEPTED =
      "Apache Spark 4.1 or a later 4, built for Scala 2.13, as https://spark.apache.org/downloads.html"
          + " has it";
  private static final Pattern CORE =
      Pattern.compile("spark-core_(\\d+\\.\\d+)-(\\d+\\.\\d+)([.-].*)?\\.jar");

  private final Path folder;

  private SparkHome(Path folder) {
    this.folder = folder;
  }

  /**
   * @param variable value of the environment variable SPARK_HOME, or null
   * @throws Unavailable if that is no Spark that the job was built for
   */
  static SparkHome of(@Nullable String variable) {
    if (variable == null || variable.isBlank()) {
      throw new Unavailable(
          "--on needs Spark, and SPARK_HOME is not set; accepted: the folder of " + ACCEPTED);
    }
    Path folder = Path.of(variable).toAbsolutePath();
    List<Matcher> found = cores(folder.resolve("jars"));
    if (found.isEmpty()) {
      throw new Unavailable(
          "SPARK_HOME is "
              + folder
              + ", which has no jars/spark-core_*.jar; accepted: the folder of "
              + ACCEPTED);
    }
    for (Matcher core : found) {
      if (!core.group(1).equals("2.13") || !core.group(2).matches("4\\.[1-9]\\d*")) {
        throw new Unavailable(
            "SPARK_HOME is "
                + folder
                + ", which has "
                + core.group()
                + "; accepted: the folder of "
                + ACCEPTED);
      }
    }
    return new SparkHome(folder);
  }

  private static List<Matcher> cores(Path jars) {
    List<Matcher> found = new ArrayList<>();
    if (Files.isDirectory(jars)) {
      try (Stream<Path> files = Files.list(jars)) {
        for (Path file : files.sorted().toList()) {
          Matcher core = CORE.matcher(String.valueOf(file.getFileName()));
          if (core.matches()) {
            found.add(core);
          }
        }
      } catch (IOException e) {
        throw Unavailable.cannot("read " + jars, e);
      }
    }
    return found;
  }

  /**
   * A process, not started yet, that submits a job in client mode. Where the installation says
   * nothing of its log, warnings alone are logged.
   *
   * @param java of this process
   */
  ProcessBuilder submit(Path java, String master, Path jar, List<String> arguments) {
    String given = System.getenv("SPARK_CONF_DIR");
    Path conf = given == null ? folder.resolve("conf") : Path.of(given);
    String log =
        Files.exists(conf.resolve("log4j2.properties")) || Files.exists(conf.resolve("log4j2.xml"))
            ? ""
            : "-Dlog4j2.configurationFile=jar:" + jar.toUri() + "!/linkworthy/cluster/log4j2.xml";
    Path script = folder.resolve("bin/spark-submit");
    List<String> command = new ArrayList<>();
    if (Files.isExecutable(script)) {
      command.add(script.toString());
    } else {
      command.add(java.toString());
      if (!log.isEmpty()) {
        command.add(log);
      }
      command.addAll(
          List.of(
              "-cp",
              conf + File.pathSeparator + folder.resolve("jars/*"),
              "org.apache.spark.deploy.SparkSubmit"));
    }
    command.addAll(List.of("--master", master, "--deploy-mode", "client", jar.toString()));
    command.addAll(arguments);
    ProcessBuilder process = new ProcessBuilder(command);
    process.environment().put("SPARK_HOME", folder.toString());
    if (!log.isEmpty()) {
      process.environment().merge("SPARK_SUBMIT_OPTS", log, (before, ours) -> before + " " + ours);
    }
    return process;
  }
}
