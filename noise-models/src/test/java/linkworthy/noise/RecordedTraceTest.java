package linkworthy.noise;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Map;
import java.util.Optional;
import java.util.stream.Collectors;
import java.util.stream.IntStream;
import linkworthy.input.BadInput;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class RecordedTraceTest extends NoiseProcessContractTest {
  private static final Severity RECORDED = new Severity(RecordedTrace.AS_RECORDED, 1);
  private static final SignalStatistics SIGNAL = new SignalStatistics(336, 128, 16720, 336, 255);
  private static final String MODEL =
      """
      id: yard
      version: 1
      process: trace
      acts-on: packets
      trace: day.csv
      severity: as-recorded
      source: invented
      """;

  @TempDir Path folder;

  @Override
  protected String id() {
    return "trace";
  }

  @Override
  protected NoiseProcess process() {
    return NoiseLibrary.find("trace").implementation();
  }

  @Override
  protected Optional<Severity> onlySeverity() {
    return Optional.of(RECORDED);
  }

  @Override
  protected List<Severity> refused() {
    return List.of(
        new Severity(RecordedTrace.AS_RECORDED, 2),
        new Severity(RecordedTrace.AS_RECORDED, Math.nextDown(1.0)),
        new Severity("loss-rate", 0.1));
  }

  private NoiseModel model(String trace) throws IOException {
    Files.writeString(folder.resolve("day.csv"), trace);
    return NoiseModel.read(Files.writeString(folder.resolve("yard.yaml"), MODEL));
  }

  private static String fates(Impairment impairment, long seed, int packets) {
    Impairment.Losses losses = ((Impairment.OnPackets) impairment).losses(Measured.stream(seed));
    return IntStream.range(0, packets)
        .mapToObj(i -> losses.lost(i) ? "1" : "0")
        .collect(Collectors.joining());
  }

  @Test
  void fatesAreReplayedFromARandomPlaceAndGoRound() throws IOException {
    Impairment impairment = model("0\n1\n1\n0\n0\n").at(RECORDED, Site.PACKETS, SIGNAL);
    assertThat(impairment.equivalentNoiseVariance()).isEqualTo(0.4 * 336);
    List<String> seen =
        IntStream.range(0, 100).mapToObj(seed -> fates(impairment, seed, 12)).distinct().toList();
    assertThat(seen)
        .containsExactlyInAnyOrder(
            "011000110001", "110001100011", "100011000110", "000110001100", "001100011000");
    Impairment.Losses far = ((Impairment.OnPackets) impairment).losses(Measured.stream(1));
    assertThat(far.lost(Integer.MAX_VALUE)).isEqualTo(far.lost(Integer.MAX_VALUE % 5));
  }

  /** Digests by sha256sum of {@code printf '0\n1\n'} and {@code printf '0\n0\n'}. */
  @Test
  void fingerprintHasTheDigestOfTheRecord() throws IOException {
    NoiseModel model = model("0\n1\n");
    assertThat(model.canonical())
        .contains(
            "\nsetting.trace: sha256"
                + " 82c1315e6c757f33c4a77ca58b2a184f5a88614470c05ec77f3d28918db6b8ae\n");
    assertThat(model("0\r\n1\r\n")).isEqualTo(model);
    assertThat(model("0\n0\n").canonical())
        .contains(
            "\nsetting.trace: sha256"
                + " 52f96c26a39ed25108a6db43d6e11c6051eba8a498a5baab1891adfa7ac7c262\n");
    assertThat(model("0\n0\n")).isNotEqualTo(model);
    assertThat(model("0\n0\n").implementation()).isNotEqualTo(model.implementation());
    assertThat(model.with(Map.of())).isEqualTo(model);
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "0 1 l | line 3 of the trace is 'l'; accepted: 0 (delivered) or 1 (lost)",
        "lost 0 1 | line 1 of the trace is 'lost'; accepted",
        "0 0,1 | line 2 of the trace is '0,1'; accepted",
        "0 2 | line 2 of the trace is '2'",
        "0 00000000000000000000000 | line 2 of the trace is '00000000000000000000...'",
      })
  void anythingElseIsNamedWithItsLine(String words, String complaint) {
    assertThatThrownBy(() -> model(words.replace(' ', '\n') + "\n"))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("yard.yaml, line 5: 'trace' cannot be used: " + complaint)
        .hasMessageNotContaining("\n");
  }

  @Test
  void recordsThatCannotBeReadAreRefused() throws IOException {
    assertThatThrownBy(() -> model(""))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("the trace is empty");
    assertThatThrownBy(() -> model("0\n\n1\n"))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("line 2 of the trace is ''");
    NoiseModel fine = model("0\n1");
    assertThat(fine.fingerprint()).isNotEqualTo(model("0\n1\n").fingerprint());
    Files.write(folder.resolve("day.csv"), new byte[] {'0', '\n', (byte) 0xFF});
    assertRefused(MODEL, "day.csv is not UTF-8 text");
    assertRefused(MODEL.replace("day.csv", "night.csv"), "night.csv does not exist");
    assertRefused(MODEL.replace("day.csv", "."), ". is a folder");
    assertRefused(MODEL.replace("trace: day.csv\n", ""), "trace needs a record");
  }

  private void assertRefused(String text, String complaint) throws IOException {
    Path file = Files.writeString(folder.resolve("yard.yaml"), text);
    assertThatThrownBy(() -> NoiseModel.read(file))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining(complaint)
        .hasMessageNotContaining("\n");
  }

  /** The shipped record is what its model file says: drawn here again by the burst-loss process. */
  @Test
  void shippedRecordIsDrawnByTheBurstLossProcess() throws IOException {
    Severity severity = new Severity(BurstLoss.LOSS_RATE, 0.1);
    Impairment.Losses losses =
        MarkovLoss.simple(0.1, 4)
            .losses(
                NoiseStreams.open(
                    1, "none", "burst-loss", Site.PACKETS, severity, 0, "trace-invented"));
    String drawn =
        IntStream.range(0, 2000)
            .mapToObj(i -> losses.lost(i) ? "1\n" : "0\n")
            .collect(Collectors.joining());
    assertThat(Files.readString(Path.of("library/trace-invented.csv"), StandardCharsets.UTF_8))
        .isEqualTo(drawn);
  }
}
