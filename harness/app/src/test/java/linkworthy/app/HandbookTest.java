package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatCode;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;

import java.io.IOException;
import java.io.PrintWriter;
import java.io.Writer;
import java.nio.file.Files;
import java.nio.file.Path;
import java.time.Clock;
import java.util.ArrayList;
import java.util.List;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import java.util.stream.Stream;
import linkworthy.codec.CodecFamilies;
import linkworthy.input.BadInput;
import linkworthy.input.YamlNode;
import linkworthy.noise.NoiseLibrary;
import linkworthy.noise.NoiseModel;
import linkworthy.results.CellsCsv;
import linkworthy.results.NodesCsv;
import linkworthy.results.PredictionsCsv;
import linkworthy.results.TimingsCsv;
import linkworthy.results.TrialsCsv;
import linkworthy.study.Study;
import linkworthy.study.StudyReader;
import linkworthy.trial.Plan;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.MethodSource;
import org.junit.jupiter.params.provider.ValueSource;
import picocli.CommandLine;

/** What the README, the contributor guide and the example studies show can be done. */
class HandbookTest {
  private static final Path ROOT = Path.of("../..");
  private static final String COMMAND = "./linkworthy ";
  private static final Pattern BLOCK =
      Pattern.compile("^```(\\w+)\\n(.*?)^```", Pattern.MULTILINE | Pattern.DOTALL);

  /** A file of the example in the README: its path in backquotes, then its text in a block. */
  private static final Pattern EXAMPLE_FILE =
      Pattern.compile(
          "`\\.\\./yard/([a-z-]+\\.(?:csv|yaml))`:\\n\\n```\\w+\\n(.*?)```", Pattern.DOTALL);

  private static String text(String file) throws IOException {
    return Files.readString(ROOT.resolve(file));
  }

  static List<Path> studies() throws IOException {
    try (Stream<Path> files = Files.list(ROOT.resolve("harness/studies"))) {
      return files.filter(file -> file.toString().endsWith(".yaml")).sorted().toList();
    }
  }

  @Test
  void thereAreStudies() throws IOException {
    assertThat(studies()).hasSizeGreaterThanOrEqualTo(4);
  }

  @ParameterizedTest
  @MethodSource("studies")
  void everyExampleStudyReadsAndPlans(Path file) {
    Plan plan = Plan.of(StudyReader.read(file));
    assertThat(plan.study().name() + ".yaml").isEqualTo(String.valueOf(file.getFileName()));
    assertThat(plan.trials()).isPositive();
  }

  @ParameterizedTest
  @ValueSource(strings = {"README.md", "DEVELOPERS.md"})
  void everyCommandShownParses(String file) throws IOException {
    List<String> commands = new ArrayList<>();
    Matcher block = BLOCK.matcher(text(file));
    while (block.find()) {
      if (block.group(1).equals("sh")) {
        block.group(2).lines().filter(line -> line.startsWith(COMMAND)).forEach(commands::add);
      }
    }
    assertThat(commands).isNotEmpty();
    for (String command : commands) {
      String[] words = command.substring(COMMAND.length()).split(" +");
      assertThatCode(() -> program().parseArgs(words)).as(command).doesNotThrowAnyException();
    }
  }

  private static CommandLine program() {
    PrintWriter nowhere = new PrintWriter(Writer.nullWriter());
    Surroundings surroundings =
        new Surroundings(nowhere, nowhere, false, Clock.systemUTC(), Path.of(""));
    return new CommandLine(new Linkworthy(), new Commands(surroundings));
  }

  @Test
  void theExampleOfTheReadmePlansAsItStands(@TempDir Path yard) throws IOException {
    List<String> written = new ArrayList<>();
    Matcher example = EXAMPLE_FILE.matcher(text("README.md"));
    while (example.find()) {
      Files.writeString(yard.resolve(example.group(1)), example.group(2));
      written.add(example.group(1));
    }
    assertThat(written).containsExactly("manifest.csv", "study.yaml", "yard-radio.yaml");
    Files.createDirectories(yard.resolve("pictures"));
    Files.copy(
        ROOT.resolve("corpus-manifest/pictures/field/gravel.png"),
        yard.resolve("pictures/logs.png"));
    assertThat(Plan.of(StudyReader.read(yard.resolve("study.yaml"))).trials()).isEqualTo(84);
  }

