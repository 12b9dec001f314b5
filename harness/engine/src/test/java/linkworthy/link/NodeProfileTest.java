package linkworthy.link;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.List;
import linkworthy.input.BadInput;
import linkworthy.input.YamlNode;
import org.jspecify.annotations.Nullable;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import tools.jackson.dataformat.yaml.YAMLMapper;

/**
 * The first-order radio model of Heinzelman, Chandrakasan and Balakrishnan (HICSS 2000, from
 * memory): 50 nJ/bit electronics, 100 pJ/bit/m^2 amplifier. Joules recomputed independently in
 * Python.
 */
class NodeProfileTest {
  private static final String PROFILE =
      """
      id: n
      sent-nj-per-bit: 1
      received-nj-per-bit: 1
      mac-nj: 5
      sleep-mw: 0
      ram-kib: 64
      kbit-per-second: 250
      battery-j: 9
      source: a test
      """;

  private static NodeProfile radio(double metres) {
    return new NodeProfile(
        "radio", 50 + 0.1 * metres * metres, 50, 5, 0, 64, 250, 20_000, "the model");
  }

  @Test
  void twoThousandBitsOverAHundredAndTenMetres() {
    assertThat(radio(100).millijoules(0, 2000, 0)).isCloseTo(2.1, within(1e-12));
    assertThat(radio(100).millijoules(0, 0, 2000)).isCloseTo(0.1, within(1e-12));
    assertThat(radio(10).millijoules(0, 2000, 0)).isCloseTo(0.120, within(1e-12));
    assertThat(0.1 * 22.36067977 * 22.36067977)
        .as("where the amplifier costs what the electronics cost")
        .isCloseTo(50, within(1e-6));
  }

  @ParameterizedTest
  @CsvSource({"524288, 157.2864", "131072, 39.3216", "65536, 19.6608", "32768, 9.8304"})
  void aPictureAndPartsOfItOverFiftyMetres(long bits, double millijoules) {
    assertThat(NodeProfile.find("first-order-radio").millijoules(0, bits, 0))
        .isCloseTo(millijoules, within(1e-9));
  }

  /**
   * The two regimes of Heinzelman, Chandrakasan and Balakrishnan (2002, from memory): 10 pJ/bit/m^2
   * and 0.0013 pJ/bit/m^4 meet at sqrt(10/0.0013) m and cost 126.9230769 nJ/bit there with 50 nJ of
   * electronics; recomputed independently in Python.
   */
  @Test
  void theRegimesOfAnAmplifierMeet() {
    NodeProfile.Radio radio = new NodeProfile.Radio(50, 10, 0.0013, 0);
    double meet = radio.crossoverMetres();
    assertThat(meet).isCloseTo(87.70580193, within(1e-8));
    assertThat(radio.sentNanojoules()).isEqualTo(50);
    assertThat(over(meet)).isCloseTo(126.9230769, within(1e-7));
    assertThat(over(Math.nextUp(meet))).isCloseTo(126.9230769, within(1e-7));
  }

  private static double over(double metres) {
    return new NodeProfile.Radio(50, 10, 0.0013, metres).sentNanojoules();
  }

  /** 50 + 0.01 d^2 and 50 + 1.3e-6 d^4 nJ/bit, worked by hand. */
  @ParameterizedTest
  @CsvSource({"10, 51", "50, 75", "120, 319.568", "200, 2130"})
  void nearAndFarCostWhatTheirRegimeSays(double metres, double nanojoules) {
    assertThat(over(metres)).isCloseTo(nanojoules, within(1e-9));
  }

