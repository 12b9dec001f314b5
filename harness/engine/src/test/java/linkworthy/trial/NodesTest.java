package linkworthy.trial;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import linkworthy.input.BadInput;
import linkworthy.input.YamlNode;
import linkworthy.link.NodeProfile;
import linkworthy.study.Study;
import linkworthy.study.StudyReader;
import linkworthy.study.StudyWriter;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;

class NodesTest {
  private static final String STUDY =
      """
      name: helpers
      pictures: {select: [cat], longest-side: 96}
      impairments:
        - {noise: node-outage, outage-rate: 0.4}
        - {noise: gaussian, snr-db: 20}
      codecs:
        - {transform: pca, over: tiles, grid: 4x4, keep: 3}
        - {transform: dct, keep: 8}
        - {transform: dct, keep: 8, protect: {retransmit: 2}}
      node: {profile: yard-camera, interval-s: 60}
      replicates: 4
      """;

  private static Study study(String text) {
    return StudyReader.read(YamlNode.parse("helpers.yaml", text), Path.of(""));
  }

  private static List<Trial> run(String text) {
    List<Trial> all = new ArrayList<>();
    int unused =
        new LocalRunner(Plan.of(study(text)), 2)
            .run(0, (unit, trials, timings) -> all.addAll(trials));
    return all;
  }

  private static double cost(Trial trial, String column) {
    return trial.further().getOrDefault(column, Double.NaN);
  }

  /** A failed helper loses its tile; a failed camera loses the picture. */
  @Test
  void failedNodesLoseTheirTiles() {
    List<Trial> failing =
        run(STUDY).stream().filter(t -> t.impairment().equals("node-outage")).toList();
    assertThat(failing)
        .filteredOn(t -> t.over().equals("tiles4x4"))
        .hasSize(4)
        .noneMatch(Trial::outage)
        .anyMatch(t -> t.packetsLost() > 0 && t.packetsLost() < t.packetsSent());
    assertThat(failing)
        .filteredOn(t -> t.codec().equals("dct blocks8 K8 step8"))
        .allMatch(t -> t.outage() == (t.packetsLost() == t.packetsSent()))
        .allMatch(t -> t.packetsLost() == 0 || t.packetsLost() == t.packetsSent());
  }

  @Test
  void costsFollowFromWorkAndBits() {
    NodeProfile node = NodeProfile.find("yard-camera");
    Trial trial =
        run(STUDY).stream()
            .filter(t -> t.impairment().equals("none") && t.codec().startsWith("dct"))
            .findFirst()
            .orElseThrow();
    double macs = cost(trial, "macs");
    assertThat(cost(trial, "energy_mj"))
        .isCloseTo(node.millijoules((long) macs, trial.sentBits(), 0), within(1e-9))
        .isEqualTo(cost(trial, "worst_node_energy_mj"));
    assertThat(cost(trial, "air_time_ms")).isCloseTo(trial.sentBits() / 250.0, within(1e-9));
    assertThat(cost(trial, "pictures_per_battery"))
        .isCloseTo(18_000_000 / (cost(trial, "energy_mj") + 0.02 * 60), within(1e-6));
  }

  /** Acknowledgements are received, not sent, by the camera. */
  @Test
  void acknowledgementsAreReceived() {
    NodeProfile node = NodeProfile.find("yard-camera");
    Trial trial =
        run(STUDY).stream()
            .filter(t -> t.impairment().equals("none") && t.codec().endsWith("retry2"))
            .findFirst()
            .orElseThrow();
    long acknowledgements = 8L * 5 * trial.packetsSent();
    double macs = cost(trial, "macs");
    assertThat(cost(trial, "energy_mj"))
        .isCloseTo(
            node.millijoules((long) macs, trial.sentBits() - acknowledgements, acknowledgements),
            within(1e-9));
  }

  @Test
  void helpersTogetherNeedMoreThanTheWorstOfThem() {
    Trial tiles =
        run(STUDY).stream()
            .filter(t -> t.impairment().equals("none") && t.over().equals("tiles4x4"))
            .findFirst()
            .orElseThrow();
    assertThat(cost(tiles, "energy_mj")).isGreaterThan(2 * cost(tiles, "worst_node_energy_mj"));
  }

  /** The raw hop hurts the codecs of helpers and no other row. */
  @Test
  void aNoisyRawHopHurtsHelpersAlone() {
    String noisy = STUDY + "raw-hop: {noise: gaussian, snr-db: 10}\n";
    List<Trial> before = run(STUDY);
    List<Trial> after = run(noisy);
    assertThat(after.stream().filter(t -> !t.over().equals("tiles4x4")).toList())
        .isEqualTo(before.stream().filter(t -> !t.over().equals("tiles4x4")).toList());
    assertThat(psnrOfCleanTiles(after)).isLessThan(psnrOfCleanTiles(before) - 0.2);
    assertThat(run(noisy)).isEqualTo(after);
    assertThat(after).extracting(Trial::trial).doesNotHaveDuplicates();
  }

  private static double psnrOfCleanTiles(List<Trial> trials) {
    return trials.stream()
        .filter(t -> t.impairment().equals("none") && t.over().equals("tiles4x4"))
        .mapToDouble(Trial::psnrDb)
        .findFirst()
        .orElseThrow();
  }

  @Test
  void withoutANodeThereAreNoCosts() {
    Study plain = study(STUDY.replaceAll("(?m)^node:.*$", ""));
    assertThat(plain.furtherColumns()).isEmpty();
    assertThat(StudyWriter.canonical(plain)).doesNotContain("node:");
    assertThat(study(STUDY).furtherColumns()).isEqualTo(Study.COSTS);
  }

  @Test
  void theCanonicalStudyKeepsNodeAndHop() {
    Study study = study(STUDY + "raw-hop: {noise: gaussian, snr-db: 10}\n");
    String canonical = StudyWriter.canonical(study);
    assertThat(canonical).contains("sent-nj-per-bit", "interval-s: 60", "raw-hop:");
    assertThat(StudyWriter.canonical(study(canonical))).isEqualTo(canonical);
    assertThat(StudyWriter.fingerprint(study(canonical))).isEqualTo(StudyWriter.fingerprint(study));
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "profile: yard-camera | profile: yard-camra | did you mean 'yard-camera'",
        "interval-s: 60 | interval-s: 0 | seconds above 0",
        "interval-s: 60 | intervall-s: 60 | did you mean 'interval-s'",
        "grid: 4x4 | grid: 200x1 | picture 'cat'",
        "keep: 3 | keep: 40 | a tile of codec"
      })
  void mistakesAreNamed(String from, String to, String complaint) {
    assertThat(STUDY).contains(from);
    assertThatThrownBy(() -> Plan.of(study(STUDY.replace(from, to))))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining(complaint)
        .hasMessageNotContaining("\n");
  }

  @Test
  void aRawHopActsOnSamplesAtOneSeverity() {
    assertThatThrownBy(() -> study(STUDY + "raw-hop: {noise: burst-loss, loss-rate: 0.1}\n"))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("acts on samples");
    assertThatThrownBy(() -> study(STUDY + "raw-hop: {noise: gaussian, snr-db: [10, 20]}\n"))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("one severity");
  }
}
