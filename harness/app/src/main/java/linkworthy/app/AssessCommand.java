package linkworthy.app;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Objects;
import java.util.concurrent.Callable;
import linkworthy.codec.CodecFamilies;
import linkworthy.codec.PluginFolder;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;
import linkworthy.input.YamlNode;
import linkworthy.results.ResultsFolder;
import linkworthy.results.ResultsWriter;
import linkworthy.study.Study;
import linkworthy.study.StudyReader;
import linkworthy.trial.Plan;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;

/** Runs a study. */
@Command(
    name = "assess",
    description = {"Run a study: write a results folder with a report, and print the summary."},
    mixinStandardHelpOptions = true,
    footer = {
      "",
      "Examples:",
      "  linkworthy assess",
      "  linkworthy assess yard.yaml --set replicates=20 --set codecs.0.step=4",
      "  linkworthy assess yard.yaml --dry-run",
      "  linkworthy assess yard.yaml --format json",
      "  linkworthy assess yard.yaml --plugins my-plugins --allow-commands",
      "  linkworthy assess yard.yaml --on spark://HOST:PORT",
      "  linkworthy assess --resume results/yard/20261201T101500Z-0123abcd"
    })
final class AssessCommand implements Callable<Integer> {
  private static final String BUILT_IN = "first-look.yaml";
  static final int MAX_THREADS = 1024;
  private static final String TEXT = "text";
  private static final String JSON = "json";

  private final Surroundings surroundings;

  @Parameters(
      arity = "0..1",
      paramLabel = "STUDY",
      description = "Study file (default: the built-in study first-look, on the shipped pictures).")
  private @Nullable Path file;

  @Option(
      names = "--out",
      paramLabel = "DIR",
      description = "Results folder, new or empty (default: results/<study>/<time>-<hash>).")
  private @Nullable Path out;

  @Option(
      names = "--threads",
      paramLabel = "N",
      description = "Worker threads (default: one for each processor).")
  private @Nullable Integer threads;

  @Option(
      names = "--set",
      paramLabel = "KEY.PATH=VALUE",
      arity = "1",
      description = "Set a value of the study; items of lists by number from 0. Repeatable.")
  private List<String> settings = List.of();

  @Option(
      names = "--dry-run",
      description = {
        "Check everything, count trials, and estimate time, memory and disk from a few trials that",
        "are run for it; keep nothing."
      })
  private boolean dryRun;

  @Option(
      names = "--resume",
      paramLabel = "DIR",
      description = {
        "Complete the results folder of a run that was stopped, to the same bytes. The study",
        "is the folder's own; plugins and leave to run programs are to be given again."
      })
  private @Nullable Path resume;

  @Option(names = "--overwrite", description = "Replace the record in the results folder.")
  private boolean overwrite;

  @Mixin private final CodecOptions codecs = new CodecOptions();

  @Mixin private final ClusterOptions cluster = new ClusterOptions();

  @Option(
      names = "--format",
      paramLabel = "FORMAT",
      completionCandidates = Formats.class,
      description =
          "What is printed at the end: text, or json: one document for scripts and nothing else.")
  private String format = TEXT;

  @Option(names = "--quiet", description = "Show no progress and no summary in words.")
  private boolean quiet;

  AssessCommand(Surroundings surroundings) {
    this.surroundings = surroundings;
  }

  @Override
  public Integer call() {
    int number = threads();
    if (number < 1 || number > MAX_THREADS) {
      throw new BadInput("--threads is " + number + "; accepted: 1 to " + MAX_THREADS);
    }
    String master = cluster.master();
    if (master != null && threads != null) {
      throw new BadInput(
          "--threads is given with --on; accepted: one of the two, as the cluster says how many cores"
              + " there are");
    }
    if (!new Formats().contains(format)) {
      throw new BadInput("--format is '" + format + "'; accepted: text, json");
    }
    if (dryRun && format.equals(JSON)) {
      throw new BadInput(
          "--format json is given together with --dry-run; accepted: one of the two");
    }
    if (resume != null) {
      return resume(resume);
    }
    try (PluginFolder plugins = codecs.open()) {
      return assess(study(codecs.families(plugins)), plugins);
    }
  }

  /** What {@code --format} accepts. */
  static final class Formats extends ArrayList<String> {
    private static final long serialVersionUID = 1;

    Formats() {
      super(List.of(TEXT, JSON));
    }
  }

  private int threads() {
    return threads == null ? Runtime.getRuntime().availableProcessors() : threads;
  }

