package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import com.networknt.schema.InputFormat;
import com.networknt.schema.Schema;
import com.networknt.schema.SchemaRegistry;
import com.networknt.schema.SpecificationVersion;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Random;
import java.util.stream.Stream;
import linkworthy.codec.CodecFamilies;
import linkworthy.codec.CodecFamily;
import linkworthy.input.BadInput;
import linkworthy.input.Kind;
import linkworthy.input.YamlNode;
import linkworthy.noise.NoiseModel;
import linkworthy.study.StudyReader;
import linkworthy.study.StudyTemplate;
import org.jspecify.annotations.Nullable;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;
import org.snakeyaml.engine.v2.api.Load;
import org.snakeyaml.engine.v2.api.LoadSettings;
import org.snakeyaml.engine.v2.schema.CoreSchema;

/** The published schemas, held against the files they describe and against the readers. */
class SchemaTest {
  private static final Path ROOT = Path.of("../..");
  private static final SchemaRegistry REGISTRY =
      SchemaRegistry.withDefaultDialect(SpecificationVersion.DRAFT_2020_12);

  private static Schema schema(String id) {
    return REGISTRY.getSchema(Schemas.text(id, CodecFamilies.installed()));
  }

  /** A YAML document as Java sees it, by the rules of YAML 1.2 that the program's reader has. */
  private static Object tree(String yaml) {
    LoadSettings settings = LoadSettings.builder().setSchema(new CoreSchema()).build();
    return new Load(settings).loadFromString(yaml);
  }

  private static List<String> complaints(Schema schema, @Nullable Object tree) {
    return schema.validate(Schemas.json(tree), InputFormat.JSON).stream()
        .map(String::valueOf)
        .toList();
  }

  @ParameterizedTest
  @CsvSource({
    "study, harness/studies/study.schema.json",
    "needs, harness/studies/needs.schema.json",
    "model, noise-models/library/model.schema.json",
    "node, noise-models/library/nodes/node.schema.json",
  })
  void thePublishedFilesAreThoseThatTheProgramMakes(String id, String file) throws IOException {
    Outcome outcome = Program.run(Path.of(""), "schema", id);
    assertThat(outcome.err()).isEmpty();
    assertThat(withoutTestMeasure(outcome.out())).isEqualTo(Files.readString(ROOT.resolve(file)));
  }

  /** The tests have a measure of their own on the class path, which no published file knows. */
  private static String withoutTestMeasure(String text) {
    return text.replaceAll("\\s*\"mean-absolute-error\",", "")
        .replace("`mean-absolute-error`, ", "")
        .replace("mean-absolute-error, ", "");
  }

  @Test
  void thePageOfKeysIsTheOneThatTheProgramPrints() throws IOException {
    assertThat(withoutTestMeasure(Program.run(Path.of(""), "schema", "keys").out()))
        .isEqualTo(Files.readString(ROOT.resolve("harness/handbook/keys.md")));
  }

  @ParameterizedTest
  @ValueSource(strings = {"study", "model", "node", "needs", "summary"})
  void everySchemaIsOneOfItsDraft(String id) {
    Schema draft =
        REGISTRY.getSchema(
            com.networknt.schema.SchemaLocation.of("https://json-schema.org/draft/2020-12/schema"));
    assertThat(draft.validate(Schemas.text(id, CodecFamilies.installed()), InputFormat.JSON))
        .isEmpty();
  }

  @Test
  void anUnknownSchemaIsRefusedWithTheNearest() {
    Outcome outcome = Program.run(Path.of(""), "schema", "stdy");
    assertThat(outcome.code()).isEqualTo(Main.BAD_INPUT);
    assertThat(outcome.errors()).singleElement().asString().contains("did you mean 'study'?");
  }

  private static List<Path> files(String folder) throws IOException {
    try (Stream<Path> files = Files.list(ROOT.resolve(folder))) {
      return files.filter(file -> file.toString().endsWith(".yaml")).sorted().toList();
    }
  }

  @Test
  void everyFileOfTheProjectFitsItsSchema() throws IOException {
    Map<String, List<Path>> all = new LinkedHashMap<>();
    all.put("study", new ArrayList<>(files("harness/studies")));
    all.put("model", files("noise-models/library"));
    all.put("node", files("noise-models/library/nodes"));
    all.get("study").add(ROOT.resolve("results/baselines/baseline/study.yaml"));
    for (Map.Entry<String, List<Path>> kind : all.entrySet()) {
      assertThat(kind.getValue()).as(kind.getKey()).hasSizeGreaterThan(1);
      for (Path file : kind.getValue()) {
        assertThat(complaints(schema(kind.getKey()), tree(Files.readString(file))))
            .as(file.toString())
            .isEmpty();
      }
    }
    assertThat(complaints(schema("study"), tree(StudyTemplate.text()))).isEmpty();
  }

