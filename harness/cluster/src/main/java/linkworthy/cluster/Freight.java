package linkworthy.cluster;

import java.io.IOException;
import java.io.Serializable;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.SortedMap;
import java.util.TreeMap;
import linkworthy.codec.PluginFolder;
import linkworthy.corpus.Manifest;
import linkworthy.corpus.ManifestEntry;
import linkworthy.input.Unavailable;
import linkworthy.study.Study;
import linkworthy.study.StudyWriter;
import linkworthy.trial.Plan;
import org.apache.spark.api.java.JavaSparkContext;
import org.apache.spark.broadcast.Broadcast;
import org.jspecify.annotations.Nullable;

/**
 * All that an executor needs to run units of a plan, by content: nothing is read from a path that
 * the machines would have to share. Each picture is a broadcast of its own, so that an executor
 * fetches those that its units need.
 *
 * @param program version of the program
 * @param study its canonical text
 * @param models files beside the study, by their paths
 * @param manifest the tested and the training pictures alone, as CSV
 * @param plugins jars by their names
 * @param pictures files by their paths in the manifest
 */
record Freight(
    String program,
    String study,
    SortedMap<String, String> models,
    String manifest,
    SortedMap<String, byte[]> plugins,
    Map<String, Broadcast<byte[]>> pictures)
    implements Serializable {

  /**
   * Packs a plan; every picture is checked against its manifest.
   *
   * @param pluginFolder where the jars are, or null
   * @throws linkworthy.input.BadInput if a picture is not what its manifest says
   * @throws Unavailable if something cannot be read
   */
  static Freight pack(
      JavaSparkContext spark,
      String program,
      Plan plan,
      @Nullable Path pluginFolder,
      List<PluginFolder.Jar> jars) {
    List<ManifestEntry> entries = entries(plan);
    Map<String, Broadcast<byte[]>> pictures = new LinkedHashMap<>();
    for (ManifestEntry entry : entries) {
      if (!pictures.containsKey(entry.file())) {
        pictures.put(entry.file(), spark.broadcast(plan.manifest().readFile(entry)));
      }
    }
    SortedMap<String, byte[]> plugins = new TreeMap<>();
    if (pluginFolder != null) {
      for (PluginFolder.Jar jar : jars) {
        plugins.put(jar.name(), read(pluginFolder.resolve(jar.name())));
      }
    }
    return new Freight(
        program,
        StudyWriter.canonical(plan.study()),
        StudyWriter.modelFiles(plan.study()),
        Manifest.toCsv(entries),
        plugins,
        pictures);
  }

  /** The pictures that are tested or learned from, in the manifest's order. */
  private static List<ManifestEntry> entries(Plan plan) {
    Study study = plan.study();
    Set<ManifestEntry> used = new LinkedHashSet<>(plan.pictures());
    if (!study.pictures().train().isEmpty()) {
      used.addAll(plan.manifest().select(study.pictures().train()));
    }
    return plan.manifest().entries().stream().filter(used::contains).toList();
  }

  private static byte[] read(Path file) {
    try {
      return Files.readAllBytes(file);
    } catch (IOException e) {
      throw Unavailable.cannot("read " + file, e);
    }
  }

  /**
   * SHA-256, in hex, of everything; the manifest has the checksums of the pictures. It names the
   * run: with the same one, the rows are the same.
   */
  String checksum() {
    List<String> lines = new ArrayList<>();
    lines.add(program);
    lines.add(sha256(study));
    models.forEach((path, text) -> lines.add(path + " " + sha256(text)));
    lines.add(sha256(manifest));
    plugins.forEach((name, jar) -> lines.add(name + " " + Manifest.sha256(jar)));
    return sha256(String.join("\n", lines));
  }

  private static String sha256(String text) {
    return Manifest.sha256(text.getBytes(StandardCharsets.UTF_8));
  }

  /** A picture's bytes; null if it is none of these. Fetched when first asked for. */
  byte @Nullable [] picture(String file) {
    Broadcast<byte[]> bytes = pictures.get(file);
    return bytes == null ? null : bytes.value();
  }

  /** Lets go of the executors' copies of the pictures. */
  void unload() {
    pictures.values().forEach(Broadcast::destroy);
  }
}
