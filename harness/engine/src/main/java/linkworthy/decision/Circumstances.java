package linkworthy.decision;

import java.util.ArrayList;
import java.util.HashMap;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Objects;
import java.util.Set;
import linkworthy.input.YamlNode;
import linkworthy.results.ResultsFolder;
import linkworthy.results.RunRecord;
import org.jspecify.annotations.Nullable;

/**
 * What a run was made of, by its own record: neither codecs nor noise models nor pictures need to
 * be there, and those of this version of the program have no part in it.
 */
final class Circumstances {
  private static final Set<String> NO_PARAMETERS = Set.of("label", "acts-on");
  private static final Set<String> CHOICE =
      Set.of("pictures.manifest", "pictures.select", "pictures.train");
  private static final int SHORT_HASH = 12;

  private final RunRecord run;
  private final Map<String, String> settings = new LinkedHashMap<>();
  private final Map<String, RunRecord.ModelUsed> models = new HashMap<>();

  private Circumstances(RunRecord run) {
    this.run = run;
  }

  static Circumstances of(ResultsFolder folder) {
    Circumstances circumstances = new Circumstances(folder.run());
    YamlNode study = YamlNode.read(folder.path().resolve(ResultsFolder.STUDY));
    for (String key : study.keys()) {
      switch (key) {
        case "name", "purpose", "seed" -> {}
        case "impairments" -> circumstances.addImpairments(study.get(key).items());
        case "codecs" -> circumstances.addCodecs(study.get(key).items());
        default -> circumstances.flatten(key, study.get(key));
      }
    }
    return circumstances;
  }

  private void addCodecs(List<YamlNode> codecs) {
    for (YamlNode codec : codecs) {
      String name = "codec " + codec.get("label").text();
      settings.put(name, "in the study");
      for (String key : codec.without("label").keys()) {
        flatten(name + ": " + key, codec.get(key));
      }
    }
  }

  private void addImpairments(List<YamlNode> impairments) {
    List<String> found = new ArrayList<>();
    for (YamlNode impairment : impairments) {
      String name = noise(impairment);
      settings.put(name, "in the study");
      found.add(parameters(impairment));
      for (String key : impairment.keys()) {
        if (!NO_PARAMETERS.contains(key) && !key.equals("noise")) {
          flatten(name + ": " + key, impairment.get(key));
        }
      }
    }
    List<String> distinct = List.copyOf(new LinkedHashSet<>(found));
    if (distinct.size() == run.noiseModels().size()) {
      for (int i = 0; i < found.size(); i++) {
        models.put(
            noise(impairments.get(i)), run.noiseModels().get(distinct.indexOf(found.get(i))));
      }
    }
  }

  /** What makes an impairment's model: its name and all that is neither label, place nor list. */
  private static String parameters(YamlNode impairment) {
    StringBuilder text = new StringBuilder();
    for (String key : impairment.keys()) {
      YamlNode value = impairment.get(key);
      if (!NO_PARAMETERS.contains(key) && !value.isSequence() && !value.isMapping()) {
        text.append(key).append('=').append(value.text()).append('\n');
      }
    }
    return text.toString();
  }

  private static String noise(YamlNode impairment) {
    String axis =
        impairment.keys().stream()
            .filter(key -> impairment.get(key).isSequence())
            .findFirst()
            .orElse("");
    return noise(impairment.get("label").text(), impairment.get("acts-on").text(), axis);
  }

  private static String noise(String label, String actsOn, String axis) {
    return "noise " + label + " on " + actsOn + " by " + axis;
  }

  private void flatten(String name, YamlNode value) {
    if (value.isMapping()) {
      value.keys().forEach(key -> flatten(name + "." + key, value.get(key)));
    } else if (value.isSequence() && value.items().stream().anyMatch(YamlNode::isMapping)) {
      for (int i = 0; i < value.items().size(); i++) {
        flatten(name + "." + i, value.items().get(i));
      }
    } else {
      settings.put(
          name, String.join(", ", value.oneOrMore().stream().map(YamlNode::text).toList()));
    }
  }

