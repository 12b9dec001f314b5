package linkworthy.study;

import java.math.BigDecimal;
import java.nio.charset.StandardCharsets;
import java.security.MessageDigest;
import java.security.NoSuchAlgorithmException;
import java.util.ArrayList;
import java.util.HexFormat;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.SortedMap;
import java.util.TreeMap;
import linkworthy.input.Decimal;
import linkworthy.link.Link;
import linkworthy.noise.NoiseLibrary;
import linkworthy.noise.NoiseModel;
import linkworthy.noise.Site;
import tools.jackson.dataformat.yaml.YAMLMapper;
import tools.jackson.dataformat.yaml.YAMLWriteFeature;

/**
 * Writes a study with every default in it, always the same bytes for the same study.
 *
 * <p>The text holds no path of the machine it was written on. A noise model of the user's own is
 * named by a file under {@code models/}, with its version in force in its name; {@link #modelFiles}
 * gives these files, to be put beside the study, so that the record can be read and repeated
 * without the user's folder. A manifest of the user's own keeps the path as the study had it:
 * pictures are not copied, and where the manifest was on the machine of the run stands in the run's
 * record.
 */
public final class StudyWriter {
  static final String SHIPPED = "shipped";
  static final String NONE = "none";

  /** Folder of the models that are not shipped, beside the study. */
  public static final String MODEL_FOLDER = "models";

  private static final int SHORT_HASH = 8;

  private static final YAMLMapper YAML =
      YAMLMapper.builder()
          .disable(YAMLWriteFeature.WRITE_DOC_START_MARKER)
          .disable(YAMLWriteFeature.SPLIT_LINES)
          .build();

  private StudyWriter() {}

  /** The study as YAML; {@link StudyReader} makes an equal study of it. */
  public static String canonical(Study study) {
    return YAML.writeValueAsString(tree(study));
  }

  /**
   * SHA-256, in hex, of what determines the rows of the record: the canonical text without {@code
   * name}, {@code purpose}, the manifest's path and every {@code protect: none}, then the
   * fingerprint of every noise model. Equal numbers need equal pictures as well; those have the
   * fingerprint of their manifest.
   */
  public static String fingerprint(Study study) {
    Map<String, Object> tree = tree(study);
    tree.remove("name");
    tree.remove("purpose");
    tree.put("pictures", pictures(study.pictures(), false));
    tree.put("codecs", study.codecs().stream().map(StudyWriter::decisive).toList());
    StringBuilder text = new StringBuilder(YAML.writeValueAsString(tree));
    for (ImpairmentChoice impairment : impairments(study)) {
      text.append(impairment.model().fingerprint()).append('\n');
    }
    try {
      byte[] bytes = text.toString().getBytes(StandardCharsets.UTF_8);
      return HexFormat.of().formatHex(MessageDigest.getInstance("SHA-256").digest(bytes));
    } catch (NoSuchAlgorithmException e) {
      throw new IllegalStateException("every Java has SHA-256", e);
    }
  }

  /**
   * The models that are not shipped, and the files they name: path beside the study, then the
   * file's text.
   */
  public static SortedMap<String, String> modelFiles(Study study) {
    SortedMap<String, String> files = new TreeMap<>();
    for (ImpairmentChoice impairment : impairments(study)) {
      String reference = reference(impairment.model());
      if (isModelPath(reference)) {
        files.put(reference, YAML.writeValueAsString(tree(impairment.model())));
        files.putAll(settingFiles(impairment.model()));
      }
    }
    return files;
  }

  /** The impairments, and that of the raw hop if there is one. */
  private static List<ImpairmentChoice> impairments(Study study) {
    List<ImpairmentChoice> all = new ArrayList<>(study.impairments());
    if (study.rawHop() != null) {
      all.add(study.rawHop());
    }
    return all;
  }

  /** Whether the value of {@code noise} is a path, not the id of a shipped model. */
  static boolean isModelPath(String noise) {
    return noise.contains("/") || noise.endsWith(".yaml") || noise.endsWith(".yml");
  }

  /** The files that a model of the user's own names, by their paths beside the study. */
  private static Map<String, String> settingFiles(NoiseModel model) {
    Map<String, String> files = new TreeMap<>(model.implementation().settings());
    files.keySet().retainAll(model.implementation().fileKeys());
    Map<String, String> byPath = new TreeMap<>();
    files.forEach((key, text) -> byPath.put(MODEL_FOLDER + "/" + settingFile(model, key), text));
    return byPath;
  }

  private static String settingFile(NoiseModel model, String key) {
    return model.id() + "-" + model.fingerprint().substring(0, SHORT_HASH) + "-" + key + ".csv";
  }

  private static String reference(NoiseModel model) {
    boolean shipped =
        NoiseLibrary.shipped().stream()
            .filter(known -> known.id().equals(model.id()))
            .anyMatch(known -> known.with(model.parameters()).equals(model));
    return shipped
        ? model.id()
        : MODEL_FOLDER
            + "/"
            + model.id()
            + "-"
            + model.fingerprint().substring(0, SHORT_HASH)
            + ".yaml";
  }

