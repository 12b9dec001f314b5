package linkworthy.app;

import java.io.IOException;
import java.math.BigDecimal;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.LinkedHashMap;
import java.util.Map;
import linkworthy.input.BadInput;
import linkworthy.input.Decimal;
import linkworthy.input.Unavailable;
import linkworthy.results.FolderFiles;
import linkworthy.results.IndentedJson;
import linkworthy.results.TrialsCsv;
import linkworthy.study.Study;
import linkworthy.trial.Repetition;
import linkworthy.trial.Trial;
import org.jspecify.annotations.Nullable;
import tools.jackson.databind.json.JsonMapper;

/** The files of a repeated trial. */
final class Replay {
  private static final JsonMapper JSON = IndentedJson.builder().build();

  private final Study study;
  private final Trial recorded;
  private final Repetition.Scene scene;

  Replay(Study study, Trial recorded, Repetition.Scene scene) {
    this.study = study;
    this.recorded = recorded;
    this.scene = scene;
  }

  /** What a trial is of, in words. */
  static String key(Trial trial) {
    String condition =
        trial.axis().isEmpty()
            ? "clean"
            : trial.impairment()
                + " on "
                + trial.actsOn()
                + ", "
                + trial.axis()
                + " "
                + Decimal.shortest(trial.severity())
                + ", replicate "
                + trial.replicate();
    return trial.picture() + ", " + condition + ", " + trial.codec();
  }

  /**
   * Writes the pictures and the figures.
   *
   * @throws BadInput if the folder is a file
   * @throws Unavailable if it cannot be written
   */
  void write(Path folder) {
    if (Files.exists(folder) && !Files.isDirectory(folder)) {
      throw new BadInput("--out is the file " + folder + "; accepted: a folder");
    }
    try {
      Files.createDirectories(folder);
    } catch (IOException e) {
      throw Unavailable.cannot("write " + folder, e);
    }
    FolderFiles.replace(folder.resolve("clean.png"), Pngs.picture(scene.clean()));
    FolderFiles.replace(folder.resolve("noisy.png"), Pngs.picture(scene.seen()));
    FolderFiles.replace(folder.resolve("decoded.png"), Pngs.picture(scene.decoded()));
    FolderFiles.replace(folder.resolve("error.png"), Pngs.error(scene.clean(), scene.decoded()));
    FolderFiles.replace(folder.resolve("figures.json"), JSON.writeValueAsString(json()) + "\n");
  }

  private Map<String, @Nullable Object> json() {
    Trial trial = scene.trial();
    Map<String, @Nullable Object> json = new LinkedHashMap<>();
    json.put("trial", trial.trial());
    json.put("of", key(trial));
    json.putAll(figures(trial));
    json.put("recorded", figures(recorded));
    json.put("equal", TrialsCsv.differences(recorded, trial).isEmpty());
    json.put(
        "differences",
        TrialsCsv.differences(recorded, trial).stream().map(Object::toString).toList());
    json.put("plane", study.pictures().hasAllPlanes() ? "luma, of all planes coded" : "luma");
    json.put("noisy_png", noisy());
    json.put("error_png", error());
    return json;
  }

  private String noisy() {
    String actsOn = scene.trial().actsOn();
    return actsOn.equals("samples")
        ? "what the encoder saw"
        : actsOn.isEmpty()
            ? "the same as clean.png: nothing was hurt"
            : "the same as clean.png: "
                + actsOn
                + " were hurt, after the encoder, which saw the clean picture";
  }

  private String error() {
    int middle = Pngs.middle(scene.clean().bitDepth());
    return middle
        + " + decoded - clean in grey levels, clipped to 0.."
        + (2 * middle - 1)
        + "; "
        + middle
        + " is no error";
  }

  private static Map<String, @Nullable Object> figures(Trial trial) {
    Map<String, @Nullable Object> figures = new LinkedHashMap<>();
    figures.put("mse", number(trial.mse()));
    figures.put("psnr_db", number(trial.psnrDb()));
    figures.put("ssim", number(trial.ssim()));
    trial.further().forEach((column, value) -> figures.put(column, number(value)));
    figures.put("payload_bits", trial.payloadBits());
    figures.put("sent_bits", trial.sentBits());
    figures.put("bits_per_pixel", number(trial.bitsPerPixel()));
    figures.put("packets_sent", trial.packetsSent());
    figures.put("packets_lost", trial.packetsLost());
    figures.put("realised_noise_variance", number(trial.realisedNoiseVariance()));
    figures.put("outage", trial.outage());
    figures.put("failure", trial.failure());
    return figures;
  }

  /** JSON has no infinity and no NaN: {@code inf} as in the record, and null. */
  private static @Nullable Object number(double value) {
    if (Double.isNaN(value)) {
      return null;
    }
    return Double.isInfinite(value)
        ? (value > 0 ? "inf" : "-inf")
        : new BigDecimal(Decimal.shortest(value));
  }
}
