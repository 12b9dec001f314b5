package linkworthy.cluster;

import java.io.File;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.HashMap;
import java.util.List;
import java.util.Map;
import java.util.TreeMap;
import java.util.regex.Pattern;

/**
 * A standalone master and its workers on the loopback interface, on ports that the system picks,
 * from the jars of Spark alone: REST off, authentication on, one core each.
 */
final class LoopbackCluster implements AutoCloseable {
  static final Path HOME = Path.of("spark-home/target/spark").toAbsolutePath();
  static final Path JOB_JAR = Path.of("target/linkworthy-cluster.jar").toAbsolutePath();
  private static final Pattern NOTHING = Pattern.compile("$.^(.)");

  private final Path folder;
  private final Map<String, String> conf;
  private final Daemon master;
  private final String address;
  private final List<Daemon> workers = new ArrayList<>();

  /**
   * @param folder for the daemons' files; nothing of a study is in it
   * @param executorOptions Java options of executors
   */
  LoopbackCluster(Path folder, String executorOptions, int workerCount) throws IOException {
    this.folder = folder;
    this.conf = conf(folder, executorOptions);
    StringBuilder lines = new StringBuilder();
    conf.forEach((key, value) -> lines.append(key).append(' ').append(value).append('\n'));
    Files.writeString(
        Files.createDirectories(folder.resolve("conf")).resolve("spark-defaults.conf"), lines);
    master =
        daemon(
            "Starting Spark master at (spark://\\S+)",
            "org.apache.spark.deploy.master.Master",
            "--host",
            "127.0.0.1",
            "--port",
            "0",
            "--webui-port",
            "0");
    try {
      address = master.await();
      for (int i = 0; i < workerCount; i++) {
        startWorker(address);
      }
      workers.forEach(Daemon::await);
    } catch (IOException | RuntimeException | AssertionError e) {
      close();
      throw e;
    }
  }

  private static Map<String, String> conf(Path folder, String executorOptions) {
    Map<String, String> conf = new TreeMap<>();
    conf.put("spark.authenticate", "true");
    conf.put("spark.authenticate.secret", "for this test alone");
    conf.put("spark.driver.bindAddress", "127.0.0.1");
    conf.put("spark.driver.host", "127.0.0.1");
    conf.put("spark.executor.extraJavaOptions", executorOptions);
    conf.put("spark.executor.memory", "512m");
    conf.put("spark.local.dir", folder.resolve("local").toString());
    conf.put("spark.master.rest.enabled", "false");
    conf.put("spark.ui.enabled", "false");
    return conf;
  }

  private Daemon daemon(String wanted, String... arguments) {
    List<String> command =
        new ArrayList<>(
            List.of(
                java(),
                "-Xmx256m",
                "-cp",
                folder.resolve("conf") + File.pathSeparator + HOME.resolve("jars/*")));
    command.addAll(List.of(arguments));
    return new Daemon(command, folder, environment(), Pattern.compile(wanted));
  }

  static String java() {
    return Path.of(System.getProperty("java.home", ""), "bin", "java").toString();
  }

  /** Starts one more worker. */
  Daemon startWorker() throws IOException {
    return startWorker(address);
  }

  private Daemon startWorker(String masterAddress) throws IOException {
    Path work = Files.createDirectories(folder.resolve("work-" + workers.size()));
    Daemon worker =
        daemon(
            "(Successfully registered with master)",
            "org.apache.spark.deploy.worker.Worker",
            "--host",
            "127.0.0.1",
            "--cores",
            "1",
            "--memory",
            "1g",
            "--work-dir",
            work.toString(),
            "--webui-port",
            "0",
            masterAddress);
    workers.add(worker);
    return worker;
  }

  /** The worker whose executor a process is. */
  Daemon workerOf(long pid) {
    return workers.stream().filter(worker -> worker.hasStarted(pid)).findFirst().orElseThrow();
  }

  String address() {
    return address;
  }

  /** What a driver has to be told. */
  Map<String, String> conf() {
    return conf;
  }

  /** The environment of daemons and drivers. */
  Map<String, String> environment() {
    Map<String, String> environment = new HashMap<>();
    environment.put("SPARK_HOME", HOME.toString());
    environment.put("SPARK_CONF_DIR", folder.resolve("conf").toString());
    environment.put("SPARK_LOCAL_IP", "127.0.0.1");
    environment.put("SPARK_PUBLIC_DNS", "127.0.0.1");
    environment.put("SPARK_SCALA_VERSION", "2.13");
    return environment;
  }

  /** Runs a command in that environment, in another folder than the daemons'. */
  Daemon run(Path workingFolder, List<String> command) {
    return new Daemon(command, workingFolder, environment(), NOTHING);
  }

  @Override
  public void close() {
    workers.forEach(Daemon::close);
    master.close();
  }
}
