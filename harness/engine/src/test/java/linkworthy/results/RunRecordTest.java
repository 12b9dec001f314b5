package linkworthy.results;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;

import java.nio.file.Path;
import java.time.Clock;
import java.time.Duration;
import linkworthy.input.BadInput;
import linkworthy.input.YamlNode;
import linkworthy.study.Study;
import linkworthy.study.StudyReader;
import linkworthy.study.StudyTemplate;
import linkworthy.study.StudyWriter;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class RunRecordTest {
  private final Study study = Samples.study();
  private final RunRecord begun = Samples.run(study, 30);

  @Test
  void aRunThatBeginsSaysWhatItIs() {
    String json = begun.toJson();
    assertThat(json)
        .startsWith(
            """
            {
              "program" : "linkworthy",
              "program_version" : "0.1.0",
              "study" : "my-study",
            """)
        .contains("\"study_fingerprint\" : \"" + StudyWriter.fingerprint(study) + "\"")
        .contains("\"corpus_fingerprint\" : \"" + "cd".repeat(32) + "\"")
        .contains("\"manifest\" : null")
        .contains("\"seed\" : 1,")
        .contains("\"java_version\" : \"" + System.getProperty("java.version") + "\"")
        .contains("\"start\" : \"2026-02-03T04:05:06Z\"")
        .contains("\"end\" : null")
        .contains("\"trials_planned\" : 30,\n  \"trials_done\" : 0,\n  \"complete\" : false")
        .contains("\"licence\" : \"CC0-1.0\"")
        .contains("\"attribution\" : \"Photograph by Stéfan\"")
        .doesNotContain("\r")
        .endsWith("}\n");
    assertThat(begun.noiseModels())
        .extracting(RunRecord.ModelUsed::id)
        .containsExactly("gaussian", "burst-loss");
  }

  @Test
  void itReadsBack() {
    RunRecord ended = begun.end(30, Clock.offset(Samples.CLOCK, Duration.ofMinutes(2)));
    assertThat(ended.complete()).isTrue();
    assertThat(ended.end()).hasToString("2026-02-03T04:07:06Z");
    assertThat(RunRecord.parse("run.json", begun.toJson())).isEqualTo(begun);
    assertThat(RunRecord.parse("run.json", ended.toJson())).isEqualTo(ended);
    assertThat(begun.end(29, Samples.CLOCK).complete()).isFalse();
  }

  @Test
  void itKnowsWhereAManifestOfOnesOwnWas() {
    Study own = Samples.study().withManifestAt(Path.of("/nowhere"));
    assertThat(Samples.run(own, 1).manifest()).isNull();
    Study other =
        StudyReader.read(
            YamlNode.parse("s.yaml", StudyTemplate.text())
                .with("pictures.manifest", "mine/manifest.csv"),
            Path.of("base").toAbsolutePath());
    assertThat(Samples.run(other, 1).manifestFile())
        .isEqualTo(Path.of("base/mine/manifest.csv").toAbsolutePath());
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      quoteCharacter = '`',
      value = {
        "\"program\" : \"linkworthy\" | \"program\" : \"other\" | accepted: linkworthy",
        "\"seed\" : 1 | \"sead\" : 1 | 'seed'",
        "\"seed\" : 1 | \"seed\" : 1, \"sead\" : 1 | sead",
        "\"study\" : \"my-study\" | \"study\" : \"\" | study is empty",
        "\"study\" : \"my-study\" | \"study\" : null | line",
        "\"seed\" : 1 | \"seed\" : null | seed is no value of the kind",
        "\"seed\" : 1 | \"seed\" : [] | seed is no value of the kind that 'assess' writes there",
        "\"trials_done\" : 0 | \"trials_done\" : 31 | 0 to 30",
        "\"complete\" : false | \"complete\" : true | complete is true",
        "{ | [ | line 1"
      })
  void aChangedRecordIsRefusedInOneLine(String right, String wrong, String complaint) {
    String json = begun.toJson().replace(right, wrong);
    assertThat(json).isNotEqualTo(begun.toJson());
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> RunRecord.parse("run.json", json))
        .withMessageStartingWith("run.json, line ")
        .withMessageContaining(complaint)
        .satisfies(e -> assertThat(String.valueOf(e.getMessage()).lines()).hasSize(1));
  }

  @ParameterizedTest
  @ValueSource(strings = {"null", "[]", "3", "\"text\""})
  void whatIsNoObjectIsRefusedInOneLine(String json) {
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> RunRecord.parse("run.json", json))
        .withMessageStartingWith("run.json, line 1: not the record of a run: it is ")
        .satisfies(e -> assertThat(e.getMessage()).doesNotContain("RunRecord"));
  }

  @Test
  void moreTrialsThanPlannedAreRefused() {
    assertThatIllegalArgumentException().isThrownBy(() -> begun.end(31, Samples.CLOCK));
  }
}
