package linkworthy.noise;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.BitSet;
import java.util.List;
import java.util.Map;
import linkworthy.input.BadInput;
import linkworthy.input.YamlNode;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

/**
 * Expected figures follow from the closed formulas in the class comments. Measured ones lie within
 * 5 standard errors, estimated from the sample over independent packets: false-alarm rate 5.7e-7
 * each, a few times that where hits are few.
 */
class BitErrorsTest extends NoiseProcessContractTest {
  private static final int PACKETS = 4000;
  private static final int BITS = 1000;
  private static final SignalStatistics SIGNAL = new SignalStatistics(1000, 128, 17384, 1000, 255);

  @Override
  protected String id() {
    return "bit-errors";
  }

  @Override
  protected List<Severity> refused() {
    return List.of(
        new Severity("bit-error-rate", Math.nextUp(0.5)),
        new Severity("bit-error-rate", -Double.MIN_VALUE),
        new Severity("eb-n0-db", 3));
  }

  private static Impairment.OnBits at(
      NoiseProcess process, String axis, double value, Map<String, Double> parameters) {
    return (Impairment.OnBits) process.at(new Severity(axis, value), parameters, Site.BITS, SIGNAL);
  }

  private static Impairment.OnBits at(double rate, Map<String, Double> parameters) {
    return at(new BitErrors(), "bit-error-rate", rate, parameters);
  }

  /** Share of flipped bits, packet by packet. */
  private static double[] shares(Impairment.OnBits impairment, long seed) {
    Impairment.Errors errors = impairment.errors(Measured.stream(seed));
    double[] shares = new double[PACKETS];
    for (int i = 0; i < PACKETS; i++) {
      shares[i] = errors.flipped(i, BITS).cardinality() / (double) BITS;
    }
    return shares;
  }

  private static double squared(double[] shares, double mean) {
    double sum = 0;
    for (double share : shares) {
      sum += (share - mean) * (share - mean);
    }
    return sum / shares.length;
  }

  /** (4^8 - 1)/3 = 21845 grey levels squared for each flip; 8 bits, then 16. */
  @Test
  void equivalentVarianceOfABitErrorRate() {
    assertThat(at(1e-3, Map.of()).equivalentNoiseVariance()).isCloseTo(21.845, within(1e-12));
    SignalStatistics deep = new SignalStatistics(1, 1, 1, 1, 65_535);
    assertThat(
            new BitErrors()
                .at(new Severity("bit-error-rate", 0.25), Map.of(), Site.BITS, deep)
                .equivalentNoiseVariance())
        .isEqualTo(4294967295.0 / 3 / 4);
  }

  @ParameterizedTest
  @CsvSource({"1e-4", "0.01", "0.3", "0.5"})
  void independentErrorsAreBinomial(double rate) {
    double[] shares = shares(at(rate, Map.of()), 41);
    assertThat(Measured.of(shares).errorsFrom(rate)).isBetween(-5.0, 5.0);
    double variance = rate * (1 - rate) / BITS;
    double kurtosis = 3 + (1 - 6 * rate * (1 - rate)) / (BITS * rate * (1 - rate));
    assertThat(squared(shares, rate))
        .isCloseTo(variance, within(5 * variance * Math.sqrt((kurtosis - 1) / PACKETS)));
  }

  /** Rate, and the variance of the number of errors in a packet by the chain's closed formula. */
  @ParameterizedTest
  @CsvSource({"0.001, 8, 0.5", "0.05, 3, 1", "0.2, 20, 0.25"})
  void errorsInBurstsFollowTheChain(double rate, double burst, double bad) {
    double[] shares = shares(at(rate, Map.of("mean-burst", burst, "errors-bad", bad)), 42);
    assertThat(Measured.of(shares).errorsFrom(rate)).isBetween(-5.0, 5.0);
    double[] squares = new double[PACKETS];
    for (int i = 0; i < PACKETS; i++) {
      squares[i] = (shares[i] - rate) * (shares[i] - rate) * BITS * BITS;
    }
    assertThat(
            Measured.of(squares)
                .errorsFrom(MarkovLoss.of(rate, burst, 1, 1 - bad).varianceOfLosses(BITS)))
        .isBetween(-5.0, 5.0);
  }

