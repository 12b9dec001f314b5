package linkworthy.cluster;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Map;
import java.util.Objects;
import java.util.Optional;
import linkworthy.codec.CodecFamilies;
import linkworthy.codec.PluginFolder;
import linkworthy.corpus.Manifest;
import linkworthy.input.Unavailable;
import linkworthy.study.StudyReader;
import linkworthy.trial.Plan;
import org.apache.spark.SparkFiles;
import org.jspecify.annotations.Nullable;

/**
 * The plan of a run as an executor makes it of the {@link Freight}: once in each process, in the
 * folder that Spark gives the executor and clears away.
 */
final class Workplace {
  private static @Nullable Workplace latest;

  private final String run;
  private final Plan plan;
  private volatile Freight freight;

  private Workplace(String run, Freight freight) {
    this.run = run;
    this.freight = freight;
    this.plan = unpack();
  }

  /**
   * The plan of a run; one at a time is kept.
   *
   * @param run checksum of the freight
   * @throws Unavailable if what arrived is not what was sent, or cannot be unpacked
   */
  static synchronized Plan plan(String run, Freight freight) {
    Workplace known = latest;
    if (known == null || !known.run.equals(run)) {
      known = new Workplace(run, freight);
      latest = known;
    }
    // Equal content, but the pictures of an earlier job may have been let go.
    known.freight = freight;
    return known.plan;
  }

  private Plan unpack() {
    String found = freight.checksum();
    if (!found.equals(run)) {
      throw new Unavailable("the study arrived with SHA-256 " + found + "; sent was " + run);
    }
    try {
      Path folder =
          Files.createTempDirectory(Path.of(SparkFiles.getRootDirectory()), "linkworthy-");
      for (Map.Entry<String, String> model : freight.models().entrySet()) {
        write(folder.resolve(model.getKey()), model.getValue().getBytes(StandardCharsets.UTF_8));
      }
      Path study = folder.resolve("study.yaml");
      write(study, freight.study().getBytes(StandardCharsets.UTF_8));
      return Plan.unchecked(StudyReader.read(study, families(folder)), pictures());
    } catch (IOException e) {
      throw Unavailable.cannot("unpack the study on an executor", e);
    }
  }

  /** The jars stay open as long as the executor lives: its codecs may need more classes. */
  private CodecFamilies families(Path folder) throws IOException {
    if (freight.plugins().isEmpty()) {
      return CodecFamilies.installed();
    }
    Path plugins = folder.resolve("plugins");
    for (Map.Entry<String, byte[]> jar : freight.plugins().entrySet()) {
      write(plugins.resolve(jar.getKey()), jar.getValue());
    }
    return CodecFamilies.installed().with(PluginFolder.open(plugins).families());
  }

  private Manifest pictures() {
    return Manifest.of(
        "the pictures sent",
        freight.manifest().getBytes(StandardCharsets.UTF_8),
        file -> Optional.ofNullable(freight.picture(file)));
  }

  private static void write(Path file, byte[] bytes) throws IOException {
    Files.createDirectories(Objects.requireNonNull(file.getParent()));
    Files.write(file, bytes);
  }
}