  private static Map<String, Object> tree(Study study) {
    Map<String, Object> tree = new LinkedHashMap<>();
    tree.put("name", study.name());
    tree.put("purpose", study.purpose());
    tree.put("seed", study.seed());
    tree.put("pictures", pictures(study.pictures(), true));
    tree.put("impairments", study.impairments().stream().map(StudyWriter::impairment).toList());
    tree.put("codecs", study.codecs().stream().map(StudyWriter::codec).toList());
    tree.put("link", link(study.link()));
    EarlyStop rule = study.earlyStop();
    tree.put("replicates", rule == null ? study.replicates() : earlyStop(rule));
    tree.put("measures", study.measures());
    NodeChoice node = study.node();
    if (node != null) {
      tree.put("node", node(node));
    }
    ImpairmentChoice hop = study.rawHop();
    if (hop != null) {
      tree.put("raw-hop", impairment(hop));
    }
    return tree;
  }

  private static Map<String, Object> earlyStop(EarlyStop rule) {
    Map<String, Object> tree = new LinkedHashMap<>();
    tree.put("at-least", rule.atLeast());
    tree.put("at-most", rule.atMost());
    tree.put("half-width-db", plainValue(rule.halfWidthDb()));
    return tree;
  }

  private static Map<String, Object> pictures(PictureChoice pictures, boolean withManifest) {
    Map<String, Object> tree = new LinkedHashMap<>();
    if (withManifest) {
      PictureChoice.ManifestFile manifest = pictures.manifest();
      tree.put("manifest", manifest == null ? SHIPPED : manifest.written());
    }
    tree.put("select", pictures.select());
    if (!pictures.train().isEmpty()) {
      tree.put("train", pictures.train());
    }
    Object side = pictures.longestSide().isPresent() ? pictures.longestSide().getAsInt() : NONE;
    tree.put("longest-side", side);
    tree.put("planes", pictures.planes());
    if (pictures.hasAllPlanes()) {
      tree.put("chroma", pictures.chroma());
    }
    tree.put("signal-power", pictures.signalPower().id());
    return tree;
  }

  private static Map<String, Object> impairment(ImpairmentChoice impairment) {
    Map<String, Object> tree = new LinkedHashMap<>();
    tree.put("noise", reference(impairment.model()));
    tree.put("label", impairment.label());
    tree.put("acts-on", impairment.site().id());
    tree.putAll(parameters(impairment.model()));
    tree.put(
        impairment.axis(), impairment.severities().stream().map(StudyWriter::plainValue).toList());
    return tree;
  }

  private static Map<String, Object> codec(CodecChoice choice) {
    Map<String, Object> tree = new LinkedHashMap<>();
    choice.settings().forEach((key, value) -> tree.put(key, plainValue(value)));
    return tree;
  }

  /** What decides the rows of an option. */
  private static Map<String, Object> decisive(CodecChoice choice) {
    Map<String, Object> tree = new LinkedHashMap<>();
    choice.identity().forEach((key, value) -> tree.put(key, plainValue(value)));
    tree.put("label", choice.label());
    return tree;
  }

  private static Map<String, Object> node(NodeChoice node) {
    Map<String, Object> profile = new LinkedHashMap<>();
    node.profile().settings().forEach((key, value) -> profile.put(key, plainValue(value)));
    Map<String, Object> tree = new LinkedHashMap<>();
    tree.put("profile", profile);
    tree.put("interval-s", plainValue(node.intervalSeconds()));
    return tree;
  }

  private static Map<String, Object> link(Link link) {
    Map<String, Object> tree = new LinkedHashMap<>();
    tree.put("payload-bytes", link.payloadBytes());
    tree.put("header-bytes", link.headerBytes());
    tree.put("order", link.order().id());
    return tree;
  }

  private static Map<String, Object> tree(NoiseModel model) {
    Map<String, Object> tree = new LinkedHashMap<>();
    tree.put("id", model.id());
    tree.put("version", model.version());
    tree.put("process", model.process());
    tree.put("acts-on", model.actsOn().stream().map(Site::id).toList());
    if (!model.recordedParameters().isEmpty()) {
      tree.put("parameters", parameters(model));
    }
    Set<String> files = model.implementation().fileKeys();
    new TreeMap<>(model.implementation().settings())
        .forEach(
            (key, text) -> tree.put(key, files.contains(key) ? settingFile(model, key) : text));
    tree.put("severity", model.axes());
    tree.put("source", model.source());
    if (!model.notes().isBlank()) {
      tree.put("notes", model.notes());
    }
    return tree;
  }

  /** Numbers, and true or false for parameters of two states. */
  private static Map<String, Object> parameters(NoiseModel model) {
    Set<String> flags = model.implementation().flags();
    Map<String, Object> tree = new LinkedHashMap<>();
    model
        .recordedParameters()
        .forEach(
            (name, number) ->
                tree.put(name, flags.contains(name) ? (Object) (number == 1) : plainValue(number)));
    return tree;
  }

  /** Numbers in the one form that does not depend on the JDK. */
  private static Object plainValue(Object value) {
    if (value instanceof Double number) {
      return new BigDecimal(Decimal.shortest(number));
    }
    return value instanceof List<?> list
        ? list.stream().map(StudyWriter::plainValue).toList()
        : value;
  }
}