  /** Every bit of a packet has the same rate: the first state comes from the long-run shares. */
  @Test
  void errorsAreAsLikelyAtTheStartOfAPacketAsLater() {
    Impairment.Errors errors =
        at(0.1, Map.of("mean-burst", 50.0, "errors-bad", 1.0)).errors(Measured.stream(43));
    double[] first = new double[40_000];
    double[] later = new double[first.length];
    for (int i = 0; i < first.length; i++) {
      BitSet flipped = errors.flipped(i, 301);
      first[i] = flipped.get(0) ? 1 : 0;
      later[i] = flipped.get(300) ? 1 : 0;
    }
    assertThat(Measured.of(first).errorsFrom(0.1)).isBetween(-5.0, 5.0);
    assertThat(Measured.of(later).errorsFrom(0.1)).isBetween(-5.0, 5.0);
  }

  @ParameterizedTest
  @ValueSource(strings = {"bpsk", "dbpsk", "ncfsk", "bpsk-rayleigh", "oqpsk-2450"})
  void radioFiguresSetTheRate(String id) {
    ErrorCurve curve = ErrorCurve.find(id);
    NoiseProcess process = new BitErrors(curve);
    double mean = curve.meanRate(StrictMath.pow(10, -0.05));
    Impairment.OnBits byRatio = at(process, curve.ratio().axis(), -0.5, Map.of());
    assertThat(byRatio.equivalentNoiseVariance()).isEqualTo(mean * 21845);
    assertThat(Measured.of(shares(byRatio, 44)).errorsFrom(mean)).isBetween(-5.0, 5.0);
    assertThat(shares(at(process, "bit-error-rate", mean, Map.of()), 44))
        .containsExactly(shares(byRatio, 44), within(0.002));
  }

  /** With blocks fading the share of a packet varies with its gain: E[b^2] - E[b]^2 and more. */
  @Test
  void fadingPacketsHaveRatesOfTheirOwn() {
    NoiseProcess process = new BitErrors(ErrorCurve.BPSK_RAYLEIGH);
    double[] shares = shares(at(process, "eb-n0-db", 10, Map.of()), 45);
    double mean = ErrorCurve.BPSK_RAYLEIGH.meanRate(10);
    double between = 0;
    int steps = 100_000;
    for (int i = 0; i < steps; i++) {
      double gain = -StrictMath.log(1 - (i + 0.5) / steps);
      double rate = ErrorCurve.BPSK.meanRate(10 * gain);
      between += (rate - mean) * (rate - mean) / steps + rate * (1 - rate) / BITS / steps;
    }
    double[] squares = new double[PACKETS];
    for (int i = 0; i < PACKETS; i++) {
      squares[i] = (shares[i] - mean) * (shares[i] - mean);
    }
    assertThat(Measured.of(squares).errorsFrom(between)).isBetween(-5.0, 5.0);
    assertThat(between).isGreaterThan(50 * mean / BITS);
  }

  @Test
  void frameCheckIsOnOrOff() {
    assertThat(at(0.1, Map.of()).checkBits()).isZero();
    assertThat(at(0.1, Map.of("frame-check", 1.0)).checkBits()).isEqualTo(16);
    assertThatThrownBy(() -> at(0.1, Map.of("frame-check", 0.5)))
        .isInstanceOf(BadInput.class)
        .hasMessage("frame-check is 0.5; accepted: 0.0 (off) or 1.0 (on)");
  }

  @Test
  void frameCheckHasOneOfTwoLengths() {
    Map<String, Double> checked = Map.of("frame-check", 1.0, "check-bits", 32.0);
    assertThat(at(0.1, checked).checkBits()).isEqualTo(32);
    assertThatThrownBy(() -> at(0.1, Map.of("frame-check", 1.0, "check-bits", 24.0)))
        .isInstanceOf(BadInput.class)
        .hasMessage("check-bits is 24.0; accepted with frame-check: 16.0 or 32.0");
    assertThatThrownBy(() -> at(0.1, Map.of("check-bits", 32.0)))
        .isInstanceOf(BadInput.class)
        .hasMessage("check-bits is 32.0; accepted without frame-check: 16.0");
  }

