package linkworthy.app;

import java.io.PrintWriter;
import java.time.Clock;
import java.time.Duration;
import java.time.Instant;
import java.util.Locale;
import me.tongfei.progressbar.DelegatingProgressBarConsumer;
import me.tongfei.progressbar.ProgressBar;
import me.tongfei.progressbar.ProgressBarBuilder;
import me.tongfei.progressbar.ProgressBarStyle;
import org.jspecify.annotations.Nullable;

/**
 * Shows how far long work has come: a bar on a terminal; otherwise a plain line every ten seconds
 * with done and total, rate and time left.
 */
final class Progress implements AutoCloseable {
  /** Stands before a total that may turn out to be smaller. */
  static final String UP_TO = "up to ";

  private static final Duration INTERVAL = Duration.ofSeconds(10);

  private final PrintWriter out;
  private final Clock clock;
  private final String task;
  private final String upTo;
  private final long total;
  private final boolean quiet;
  private final Instant start;
  private final @Nullable ProgressBar bar;
  private Instant lastLine;
  private long done;

  /**
   * @param upTo {@link #UP_TO} if there may be fewer steps in the end, or empty
   * @param total steps there are
   * @param quiet show nothing
   */
  Progress(Surroundings surroundings, String task, String upTo, long total, boolean quiet) {
    this.out = surroundings.err();
    this.clock = surroundings.clock();
    this.task = task;
    this.upTo = upTo;
    this.total = total;
    this.quiet = quiet;
    this.start = clock.instant();
    this.lastLine = start;
    this.bar =
        quiet || !surroundings.terminal()
            ? null
            : new ProgressBarBuilder()
                .setTaskName(task)
                .setInitialMax(total)
                .setStyle(ProgressBarStyle.ASCII)
                .setUnit(" trials", 1)
                .showSpeed()
                .setConsumer(new DelegatingProgressBarConsumer(this::draw))
                .build();
  }

  /** Counts steps done. */
  void step(long steps) {
    done += steps;
    if (bar != null) {
      bar.stepBy(steps);
    } else if (!quiet && Duration.between(lastLine, clock.instant()).compareTo(INTERVAL) >= 0) {
      lastLine = clock.instant();
      out.println(line());
    }
  }

  private void draw(String line) {
    out.print("\r" + line);
    out.flush();
  }

  /** As in {@code assess: 1200 of 9600 trials, 12 %, 130.2 a second, 1 min 05 s left}. */
  private String line() {
    double seconds = Math.max(1e-3, Duration.between(start, clock.instant()).toMillis() / 1e3);
    double rate = done / seconds;
    long left = done == 0 ? 0 : Math.round((total - done) / rate);
    return String.format(
        Locale.ROOT,
        "%s: %d of %s%d trials, %d %%, %.1f a second, %s%s left",
        task,
        done,
        upTo,
        total,
        total == 0 ? 100 : 100 * done / total,
        rate,
        upTo,
        duration(left));
  }

  /** Seconds as {@code 45 s}, {@code 1 min 05 s} or {@code 2 h 03 min}. */
  static String duration(long seconds) {
    if (seconds < 60) {
      return seconds + " s";
    }
    if (seconds < 3600) {
      return String.format(Locale.ROOT, "%d min %02d s", seconds / 60, seconds % 60);
    }
    return String.format(Locale.ROOT, "%d h %02d min", seconds / 3600, seconds % 3600 / 60);
  }

  @Override
  public void close() {
    if (bar != null) {
      bar.close();
      out.println();
    }
  }
}
