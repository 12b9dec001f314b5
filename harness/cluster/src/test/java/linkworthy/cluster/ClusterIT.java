package linkworthy.cluster;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;

import java.io.IOException;
import java.io.OutputStream;
import java.net.InetAddress;
import java.net.ServerSocket;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Clock;
import java.time.Instant;
import java.time.ZoneOffset;
import java.util.ArrayDeque;
import java.util.ArrayList;
import java.util.Collections;
import java.util.Deque;
import java.util.List;
import java.util.Objects;
import java.util.concurrent.CompletableFuture;
import java.util.jar.JarEntry;
import java.util.jar.JarOutputStream;
import java.util.stream.Stream;
import linkworthy.cluster.gate.GateFamily;
import linkworthy.codec.CodecFamilies;
import linkworthy.codec.PluginFolder;
import linkworthy.input.BadInput;
import linkworthy.results.ResultsFolder;
import linkworthy.study.StudyReader;
import linkworthy.trial.Plan;
import org.apache.spark.SparkConf;
import org.apache.spark.api.java.JavaSparkContext;
import org.jspecify.annotations.Nullable;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.MethodOrderer;
import org.junit.jupiter.api.Order;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.TestMethodOrder;
import org.junit.jupiter.api.io.TempDir;

/**
 * A real cluster of a master and two workers on the loopback interface. Whatever happens to it, the
 * record has the very bytes that the runnable program writes on its own.
 */
@TestMethodOrder(MethodOrderer.OrderAnnotation.class)
class ClusterIT {
  private static final Path PROGRAM = Path.of("../app/target/linkworthy.jar").toAbsolutePath();

  /** 14 units: two pictures, each clean and at three severities twice. */
  private static final String STUDY =
      """
      name: gated
      purpose: Does a cluster change a result?
      seed: 7
      pictures:
        manifest: own/manifest.csv
        select: [canyon, cat]
        train: [meadow]
        longest-side: 24
      impairments:
        - {noise: own-noise.yaml, snr-db: [20, 10, 5]}
      codecs:
        - {gate: mean}
        - {transform: pca, over: rows, keep: [2, 6]}
        - {transform: pca, over: blocks, basis: shared, keep: 3}
        - {transform: dct, keep: 4, step: none}
      node: {profile: yard-camera, interval-s: 600}
      replicates: 2
      """;

  private static final String NOISE =
      """
      id: own-noise
      version: 1
      process: gaussian
      acts-on: [samples]
      severity: [snr-db]
      source: made up for this test
      """;

  @TempDir private static Path temporary;

  private static final Deque<AutoCloseable> TO_CLOSE = new ArrayDeque<>();

  private static @Nullable GateServer gate;
  private static @Nullable LoopbackCluster cluster;
  private static @Nullable ServerSocket silent;
  private static @Nullable Daemon toTheSilent;
  private static Path study = Path.of("");
  private static Path plugins = Path.of("");
  private static String expected = "";

  @BeforeAll
  static void start() throws IOException {
    gate = toClose(new GateServer());
    silent = toClose(new ServerSocket(0, 50, InetAddress.getLoopbackAddress()));
    Path elsewhere = Files.createDirectories(temporary.resolve("elsewhere"));
    cluster =
        toClose(new LoopbackCluster(elsewhere, "-D" + GateFamily.PORT + "=" + gate.port(), 2));
    Path own = Files.createDirectories(temporary.resolve("study"));
    copyCorpus(own.resolve("own"));
    Files.writeString(own.resolve("own-noise.yaml"), NOISE);
    study = Files.writeString(own.resolve("study.yaml"), STUDY);
    plugins = Files.createDirectories(temporary.resolve("plugins"));
    pack(plugins.resolve("gate.jar"));
    Daemon local = cluster.run(temporary, program("--threads", "2", "--out", "local"));
    assertThat(local.exitCode()).as(local.words()).isZero();
    expected = trials("local");
    toTheSilent =
        toClose(
            cluster.run(
                temporary,
                program("--on", "spark://127.0.0.1:" + silent.getLocalPort(), "--out", "silent")));
  }

  @AfterAll
  static void stop() throws Exception {
    while (!TO_CLOSE.isEmpty()) {
      TO_CLOSE.pop().close();
    }
  }

  private static <T extends AutoCloseable> T toClose(T opened) {
    TO_CLOSE.push(opened);
    return opened;
  }

  private static void copyCorpus(Path to) throws IOException {
    Path from = Path.of("../../corpus-manifest");
    for (String name : List.of("manifest.csv", "canyon", "cat", "meadow")) {
      Path file =
          name.endsWith(".csv") ? Path.of(name) : Path.of("pictures/field/" + name + ".png");
      Path target = to.resolve(file);
      Files.createDirectories(target.getParent());
      Files.copy(from.resolve(file), target);
    }
  }

