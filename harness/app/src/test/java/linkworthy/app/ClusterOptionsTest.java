package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;

import java.io.File;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import linkworthy.input.Unavailable;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

/** What is said before anything is started on a cluster. */
class ClusterOptionsTest {
  private static final String ACCEPTED =
      "; accepted: the folder of Apache Spark 4.1 or a later 4, built for Scala 2.13, as"
          + " https://spark.apache.org/downloads.html has it";

  @TempDir private Path temporary;

  private void assertRefused(String accepted, String... more) {
    List<String> arguments = new ArrayList<>(List.of("assess"));
    arguments.add(SmallStudy.in(temporary).toString());
    arguments.addAll(List.of("--out", temporary.resolve("out").toString()));
    arguments.addAll(List.of(more));
    CommandLineRun run = CommandLineRun.of(temporary, arguments.toArray(new String[0]));
    assertThat(run.exitCode()).isEqualTo(Main.BAD_INPUT);
    assertThat(run.err()).isEqualTo("linkworthy: " + accepted + "\n");
    assertThat(temporary.resolve("out")).doesNotExist();
  }

  @Test
  void optionsThatDoNotGoTogetherAreRefused() {
    assertRefused("--parts is given without --on; accepted: both", "--parts", "hdfs://a/b");
    assertRefused("--partitions is given without --on; accepted: both", "--partitions", "2");
    assertRefused(
        "--partitions is 0; accepted: a number from 1", "--on", "local[2]", "--partitions", "0");
    assertRefused(
        "--threads is given with --on; accepted: one of the two, as the cluster says how many cores"
            + " there are",
        "--on",
        "local[2]",
        "--threads",
        "2");
    assertRefused(
        "--allow-commands is given with --on, and the programs of this machine are not on others;"
            + " accepted with --on: codecs of this program and of --plugins",
        "--on",
        "local[2]",
        "--allow-commands");
  }

  @ParameterizedTest
  @ValueSource(strings = {"spark:", "host:7077", "local2", "mesos://a:1"})
  void aMasterThatSparkDoesNotKnowIsRefused(String master) {
    assertRefused(
        "--on is '" + master + "'; accepted: spark://HOST:PORT, local[N], yarn, k8s://...",
        "--on",
        master);
  }

  @Test
  void withoutSparkHomeItSaysHowToGetSpark() {
    assertThatExceptionOfType(Unavailable.class)
        .isThrownBy(() -> SparkHome.of(null))
        .withMessage("--on needs Spark, and SPARK_HOME is not set" + ACCEPTED);
    assertThatExceptionOfType(Unavailable.class)
        .isThrownBy(() -> SparkHome.of(temporary.toString()))
        .withMessage(
            "SPARK_HOME is " + temporary + ", which has no jars/spark-core_*.jar" + ACCEPTED);
  }

  private void putJar(String name) throws IOException {
    Files.createDirectories(temporary.resolve("jars"));
    Files.write(temporary.resolve("jars").resolve(name), new byte[0]);
  }

  @ParameterizedTest
  @CsvSource({"2.12,3.5.6", "2.13,3.5.6", "2.13,4.0.1", "2.13,5.0.0", "3.3,4.1.0"})
  void aSparkOfAnotherScalaOrVersionIsRefused(String scala, String version) throws IOException {
    String jar = "spark-core_" + scala + "-" + version + ".jar";
    putJar(jar);
    assertThatExceptionOfType(Unavailable.class)
        .isThrownBy(() -> SparkHome.of(temporary.toString()))
        .withMessage("SPARK_HOME is " + temporary + ", which has " + jar + ACCEPTED);
  }

  @ParameterizedTest
  @ValueSource(booleans = {true, false})
  void aJobIsSubmittedByTheScriptOrElseByItsClass(boolean script) throws IOException {
    putJar("spark-core_2.13-4.1.3.jar");
    Path submit = temporary.resolve("bin/spark-submit");
    if (script) {
      Files.createDirectories(temporary.resolve("bin"));
      Files.createFile(submit);
      assertThat(submit.toFile().setExecutable(true)).isTrue();
    }
    Path jar = temporary.resolve("job.jar");
    ProcessBuilder process =
        SparkHome.of(temporary.toString())
            .submit(Path.of("java"), "local[2]", jar, List.of("study.yaml", "--quiet"));
    String rest = " --master local[2] --deploy-mode client " + jar + " study.yaml --quiet";
    String log =
        "-Dlog4j2.configurationFile=jar:" + jar.toUri() + "!/linkworthy/cluster/log4j2.xml";
    assertThat(String.join(" ", process.command()))
        .isEqualTo(
            script
                ? submit + rest
                : "java "
                    + log
                    + " -cp "
                    + temporary.resolve("conf")
                    + File.pathSeparator
                    + temporary.resolve("jars/*")
                    + " org.apache.spark.deploy.SparkSubmit"
                    + rest);
    assertThat(process.environment()).containsEntry("SPARK_HOME", temporary.toString());
    assertThat(process.environment().get("SPARK_SUBMIT_OPTS")).endsWith(log);
  }
}
