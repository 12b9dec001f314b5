package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import com.networknt.schema.InputFormat;
import com.networknt.schema.SchemaRegistry;
import com.networknt.schema.SpecificationVersion;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import linkworthy.codec.CodecFamilies;
import linkworthy.results.ResultsFolder;
import linkworthy.statistics.Cell;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import tools.jackson.databind.JsonNode;
import tools.jackson.databind.json.JsonMapper;

/** The summary for scripts. */
class SummaryJsonTest {
  @TempDir Path folder;

  private Outcome assess(String... more) {
    List<String> arguments = new ArrayList<>(List.of("assess", "--format", "json"));
    arguments.addAll(List.of(more));
    return Program.run(folder, arguments.toArray(new String[0]));
  }

  @Test
  void standardOutputIsOneDocumentThatItsSchemaAllows() {
    Path out = folder.resolve("out");
    Outcome run = assess(SmallStudy.in(folder).toString(), "--out", out.toString());
    assertThat(run.code()).isZero();
    JsonNode summary = JsonMapper.shared().readTree(run.out());
    assertThat(run.out()).startsWith("{").endsWith("}\n");
    assertThat(
            SchemaRegistry.withDefaultDialect(SpecificationVersion.DRAFT_2020_12)
                .getSchema(Schemas.text("summary", CodecFamilies.installed()))
                .validate(run.out(), InputFormat.JSON))
        .isEmpty();
    ResultsFolder results = ResultsFolder.open(out);
    assertThat(summary.get("study").asString()).isEqualTo("small");
    assertThat(summary.get("folder").asString()).isEqualTo(out.toString());
    assertThat(summary.get("study_fingerprint").asString())
        .isEqualTo(results.run().studyFingerprint());
    assertThat(summary.get("trials_done").asLong()).isEqualTo(results.run().trialsDone());
    assertThat(summary.get("answer").get(0).asString()).isEqualTo(Reports.answer(results).get(0));
    assertThat(summary.get("exit_code").asInt()).isZero();
    List<Cell> cells = results.cells();
    assertThat(summary.get("cells").size()).isEqualTo(cells.size());
    for (int i = 0; i < cells.size(); i++) {
      JsonNode cell = summary.get("cells").get(i);
      assertThat(cell.get("codec").asString()).isEqualTo(cells.get(i).codec());
      assertThat(cell.get("psnr_mean_db").asDouble()).isEqualTo(cells.get(i).psnrMeanDb());
      assertThat(cell.get("severity").isNull()).isEqualTo(Double.isNaN(cells.get(i).severity()));
    }
    Outcome again = Program.run(folder, "assess", "--format", "json", "--resume", out.toString());
    assertThat(again.out()).isEqualTo(run.out());
    assertThat(again.err()).contains("is complete");
  }

  @Test
  void otherFormatsAndDryRunsAreRefused() {
    String study = SmallStudy.in(folder).toString();
    assertThat(Program.run(folder, "assess", study, "--format", "xml").errors())
        .singleElement()
        .asString()
        .contains("--format is 'xml'; accepted: text, json");
    assertThat(assess(study, "--dry-run").errors())
        .singleElement()
        .asString()
        .contains("--dry-run");
  }
}