  private static void pack(Path jar) throws IOException {
    Path classes = Path.of("target/test-classes");
    try (OutputStream out = Files.newOutputStream(jar);
        JarOutputStream entries = new JarOutputStream(out);
        Stream<Path> files = Files.walk(classes.resolve("linkworthy/cluster/gate"))) {
      for (Path file : files.filter(Files::isRegularFile).sorted().toList()) {
        entries.putNextEntry(new JarEntry(classes.relativize(file).toString()));
        entries.write(Files.readAllBytes(file));
      }
      entries.putNextEntry(new JarEntry("META-INF/services/linkworthy.codec.CodecFamily"));
      entries.write(GateFamily.class.getName().getBytes(StandardCharsets.UTF_8));
    }
  }

  /** The runnable program with the gated study. */
  private static List<String> program(String... more) {
    return command("assess", study.toString(), more);
  }

  private static List<String> command(String first, String second, String... more) {
    List<String> command =
        new ArrayList<>(
            List.of(
                LoopbackCluster.java(),
                "-Dlinkworthy.home=" + Path.of("../..").toAbsolutePath().normalize(),
                "-jar",
                PROGRAM.toString(),
                first,
                second,
                "--plugins",
                plugins.toString()));
    command.addAll(List.of(more));
    return command;
  }

  private static String trials(String out) throws IOException {
    return Files.readString(temporary.resolve(out).resolve("trials.csv"));
  }

  private static GateServer gate() {
    return Objects.requireNonNull(gate);
  }

  private static LoopbackCluster cluster() {
    return Objects.requireNonNull(cluster);
  }

  private static JavaSparkContext connect() {
    SparkConf conf =
        new SparkConf()
            .setMaster(cluster().address())
            .setAppName("test")
            .setJars(new String[] {LoopbackCluster.JOB_JAR.toString()});
    cluster().conf().forEach(conf::set);
    return new JavaSparkContext(conf);
  }

  /** Runs the study with a driver in this process; what it said. */
  private static List<String> run(
      JavaSparkContext spark, Path file, String out, @Nullable String parts, int partitions) {
    List<String> lines = Collections.synchronizedList(new ArrayList<>());
    try (PluginFolder opened = PluginFolder.open(plugins)) {
      CodecFamilies families = CodecFamilies.installed().with(opened.families());
      new ClusterRun(
              Plan.of(StudyReader.read(file, families)),
              new ClusterRun.Request(
                  temporary.resolve(out),
                  ResultsFolder.Start.NEW,
                  parts,
                  partitions,
                  plugins,
                  "test",
                  true),
              opened.jars(),
              Clock.fixed(Instant.parse("2026-12-01T10:15:00Z"), ZoneOffset.UTC),
              lines::add)
          .run(spark);
    }
    return lines;
  }

  @Test
  @Order(1)
  void anyNumberOfPartitionsGivesTheBytesOfALocalRun() throws IOException {
    try (JavaSparkContext spark = connect()) {
      for (int partitions : new int[] {1, 2, 7}) {
        String out = "in-" + partitions;
        String parts = partitions == 2 ? temporary.resolve("shared").toUri().toString() : null;
        List<String> lines = run(spark, study, out, parts, partitions);
        assertThat(trials(out)).isEqualTo(expected);
        for (String file : List.of("cells.csv", "predictions.csv", "study.yaml")) {
          assertThat(temporary.resolve(out).resolve(file))
              .hasSameTextualContentAs(temporary.resolve("local").resolve(file));
        }
        assertThat(temporary.resolve(out).resolve("parts")).doesNotExist();
        assertThat(temporary.resolve("shared")).doesNotExist();
        assertThat(lines).hasSize(1);
        assertThat(lines.get(0)).startsWith("codec 'gate mean' failed in ").contains("(threw)");
      }
      assertTwoJobsOnOnePathAreRefused(spark);
    }
  }