  /** Ids of the pictures that were tested in both runs and are the same, in the same size. */
  Set<String> unchangedPictures(Circumstances other) {
    Set<String> unchanged = new LinkedHashSet<>();
    boolean sameSize = hasPictureSettingsOf(other);
    for (RunRecord.PictureUsed picture : run.pictures()) {
      boolean there =
          other.run.pictures().stream()
              .anyMatch(p -> p.id().equals(picture.id()) && p.sha256().equals(picture.sha256()));
      if (there && sameSize) {
        unchanged.add(picture.id());
      }
    }
    return unchanged;
  }

  /** Which pictures are tested, and where from, is no matter: they are compared one by one. */
  private boolean hasPictureSettingsOf(Circumstances other) {
    Set<String> names = new LinkedHashSet<>(settings.keySet());
    names.addAll(other.settings.keySet());
    return names.stream()
        .filter(name -> name.startsWith("pictures.") && !CHOICE.contains(name))
        .allMatch(name -> Objects.equals(settings.get(name), other.settings.get(name)));
  }

  /** Whether equal replicates of an unchanged picture met the same noise in this cell. */
  boolean hasNoiseOf(Circumstances other, CellKey cell) {
    if (cell.isClean()) {
      return true;
    }
    String name = noise(cell.impairment(), cell.actsOn(), cell.axis());
    RunRecord.ModelUsed model = models.get(name);
    RunRecord.ModelUsed theirs = other.models.get(name);
    return run.seed() == other.run.seed()
        && model != null
        && theirs != null
        && model.fingerprint().equals(theirs.fingerprint());
  }

  /** Everything that differs from an older run, by its record. */
  List<Change> since(Circumstances old) {
    List<Change> changes = new ArrayList<>();
    add(changes, "study", old.run.study(), run.study());
    add(changes, "program version", old.run.programVersion(), run.programVersion());
    add(changes, "Java", java(old.run), java(run));
    add(changes, "operating system", old.run.operatingSystem(), run.operatingSystem());
    add(changes, "seed", Long.toString(old.run.seed()), Long.toString(run.seed()));
    addAll(changes, old.modelFiles(), modelFiles());
    addAll(changes, old.pictures(), pictures());
    addAll(changes, old.settings, settings);
    addAll(changes, old.plugins(), plugins());
    return changes;
  }

  private static String java(RunRecord run) {
    return run.javaVersion() + " (" + run.javaVendor() + ")";
  }

  private Map<String, String> modelFiles() {
    Map<String, String> files = new LinkedHashMap<>();
    for (RunRecord.ModelUsed model : run.noiseModels()) {
      files.merge(
          "noise model " + model.id(),
          "version " + model.version() + ", " + shortly(model.fingerprint()),
          (a, b) -> a + " and " + b);
    }
    return files;
  }

  private Map<String, String> pictures() {
    Map<String, String> pictures = new LinkedHashMap<>();
    run.pictures()
        .forEach(p -> pictures.put("picture " + p.id(), "SHA-256 " + shortly(p.sha256())));
    return pictures;
  }

  private Map<String, String> plugins() {
    Map<String, String> plugins = new LinkedHashMap<>();
    run.plugins().forEach(p -> plugins.put("plugin " + p.jar(), "SHA-256 " + shortly(p.sha256())));
    run.programs().forEach(p -> plugins.put("program of codec " + p.codec(), p.program()));
    return plugins;
  }

  private static String shortly(String hash) {
    return hash.length() > SHORT_HASH ? hash.substring(0, SHORT_HASH) : hash;
  }

  private static void addAll(
      List<Change> changes, Map<String, String> before, Map<String, String> after) {
    Set<String> names = new LinkedHashSet<>(before.keySet());
    names.addAll(after.keySet());
    for (String name : names) {
      boolean partOfOneOnly =
          name.contains(": ")
              && !(before.containsKey(group(name)) && after.containsKey(group(name)));
      if (!partOfOneOnly) {
        add(changes, name, before.get(name), after.get(name));
      }
    }
  }

  /** The codec or noise that a setting belongs to; one that is new is named once. */
  private static String group(String name) {
    return name.substring(0, name.indexOf(": "));
  }

  private static void add(
      List<Change> changes, String what, @Nullable String before, @Nullable String after) {
    if (!Objects.equals(before, after)) {
      changes.add(new Change(what, before == null ? "" : before, after == null ? "" : after));
    }
  }
}
