package linkworthy.study;

import java.nio.file.InvalidPathException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Collection;
import java.util.HashMap;
import java.util.HashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.TreeMap;
import linkworthy.input.BadInput;
import linkworthy.input.Decimal;
import linkworthy.input.Kind;
import linkworthy.input.YamlNode;
import linkworthy.noise.NoiseLibrary;
import linkworthy.noise.NoiseModel;
import linkworthy.noise.Severity;
import linkworthy.noise.Site;

/** Reads the impairments of a study and keeps watch over their labels. */
final class ImpairmentReader {
  private static final List<String> FIXED_KEYS = List.of("noise", "acts-on", "label");

  private final Path baseFolder;
  private final Map<Place, NoiseModel> models = new HashMap<>();
  private final Set<Level> levels = new HashSet<>();

  ImpairmentReader(Path baseFolder) {
    this.baseFolder = baseFolder;
  }

  private record Place(String label, Site site) {}

  private record Level(Place place, String axis, double severity) {}

  ImpairmentChoice read(YamlNode entry) {
    NoiseModel plain = model(entry.get("noise"));
    StudyKeys.impairment("impairment", Kind.Text.any(), plain).check(entry);

    NoiseModel model = inForce(entry, plain);
    String label = entry.find("label").map(ImpairmentReader::label).orElse(model.id());
    Place place = new Place(label, site(entry, model));
    String axis = axis(entry, model.axes());
    List<Double> severities = new ArrayList<>();
    for (YamlNode item : entry.get(axis).oneOrMore()) {
      severities.add(severity(entry, item, axis, model, place));
    }
    NoiseModel known = models.putIfAbsent(place, model);
    if (known != null && !known.equals(model)) {
      throw entry.refuse(
          "gives the label '"
              + label
              + "' to a second model that acts on "
              + place.site().id()
              + "; add label: with a name of its own");
    }
    return new ImpairmentChoice(label, model, place.site(), axis, severities);
  }

  /** A shipped model's id, or a path: one that has a slash or ends like a YAML file. */
  private NoiseModel model(YamlNode noise) {
    String text = noise.text();
    try {
      return StudyWriter.isModelPath(text)
          ? NoiseModel.read(baseFolder.resolve(text))
          : NoiseLibrary.find(text);
    } catch (BadInput | InvalidPathException e) {
      throw noise.refuse("cannot be used: " + e.getMessage());
    }
  }

  /**
   * The model with every parameter: the process' default, unless the model or, before it, the study
   * has one.
   */
  private static NoiseModel inForce(YamlNode entry, NoiseModel model) {
    Map<String, Double> all = new TreeMap<>(model.implementation().parameters());
    all.putAll(model.parameters());
    for (String name : List.copyOf(all.keySet())) {
      boolean isFlag = model.implementation().flags().contains(name);
      entry
          .find(name)
          .ifPresent(
              node ->
                  all.put(
                      name, isFlag ? (node.flag() ? 1.0 : 0.0) : node.number("a finite number")));
    }
    try {
      return model.with(all);
    } catch (BadInput e) {
      throw refuse(entry, entry, e);
    }
  }

  private static String label(YamlNode node) {
    String label = StudyKeys.LABEL.read(node).strip();
    if (label.equals(ImpairmentChoice.CLEAN)) {
      throw node.refuse("is 'none', which is kept for clean pictures; accepted: another name");
    }
    return label;
  }

  private static Site site(YamlNode entry, NoiseModel model) {
    List<String> words = model.actsOn().stream().map(Site::id).toList();
    return entry
        .find("acts-on")
        .map(node -> model.actsOn().get(words.indexOf(node.oneOf(words))))
        .orElse(model.actsOn().get(0));
  }

  private static String axis(YamlNode entry, Collection<String> axes) {
    return axes.stream().filter(axis -> entry.find(axis).isPresent()).findFirst().orElseThrow();
  }

  private double severity(
      YamlNode entry, YamlNode item, String axis, NoiseModel model, Place place) {
    double value = item.number("a finite number") + 0.0;
    try {
      model.implementation().check(new Severity(axis, value), model.parameters(), place.site());
    } catch (BadInput e) {
      throw refuse(entry, item, e);
    }
    if (!levels.add(new Level(place, axis, value))) {
      throw item.refuse(
          "gives "
              + place.label()
              + " on "
              + place.site().id()
              + " at "
              + axis
              + " "
              + Decimal.shortest(value)
              + " a second time; remove it, or add label: to tell the two apart");
    }
    return value;
  }

  /** The complaint at the key it speaks of, or else at another place. */
  private static BadInput refuse(YamlNode entry, YamlNode otherwise, BadInput cause) {
    String complaint = String.valueOf(cause.getMessage());
    return entry.keys().stream()
        .filter(key -> !FIXED_KEYS.contains(key))
        .filter(key -> complaint.startsWith(key + " ") || complaint.contains(": " + key + " "))
        .filter(key -> !entry.get(key).isSequence())
        .findFirst()
        .map(entry::get)
        .orElse(otherwise)
        .refuse("cannot be used: " + complaint);
  }
}
