package linkworthy.results;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import linkworthy.input.BadInput;
import linkworthy.statistics.Cells;
import linkworthy.trial.Course;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** A record whose replicates end early is taken up anywhere and completed to the same bytes. */
class EarlyStoppedRecordTest {
  private static final int CODECS = 2;
  private static final String STUDY =
      """
      name: early
      pictures: {select: [canyon, cat], longest-side: 16}
      impairments: [{noise: gaussian, snr-db: [20, 10]}]
      codecs: [{transform: dct, keep: 3}, {transform: mean, step: 16}]
      replicates: {at-least: 2, at-most: 13, half-width-db: 1}
      seed: 7
      """;

  @TempDir private Path temporary;
  private UndisturbedRecord record;

  @BeforeEach
  void runUndisturbed() throws IOException {
    record = new UndisturbedRecord(temporary.resolve("out"), STUDY);
  }

  @Test
  void aCompleteRecordHasAsManyTrialsAsItCameTo() {
    RunRecord ended = ResultsFolder.open(temporary.resolve("out")).run();
    assertThat(ended.complete()).isTrue();
    assertThat(ended.trialsDone())
        .isEqualTo(record.trials().lines().count() - 1)
        .isEqualTo(ended.trialsPlanned())
        .isLessThan(record.plan().trials());
  }

  /** Every 83rd length, so that every replicate and every kind of line is cut. */
  @Test
  void howeverLittleIsLeftOfEitherTable() throws IOException {
    for (int bytes = 0; bytes < record.trials().length(); bytes += 83) {
      record.assertCompletedFromTrials(bytes);
    }
    for (int bytes = 0; bytes < record.timings().length(); bytes += 83) {
      record.assertCompletedFromTimings(bytes);
    }
  }

  @Test
  void timesThatEndWhereTheTrialsDoNotAreRefused() throws IOException {
    List<String> lines = record.timings().lines().toList();
    int second = 0;
    while (!lines.get(second).startsWith("canyon,gaussian,10.0,0,")) {
      second++;
    }
    StringBuilder shorter = new StringBuilder();
    for (int i = 0; i < lines.size(); i++) {
      boolean left = i >= second - CODECS && i < second;
      shorter.append(left ? "" : lines.get(i) + "\n");
    }
    Files.writeString(temporary.resolve("out/timings.csv"), shorter.toString());
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> record.resume(new Cells(), new Course(record.plan())))
        .withMessageContaining("timings.csv, line " + (second - CODECS + 1))
        .withMessageContaining("times of the same trials");
  }
}
