package linkworthy.noise.fit;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.FileAlreadyExistsException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardOpenOption;
import java.util.Locale;
import linkworthy.input.BadInput;
import linkworthy.input.Decimal;
import linkworthy.input.Unavailable;
import linkworthy.input.YamlNode;
import linkworthy.noise.BurstLoss;
import linkworthy.noise.NoiseModel;
import linkworthy.noise.ShotNoise;

/** A fitted model as the text of a model file, which {@link NoiseModel#read} accepts. */
public final class ModelFile {
  private static final int LONGEST_ID = 64;

  private ModelFile() {}

  /** The model of a loss trace, to be set by its loss rate. */
  public static String of(LossFit fit, String id) {
    ChainEstimate chosen = fit.chosen();
    LossTrace trace = fit.trace();
    StringBuilder text = head(id, "burst-loss", "packets");
    text.append("parameters:\n");
    text.append("  ").append(BurstLoss.MEAN_BURST).append(": ");
    text.append(Decimal.shortest(chosen.meanBurst()));
    text.append("  # mean stay in the bad state, in packets\n");
    text.append("  ").append(BurstLoss.DELIVERY_GOOD).append(": 1\n");
    text.append("  ").append(BurstLoss.DELIVERY_BAD).append(": ");
    text.append(Decimal.shortest(chosen.chain().h())).append('\n');
    text.append("severity: [").append(BurstLoss.LOSS_RATE).append("]\n");
    line(
        text,
        "source",
        "fitted from %s, %d packets, sha256 %s"
            .formatted(trace.name(), trace.packets(), trace.sha256()));
    line(text, "notes", notes(chosen));
    return text.toString();
  }

  private static String notes(ChainEstimate chosen) {
    StringBuilder notes = new StringBuilder();
    notes.append(chosen.form().label());
    notes.append("; of this trace: loss-rate ").append(Decimal.shortest(chosen.chain().lossRate()));
    notes.append(" (s.e. ").append(LossFit.format(chosen.errorOfLossRate())).append(')');
    notes.append(", mean-burst ").append(LossFit.format(chosen.meanBurst()));
    notes.append(" (s.e. ").append(LossFit.format(chosen.errorOfMeanBurst())).append(')');
    if (chosen.form() == ChainEstimate.Form.THREE_PARAMETER) {
      notes.append(", delivery-bad ").append(LossFit.format(chosen.chain().h()));
      notes.append(" (s.e. ").append(LossFit.format(chosen.errorOfH())).append(')');
    }
    if (chosen.form() == ChainEstimate.Form.INDEPENDENT) {
      notes.append("; losses are independent at that loss rate only: mean-burst is 1/(1-q)");
    }
    return notes.append('.').toString();
  }

  /** Photon and read noise, to be set by its gain. */
  static String shotNoise(String id, double readNoise, String source, String notes) {
    StringBuilder text = head(id, "shot-noise", "samples");
    text.append("parameters:\n  ").append(ShotNoise.READ_NOISE).append(": ");
    text.append(Decimal.shortest(readNoise)).append("  # grey levels\n");
    text.append("severity: [").append(ShotNoise.GAIN).append(", snr-db, variance]\n");
    line(text, "source", source);
    line(text, "notes", notes);
    return text.toString();
  }

  /** Noise that does not depend on the light, to be set by its variance. */
  static String gaussian(String id, String source, String notes) {
    StringBuilder text = head(id, "gaussian", "samples");
    text.append("severity: [variance, snr-db]\n");
    line(text, "source", source);
    line(text, "notes", notes);
    return text.toString();
  }

  /** The common keys down to acts-on. */
  private static StringBuilder head(String id, String process, String site) {
    StringBuilder text = new StringBuilder();
    text.append("# A noise model fitted from measurements.\n");
    text.append("id: ").append(id).append("\nversion: 1\nprocess: ").append(process);
    return text.append("\nacts-on: [").append(site).append("]\n");
  }

  /** A key with a text in double quotes (YAML 1.2, section 7.3.1). */
  private static void line(StringBuilder text, String key, String value) {
    text.append(key).append(": \"");
    for (int i = 0; i < value.length(); i++) {
      char c = value.charAt(i);
      if (c == '"' || c == '\\') {
        text.append('\\').append(c);
      } else if (Character.isISOControl(c) || c == 0x2028 || c == 0x2029) {
        text.append(String.format(Locale.ROOT, "\\u%04x", (int) c));
      } else {
        text.append(c);
      }
    }
    text.append("\"\n");
  }

  /** An id made of a file's name without its ending; {@code fitted} where nothing is left of it. */
  public static String id(Path file) {
    String name = String.valueOf(file.getFileName()).toLowerCase(Locale.ROOT);
    String id =
        name.replaceFirst("\\.[a-z0-9]+$", "")
            .replaceAll("[^a-z0-9]+", "-")
            .replaceAll("^[^a-z]+|-$", "");
    id = id.substring(0, Math.min(LONGEST_ID, id.length()));
    return id.isEmpty() ? "fitted" : id;
  }

  /**
   * Refuses a file that is there already.
   *
   * @throws BadInput if so
   */
  public static void requireNew(Path file) {
    if (Files.exists(file)) {
      throw new BadInput(file + " exists already; accepted: a new file");
    }
  }

  /**
   * Writes a model to a new file.
   *
   * @throws BadInput if the file exists, or the text is no model
   * @throws Unavailable if it cannot be written
   */
  public static void write(Path file, String text) {
    NoiseModel.parse(YamlNode.parse(file.toString(), text));
    try {
      Files.write(file, text.getBytes(StandardCharsets.UTF_8), StandardOpenOption.CREATE_NEW);
    } catch (FileAlreadyExistsException e) {
      throw new BadInput(file + " exists already; accepted: a new file", e);
    } catch (IOException e) {
      throw Unavailable.cannot("write " + file, e);
    }
  }
}
