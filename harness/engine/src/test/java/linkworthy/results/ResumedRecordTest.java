package linkworthy.results;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Path;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** A record that was cut off anywhere is taken up and completed to the same bytes. */
class ResumedRecordTest {
  /** Four units of two trials. */
  private static final String STUDY =
      """
      name: small
      pictures: {select: [cat], longest-side: 16}
      impairments: [{noise: gaussian, snr-db: 10}]
      codecs: [{transform: dct, keep: 3}, {transform: mean, step: 16}]
      replicates: 3
      seed: 7
      """;

  @TempDir private Path temporary;
  private UndisturbedRecord record;

  @BeforeEach
  void runUndisturbed() throws IOException {
    record = new UndisturbedRecord(temporary.resolve("out"), STUDY);
    assertThat(record.trials()).hasLineCount(1 + 4 * 2);
  }

  @Test
  void whereverItsTrialsAreCut() throws IOException {
    int lastTwoRows = record.trials().length();
    for (int row = 0; row < 2; row++) {
      lastTwoRows = record.trials().lastIndexOf('\n', lastTwoRows - 2) + 1;
    }
    for (int bytes = record.trials().length(); bytes >= lastTwoRows; bytes--) {
      record.assertCompletedFromTrials(bytes);
    }
  }

  /** Every 61st length down to none, so that every part of every kind of line is met. */
  @Test
  void howeverLittleIsLeftOfEitherTable() throws IOException {
    for (int bytes = 0; bytes < record.trials().length(); bytes += 61) {
      record.assertCompletedFromTrials(bytes);
    }
    for (int bytes = 0; bytes < record.timings().length(); bytes += 61) {
      record.assertCompletedFromTimings(bytes);
    }
  }

  @Test
  void aMissingTableIsBegunAgain() throws IOException {
    record.assertCompletedFromNothing();
  }
}
