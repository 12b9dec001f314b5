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
import org.junit.jupiter.api.DynamicTest;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.TestFactory;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.MethodSource;
import org.junit.jupiter.params.provider.ValueSource;
import picocli.CommandLine;

/**
 * What the README, the contributor guide, the handbook and the example studies show can be done.
 */
class HandbookTest {
  private static final Path ROOT = Path.of("../..");
  private static final String HANDBOOK = "harness/handbook/";
  private static final String COMMAND = "./linkworthy ";
  private static final Pattern BLOCK =
      Pattern.compile("^```(\\w+)\\n(.*?)^```", Pattern.MULTILINE | Pattern.DOTALL);

  /**
   * A file of an example: its path in backquotes, then a colon or a full stop, its text in a block.
   */
  private static final Pattern EXAMPLE_FILE =
      Pattern.compile(
          "`(yard/[a-z-]+\\.(?:csv|yaml))`[^`]*?:\\n\\n```\\w+\\n(.*?)```", Pattern.DOTALL);

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
        block
            .group(2)
            .lines()
            .filter(line -> line.startsWith(COMMAND))
            .map(line -> line.replaceFirst(" [>#].*", ""))
            .forEach(commands::add);
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

  /** Links between the pages and the picture of the README. */
  static List<String> pages() throws IOException {
    List<String> pages =
        new ArrayList<>(List.of("README.md", "DEVELOPERS.md", "results/README.md"));
    try (Stream<Path> files = Files.list(ROOT.resolve(HANDBOOK))) {
      files
          .map(file -> HANDBOOK + file.getFileName())
          .filter(file -> file.endsWith(".md"))
          .sorted()
          .forEach(pages::add);
    }
    return pages;
  }

  @ParameterizedTest
  @MethodSource("pages")
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

  /** The pages in the order of the start page, which links all of them. */
  private static List<String> handbook() throws IOException {
    List<String> pages = new ArrayList<>();
    Matcher link = Pattern.compile("\\(([a-z-]+\\.md)\\)").matcher(text(HANDBOOK + "README.md"));
    while (link.find()) {
      pages.add(HANDBOOK + link.group(1));
    }
    assertThat(pages)
        .hasSizeGreaterThan(8)
        .containsAll(
            pages().stream()
                .filter(p -> p.startsWith(HANDBOOK) && !p.endsWith("README.md"))
                .toList());
    return pages;
  }

  /**
   * Every file that the handbook shows is written, and every command that it shows is run, page by
   * page in one folder. Only what builds the project's own jars is left to another test, and what
   * needs a cluster, which stands in blocks of plain text, to the tests of the cluster.
   */
  @TestFactory
  List<DynamicTest> everyPageDoesWhatItShows(@TempDir Path yard) throws IOException {
    Files.createDirectories(yard.resolve("yard"));
    Files.createDirectories(yard.resolve("my-plugins"));
    Path unused = PluginJars.makeExample(yard.resolve("my-plugins"));
    List<DynamicTest> tests = new ArrayList<>();
    int commands = 0;
    for (String page : handbook()) {
      Matcher example = EXAMPLE_FILE.matcher(text(page));
      int files = 0;
      while (example.find()) {
        Files.writeString(yard.resolve(example.group(1)), example.group(2));
        files++;
      }
      Matcher block = BLOCK.matcher(text(page));
      int yaml = 0;
      while (block.find()) {
        yaml += block.group(1).equals("yaml") || block.group(1).equals("csv") ? 1 : 0;
        if (block.group(1).equals("sh")) {
          for (String line : block.group(2).lines().toList()) {
            commands++;
            tests.add(DynamicTest.dynamicTest(page + ": " + line, () -> run(yard, line)));
          }
        }
      }
      assertThat(files).as("files named on %s", page).isEqualTo(yaml);
    }
    assertThat(commands).isGreaterThan(30);
    return tests;
  }

  /** Runs a command of a page with its files in a folder. */
  private static void run(Path folder, String line) throws IOException {
    List<String> words = List.of(line.replaceFirst(" +#.*", "").split(" +"));
    if (words.get(0).equals("mkdir")) {
      Files.createDirectories(folder.resolve(words.get(2)));
    } else if (words.get(0).equals("cp")) {
      Path to = folder.resolve(words.get(2));
      if (!words.get(1).contains("/target/")) {
        Files.copy(ROOT.resolve(words.get(1)), to);
      }
      assertThat(to.resolveSibling("")).isDirectory();
    } else if (words.get(0).equals("mvn")) {
      assertThat(words).contains("-q");
    } else {
      assertThat(words.get(0)).isEqualTo("./linkworthy");
      Outcome outcome =
          Program.run(
              folder,
              words.stream().skip(1).map(word -> placed(folder, word)).toArray(String[]::new));
      assertThat(outcome.code())
          .as("%s\n%s%s", line, outcome.out(), outcome.err())
          .isEqualTo(line.contains("# exit code 1") ? Main.NO : Main.DONE);
    }
  }

  /** A word of a command; what is a path leads into the folder, or to what the project ships. */
  private static String placed(Path folder, String word) {
    if (!word.matches("(yard|results|harness|noise-models|my-plugins)(/.*)?")) {
      return word;
    }
    return (word.startsWith("harness") ? ROOT : folder).resolve(word).toString();
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
    String page = text("harness/handbook/keys.md");
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
    String page = text("harness/handbook/keys.md");
    assertThat(CodecFamilies.installed().all())
        .allMatch(family -> page.contains("\n### " + family.id() + "\n"));
  }
}