  @Test
  void everyFamilyDescribesItsKeys() {
    assertThat(CodecFamilies.installed().all())
        .extracting(CodecFamily::keys)
        .allMatch(k -> k.isPresent());
  }

  private static List<Object> studies() throws IOException {
    List<Object> trees = new ArrayList<>();
    for (Path file : files("harness/studies")) {
      trees.add(tree(Files.readString(file)));
    }
    trees.add(tree(StudyTemplate.text()));
    String page = Files.readString(ROOT.resolve("harness/handbook/choosing-a-codec.md"));
    int at = page.indexOf("```yaml\nname: every-group");
    trees.add(tree(page.substring(at + 8, page.indexOf("```", at + 8))));
    return trees;
  }

  /** 3000 studies and 1000 models, damaged in one to three places; case i is drawn with seed i. */
  @Test
  void schemaAndReaderRefuseTheSame() throws IOException {
    List<Object> models = new ArrayList<>();
    for (Path file : files("noise-models/library")) {
      models.add(tree(Files.readString(file)));
    }
    int refused = compare("study", studies(), 3000);
    assertThat(refused).isBetween(1000, 2900);
    assertThat(compare("model", models, 1000)).isBetween(300, 990);
  }

  private static int compare(String id, List<Object> bases, int cases) {
    Schema schema = schema(id);
    Kind kind = Schemas.kind(id, CodecFamilies.installed());
    int refused = 0;
    for (int seed = 0; seed < cases; seed++) {
      Random random = new Random(seed);
      @Nullable Object damaged = bases.get(seed % bases.size());
      for (int hit = 0; hit <= random.nextInt(3); hit++) {
        damaged = damaged(damaged, random);
      }
      String json = Schemas.json(damaged);
      List<String> complaints = complaints(schema, damaged);
      String complaint = complaint(kind, json);
      assertThat(complaints.isEmpty())
          .as("seed %s: %s\nschema: %s\nreader: %s", seed, json, complaints, complaint)
          .isEqualTo(complaint.isEmpty());
      if (!complaint.isEmpty()) {
        refused++;
        assertThat(read(id, json)).as("seed %s: %s", seed, json).isTrue();
      }
    }
    return refused;
  }

  /** What the description says to a document; nothing if it fits. */
  private static String complaint(Kind kind, String json) {
    try {
      kind.check(YamlNode.parse("a.yaml", json));
      return "";
    } catch (BadInput e) {
      return String.valueOf(e.getMessage());
    }
  }

  /** Whether the reader of the files refuses the document. */
  private static boolean read(String id, String json) {
    YamlNode root = YamlNode.parse("a.yaml", json);
    try {
      Object unused =
          id.equals("study")
              ? StudyReader.read(root, Path.of(""), CodecFamilies.installed().allowingCommands())
              : NoiseModel.parse(root);
      return false;
    } catch (BadInput e) {
      return true;
    }
  }

  /** The same document with one value, somewhere in it, replaced, removed, added or renamed. */
  private static @Nullable Object damaged(@Nullable Object value, Random random) {
    if (value instanceof Map<?, ?> map && !map.isEmpty() && random.nextInt(8) != 0) {
      Map<Object, @Nullable Object> copy = new LinkedHashMap<>(map);
      List<Object> keys = new ArrayList<>(copy.keySet());
      Object key = keys.get(random.nextInt(keys.size()));
      switch (random.nextInt(10)) {
        case 0 -> copy.remove(key);
        case 1 -> copy.put(key + "s", copy.remove(key));
        case 2 -> copy.put(KEYS.get(random.nextInt(KEYS.size())), anything(random));
        default -> copy.put(key, damaged(copy.get(key), random));
      }
      return copy;
    }
    if (value instanceof List<?> list && !list.isEmpty() && random.nextInt(8) != 0) {
      List<@Nullable Object> copy = new ArrayList<>(list);
      int at = random.nextInt(copy.size());
      copy.set(at, damaged(copy.get(at), random));
      return copy;
    }
    return anything(random);
  }

  private static final List<String> KEYS =
      List.of("label", "step", "keep", "snr-db", "variance", "protect", "seed", "only", "qqq");

  private static @Nullable Object anything(Random random) {
    return switch (random.nextInt(16)) {
      case 0 -> null;
      case 1 -> true;
      case 2 -> List.of();
      case 3 -> Map.of();
      case 4 -> List.of(3, 4);
      case 5 -> Map.of("n", 12, "k", 8);
      case 6 -> List.of("rest", "rest");
      case 7 -> -1;
      case 8 -> 0;
      case 9 -> 1;
      case 10 -> 100;
      case 11 -> 70_000;
      case 12 -> 0.5;
      case 13 -> -2.5;
      case 14 -> "none";
      default ->
          List.of("pca", "x", "a b", "all", "8", "gaussian", "../y.yaml").get(random.nextInt(7));
    };
  }
}
