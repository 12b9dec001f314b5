package linkworthy.app;

import java.lang.management.ManagementFactory;
import java.util.List;
import java.util.Locale;
import linkworthy.codec.PluginFolder;
import linkworthy.study.EarlyStop;
import linkworthy.trial.Estimate;
import linkworthy.trial.Plan;
import linkworthy.trial.Rehearsal;

/**
 * Says what a plan will take: counts its trials, runs a few of its units on this machine, and makes
 * a {@link SampleRecord} of them. Where replicates may end early, what it takes at least and at
 * most.
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
    double before = ManagementFactory.getRuntimeMXBean().getUptime() / 1e3;
    long start = System.nanoTime();
    Rehearsal rehearsal = Rehearsal.of(plan, threads, SECONDS);
    SampleRecord sample = SampleRecord.of(surroundings, plan, plugins, rehearsal);
    double measured = (System.nanoTime() - start) / 1e9;
    EarlyStop rule = plan.study().earlyStop();
    int most = plan.study().replicates();
    int least = rule == null ? most : rule.atLeast();
    String upTo = rule == null ? "" : Progress.UP_TO;
    var to = surroundings.out();
    to.println("study:    " + plan.study().name());
    to.println("pictures: " + plan.pictures().size());
    to.println("codecs:   " + plan.study().codecs().size());
    to.println("units:    " + upTo + plan.units() + " (picture, impairment, severity, replicate)");
    to.println("trials:   " + upTo + plan.trials());
    to.println(
        "time:     "
            + range(
                duration(before + sample.seconds(least)), duration(before + sample.seconds(most)))
            + " on "
            + threads
            + " threads");
    to.println(
        "memory:   about " + Estimate.mebibytes(Estimate.of(plan, threads).memoryBytes()) + " MiB");
    to.println(
        "disk:     "
            + range(mebibytes(sample.bytes(least)), mebibytes(sample.bytes(most)))
            + " MiB"
            + (rehearsal.isWhole() ? "" : ", and more pictures in the report"));
    to.println(
        "measured: "
            + rehearsal.units()
            + " units, run "
            + rehearsal.runs()
            + " times on this machine in "
            + String.format(Locale.ROOT, "%.1f", measured)
            + " s; nothing of it is kept");
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
