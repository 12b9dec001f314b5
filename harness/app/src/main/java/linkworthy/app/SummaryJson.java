package linkworthy.app;

import java.math.BigDecimal;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import linkworthy.input.Decimal;
import linkworthy.input.Key;
import linkworthy.input.KeyGroup;
import linkworthy.input.Kind;
import linkworthy.results.ResultsFolder;
import linkworthy.results.RunRecord;
import linkworthy.statistics.Cell;
import linkworthy.statistics.Standing;
import org.jspecify.annotations.Nullable;

/**
 * What {@code assess --format json} prints: one JSON document about a run, for scripts. A figure
 * that does not exist, or is infinite, is {@code null}.
 */
final class SummaryJson {
  private static final Kind TEXT = new Kind.Text("[\\s\\S]*", "text");
  private static final Kind COUNT = new Kind.Whole(0, Long.MAX_VALUE);
  private static final Kind FIGURE = new Kind.OrNull(Kind.Real.any("a number"));

  private static final KeyGroup CELL =
      KeyGroup.of(
          "cell",
          Key.required("impairment", TEXT, "noise, none for clean pictures"),
          Key.required("acts_on", TEXT, "samples, packets or bits; empty for clean pictures"),
          Key.required("axis", TEXT, "key by which the severity was given; empty for clean"),
          Key.required("severity", FIGURE, "value on that axis"),
          Key.required("codec", TEXT, "label"),
          Key.required("pictures", COUNT, "how many"),
          Key.required("trials", COUNT, "how many"),
          Key.required("bits_per_pixel", FIGURE, "mean of all bits sent over samples"),
          Key.required("psnr_mean_db", FIGURE, "mean PSNR in dB"),
          Key.required("psnr_noise_half_width_db", FIGURE, "half the 95 % noise interval"),
          Key.required("psnr_picture_half_width_db", FIGURE, "half the 95 % picture interval"),
          Key.required("ssim_mean", FIGURE, "mean SSIM"),
          Key.required("outage_rate", FIGURE, "share of outages"),
          Key.required("failures", COUNT, "trials in which the codec failed"),
          Key.required(
              "standing",
              new Kind.Words(Arrays.stream(Standing.values()).map(Standing::toString).toList()),
              "against the best codec under this severity"));

  /** What the document holds. */
  static final KeyGroup KEYS =
      KeyGroup.of(
          "summary",
          Key.required("study", TEXT, "name of the study"),
          Key.required("purpose", TEXT, "why it was run"),
          Key.required("study_fingerprint", TEXT, "SHA-256 of the study and its noise models"),
          Key.required("program_version", TEXT, "version of Linkworthy"),
          Key.required("folder", TEXT, "results folder"),
          Key.required("report", TEXT, "path of the report"),
          Key.required("complete", new Kind.Flag(), "whether every planned trial was run"),
          Key.required("exit_code", new Kind.Whole(0, 3), "with which the program ends"),
          Key.required("exit_meaning", TEXT, "that code in words"),
          Key.required("trials_planned", COUNT, "how many"),
          Key.required("trials_done", COUNT, "how many"),
          Key.required(
              "answer", new Kind.Items(TEXT), "the answer and its certainty, in sentences"),
          Key.required(
              "cells", new Kind.Items(CELL), "a codec under a severity, over all pictures"));

  private SummaryJson() {}

  static String of(ResultsFolder results) {
    RunRecord run = results.run();
    List<String> answer = new ArrayList<>(Reports.answer(results));
    Reports.widths(results).ifPresent(answer::add);
    return Schemas.json(
        Kind.inOrder(
            "study",
            run.study(),
            "purpose",
            run.purpose(),
            "study_fingerprint",
            run.studyFingerprint(),
            "program_version",
            run.programVersion(),
            "folder",
            results.path().toString(),
            "report",
            results.path().resolve(ResultsFolder.REPORT).toString(),
            "complete",
            run.complete(),
            "exit_code",
            Main.DONE,
            "exit_meaning",
            "done",
            "trials_planned",
            run.trialsPlanned(),
            "trials_done",
            run.trialsDone(),
            "answer",
            answer,
            "cells",
            results.cells().stream().map(SummaryJson::cell).toList()));
  }

  private static Map<String, @Nullable Object> cell(Cell cell) {
    Map<String, @Nullable Object> map = new LinkedHashMap<>();
    map.put("impairment", cell.impairment());
    map.put("acts_on", cell.actsOn());
    map.put("axis", cell.axis());
    map.put("severity", figure(cell.severity()));
    map.put("codec", cell.codec());
    map.put("pictures", cell.pictures());
    map.put("trials", cell.trials());
    map.put("bits_per_pixel", figure(cell.bitsPerPixelMean()));
    map.put("psnr_mean_db", figure(cell.psnrMeanDb()));
    map.put("psnr_noise_half_width_db", figure(cell.psnrNoiseHalfWidthDb()));
    map.put("psnr_picture_half_width_db", figure(cell.psnrPictureHalfWidthDb()));
    map.put("ssim_mean", figure(cell.ssimMean()));
    map.put("outage_rate", figure(cell.outageRate()));
    map.put("failures", cell.failures());
    map.put("standing", cell.standing().toString());
    return map;
  }

  private static @Nullable BigDecimal figure(double value) {
    return Double.isFinite(value) ? new BigDecimal(Decimal.shortest(value)) : null;
  }
}