  /** Both fingerprints recomputed independently in Python (hashlib) from the canonical text. */
  @Test
  void theUsualLengthLeavesNoMarkInTheFingerprint() {
    NoiseModel model = NoiseLibrary.find("radio-oqpsk-2450");
    assertThat(model.parameters()).containsEntry("check-bits", 16.0);
    assertThat(model.canonical()).doesNotContain("check-bits");
    assertThat(model.fingerprint())
        .isEqualTo("40cf6d63b17bb6fc9f54b71c6862023a776a023c6bd3aee26aac0b220656b43b");
    NoiseModel longer = model.with(Map.of("check-bits", 32.0));
    assertThat(longer.canonical()).contains("\nparameters.check-bits: 0x1.0p5\n");
    assertThat(longer.fingerprint())
        .isEqualTo("71bd61a8d0f415039181ea32b2f69ad7b5192bfa1663a9da8dc075367a337170");
    assertThat(longer.with(Map.of("check-bits", 16.0))).isEqualTo(model);
  }

  @Test
  void ratesOutOfReachAreRefusedWithTheirLimit() {
    Map<String, Double> bursts = Map.of("mean-burst", 4.0);
    assertThatThrownBy(() -> at(0.41, bursts))
        .isInstanceOf(BadInput.class)
        .hasMessage("bit-error-rate is 0.41; accepted: 0.0 to 0.4");
    assertThat(shares(at(0.4, bursts), 46)).isNotEmpty().doesNotContain(0.0);
    assertThatThrownBy(() -> at(new BitErrors(), "variance", 11_000, Map.of()))
        .isInstanceOf(BadInput.class)
        .hasMessageStartingWith("bit-errors at variance 11000.0 needs a bit-error rate of 0.503")
        .hasMessageEndingWith("; accepted: 0.0 to 0.5");
    NoiseProcess radio = new BitErrors(ErrorCurve.BPSK);
    assertThatThrownBy(() -> at(radio, "eb-n0-db", -60, bursts))
        .isInstanceOf(BadInput.class)
        .hasMessageStartingWith("bit-errors at eb-n0-db -60.0 needs a bit-error rate of 0.499");
    assertThatThrownBy(() -> at(new BitErrors(ErrorCurve.BPSK_RAYLEIGH), "snr-db", 9, bursts))
        .isInstanceOf(BadInput.class)
        .hasMessage("mean-burst is 4.0; accepted with the curve bpsk-rayleigh: 1.0");
    assertThatThrownBy(() -> at(0.1, Map.of("errors-bad", 0.0)))
        .isInstanceOf(BadInput.class)
        .hasMessageStartingWith("errors-bad is 0.0; accepted: 1.0E-6 to 1.0");
  }

  @Test
  void modelFileNamesTheCurveAndSwitchesTheCheck() {
    String text =
        """
        id: own
        version: 1
        process: bit-errors
        acts-on: bits
        curve: dbpsk
        parameters: {frame-check: true}
        severity: [eb-n0-db]
        source: x
        """;
    NoiseModel model = NoiseModel.parse(YamlNode.parse("m.yaml", text));
    assertThat(model.implementation()).isEqualTo(new BitErrors(ErrorCurve.DBPSK));
    assertThat(model.parameters()).containsEntry("frame-check", 1.0);
    assertThat(model.with(Map.of("mean-burst", 2.0)).implementation())
        .isEqualTo(model.implementation());
    assertThat(model.fingerprint())
        .isNotEqualTo(
            NoiseModel.parse(YamlNode.parse("m.yaml", text.replace("dbpsk", "bpsk")))
                .fingerprint());
    assertRefused(text.replace("dbpsk", "dbspk"), "'curve' is 'dbspk'; did you mean 'dbpsk'?");
    assertRefused(text.replace("curve: dbpsk\n", ""), "'severity[0]' is 'eb-n0-db'; accepted: snr");
    assertRefused(text.replace("eb-n0-db", "sinr-db"), "'severity[0]' is 'sinr-db'; ");
    assertRefused(text.replace("true", "1"), "'parameters.frame-check' is '1'; accepted: true or");
    assertRefused(
        text.replace("true}", "true, check-bits: 24}"),
        "line 6: 'parameters.check-bits' is '24'; accepted: 16 or 32");
    assertRefused(
        text.replace("true}", "false, check-bits: 32}"),
        "check-bits is 32.0; accepted without frame-check: 16.0");
    assertRefused(text.replace("bit-errors", "gaussian"), "line 5: unknown key 'curve'");
  }

  private static void assertRefused(String text, String complaint) {
    assertThatThrownBy(() -> NoiseModel.parse(YamlNode.parse("m.yaml", text)))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining(complaint)
        .hasMessageNotContaining("\n");
  }
}