  /** Both paths: that of the results, and that of the parts. */
  private static void assertTwoJobsOnOnePathAreRefused(JavaSparkContext spark) {
    String parts = temporary.resolve("shared").toUri().toString();
    gate().holdAfter(0);
    CompletableFuture<List<String>> first =
        CompletableFuture.supplyAsync(() -> run(spark, study, "first", parts, 2));
    long unused = gate().nextHeld();
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> run(spark, study, "first", null, 2))
        .withMessageContaining("is being written by another run");
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> run(spark, study, "second", parts, 2))
        .withMessageContaining("holds the parts of a run into ")
        .withMessageContaining(temporary.resolve("first").toString());
    gate().open();
    assertThat(first.join()).hasSize(1);
  }

  @Test
  @Order(2)
  void replicatesThatEndEarlyEndWhereTheyDoInALocalRun() throws IOException {
    Path early =
        Files.writeString(
            study.resolveSibling("early.yaml"),
            STUDY.replace(
                "replicates: 2", "replicates: {at-least: 2, at-most: 12, half-width-db: 0.4}"));
    Daemon local =
        cluster().run(temporary, command("assess", early.toString(), "--out", "early-local"));
    try (JavaSparkContext spark = connect()) {
      List<String> unused = run(spark, early, "early", null, 7);
    }
    assertThat(local.exitCode()).as(local.words()).isZero();
    assertThat(trials("early")).isEqualTo(trials("early-local"));
    assertThat(trials("early").lines().count()).isNotEqualTo(1 + 5 * (2 + 2 * 3 * 12));
  }

  @Test
  @Order(3)
  void anExecutorIsKilledAndAWorkerStopped() throws IOException {
    try (JavaSparkContext spark = connect()) {
      gate().holdAfter(3);
      CompletableFuture<List<String>> first =
          CompletableFuture.supplyAsync(() -> run(spark, study, "killed", null, 7));
      long executor = gate().nextHeld();
      ProcessHandle process = ProcessHandle.of(executor).orElseThrow();
      assertThat(process.destroyForcibly()).isTrue();
      process.onExit().join();
      long another = gate().nextHeld();
      assertThat(another).isNotEqualTo(executor);
      gate().open();
      first.join();
      assertThat(trials("killed")).isEqualTo(expected);

      gate().holdAfter(3);
      CompletableFuture<List<String>> second =
          CompletableFuture.supplyAsync(() -> run(spark, study, "stopped", null, 7));
      Daemon worker = cluster().workerOf(gate().nextHeld());
      worker.close();
      gate().open();
      second.join();
      assertThat(trials("stopped")).isEqualTo(expected);
    }
    assertThat(cluster().startWorker().await()).isNotEmpty();
  }

  @Test
  @Order(4)
  void aDriverIsKilledAndItsRunTakenUpAgain() throws IOException {
    // Two units a part and two executors: of five units that pass, three are one executor's, and
    // it comes with the third only once its first part is there.
    gate().holdAfter(5);
    Daemon first =
        cluster()
            .run(
                temporary,
                program("--on", cluster().address(), "--out", "resumed", "--partitions", "7"));
    long unused = gate().nextHeld();
    ProcessHandle driver =
        first
            .handle()
            .children()
            .filter(child -> child.info().command().orElse("").endsWith("java"))
            .findFirst()
            .orElseThrow();
    assertThat(driver.destroyForcibly()).isTrue();
    assertThat(first.exitCode()).isEqualTo(3);
    assertThat(first.words())
        .contains("the driver ended with exit code 137; go on with: linkworthy assess --resume ");
    assertThat(expected).startsWith(trials("resumed")).isNotEqualTo(trials("resumed"));
    gate().open();
    Daemon second =
        cluster()
            .run(
                temporary,
                command(
                    "assess",
                    "--resume=" + temporary.resolve("resumed"),
                    "--on",
                    cluster().address()));
    assertThat(second.exitCode()).as(second.words()).isZero();
    assertThat(second.words())
        .containsPattern("linkworthy: going on with [1-4] parts that are there")
        .contains("report: " + temporary.resolve("resumed"));
    assertThat(trials("resumed")).isEqualTo(expected);
    assertThat(temporary.resolve("resumed/cells.csv"))
        .hasSameTextualContentAs(temporary.resolve("local/cells.csv"));
    assertThat(temporary.resolve("resumed/report.html")).exists();
    assertThat(temporary.resolve("resumed/parts")).doesNotExist();
  }

  @Test
  @Order(5)
  void whatCannotBeReachedOrWrittenIsSaidInOneLine() {
    Daemon noMaster = refused("--on", "spark://127.0.0.1:1", "--out", "none");
    Daemon noPath = refused("--on", "local[1]", "--out", study + "/below-a-file");
    Daemon noParts =
        refused("--on", "local[1]", "--out", "no-parts", "--parts", "nowhere://host/folder");
    assertEnd(noMaster, "no Spark master answers at spark://127.0.0.1:1: Connection refused");
    assertEnd(noPath, "cannot write " + study + "/below-a-file: Not a directory");
    assertEnd(noParts, "cannot use nowhere://host/folder: No FileSystem for scheme \"nowhere\"");
    Daemon waiting = Objects.requireNonNull(toTheSilent);
    assertEnd(
        waiting, " is silent, or does not let this application in; accepted: a master of Spark ");
    assertThat(waiting.seconds()).isLessThan(30);
    assertThat(temporary.resolve("silent")).doesNotExist();
  }

  private static Daemon refused(String... arguments) {
    return cluster().run(temporary, program(arguments));
  }

  private static void assertEnd(Daemon run, String words) {
    assertThat(run.exitCode()).as(run.words()).isEqualTo(3);
    assertThat(run.words().lines().filter(line -> line.startsWith("linkworthy: ")))
        .singleElement()
        .asString()
        .contains(words);
  }
}