  @Test
  void theShippedProfileOfTheTwoRegimesKeepsItsRadio() {
    NodeProfile profile = NodeProfile.find("two-regime-radio");
    assertThat(profile.sentNanojoules()).isCloseTo(319.568, within(1e-9));
    assertThat(profile.millijoules(0, 1_000_000, 0)).isCloseTo(319.568, within(1e-9));
    String text = new YAMLMapper().writeValueAsString(profile.settings());
    assertThat(NodeProfile.parse(YamlNode.parse("node.yaml", text))).isEqualTo(profile);
    assertThatIllegalArgumentException()
        .isThrownBy(() -> new NodeProfile("n", 1, 1, 1, 1, 1, 1, 1, "x", profile.radio(), 0, 0))
        .withMessageContaining("sent-nj-per-bit is 1.0 and the radio's 319.5");
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "electronics-nj: -1, near-pj-per-m2: 1, far-pj-per-m4: 1, distance-m: 1 | 0 to 1e12",
        "electronics-nj: 1, near-pj-per-m2: 0, far-pj-per-m4: 1, distance-m: 1 | 1e-12 to 1e12",
        "electronics-nj: 1, near-pj-per-m2: 1, far-pj-per-m4: 0, distance-m: 1 | 1e-12 to 1e12",
        "electronics-nj: 1, near-pj-per-m2: 1, far-pj-per-m4: 1, distance-m: .nan | 0 to 1e12",
        "electronics-nj: 1, near-pj-per-m2: 1, far-pj-per-m4: 1 | missing key 'distance-m'",
        "electronics-nj: 1, near-pj-per-m2: 1, far-pj-per-m4: 1, distance: 1 | 'distance-m'"
      })
  void wrongRadiosAreRefused(String radio, String complaint) {
    String text =
        "id: n\nsent-nj-per-bit: {"
            + radio
            + "}\nreceived-nj-per-bit: 1\nmac-nj: 5\nsleep-mw: 0\nram-kib: 64\n"
            + "kbit-per-second: 250\nbattery-j: 9\nsource: a test\n";
    assertThatThrownBy(() -> NodeProfile.parse(YamlNode.parse("node.yaml", text)))
        .isInstanceOf(BadInput.class)
        .hasMessageStartingWith("node.yaml, line 2: ")
        .hasMessageContaining(complaint);
  }

  @Test
  void workAirTimeAndBattery() {
    NodeProfile node = new NodeProfile("n", 1, 1, 0.5, 2, 64, 250, 100, "own example");
    assertThat(node.millijoules(2_000_000, 0, 0)).isEqualTo(1);
    assertThat(node.airTimeMs(8 * 133, 1, 1)).isCloseTo(4.256, within(1e-12));
    assertThat(node.picturesPerBattery(10, 20)).isEqualTo(100_000 / 50.0);
  }

  /**
   * IEEE 802.15.4-2003/2006, clause 6 (from memory): at 250 kbit/s an octet lasts 32 µs and an
   * acknowledgement, 11 octets with preamble and length, 352 µs; the turnaround of 12 symbols lasts
   * 192 µs, a unit of back-off, 20 symbols, 320 µs, the long interframe space, 40 symbols, 640 µs,
   * the short one, 12 symbols, 192 µs, after frames of up to 18 octets, 24 with preamble and
   * length. So the longest frame and its acknowledgement take 4256 + 192 + 352 + 640 µs without
   * back-off, the longest with a short space 768 + 192 + 352 + 192 µs, and a unit of back-off adds
   * 320 µs.
   */
  @Test
  void anAcknowledgedPacketTakesItsPausesToo() {
    String text = PROFILE + "gap-us: 640\nturnaround-us: 192\n";
    NodeProfile node = NodeProfile.parse(YamlNode.parse("node.yaml", text));
    assertThat(node.airTimeMs(8, 0, 0)).isCloseTo(0.032, within(1e-12));
    assertThat(node.airTimeMs(8 * 11, 0, 0)).isCloseTo(0.352, within(1e-12));
    assertThat(node.airTimeMs(8 * (133 + 11), 1, 1)).isCloseTo(5.440, within(1e-12));
    assertThat(node.airTimeMs(8 * 133, 1, 0)).as("not awaited").isCloseTo(4.896, within(1e-12));
    NodeProfile shortly =
        NodeProfile.parse(YamlNode.parse("node.yaml", text.replace("gap-us: 640", "gap-us: 192")));
    assertThat(shortly.airTimeMs(8 * (24 + 11), 1, 1)).isCloseTo(1.504, within(1e-12));
    assertThat(shortly.airTimeMs(8 * 24, 1, 0)).isCloseTo(0.960, within(1e-12));
    assertThat(shortly.airTimeMs(0, 1, 0))
        .as("12 symbols of 16 µs")
        .isCloseTo(12 * 0.016, within(1e-12));
    assertThat(node.airTimeMs(0, 1, 0)).as("40 symbols").isCloseTo(40 * 0.016, within(1e-12));
    assertThat(node.airTimeMs(0, 0, 1)).as("turnaround").isCloseTo(12 * 0.016, within(1e-12));
    String backOff = text.replace("gap-us: 640", "gap-us: 960");
    assertThat(
            NodeProfile.parse(YamlNode.parse("node.yaml", backOff)).airTimeMs(8 * (133 + 11), 1, 1))
        .isCloseTo(5.760, within(1e-12));
    String written = new YAMLMapper().writeValueAsString(node.settings());
    assertThat(NodeProfile.parse(YamlNode.parse("node.yaml", written))).isEqualTo(node);
    assertThat(NodeProfile.find("yard-camera").settings()).doesNotContainKeys("gap-us");
    assertThatThrownBy(() -> NodeProfile.parse(YamlNode.parse("n.yaml", text.replace("192", "-1"))))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("'turnaround-us'");
  }

  /**
   * IEEE 802.15.4-2003/2006, clause 6 (from memory; arithmetic recomputed): at 250 kbit/s the
   * longest frame, 133 octets with preamble and length, lasts 4.256 ms, and 127 octets less 11 or
   * 25 of overhead leave 116 or 102, so 4096 octets take 36 or 41 packets and 65536 take 565 or
   * 643.
   */
  @ParameterizedTest
  @CsvSource({"4096, 116, 36", "4096, 102, 41", "65536, 116, 565", "65536, 102, 643"})
  void packetsOfAStandardRadio(int octets, int payload, int packets) {
    Packetizer.Strip strip =
        new Packetizer.Strip() {
          private int left = octets;

          @Override
          public boolean isDone() {
            return left == 0;
          }

          @Override
          public Importance importance() {
            return Importance.REST;
          }

          @Override
          public Packetizer.@Nullable Unit take(int room, boolean whole) {
            int count = Math.min(room, left);
            if (count == 0) {
              return null;
            }
            left -= count;
            return Packetizer.Unit.of(new byte[count]);
          }
        };
    assertThat(Packetizer.pack(new byte[0], List.of(strip), payload)).hasSize(packets);
  }

  @Test
  void everyShippedProfileReads() {
    assertThat(NodeProfile.shipped()).isNotEmpty();
    for (String id : NodeProfile.shipped()) {
      NodeProfile profile = NodeProfile.find(id);
      assertThat(profile.id()).isEqualTo(id);
      assertThat(profile.source()).isNotBlank();
    }
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "mac-nj: 5 | mac-nj: -5 | 0 to 1e12",
        "ram-kib: 64 | ram-kib: 0 | 1e-12 to 1e12",
        "battery-j: 9 | battery-j: .inf | 1e-12 to 1e12",
        "sleep-mw: 0 | sleep-mw: 1e308 | 0 to 1e12",
        "kbit-per-second: 250 | kbit-per-second: 1e-308 | 1e-12 to 1e12",
        "id: n | id: N! | lower-case",
        "mac-nj: 5 | mac-njj: 5 | did you mean 'mac-nj'"
      })
  void wrongProfilesAreRefused(String from, String to, String complaint) {
    assertThat(NodeProfile.parse(YamlNode.parse("node.yaml", PROFILE)).ramKib()).isEqualTo(64);
    assertThat(PROFILE).contains(from);
    assertThatThrownBy(
            () -> NodeProfile.parse(YamlNode.parse("node.yaml", PROFILE.replace(from, to))))
        .isInstanceOf(BadInput.class)
        .hasMessageStartingWith("node.yaml, line ")
        .hasMessageContaining(complaint);
  }

  @Test
  void anUnknownProfileNamesTheNearest() {
    assertThatThrownBy(() -> NodeProfile.find("yard-camra"))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("yard-camera");
  }
}
