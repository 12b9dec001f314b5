package linkworthy.app;

import java.util.ArrayList;
import java.util.List;
import linkworthy.input.BadInput;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Option;

/** Where a study runs, if not here. */
final class ClusterOptions {
  @Option(
      names = "--on",
      paramLabel = "MASTER",
      description = {
        "Run on Apache Spark, found by SPARK_HOME: spark://HOST:PORT, local[N], or any other",
        "master that spark-submit takes."
      })
  private @Nullable String on;

  @Option(
      names = "--parts",
      paramLabel = "URI",
      description = {
        "With --on: a folder that this machine and the cluster share, for the rows on their way,",
        "such as hdfs://host:port/folder (default: in the results folder)."
      })
  private @Nullable String parts;

  @Option(
      names = "--partitions",
      paramLabel = "N",
      description = "With --on: tasks to cut the study into (default: as suits it).")
  private @Nullable Integer partitions;

  /**
   * The master, or null to run here.
   *
   * @throws BadInput if an option of a cluster is given without one
   */
  @Nullable String master() {
    if (on == null && (parts != null || partitions != null)) {
      throw new BadInput(
          (parts != null ? "--parts" : "--partitions") + " is given without --on; accepted: both");
    }
    if (partitions != null && partitions < 1) {
      throw new BadInput("--partitions is " + partitions + "; accepted: a number from 1");
    }
    return on;
  }

  /** These options for the driver, which gets its master otherwise. */
  List<String> forDriver() {
    List<String> arguments = new ArrayList<>();
    if (parts != null) {
      arguments.addAll(List.of("--parts", parts));
    }
    if (partitions != null) {
      arguments.addAll(List.of("--partitions", partitions.toString()));
    }
    return arguments;
  }

  /** These options as they would be given again, each with a space before it. */
  String asArguments() {
    return on == null
        ? ""
        : " --on "
            + CodecOptions.quoted(on)
            + (parts == null ? "" : " --parts " + CodecOptions.quoted(parts));
  }
}
