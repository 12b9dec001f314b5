package linkworthy.bench;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import linkworthy.trial.Plan;

/**
 * The stages of a trial held against the limits of the machine (Williams, Waterman and Patterson
 * 2009, "Roofline"), on one thread, as a table in Markdown: the share of the study's time, time and
 * work of one trial, what was achieved, and which limit binds, that is, which would take the
 * longest if the stage did nothing else; with the share of it that is reached.
 */
public final class Roofline {
  private static final int ROUNDS = 40;
  private static final int PASSES = 3;

  private Roofline() {}

  /**
   * Arguments: the study file, the number of passes that are watched and the replicates (3 and 2
   * unless given).
   */
  public static void main(String[] args) {
    int passes = args.length > 1 ? Integer.parseInt(args[1]) : PASSES;
    int replicates = args.length > 2 ? Integer.parseInt(args[2]) : StudyThroughput.REPLICATES;
    Plan plan = Scenes.plan(Path.of(args[0]), replicates);
    System.out.print(table(plan, passes, ROUNDS));
  }

  /** The limits, then the table. */
  static String table(Plan plan, int passes, int rounds) {
    MachineLimits.OneThread limits = MachineLimits.OneThread.measure(rounds);
    StudyWork work = new StudyWork(plan);
    Map<String, String> stageOfPlace = new LinkedHashMap<>();
    List<String> names = new ArrayList<>();
    for (StudyWork.Stage stage : work.stages(0)) {
      names.add(stage.name());
      stage.places().forEach(place -> stageOfPlace.put(place, stage.name()));
    }
    StageTimes.Seen seen = new StageTimes(plan, names, stageOfPlace).run(passes);
    StringBuilder text = new StringBuilder(limitsText(limits));
    text.append(
        String.format(
            Locale.ROOT,
            "One pass: %d trials in %.2f s of processor time; %d samples.%n%n",
            plan.trials(),
            seen.seconds(),
            seen.all()));
    text.append("| stage | share | µs a trial | work on a picture | M multiply-adds | MB |");
    text.append(" G multiply-adds/s | GB/s | limit that binds | reached |\n");
    text.append("|---|---|---|---|---|---|---|---|---|---|\n");
    for (StudyWork.Stage stage : work.stages(seen.packets())) {
      text.append(row(stage, seen, limits, plan.trials()));
    }
    double rest = (double) seen.others() / seen.all();
    text.append(
        String.format(
            Locale.ROOT,
            "| everything else | %.1f %% | %.1f | | | | | | | |%n",
            100 * rest,
            rest * seen.seconds() / plan.trials() * 1e6));
    return text.toString();
  }

  private static String limitsText(MachineLimits.OneThread limits) {
    return String.format(
        Locale.ROOT,
        "Limits of one thread: %.1f G multiply-adds/s, %.2f G divisions/s, %.1f G steps/s,"
            + " %.0f GB/s in the first cache, %.0f GB/s in the second, %.1f GB/s in memory.%n%n",
        limits.multiplyAdds() / 1e9,
        limits.divisions() / 1e9,
        limits.steps() / 1e9,
        limits.nearBytes() / 1e9,
        limits.cacheBytes() / 1e9,
        limits.memoryBytes() / 1e9);
  }

  private static String row(
      StudyWork.Stage stage, StageTimes.Seen seen, MachineLimits.OneThread limits, long trials) {
    double seconds = seen.share(stage.name()) * seen.seconds();
    StudyWork.Work work = stage.work();
    double bytes = work.nearBytes() + work.cacheBytes() + work.memoryBytes();
    String binding = "";
    double least = 0;
    for (var limit : StudyWork.LIMITS.entrySet()) {
      double time = limit.getValue().applyAsDouble(new StudyWork.LimitedWork(work, limits));
      if (time > least) {
        least = time;
        binding = limit.getKey();
      }
    }
    return String.format(
        Locale.ROOT,
        "| %s | %.1f %% | %.1f | %s | %s | %s | %s | %s | %s | %s |%n",
        stage.name(),
        100 * seen.share(stage.name()),
        seconds / trials * 1e6,
        stage.formula(),
        figure(work.multiplyAdds() / trials / 1e6),
        figure(bytes / trials / 1e6),
        seconds > 0 ? figure(work.multiplyAdds() / seconds / 1e9) : "",
        seconds > 0 ? figure(bytes / seconds / 1e9) : "",
        binding,
        seconds > 0 && least > 0
            ? String.format(Locale.ROOT, "%.0f %%", 100 * least / seconds)
            : "");
  }

  private static String figure(double value) {
    return value == 0 ? "" : String.format(Locale.ROOT, value < 10 ? "%.2f" : "%.0f", value);
  }
}