  private int resume(Path folder) {
    refuseBesideResume();
    ResultsFolder stopped = ResultsFolder.openStopped(folder);
    if (stopped.isWhole()) {
      boolean asJson = format.equals(JSON);
      var words = asJson ? surroundings.err() : surroundings.out();
      words.println(folder + " is complete; there is nothing to go on with");
      if (stopped.isUntidy()) {
        try (PluginFolder plugins = codecs.open();
            ResultsWriter writer = stopped.tidy()) {
          ResultsFolder results = ResultsFolder.open(folder);
          writer.writeReport(Reports.html(results, codecs, plugins, null));
        }
        words.println("report: " + folder.resolve(ResultsFolder.REPORT));
      }
      if (asJson) {
        Ending.JSON.print(ResultsFolder.open(folder), surroundings.out());
      }
      return Main.DONE;
    }
    String master = cluster.master();
    if (master != null) {
      return runOn(master, folder, List.of("--resume", folder.toAbsolutePath().toString()));
    }
    try (PluginFolder plugins = codecs.open()) {
      Plan plan = Plan.of(stopped.unchangedStudy(codecs.families(plugins)));
      return run(plan, plugins, folder, ResultsFolder.Start.RESUME);
    }
  }

  /** The study of a stopped run is the one in its folder, and the run goes on there. */
  private void refuseBesideResume() {
    String other =
        file != null
            ? "a study"
            : !settings.isEmpty()
                ? "--set"
                : out != null ? "--out" : overwrite ? "--overwrite" : dryRun ? "--dry-run" : "";
    if (!other.isEmpty()) {
      throw new BadInput(
          "--resume is given together with "
              + other
              + "; accepted: --resume alone, as study and settings are those in the folder");
    }
  }

  private String goOn(Path folder) {
    return "linkworthy assess --resume "
        + CodecOptions.quoted(folder)
        + codecs.asArguments()
        + cluster.asArguments();
  }

  private Ending ending() {
    return format.equals(JSON) ? Ending.JSON : quiet ? Ending.NOTHING : Ending.TEXT;
  }

  private int run(Plan plan, PluginFolder plugins, Path folder, ResultsFolder.Start start) {
    return new Assessment(
            surroundings,
            plan,
            plugins.jars(),
            folder,
            start,
            threads(),
            quiet,
            ending(),
            goOn(folder))
        .run();
  }

  /**
   * @param what tells the driver which study and which folder
   */
  private int runOn(String master, Path folder, List<String> what) {
    List<String> arguments = new ArrayList<>(what);
    arguments.addAll(codecs.forDriver());
    arguments.addAll(cluster.forDriver());
    if (quiet) {
      arguments.add("--quiet");
    }
    return new ClusterAssessment(surroundings, master, codecs)
        .run(folder, arguments, ending(), goOn(folder));
  }

  /** The driver reads the study again, and checks the pictures. */
  private int runOn(String master, Path folder) {
    try {
      Path own = file == null ? Files.createTempFile("first-look", ".yaml") : null;
      try {
        if (own != null) {
          Files.writeString(own, Resources.text("studies/" + BUILT_IN));
        }
        List<String> what = new ArrayList<>();
        what.add(String.valueOf(own != null ? own : Objects.requireNonNull(file).toAbsolutePath()));
        what.addAll(List.of("--out", folder.toAbsolutePath().toString()));
        settings.forEach(setting -> what.addAll(List.of("--set", setting)));
        if (overwrite) {
          what.add("--overwrite");
        }
        return runOn(master, folder, what);
      } finally {
        if (own != null) {
          Files.delete(own);
        }
      }
    } catch (IOException e) {
      throw Unavailable.cannot("write the built-in study for the driver", e);
    }
  }

  private int assess(Study study, PluginFolder plugins) {
    if (!quiet) {
      study.warnings().forEach(line -> surroundings.err().println("linkworthy: " + line));
    }
    String master = cluster.master();
    if (master != null && !dryRun) {
      return runOn(master, folder(study));
    }
    Plan plan = Plan.of(study);
    if (dryRun) {
      new DryRun(surroundings, plan, plugins.jars(), threads()).print();
      return Main.DONE;
    }
    ResultsFolder.Start start = overwrite ? ResultsFolder.Start.OVERWRITE : ResultsFolder.Start.NEW;
    return run(plan, plugins, folder(study), start);
  }

  private Path folder(Study study) {
    return out != null
        ? out
        : ResultsFolder.defaultPath(
            surroundings.home().resolve("results"), study, surroundings.clock());
  }

  private Study study(CodecFamilies families) {
    YamlNode root =
        file == null
            ? YamlNode.parse(BUILT_IN, Resources.text("studies/" + BUILT_IN))
            : YamlNode.read(file);
    Path folder = file == null ? surroundings.home() : file.toAbsolutePath().getParent();
    return StudyReader.read(root.with(settings), folder == null ? Path.of("/") : folder, families);
  }
}