  /** Links between the pages and the picture of the README. */
  @ParameterizedTest
  @ValueSource(
      strings = {
        "README.md",
        "DEVELOPERS.md",
        "results/README.md",
        "harness/handbook/README.md",
        "harness/handbook/decisions.md",
        "harness/handbook/methods.md",
        "harness/handbook/results.md",
        "harness/handbook/studies.md"
      })
  void everyLinkLeadsToAFile(String file) throws IOException {
    Matcher link = Pattern.compile("\\]\\(([^)#:]+)(#[^)]*)?\\)").matcher(text(file));
    Path folder = ROOT.resolve(file).resolveSibling("");
    List<String> broken = new ArrayList<>();
    while (link.find()) {
      if (!Files.exists(folder.resolve(link.group(1)))) {
        broken.add(link.group(1));
      }
    }
    assertThat(broken).isEmpty();
  }

  @Test
  void theResultsPageNamesEveryColumn() throws IOException {
    String page = text("harness/handbook/results.md");
    List<String> columns = new ArrayList<>(TrialsCsv.columns());
    columns.addAll(CellsCsv.columns());
    columns.addAll(TimingsCsv.columns());
    columns.addAll(NodesCsv.columns());
    columns.addAll(PredictionsCsv.columns());
    columns.addAll(Study.COSTS);
    assertThat(columns).allMatch(column -> page.contains("`" + column + "`"));
  }

  /**
   * Studies with an unknown key, one for each group of keys; the refusal lists all that is known.
   */
  private static List<String> misspelt() {
    String study = "name: a\nimpairments: [{noise: gaussian, snr-db: 20}]\n";
    String codecs = "codecs: [{transform: dct, keep: 8}]\n";
    List<String> all = new ArrayList<>();
    all.add(study + codecs + "qqqqqq: 1\n");
    for (String group :
        List.of(
            "pictures: {qqqqqq: 1}",
            "link: {qqqqqq: 1}",
            "node: {qqqqqq: 1}",
            "node: {profile: {qqqqqq: 1}}",
            "protect: {qqqqqq: 1}",
            "protect: {reed-solomon: {qqqqqq: 1}}")) {
      all.add(study + codecs + group + "\n");
    }
    for (String codec :
        List.of("transform: dct", "jpeg: baseline", "wavelet: cdf-9-7", "command: {}")) {
      all.add(study + "codecs: [{" + codec + ", qqqqqq: 1}]\n");
    }
    all.add(study + "codecs: [{command: {qqqqqq: 1}}]\n");
    for (NoiseModel model : NoiseLibrary.shipped()) {
      all.add("name: a\nimpairments: [{noise: " + model.id() + ", qqqqqq: 1}]\n" + codecs);
    }
    return all;
  }

  @ParameterizedTest
  @MethodSource("misspelt")
  void theStudiesPageNamesEveryKey(String study) throws IOException {
    String page = text("harness/handbook/studies.md");
    String refusal =
        assertThatExceptionOfType(BadInput.class)
            .isThrownBy(() -> StudyReader.read(YamlNode.parse("a.yaml", study), Path.of("")))
            .actual()
            .getMessage();
    assertThat(refusal).contains("unknown key 'qqqqqq'");
    List<String> keys = List.of(refusal.split("accepted: ", 2)[1].split(", "));
    assertThat(keys).isNotEmpty().allMatch(key -> page.contains("`" + key + "`"));
  }

  @Test
  void theStudiesPageKnowsEveryFamily() throws IOException {
    String page = text("harness/handbook/studies.md");
    assertThat(CodecFamilies.installed().all())
        .allMatch(family -> page.contains("\n### " + family.id() + "\n"));
  }

  @Test
  void theExampleOfTheStudiesPagePlans(@TempDir Path folder) throws IOException {
    Matcher block = BLOCK.matcher(text("harness/handbook/studies.md"));
    assertThat(block.find()).isTrue();
    Path file = Files.writeString(folder.resolve("study.yaml"), block.group(2));
    // 2 pictures, 6 codecs; clean once and 5 severities 3 times
    assertThat(Plan.of(StudyReader.read(file)).trials()).isEqualTo(2 * 6 * (1 + 5 * 3));
  }
}
