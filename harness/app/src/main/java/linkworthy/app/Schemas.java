package linkworthy.app;

import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import linkworthy.codec.CodecFamilies;
import linkworthy.decision.Needs;
import linkworthy.input.Kind;
import linkworthy.link.NodeProfile;
import linkworthy.noise.NoiseModel;
import linkworthy.results.IndentedJson;
import linkworthy.study.StudyKeys;
import org.jspecify.annotations.Nullable;
import tools.jackson.databind.json.JsonMapper;

/**
 * The kinds of files that users write, and the summary that the program writes, as JSON Schema
 * (draft 2020-12). They are made of the descriptions by which the readers check.
 */
final class Schemas {
  /** What there are schemas of. */
  static final List<String> IDS = List.of("study", "model", "node", "needs", "summary");

  private static final JsonMapper JSON = IndentedJson.builder().build();

  private Schemas() {}

  /** The description of one kind of file. */
  static Kind kind(String id, CodecFamilies families) {
    return switch (id) {
      case "study" -> StudyKeys.study(families);
      case "model" -> NoiseModel.kind();
      case "node" -> NodeProfile.KEYS;
      case "needs" -> Needs.KEYS;
      case "summary" -> SummaryJson.KEYS;
      default -> throw new IllegalArgumentException("no schema of " + id);
    };
  }

  /** The schema of one kind of file, as JSON with a line break at its end. */
  static String text(String id, CodecFamilies families) {
    Map<String, Object> shared = new LinkedHashMap<>();
    Map<String, Object> root = kind(id, families).schema(shared);
    Map<String, Object> schema =
        Kind.inOrder(
            "$schema",
            "https://json-schema.org/draft/2020-12/schema",
            "title",
            "Linkworthy " + (id.equals("model") ? "noise model" : id));
    schema.putAll(root);
    schema.put("$defs", shared);
    return json(schema);
  }

  /** A value as JSON on lines of its own. */
  static String json(@Nullable Object value) {
    return JSON.writeValueAsString(value) + "\n";
  }
}
