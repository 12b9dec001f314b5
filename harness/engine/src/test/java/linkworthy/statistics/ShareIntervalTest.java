package linkworthy.statistics;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;
import static org.assertj.core.api.Assertions.within;

import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class ShareIntervalTest {
  /**
   * The first four are the cases of Newcombe (1998, Statistics in Medicine 17:857-872; its table
   * from memory); the next three by R 3.6.2, as SciPy's tests cite it. The last two and all digits
   * of the first recomputed independently in Python with SciPy.
   */
  @ParameterizedTest
  @CsvSource({
    "81, 263, 0.95, 0.2552885199, 0.3662095770, 5e-11",
    "15, 148, 0.95, 0.0623863995, 0.1604872417, 5e-11",
    "0, 20, 0.95, 0, 0.1611251581, 5e-11",
    "1, 29, 0.95, 0.0061132143, 0.1717552188, 5e-11",
    "3, 10, 0.95, 0.1077913, 0.6032219, 5e-8",
    "3, 10, 0.99, 0.07956632, 0.6799753, 5e-8",
    "0, 10, 0.95, 0, 0.2775328, 5e-8",
    "3, 100, 0.95, 0.0102545240, 0.0845193643, 5e-11",
    "0, 50, 0.95, 0, 0.0713475991, 5e-11"
  })
  void wilsonsInterval(
      int hits, int count, double confidence, double lower, double upper, double tolerance) {
    ShareInterval interval = ShareInterval.wilson(hits, count, confidence);
    assertThat(interval.lower()).isCloseTo(lower, within(tolerance)).isNotNegative();
    assertThat(interval.upper()).isCloseTo(upper, within(tolerance));
    ShareInterval mirrored = ShareInterval.wilson(count - hits, count, confidence);
    assertThat(mirrored.lower()).isCloseTo(1 - upper, within(tolerance));
    assertThat(mirrored.upper()).isCloseTo(1 - lower, within(tolerance)).isLessThanOrEqualTo(1);
  }

  @Test
  void moreHitsThanCasesAreRefused() {
    assertThatIllegalArgumentException()
        .isThrownBy(() -> ShareInterval.wilson(3, 2, 0.95))
        .withMessageContaining("number of hits");
    assertThatIllegalArgumentException()
        .isThrownBy(() -> ShareInterval.wilson(0, 0, 0.95))
        .withMessageContaining("number of cases");
  }
}
