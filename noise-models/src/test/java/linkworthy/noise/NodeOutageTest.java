package linkworthy.noise;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.util.List;
import java.util.Map;
import linkworthy.input.BadInput;
import org.junit.jupiter.api.Test;

class NodeOutageTest extends NoiseProcessContractTest {
  @Override
  protected String id() {
    return "node-outage";
  }

  @Override
  protected List<Severity> refused() {
    return List.of(
        new Severity(NodeOutage.OUTAGE_RATE, Math.nextUp(1.0)),
        new Severity(NodeOutage.OUTAGE_RATE, -Double.MIN_VALUE),
        new Severity("loss-rate", 0.1));
  }

  private static Impairment.OnNodes at(Severity severity) {
    SignalStatistics signal = new SignalStatistics(100, 50, 2600, 100, 255);
    return (Impairment.OnNodes) new NodeOutage().at(severity, Map.of(), Site.PACKETS, signal);
  }

  /** Binomial standard error; 5 of them are exceeded with probability 5.7e-7. */
  @Test
  void nodesFailAloneAndAsOftenAsAsked() {
    Impairment.Losses failures =
        at(new Severity(NodeOutage.OUTAGE_RATE, 0.2)).failures(Measured.stream(71));
    int nodes = 100_000;
    int failed = 0;
    int pairs = 0;
    for (int i = 0; i < nodes; i++) {
      failed += failures.lost(i) ? 1 : 0;
      pairs += i > 0 && failures.lost(i) && failures.lost(i - 1) ? 1 : 0;
    }
    assertThat((failed - 0.2 * nodes) / Math.sqrt(0.2 * 0.8 * nodes)).isBetween(-5.0, 5.0);
    double share = 0.04;
    double pairVariance = share * (1 - share) + 2 * (0.008 - share * share);
    assertThat((pairs - share * nodes) / Math.sqrt(pairVariance * nodes)).isBetween(-5.0, 5.0);
  }

  @Test
  void theExtremesAreCertain() {
    Impairment.Losses never =
        at(new Severity(NodeOutage.OUTAGE_RATE, 0)).failures(Measured.stream(72));
    Impairment.Losses always =
        at(new Severity(NodeOutage.OUTAGE_RATE, 1)).failures(Measured.stream(73));
    for (int i = 0; i < 1000; i++) {
      assertThat(never.lost(i)).isFalse();
      assertThat(always.lost(i)).isTrue();
    }
  }

  @Test
  void anSnrThatNeedsMoreThanCertaintyIsRefused() {
    assertThat(at(new Severity(Severity.SNR_DB, 10)).equivalentNoiseVariance()).isEqualTo(10);
    assertThatThrownBy(() -> at(new Severity(Severity.SNR_DB, -1)))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("outage rate")
        .hasMessageContaining("0 to 1");
  }
}
