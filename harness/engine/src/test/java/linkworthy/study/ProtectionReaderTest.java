package linkworthy.study;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.util.EnumSet;
import java.util.List;
import java.util.Set;
import linkworthy.input.BadInput;
import linkworthy.link.HammingCode;
import linkworthy.link.Importance;
import linkworthy.link.Protection;
import org.jspecify.annotations.Nullable;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class ProtectionReaderTest {
  private static final Set<Importance> ALL = EnumSet.allOf(Importance.class);

  /** A study whose protect key has this value, on line 1. */
  private static Study read(String protect) {
    return StudyReaderTest.read("protect: " + protect + "\n" + StudyReaderTest.SHORT);
  }

  private static Protection protection(String protect) {
    return read(protect).codecs().get(0).protection();
  }

  @Test
  void whatIsLeftOutHasItsDefault() {
    assertThat(StudyReaderTest.read(StudyReaderTest.SHORT).codecs().get(0).protection())
        .isEqualTo(Protection.NONE);
    assertThat(protection("none")).isEqualTo(Protection.NONE);
    assertThat(protection("{repeat: 2}").rules())
        .containsExactly(new Protection.Rule(ALL, 2, null, 0, 5));
    assertThat(protection("{reed-solomon: {n: 12, k: 8}}").rules())
        .containsExactly(new Protection.Rule(ALL, 1, new Protection.ErasureCode(12, 8, 1), 0, 5));
    assertThat(protection("{reed-solomon: {n: 12, k: 8, corrects: erasures}}"))
        .isEqualTo(protection("{reed-solomon: {n: 12, k: 8}}"));
    assertThat(protection("{reed-solomon: {n: 12, k: 8, corrects: errors}}").rules())
        .containsExactly(
            new Protection.Rule(ALL, 1, new Protection.ErasureCode(12, 8, 1, true), 0, 5));
    assertThat(protection("{retransmit: 3}").rules())
        .containsExactly(new Protection.Rule(ALL, 1, null, 3, 5));
    assertThat(protection("{hamming: {}}").rules())
        .containsExactly(new Protection.Rule(ALL, 1, null, new HammingCode(1), 0, 5));
    assertThat(protection("{hamming: none, repeat: 2}").rules())
        .containsExactly(new Protection.Rule(ALL, 2, null, 0, 5));
  }

  @Test
  void everyKeyIsRead() {
    assertThat(
            protection(
                    "{repeat: 2, reed-solomon: {n: 12, k: 8, depth: 4}, hamming: {depth: 56},"
                        + " retransmit: 3, ack-bytes: 11, only: [first, header]}")
                .rules())
        .containsExactly(
            new Protection.Rule(
                EnumSet.of(Importance.HEADER, Importance.FIRST),
                2,
                new Protection.ErasureCode(12, 8, 4),
                new HammingCode(56),
                3,
                11));
    assertThat(
            protection("[{repeat: 3, only: header}, {retransmit: 1, only: [basis, first]}]")
                .rules())
        .containsExactly(
            new Protection.Rule(EnumSet.of(Importance.HEADER), 3, null, 0, 5),
            new Protection.Rule(EnumSet.of(Importance.BASIS, Importance.FIRST), 1, null, 1, 5));
  }

  private static final String SEVERAL =
      """
      name: yard
      protect: {reed-solomon: {n: 12, k: 8, depth: 4}}
      impairments:
        - {noise: gaussian, snr-db: 20}
      codecs:
        - {transform: dct, keep: [2, 4]}
        - {transform: dct, keep: [2, 4], protect: none}
        - {transform: dct, keep: 2, protect: {repeat: 2}}
        - {transform: dct, keep: 2, protect: {hamming: {depth: 8}}}
        - {transform: dct, keep: 2, protect: {reed-solomon: {n: 6, k: 4, corrects: errors}}}
        - {transform: dct, keep: 2, protect: {retransmit: 3}, label: patient}
        - {transform: dct, keep: 2, protect: [{repeat: 3, only: header}, {retransmit: 1, only: rest}]}
      """;

  @Test
  void anEntrySaysOtherwiseForItself() {
    assertThat(StudyReaderTest.read(SEVERAL).codecs())
        .extracting(CodecChoice::label)
        .containsExactly(
            "dct blocks8 K2 step8 rs12-8x4",
            "dct blocks8 K4 step8 rs12-8x4",
            "dct blocks8 K2 step8",
            "dct blocks8 K4 step8",
            "dct blocks8 K2 step8 repeat2",
            "dct blocks8 K2 step8 hamming7-4x8",
            "dct blocks8 K2 step8 rs6-4x1e",
            "patient",
            "dct blocks8 K2 step8 repeat3:header retry1:rest");
  }

  @Test
  void readingItBackGivesTheSameOptions() {
    Study study = StudyReaderTest.read(SEVERAL);
    String text = StudyWriter.canonical(study);
    assertThat(text)
        .contains(
            """
              step: 8.0
              protect:
                repeat: 1
                reed-solomon:
                  "n": 12
                  k: 8
                  depth: 4
                retransmit: 0
                only:
                - "header"
                - "basis"
                - "first"
                - "rest"
              label: "dct blocks8 K2 step8 rs12-8x4"
            """)
        .contains(
            """
              protect: "none"
              label: "dct blocks8 K2 step8"
            """)
        .contains(
            """
                reed-solomon: "none"
                retransmit: 3
                ack-bytes: 5
                only:
            """);
    Study back = StudyReaderTest.read(text);
    assertThat(StudyWriter.canonical(back)).isEqualTo(text);
    assertThat(StudyWriter.fingerprint(back)).isEqualTo(StudyWriter.fingerprint(study));
    assertThat(back.codecs())
        .extracting(CodecChoice::identity)
        .isEqualTo(study.codecs().stream().map(CodecChoice::identity).toList());
    assertThat(back.codecs())
        .extracting(CodecChoice::protection)
        .isEqualTo(study.codecs().stream().map(CodecChoice::protection).toList());
  }

  /** Results from before there was protection keep their study's fingerprint. */
  @Test
  void protectNoneChangesNoFingerprint() {
    String plain = StudyWriter.fingerprint(StudyReaderTest.read(StudyReaderTest.SHORT));
    assertThat(StudyWriter.fingerprint(read("none"))).isEqualTo(plain);
    assertThat(StudyWriter.fingerprint(read("{repeat: 2}"))).isNotEqualTo(plain);
    assertThat(StudyReaderTest.read(StudyReaderTest.SHORT).codecs().get(0).identity())
        .doesNotContainKeys("protect", "label");
  }

  @ParameterizedTest
  @ValueSource(
      strings = {
        "{repeat: 3}",
        "{reed-solomon: {n: 13, k: 8}}",
        "{reed-solomon: {n: 12, k: 7}}",
        "{reed-solomon: {n: 12, k: 8, depth: 2}}",
        "{hamming: {}}",
        "{retransmit: 2}",
        "{repeat: 2, only: header}",
        "{retransmit: 1, ack-bytes: 6}"
      })
  void everyPartCountsInTheFingerprint(String protect) {
    List<String> others =
        List.of("{repeat: 2}", "{reed-solomon: {n: 12, k: 8}}", "{retransmit: 1}", "none");
    assertThat(others)
        .noneMatch(
            other ->
                StudyWriter.fingerprint(read(other))
                    .equals(StudyWriter.fingerprint(read(protect))));
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "often | 'protect' | is 'often'; accepted: none, a group of keys",
        "[] | 'protect' | an empty list",
        "[none] | 'protect[0]' | keys with values",
        "{repeat: 0} | 'protect.repeat' | 1 to 16",
        "{repeat: 17} | 'protect.repeat' | 1 to 16",
        "{repeat: 1.5} | 'protect.repeat' | a whole number",
        "{repaet: 2} | unknown key 'repaet' | did you mean 'repeat'",
        "{only: header} | 'protect' | protects nothing",
        "{retransmit: 256} | 'protect.retransmit' | 0 to 255",
        "{repeat: 2, ack-bytes: 5} | 'protect.ack-bytes' | belongs to retransmit",
        "{retransmit: 1, ack-bytes: -1} | 'protect.ack-bytes' | 0 to 65535",
        "{reed-solomon: 12} | 'protect.reed-solomon' | none, or a group",
        "{reed-solomon: {n: 12}} | missing key 'k' | protect.reed-solomon",
        "{reed-solomon: {n: 8, k: 8}} | 'protect.reed-solomon.k' | 1 to 7, below n",
        "{reed-solomon: {n: 8, k: 9}} | 'protect.reed-solomon.k' | 1 to 7, below n",
        "{reed-solomon: {n: 8, k: 0}} | 'protect.reed-solomon.k' | 1 to 254",
        "{reed-solomon: {n: 256, k: 8}} | 'protect.reed-solomon.n' | 2 to 255",
        "{reed-solomon: {n: 12, k: 8, depth: 0}} | 'protect.reed-solomon.depth' | 1 to 4096",
        "{reed-solomon: {n: 12, k: 8, dept: 2}} | unknown key 'dept' | did you mean 'depth'",
        "{hamming: 8} | 'protect.hamming' | none, or a group with depth",
        "{hamming: {depth: 0}} | 'protect.hamming.depth' | 1 to 4096",
        "{hamming: {dept: 2}} | unknown key 'dept' | did you mean 'depth'",
        "{repeat: 2, only: [haeder]} | 'protect.only[0]' | did you mean 'header'",
        "{repeat: 2, only: [rest, rest]} | 'protect.only[1]' | 'rest' a second time",
        "{repeat: 2, only: []} | 'protect.only' | an empty list",
        "[{repeat: 2}, {retransmit: 1, only: rest}] | 'protect[1].only' | 'rest' a second time",
        "[{repeat: 2, only: rest}, {retransmit: 1}] | 'protect[1]' | 'rest' a second time"
      })
  void mistakes(String protect, String place, String complaint) {
    assertThatThrownBy(() -> read(protect))
        .isInstanceOf(BadInput.class)
        .hasMessageStartingWith("study.yaml, line 1: ")
        .hasMessageContaining(place)
        .hasMessageContaining(complaint)
        .hasMessageNotContaining("\n");
  }

  @Test
  void mistakesInAnEntryNameItsLine() {
    String study = StudyReaderTest.SHORT;
    assertThatThrownBy(() -> StudyReaderTest.read(study + "    protect: {repeat: 99}\n"))
        .isInstanceOf(BadInput.class)
        .hasMessageStartingWith("study.yaml, line 8: 'codecs[0].protect.repeat'");
    assertThatThrownBy(() -> StudyReaderTest.read(study + "    protct: none\n"))
        .isInstanceOf(BadInput.class)
        .hasMessageStartingWith("study.yaml, line 8: unknown key 'protct'")
        .hasMessageContaining("did you mean 'protect'");
    assertThatThrownBy(
            () -> StudyReaderTest.read(study + "  - {transform: mean, step: 16, protect: none}\n"))
        .isInstanceOf(BadInput.class)
        .hasMessageStartingWith("study.yaml, line 8: ")
        .hasMessageContaining("'mean rows step16' a second time");
  }

  /** 32 bytes for the codec and 7 for the code's header and length. */
  @Test
  void aPayloadMustHaveRoom() {
    String link = "link: {payload-bytes: 38}\n";
    assertThat(StudyReaderTest.read(link + StudyReaderTest.SHORT).codecs()).hasSize(1);
    assertThatThrownBy(
            () ->
                StudyReaderTest.read(
                    link + "protect: {reed-solomon: {n: 12, k: 8}}\n" + StudyReaderTest.SHORT))
        .isInstanceOf(BadInput.class)
        .hasMessageStartingWith("study.yaml, line 2: 'protect' takes up to 7 bytes")
        .hasMessageContaining("at least 39");
  }

  /** 4/7 of the payload are left beside a code on bits: 32 of 56, and 33 of 58 with planes. */
  @Test
  void aCodeOnBitsNeedsRoom() {
    String coded = "link: {payload-bytes: 55}\nprotect: {hamming: {}}\n" + StudyReaderTest.SHORT;
    assertThatThrownBy(() -> StudyReaderTest.read(coded))
        .isInstanceOf(BadInput.class)
        .hasMessageStartingWith("study.yaml, line 2: 'protect' takes up to 24 bytes")
        .hasMessageContaining("at least 56");
    assertThat(StudyReaderTest.read(coded.replace("55", "56")).codecs()).hasSize(1);
    String planes = "pictures: {planes: all}\n" + coded.replace("55", "57");
    assertThatThrownBy(() -> StudyReaderTest.read(planes))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("has only 31 bytes of payload-bytes left")
        .hasMessageContaining("payload-bytes of at least 58");
    assertThat(StudyReaderTest.read(planes.replace("57", "58")).codecs()).hasSize(1);
  }

  /** One byte each for the number of a tile and of a plane, beside the 32 of the codec. */
  @Test
  void tilesAndPlanesNeedRoomBesideProtection() {
    String tiles =
        """
        name: yard
        link: {payload-bytes: 32}
        impairments: [{noise: gaussian, variance: 100}]
        codecs:
          - {transform: pca, over: tiles, grid: 2x2, keep: 2}
        """;
    assertThatThrownBy(() -> StudyReaderTest.read(tiles))
        .isInstanceOf(BadInput.class)
        .hasMessageStartingWith("study.yaml, line 5: 'codecs[0]' numbers its tiles")
        .hasMessageContaining("only 32 are left")
        .hasMessageContaining("at least 33");
    assertThat(StudyReaderTest.read(tiles.replace("32", "33")).codecs()).hasSize(1);
    String planes =
        "link: {payload-bytes: 39}\npictures: {planes: all}\n"
            + "protect: {reed-solomon: {n: 12, k: 8}}\n"
            + StudyReaderTest.SHORT;
    assertThatThrownBy(() -> StudyReaderTest.read(planes))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("has only 31 bytes of payload-bytes left")
        .hasMessageContaining("payload-bytes of at least 40");
    assertThat(StudyReaderTest.read(planes.replace("39", "40")).codecs()).hasSize(1);
  }

  /** What protects from damage needs damaged packets, what protects from loss lost ones. */
  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "burst-loss, loss-rate: 0.1 | {hamming: {depth: 8}} | hamming",
        "burst-loss, loss-rate: 0.1 | {reed-solomon: {n: 6, k: 4, corrects: errors}}"
            + " | corrects: errors",
        "burst-loss, loss-rate: 0.1 | {reed-solomon: {n: 6, k: 4}, retransmit: 1} | ",
        "'bit-errors, frame-check: true, bit-error-rate: 0.01' | {hamming: {}, retransmit: 2}"
            + " | hamming",
        "'bit-errors, bit-error-rate: 0.01' | {hamming: {}} | ",
        "'bit-errors, bit-error-rate: 0.01' | {reed-solomon: {n: 6, k: 4, corrects: errors}} | ",
        "'bit-errors, bit-error-rate: 0.01' | {reed-solomon: {n: 6, k: 4}, retransmit: 1}"
            + " | 'reed-solomon with corrects: erasures, retransmit'",
        "'gaussian, snr-db: 20' | {repeat: 2} | "
      })
  void whatProtectsFromNothingIsSaid(String noise, String protect, @Nullable String parts) {
    Study study =
        StudyReaderTest.read(
            "protect: "
                + protect
                + "\n"
                + StudyReaderTest.SHORT.replace(
                    "  - noise: gaussian\n    snr-db: 20\n", "  - {noise: " + noise + "}\n"));
    assertThat(study.warnings().stream().map(line -> line.split(" gains nothing", 2)[0]).toList())
        .isEqualTo(parts == null ? List.of() : List.of(parts.split(", ", -1)));
    assertThat(study.warnings()).noneMatch(line -> line.contains("\n"));
  }
}
