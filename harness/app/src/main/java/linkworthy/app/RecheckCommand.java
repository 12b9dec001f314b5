package linkworthy.app;

import java.nio.file.Path;
import java.security.SecureRandom;
import java.util.concurrent.Callable;
import linkworthy.codec.PluginFolder;
import linkworthy.input.BadInput;
import linkworthy.results.ResultsFolder;
import linkworthy.study.Study;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;

/** Holds a record against its pictures, its models, its study and repeated trials. */
@Command(
    name = "recheck",
    description = {
      "Repeat a random sample of the recorded trials and compare bit for bit.",
      "Checks pictures, noise models, study and cells as well, and says the chance that altered",
      "rows would have been missed."
    },
    mixinStandardHelpOptions = true,
    footer = {
      "",
      "Examples:",
      "  linkworthy recheck results/yard/20261201T101500Z-0123abcd",
      "  linkworthy recheck results/yard/20261201T101500Z-0123abcd --sample 1000 --seed 7"
    })
final class RecheckCommand implements Callable<Integer> {
  private static final long MAX_SEED = Study.MAX_SEED;

  private final Surroundings surroundings;

  @Parameters(paramLabel = "RESULTS", description = "Results folder.")
  @SuppressWarnings("NullAway.Init")
  private Path folder;

  @Option(
      names = "--sample",
      paramLabel = "N",
      description = "Trials to repeat, at most all there are (default: 100).")
  private @Nullable Long sample;

  @Option(
      names = "--seed",
      paramLabel = "S",
      description = "Seed of the sample (default: another one each time; it is printed).")
  private @Nullable Long seed;

  @Option(names = "--all", description = "Repeat every trial.")
  private boolean all;

  @Option(
      names = "--threads",
      paramLabel = "N",
      description = "Worker threads (default: one for each processor).")
  private int threads = Runtime.getRuntime().availableProcessors();

  @Option(names = "--quiet", description = "Show no progress.")
  private boolean quiet;

  @Mixin private final PageOption html = new PageOption();

  @Mixin private final CodecOptions codecs = new CodecOptions();

  RecheckCommand(Surroundings surroundings) {
    this.surroundings = surroundings;
  }

  @Override
  public Integer call() {
    if (all && sample != null) {
      throw new BadInput("--all is given together with --sample; accepted: one of the two");
    }
    if (sample != null && sample < 1) {
      throw new BadInput("--sample is " + sample + "; accepted: a whole number from 1");
    }
    if (seed != null && (seed < 0 || seed > MAX_SEED)) {
      throw new BadInput("--seed is " + seed + "; accepted: 0 to " + MAX_SEED);
    }
    if (threads < 1 || threads > AssessCommand.MAX_THREADS) {
      throw new BadInput(
          "--threads is " + threads + "; accepted: 1 to " + AssessCommand.MAX_THREADS);
    }
    html.check();
    ResultsFolder results = ResultsFolder.open(folder);
    try (PluginFolder plugins = codecs.open()) {
      Recheck.Extent extent =
          new Recheck.Extent(
              all ? Long.MAX_VALUE : sample == null ? Recheck.USUAL_SAMPLE : sample,
              seed == null ? new SecureRandom().nextLong(MAX_SEED + 1) : seed,
              threads,
              quiet);
      RecheckFindings findings =
          new Recheck(surroundings, results, extent)
              .run(results.study(codecs.families(plugins)), plugins.jars());
      findings.lines().forEach(surroundings.out()::println);
      html.write(surroundings, () -> findings.page(results.run().study(), folder));
      return findings.stands() ? Main.DONE : Main.NO;
    }
  }
}
