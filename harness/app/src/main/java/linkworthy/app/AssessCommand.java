package linkworthy.app;

import java.nio.file.Path;
import java.util.List;
import java.util.concurrent.Callable;
import linkworthy.codec.CodecFamilies;
import linkworthy.codec.PluginFolder;
import linkworthy.input.BadInput;
import linkworthy.input.YamlNode;
import linkworthy.results.ResultsFolder;
import linkworthy.results.ResultsWriter;
import linkworthy.study.Study;
import linkworthy.study.StudyReader;
import linkworthy.trial.Estimate;
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
      "  linkworthy assess yard.yaml --plugins my-plugins --allow-commands",
      "  linkworthy assess --resume results/yard/20261201T101500Z-0123abcd"
    })
final class AssessCommand implements Callable<Integer> {
  private static final String BUILT_IN = "first-look.yaml";
  static final int MAX_THREADS = 1024;

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
  private int threads = Runtime.getRuntime().availableProcessors();

  @Option(
      names = "--set",
      paramLabel = "KEY.PATH=VALUE",
      arity = "1",
      description = "Set a value of the study; items of lists by number from 0. Repeatable.")
  private List<String> settings = List.of();

  @Option(
      names = "--dry-run",
      description = "Check everything, count trials, estimate time, memory and disk; run nothing.")
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

  @Option(names = "--quiet", description = "Show no progress and no summary.")
  private boolean quiet;

  AssessCommand(Surroundings surroundings) {
    this.surroundings = surroundings;
  }

  @Override
  public Integer call() {
    if (threads < 1 || threads > MAX_THREADS) {
      throw new BadInput("--threads is " + threads + "; accepted: 1 to " + MAX_THREADS);
    }
    if (resume != null) {
      return resume(resume);
    }
    try (PluginFolder plugins = codecs.open()) {
      return assess(study(codecs.families(plugins)), plugins);
    }
  }

  private int resume(Path folder) {
    refuseBesideResume();
    ResultsFolder stopped = ResultsFolder.openStopped(folder);
    if (stopped.isWhole()) {
      surroundings.out().println(folder + " is complete; there is nothing to go on with");
      if (stopped.isUntidy()) {
        try (PluginFolder plugins = codecs.open();
            ResultsWriter writer = stopped.tidy()) {
          ResultsFolder results = ResultsFolder.open(folder);
          writer.writeReport(
              Reports.html(
                  results,
                  () -> Plan.unchecked(results.unchangedStudy(codecs.families(plugins))),
                  null));
        }
        surroundings.out().println("report: " + folder.resolve(ResultsFolder.REPORT));
      }
      return Main.DONE;
    }
    try (PluginFolder plugins = codecs.open()) {
      Plan plan = Plan.of(stopped.unchangedStudy(codecs.families(plugins)));
      return run(plan, plugins, folder, Assessment.Start.RESUME);
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

  private int run(Plan plan, PluginFolder plugins, Path folder, Assessment.Start start) {
    String goOn =
        "linkworthy assess --resume " + CodecOptions.quoted(folder) + codecs.asArguments();
    return new Assessment(surroundings, plan, plugins.jars(), folder, start, threads, quiet, goOn)
        .run();
  }

  private int assess(Study study, PluginFolder plugins) {
    Plan plan = Plan.of(study);
    if (dryRun) {
      printEstimate(plan);
      return Main.DONE;
    }
    Path folder =
        out != null
            ? out
            : ResultsFolder.defaultPath(
                surroundings.home().resolve("results"), study, surroundings.clock());
    Assessment.Start start = overwrite ? Assessment.Start.OVERWRITE : Assessment.Start.NEW;
    return run(plan, plugins, folder, start);
  }

  private Study study(CodecFamilies families) {
    YamlNode root =
        file == null
            ? YamlNode.parse(BUILT_IN, Resources.text("studies/" + BUILT_IN))
            : YamlNode.read(file);
    for (String setting : settings) {
      int equals = setting.indexOf('=');
      if (equals < 1) {
        throw new BadInput("--set is '" + setting + "'; accepted: key.path=value");
      }
      root = root.with(setting.substring(0, equals), setting.substring(equals + 1));
    }
    Path folder = file == null ? surroundings.home() : file.toAbsolutePath().getParent();
    return StudyReader.read(root, folder == null ? Path.of("/") : folder, families);
  }

  private void printEstimate(Plan plan) {
    Estimate estimate = Estimate.of(plan, threads);
    String upTo = plan.study().earlyStop() == null ? "" : Progress.UP_TO;
    var to = surroundings.out();
    to.println("study:    " + plan.study().name());
    to.println("pictures: " + plan.pictures().size());
    to.println("codecs:   " + plan.study().codecs().size());
    to.println("units:    " + upTo + plan.units() + " (picture, impairment, severity, replicate)");
    to.println("trials:   " + upTo + plan.trials());
    to.println(
        "time:     "
            + upTo
            + "about "
            + Progress.duration(Math.round(estimate.seconds()))
            + " on "
            + threads
            + " threads (a rough figure, for a processor of about 3 GHz)");
    to.println("memory:   about " + Estimate.mebibytes(estimate.memoryBytes()) + " MiB");
    to.println("disk:     " + upTo + "about " + Estimate.mebibytes(estimate.diskBytes()) + " MiB");
  }
}
