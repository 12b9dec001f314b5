package linkworthy.report;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.List;
import org.junit.jupiter.api.Test;

class ComparisonViewTest {
  private static final Condition SNR =
      new Condition("gaussian", "samples", "snr-db", 20, 40, 40, 20);

  private static Comparisons.CurveGap gap(Comparisons.Delta cubic, String refusal) {
    return new Comparisons.CurveGap(
        SNR,
        "pca rows step8",
        "dct blocks8 step8",
        new Comparisons.Delta(1.7, -30.24, true),
        cubic,
        new Comparisons.Interval(1.2, 2.1),
        Comparisons.Interval.NONE,
        refusal);
  }

  @Test
  void gapsAreGroupedByNoiseAndSwingingCubicsFlagged() {
    ComparisonView view =
        ComparisonView.of(
            new Comparisons(
                List.of(
                    gap(new Comparisons.Delta(1.5, 650.84, false), ""),
                    gap(Comparisons.Delta.NONE, "the curves share no range of rate")),
                List.of()));
    assertThat(view.reference()).isEqualTo("pca rows step8");
    assertThat(view.tables()).hasSize(1);
    assertThat(view.tables().get(0).title()).isEqualTo("gaussian on samples");
    assertThat(view.tables().get(0).rows())
        .containsExactly(
            new ComparisonView.CurveRow(
                "dct blocks8 step8",
                "SNR 20 dB",
                "1.70",
                "1.20 to 2.10",
                "-30.2 %",
                "",
                "1.50",
                "650.8 %",
                "the cubic swings: do not use its numbers"),
            new ComparisonView.CurveRow(
                "dct blocks8 step8",
                "SNR 20 dB",
                "1.70",
                "1.20 to 2.10",
                "-30.2 %",
                "",
                "n/a",
                "n/a",
                "the curves share no range of rate"));
  }

  private static String interval(double low, double high) {
    Comparisons.Crossing crossing = new Comparisons.Crossing(SNR, "a", "b", 15.333, low, high);
    return ComparisonView.of(new Comparisons(List.of(), List.of(crossing)))
        .crossings()
        .get(0)
        .interval();
  }

  @Test
  void intervalsMayBeOpen() {
    assertThat(interval(11.07, 19.19)).isEqualTo("SNR 11.1 dB to SNR 19.2 dB");
    assertThat(interval(Double.NaN, 19.19)).isEqualTo("below SNR 19.2 dB");
    assertThat(interval(11.07, Double.NaN)).isEqualTo("above SNR 11.1 dB");
    assertThat(interval(Double.NaN, Double.NaN)).isEqualTo("not told apart at any severity");
  }
}
