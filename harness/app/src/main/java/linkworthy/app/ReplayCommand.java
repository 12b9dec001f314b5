package linkworthy.app;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.Callable;
import java.util.regex.Pattern;
import linkworthy.codec.PluginFolder;
import linkworthy.input.BadInput;
import linkworthy.results.ResultsFolder;
import linkworthy.results.TrialsCsv;
import linkworthy.study.CodecChoice;
import linkworthy.trial.Plan;
import linkworthy.trial.Repetition;
import linkworthy.trial.Trial;
import linkworthy.trial.WorkUnit;
import org.jspecify.annotations.Nullable;
import picocli.CommandLine.Command;
import picocli.CommandLine.Mixin;
import picocli.CommandLine.Option;
import picocli.CommandLine.Parameters;

/** Repeats one recorded trial alone. */
@Command(
    name = "replay",
    description = {
      "Repeat one recorded trial, and say whether its figures are the recorded ones.",
      "They must agree bit for bit. Writes clean.png, noisy.png, decoded.png, error.png and figures.json."
    },
    mixinStandardHelpOptions = true,
    footer = {
      "",
      "Example:",
      "  linkworthy replay results/yard/20261201T101500Z-0123abcd --trial 0123456789abcdef"
    })
final class ReplayCommand implements Callable<Integer> {
  private static final Pattern ID = Pattern.compile("[0-9a-f]{16}");

  private final Surroundings surroundings;

  @Parameters(paramLabel = "RESULTS", description = "Results folder.")
  @SuppressWarnings("NullAway.Init")
  private Path folder;

  @Option(
      names = "--trial",
      paramLabel = "ID",
      required = true,
      description = "Id of the trial: the first column of trials.csv.")
  private String id = "";

  @Option(
      names = "--out",
      paramLabel = "DIR",
      description = "Where to write (default: replay/ID in the results folder).")
  private @Nullable Path out;

  @Mixin private final CodecOptions codecs = new CodecOptions();

  ReplayCommand(Surroundings surroundings) {
    this.surroundings = surroundings;
  }

  @Override
  public Integer call() {
    if (!ID.matcher(id).matches()) {
      throw new BadInput("--trial is '" + id + "'; accepted: 16 hexadecimal digits in lower case");
    }
    ResultsFolder results = ResultsFolder.open(folder);
    Trial recorded = find(results);
    try (PluginFolder plugins = codecs.open()) {
      Plan plan = Plan.unchecked(results.unchangedStudy(codecs.families(plugins)));
      return replay(plan, recorded);
    }
  }

  private Trial find(ResultsFolder results) {
    List<Trial> found = new ArrayList<>();
    long trials =
        results.rows(
            trial -> {
              if (trial.trial().equals(id)) {
                found.add(trial);
              }
            });
    if (found.size() != 1) {
      throw new BadInput(
          "--trial "
              + id
              + " is "
              + (found.isEmpty() ? "none of the " : found.size() + " of the ")
              + trials
              + " trials of "
              + folder
              + "; accepted: an id that its trials.csv has once");
    }
    return found.get(0);
  }

  private int replay(Plan plan, Trial recorded) {
    WorkUnit unit = plan.unitOf(recorded).orElseThrow(() -> notOfTheStudy(recorded));
    CodecChoice codec =
        plan.study().codecs().stream()
            .filter(choice -> choice.label().equals(recorded.codec()))
            .findFirst()
            .orElseThrow(() -> notOfTheStudy(recorded));
    String expected = plan.trialId(unit, codec);
    if (!expected.equals(id)) {
      throw new BadInput(
          "the trial of "
              + Replay.key(recorded)
              + " has the id "
              + expected
              + " now; accepted: "
              + id
              + " (was its row, the picture or the manifest changed?)");
    }
    Repetition.Scene scene = new Repetition(plan, 1).scene(unit, codec);
    Path target = out == null ? folder.resolve("replay").resolve(id) : out;
    new Replay(plan.study(), recorded, scene).write(target);
    List<TrialsCsv.Difference> differences = TrialsCsv.differences(recorded, scene.trial());
    surroundings.out().println("trial " + id + ": " + Replay.key(recorded));
    differences.forEach(difference -> surroundings.out().println("differs: " + difference));
    surroundings
        .out()
        .println(
            differences.isEmpty()
                ? "every figure equals the recorded one, bit for bit"
                : "the repeated trial is not the recorded one");
    surroundings.out().println("written: " + target);
    return differences.isEmpty() ? Main.DONE : Main.NO;
  }

  private BadInput notOfTheStudy(Trial recorded) {
    return new BadInput(
        "the trial " + id + " is of " + Replay.key(recorded) + ", which the study does not have");
  }
}
