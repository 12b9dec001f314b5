package linkworthy.app;

import java.lang.management.ManagementFactory;
import java.util.List;
import java.util.Locale;
import linkworthy.codec.PluginFolder;
import linkworthy.study.CodecChoice;
import linkworthy.study.EarlyStop;
import linkworthy.trial.Estimate;
import linkworthy.trial.Plan;
import linkworthy.trial.Rehearsal;

/**
 * Says what a plan will take: counts its trials, runs a few of its units on this machine, and makes
 * a {@link SampleRecord} of them. Where replicates may end early, what it takes at least and at
 * most. Programs of the user's are not started: another codec of the study stands in for each that
 * runs one, so that the rows have their size.
 */
final class DryRun {
  /** How long units are run, in seconds; longer where they are slow. */
  private static final double SECONDS = 3;

  private static final double MEBI = 1 << 20;

  private final Surroundings surroundings;
  private final Plan plan;
  private final List<PluginFolder.Jar> plugins;
  private final int threads;

  DryRun(Surroundings surroundings, Plan plan, List<PluginFolder.Jar> plugins, int threads) {
    this.surroundings = surroundings;
    this.plan = plan;
    this.plugins = plugins;
    this.threads = threads;
  }

  /** Measures and prints. The time counts from the start of the program. */
  void print() {
    EarlyStop rule = plan.study().earlyStop();
    String upTo = rule == null ? "" : Progress.UP_TO;
    line("study:    " + plan.study().name());
    line("pictures: " + plan.pictures().size());
    line("codecs:   " + plan.study().codecs().size());
    line("units:    " + upTo + plan.units() + " (picture, impairment, severity, replicate)");
    line("trials:   " + upTo + plan.trials());
    line(
        "memory:   about " + Estimate.mebibytes(Estimate.of(plan, threads).memoryBytes()) + " MiB");
    List<CodecChoice> measurable = plan.study().codecs().stream().filter(DryRun::isOurs).toList();
    if (measurable.isEmpty()) {
      line("time:     not known, as all codecs are programs, which a dry run does not start");
    } else {
      measure(measurable.get(0));
    }
  }

  private void measure(CodecChoice standIn) {
    double before = ManagementFactory.getRuntimeMXBean().getUptime() / 1e3;
    long start = System.nanoTime();
    List<CodecChoice> codecs =
        plan.study().codecs().stream()
            .map(c -> isOurs(c) ? c : new CodecChoice(c.label(), standIn.codec(), c.protection()))
            .toList();
    boolean ours = plan.study().codecs().stream().allMatch(DryRun::isOurs);
    Plan measured = ours ? plan : Plan.of(plan.study().withCodecs(codecs));
    Rehearsal rehearsal = Rehearsal.of(measured, threads, SECONDS);
    SampleRecord sample = SampleRecord.of(surroundings, measured, plugins, rehearsal);
    double seconds = (System.nanoTime() - start) / 1e9;
    EarlyStop rule = plan.study().earlyStop();
    int most = plan.study().replicates();
    int least = rule == null ? most : rule.atLeast();
    line(
        "time:     "
            + range(
                duration(before + sample.seconds(least)), duration(before + sample.seconds(most)))
            + " on "
            + threads
            + " threads"
            + (ours ? "" : ", and that of the programs, which a dry run does not start"));
    line(
        "disk:     "
            + range(mebibytes(sample.bytes(least)), mebibytes(sample.bytes(most)))
            + " MiB"
            + (rehearsal.isWhole() ? "" : ", and more pictures in the report"));
    line(
        "measured: "
            + rehearsal.units()
            + " units, run "
            + rehearsal.runs()
            + " times on this machine in "
            + String.format(Locale.ROOT, "%.1f", seconds)
            + " s; nothing of it is kept");
  }

  private static boolean isOurs(CodecChoice choice) {
    return choice.codec().programs().isEmpty();
  }

  private void line(String text) {
    surroundings.out().println(text);
  }

  private static String range(String least, String most) {
    return least.equals(most)
        ? "about " + most
        : "at least about " + least + ", at most about " + most;
  }

  private static String duration(double seconds) {
    return Progress.duration(Math.max(1, Math.round(seconds)));
  }

  private static String mebibytes(double bytes) {
    double mebibytes = bytes / MEBI;
    return mebibytes < 100
        ? String.format(Locale.ROOT, "%.2f", mebibytes)
        : Long.toString(Math.round(mebibytes));
  }
}
