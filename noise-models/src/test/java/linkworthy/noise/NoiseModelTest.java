package linkworthy.noise;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Map;
import linkworthy.corpus.TestPattern;
import linkworthy.input.BadInput;
import linkworthy.input.YamlNode;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class NoiseModelTest {
  private static final String YARD =
      """
      id: yard-radio
      version: 2
      process: burst-loss
      acts-on: [packets]
      parameters: {mean-burst: 6}
      severity: [loss-rate, snr-db]
      source: measured in the yard
      """;

  private static NoiseModel parse(String text) {
    return NoiseModel.parse(YamlNode.parse("m.yaml", text));
  }

  @Test
  void fileIsReadWithItsDefaultsFilledIn(@TempDir Path folder) throws IOException {
    NoiseModel model = NoiseModel.read(Files.writeString(folder.resolve("m.yaml"), YARD));
    assertThat(model)
        .isEqualTo(
            new NoiseModel(
                "yard-radio",
                2,
                "burst-loss",
                List.of(Site.PACKETS),
                Map.of("mean-burst", 6.0, "delivery-good", 1.0, "delivery-bad", 0.0),
                List.of("loss-rate", "snr-db"),
                "measured in the yard",
                ""));
    assertThat(model.implementation()).isInstanceOf(BurstLoss.class);
    assertThat(model.parameters().keySet())
        .containsExactly("delivery-bad", "delivery-good", "mean-burst");
    assertThatThrownBy(() -> model.parameters().put("x", 1.0))
        .isInstanceOf(UnsupportedOperationException.class);
  }

  @Test
  void sitesKeepTheOrderOfTheFile() {
    assertThat(parse(YARD.replace("[packets]", "[samples, packets]")).actsOn())
        .containsExactly(Site.SAMPLES, Site.PACKETS);
    assertThat(parse(YARD.replace("[packets]", "samples")).actsOn()).containsExactly(Site.SAMPLES);
  }

  /** The digest is that of the canonical text, recomputed independently with sha256sum. */
  @Test
  void fingerprintIsTheDigestOfTheCanonicalText() {
    assertThat(parse(YARD).canonical())
        .isEqualTo(
            """
            id: yard-radio
            version: 2
            process: burst-loss
            revision: 1
            acts-on: packets
            parameters.delivery-bad: 0x0.0p0
            parameters.delivery-good: 0x1.0p0
            parameters.mean-burst: 0x1.8p2
            severity: loss-rate, snr-db
            """);
    assertThat(parse(YARD).fingerprint())
        .isEqualTo("8dd709cd230875a3a93dad1c435da3772d7f55d2d88096774a0e1c82586759a8");
  }

  @Test
  void fingerprintFollowsWhatMattersAndNothingElse() {
    String fingerprint = parse(YARD).fingerprint();
    assertThat(parse(YARD.replace("measured", "guessed") + "notes: none\n").fingerprint())
        .isEqualTo(fingerprint);
    assertThat(
            parse(YARD.replace("mean-burst: 6", "mean-burst: 6.0, delivery-bad: -0")).fingerprint())
        .isEqualTo(fingerprint);
    assertThat(parse(YARD.replace("burst: 6", "burst: 6.5")).fingerprint())
        .isNotEqualTo(fingerprint);
    assertThat(parse(YARD.replace("version: 2", "version: 3")).fingerprint())
        .isNotEqualTo(fingerprint);
    assertThat(parse(YARD.replace("yard-", "yard2-")).fingerprint()).isNotEqualTo(fingerprint);
  }

  @Test
  void overridesReplaceParameters() {
    NoiseModel model = parse(YARD).with(Map.of("mean-burst", 3.0));
    assertThat(model.parameters()).containsEntry("mean-burst", 3.0);
    assertThat(model)
        .isEqualTo(parse(YARD.replace("burst: 6", "burst: 3")))
        .isNotEqualTo(parse(YARD));
    assertThat(model.fingerprint()).isNotEqualTo(parse(YARD).fingerprint());
    assertThatThrownBy(() -> parse(YARD).with(Map.of("mean-brust", 3.0)))
        .isInstanceOf(BadInput.class)
        .hasMessage(
            "noise model 'yard-radio' has no parameter 'mean-brust'; did you mean 'mean-burst'?"
                + " accepted: delivery-bad, delivery-good, mean-burst");
    assertThatThrownBy(() -> parse(YARD).with(Map.of("mean-burst", 0.5)))
        .isInstanceOf(BadInput.class)
        .hasMessageStartingWith("noise model 'yard-radio': mean-burst is 0.5; accepted: 1.0 to ");
    assertThatThrownBy(() -> NoiseLibrary.find("gaussian").with(Map.of("mean-burst", 4.0)))
        .isInstanceOf(BadInput.class)
        .hasMessage("noise model 'gaussian' has no parameter 'mean-burst'; it has none");
  }

  @Test
  void modelAllowsOnlyItsOwnSitesAndAxes() {
    NoiseModel model = parse(YARD);
    SignalStatistics signal = SignalStatistics.of(TestPattern.cvp(64));
    Severity rate = new Severity("loss-rate", 0.1);
    assertThat(model.at(rate, Site.PACKETS, signal).equivalentNoiseVariance())
        .isEqualTo(0.1 * signal.variance());
    assertThatThrownBy(() -> model.at(rate, Site.SAMPLES, signal))
        .isInstanceOf(BadInput.class)
        .hasMessage("noise model 'yard-radio' has no site 'samples'; accepted: packets");
    assertThatThrownBy(() -> model.check(new Severity(Severity.VARIANCE, 3), Site.PACKETS))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("no severity axis 'variance'; accepted: loss-rate, snr-db");
    assertThatThrownBy(() -> model.check(new Severity("loss-rate", 0.9), Site.PACKETS))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("loss-rate is 0.9");
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "id: yard-radio | id: Yard Radio | m.yaml, line 1: 'id' is 'Yard Radio'; accepted: lower",
        "id: yard-radio | name: yard-radio | m.yaml, line 1: unknown key 'name'; accepted: id, ver",
        "version: 2 | version: 0 | m.yaml, line 2: 'version' is '0'; accepted: a whole number from 1",
        "version: 2 | version: 1.5 | m.yaml, line 2: 'version' is '1.5'; accepted: a whole number",
        "burst-loss | burst-los | line 3: 'process' is 'burst-los'; did you mean 'burst-loss'? acc",
        "[packets] | [bits] | m.yaml, line 4: 'acts-on[0]' is 'bits'; accepted: packets, samples",
        "[packets] | [packets, packets] | 'acts-on[1]' is 'packets' a second time; accepted: each",
        "[packets] | [] | m.yaml, line 4: 'acts-on' is an empty list; accepted: a list with at le",
        "{mean-burst: 6} | {mean-brust: 6} | unknown key 'mean-brust' in parameters; did you mean",
        "{mean-burst: 6} | {mean-burst: .nan} | 'parameters.mean-burst' is '.nan'; accepted: a num",
        "{mean-burst: 6} | {mean-burst: 0.9} | 'parameters.mean-burst' is '0.9'; accepted: a number from 1 to 1000000000",
        "loss-rate, | density, | m.yaml, line 6: 'severity[0]' is 'density'; accepted: snr-db, var",
        "source: | sauce: | m.yaml, line 7: unknown key 'sauce'; did you mean 'source'? accepted",
      })
  void everyMistakeIsNamedWithItsLine(String right, String wrong, String message) {
    assertThatThrownBy(() -> parse(YARD.replace(right, wrong)))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining(message)
        .satisfies(e -> assertThat(e.getMessage()).doesNotContain("\n"));
  }

  @Test
  void missingKeysAndParametersOfAProcessWithoutAnyAreRefused() {
    assertThatThrownBy(() -> parse(YARD.replace("source: measured in the yard\n", "")))
        .isInstanceOf(BadInput.class)
        .hasMessage("m.yaml, line 1: missing key 'source'");
    String gaussian =
        """
        id: g
        version: 1
        process: gaussian
        acts-on: samples
        parameters: {a: 1}
        severity: snr-db
        source: x
        """;
    assertThatThrownBy(() -> parse(gaussian))
        .isInstanceOf(BadInput.class)
        .hasMessage("m.yaml, line 5: 'parameters' has keys; accepted: no keys");
    assertThat(parse(gaussian.replace("a: 1", "")).parameters()).isEmpty();
  }
}
