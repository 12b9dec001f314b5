package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.PrintWriter;
import java.io.StringWriter;
import java.nio.file.Path;
import java.time.Clock;
import java.time.Duration;
import java.time.Instant;
import java.time.InstantSource;
import java.time.ZoneOffset;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class ProgressTest {
  @TempDir private Path folder;

  private final StringWriter err = new StringWriter();
  private Instant now = Program.CLOCK.instant();

  private Progress progress(boolean terminal, boolean quiet) {
    return progress(400, terminal, quiet);
  }

  private Progress progress(long total, boolean terminal, boolean quiet) {
    Clock clock = ((InstantSource) () -> now).withZone(ZoneOffset.UTC);
    PrintWriter to = new PrintWriter(err);
    return new Progress(
        new Surroundings(to, to, terminal, clock, folder), "assess", "", total, quiet);
  }

  private void pass(int seconds) {
    now = now.plus(Duration.ofSeconds(seconds));
  }

  @Test
  void aLineEveryTenSecondsWhereThereIsNoTerminal() {
    try (Progress progress = progress(false, false)) {
      progress.step(50);
      pass(9);
      progress.step(50);
      assertThat(err.toString()).isEmpty();
      pass(1);
      progress.step(4);
      pass(3);
      progress.step(26);
      pass(7);
      progress.step(70);
      pass(10);
      progress.step(200);
    }
    assertThat(err.toString().lines())
        .containsExactly(
            "assess: 104 of 400 trials, 26 %, 10.4 a second, 28 s left",
            "assess: 200 of 400 trials, 50 %, 10.0 a second, 20 s left",
            "assess: 400 of 400 trials, 100 %, 13.3 a second, 0 s left");
  }

  /** Ten million steps: an hour at 100 a second, then 400 a second. */
  @Test
  void theRateOfALongRunIsThatOfItsLastMinutes() {
    try (Progress progress = progress(10_000_000, false, false)) {
      for (int second = 1; second <= 7200; second++) {
        pass(1);
        progress.step(second <= 3600 ? 100 : 400);
      }
    }
    // 60 in the first ten minutes, then one a minute.
    assertThat(err.toString().lines())
        .hasSize(170)
        .contains("assess: 360000 of 10000000 trials, 3 %, 100.0 a second, 26 h 46 min left")
        .endsWith("assess: 1800000 of 10000000 trials, 18 %, 400.0 a second, 5 h 41 min left");
  }

  @Test
  void stepsThatDoNotComeAreNotWaitedFor() {
    try (Progress progress = progress(false, false)) {
      pass(10);
      progress.leaveOut(200);
      progress.step(100);
    }
    assertThat(err.toString().lines())
        .containsExactly("assess: 100 of 200 trials, 50 %, 10.0 a second, 10 s left");
  }

  @Test
  void nothingWhenQuiet() {
    for (boolean terminal : new boolean[] {false, true}) {
      try (Progress progress = progress(terminal, true)) {
        pass(60);
        progress.step(400);
      }
    }
    assertThat(err.toString()).isEmpty();
  }

  @Test
  void aBarOnATerminal() {
    try (Progress progress = progress(true, false)) {
      progress.step(400);
    }
    assertThat(err.toString()).startsWith("\rassess").contains("400/400", "100%").endsWith("\n");
    assertThat(err.toString()).containsOnlyOnce("\n");
  }

  @ParameterizedTest
  @CsvSource({"0, 0 s", "59, 59 s", "60, 1 min 00 s", "3599, 59 min 59 s", "3600, 1 h 00 min"})
  void durationsInTwoUnits(long seconds, String words) {
    assertThat(Progress.duration(seconds)).isEqualTo(words);
  }

  @Test
  void aRunShowsTheBarOnATerminalAndNothingElse() {
    String study = SmallStudy.in(folder).toString();
    Outcome outcome =
        Program.run(folder, Program.CLOCK, true, "assess", study, "--out", folder + "/out");
    assertThat(outcome.code()).isZero();
    assertThat(outcome.err()).startsWith("\rassess").contains("90/90");
    assertThat(outcome.out())
        .contains("pca rows K2 step8", "report: " + folder + "/out/report.html");
  }
}
