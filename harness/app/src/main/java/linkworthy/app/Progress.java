package linkworthy.app;

import java.io.PrintWriter;
import java.time.Clock;
import java.time.Duration;
import java.time.Instant;
import java.util.ArrayDeque;
import java.util.Deque;
import java.util.Locale;
import me.tongfei.progressbar.DelegatingProgressBarConsumer;
import me.tongfei.progressbar.ProgressBar;
import me.tongfei.progressbar.ProgressBarBuilder;
import me.tongfei.progressbar.ProgressBarStyle;
import org.jspecify.annotations.Nullable;

/**
 * Shows how far long work has come: a bar on a terminal; otherwise a plain line with done and
 * total, rate and time left, every ten seconds and after ten minutes every minute. The rate is that
 * of the last ten minutes, as trials of one picture may take longer than those of another.
 */
final class Progress implements AutoCloseable {
  /** Stands before a total that may turn out to be smaller. */
  static final String UP_TO = "up to ";

  private static final Duration INTERVAL = Duration.ofSeconds(10);
  private static final Duration LATER = Duration.ofMinutes(1);
  private static final Duration WINDOW = Duration.ofMinutes(10);

  private final PrintWriter out;
  private final Clock clock;
  private final String task;
  private final String upTo;
  private final boolean quiet;
  private final Instant start;
  private final @Nullable ProgressBar bar;
  private final Deque<Mark> marks = new ArrayDeque<>();
  private Instant lastLine;
  private long total;
  private long done;

  /** How much was done at a time. */
  private record Mark(Instant time, long done) {}

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
    marks.add(new Mark(start, 0));
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
    } else if (!quiet) {
      Instant now = clock.instant();
      Duration interval = Duration.between(start, now).compareTo(WINDOW) > 0 ? LATER : INTERVAL;
      if (Duration.between(lastLine, now).compareTo(interval) >= 0) {
        lastLine = now;
        out.println(line(now));
        out.flush();
      }
    }
  }

  /** Says that so many steps will not come. */
  void leaveOut(long steps) {
    total -= steps;
    if (bar != null) {
      bar.maxHint(total);
    }
  }

  private void draw(String line) {
    out.print("\r" + line);
    out.flush();
  }

  /** As in {@code assess: 1200 of 9600 trials, 12 %, 130.2 a second, 1 min 05 s left}. */
  private String line(Instant now) {
    double rate = rate(now);
    long left = rate == 0 ? 0 : Math.round((total - done) / rate);
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

  /** Steps a second since the oldest mark that is not older than the window. */
  private double rate(Instant now) {
    while (marks.size() > 1
        && Duration.between(marks.getFirst().time(), now).compareTo(WINDOW) > 0) {
      marks.removeFirst();
    }
    Mark from = marks.getFirst();
    marks.addLast(new Mark(now, done));
    double seconds = Math.max(1e-3, Duration.between(from.time(), now).toMillis() / 1e3);
    return (done - from.done()) / seconds;
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
