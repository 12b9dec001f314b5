package linkworthy.report;

import java.util.List;
import org.jspecify.annotations.Nullable;

/**
 * Pictures before and after, chosen by a stated rule.
 *
 * @param rule which pictures, codecs and severities are shown, a sentence each
 * @param missing why no picture is shown, or empty
 * @param noises in the order of the tables
 */
public record Gallery(List<String> rule, String missing, List<Shown> noises) {
  /** No picture, and no word of it. */
  public static final Gallery NONE = new Gallery(List.of(), "", List.of());

  public Gallery {
    rule = List.copyOf(rule);
    noises = List.copyOf(noises);
  }

  /** No picture, for a reason. */
  public static Gallery missing(String reason) {
    return new Gallery(List.of(), reason, List.of());
  }

  /**
   * A picture in grey, as PNG.
   *
   * @param base64 the file
   * @param width in pixels
   * @param height in pixels
   */
  public record Image(String base64, int width, int height) {
    /** The picture as an address of itself. */
    public String address() {
      return "data:image/png;base64," + base64;
    }
  }

  /** A rectangle of a picture, in its pixels. */
  public record Crop(int x, int y, int width, int height) {}

  /** The pictures under one noise, which acts as this one of its conditions does. */
  public record Shown(Condition noise, List<Subject> subjects) {
    public Shown {
      subjects = List.copyOf(subjects);
    }
  }

  /**
   * A picture under one noise.
   *
   * @param role why it was chosen, as in {@code worst}
   * @param picture its id
   * @param whole the clean picture, perhaps reduced
   * @param crop what of {@code whole} the other images show
   * @param clean the crop of the clean picture, at full resolution
   * @param scenes mildest first
   */
  public record Subject(
      String role, String picture, Image whole, Crop crop, Image clean, List<Scene> scenes) {
    public Subject {
      scenes = List.copyOf(scenes);
    }
  }

  /**
   * A picture in one condition.
   *
   * @param received what reached the encoder, or null where that is the clean picture
   */
  public record Scene(Condition condition, @Nullable Image received, List<Decoded> decoded) {
    public Scene {
      decoded = List.copyOf(decoded);
    }
  }

  /**
   * What a receiver shows.
   *
   * @param codec its label
   * @param role why it was chosen, as in {@code best mean PSNR}
   * @param picture the crop as decoded
   * @param error the crop's error: mid-grey is none
   * @param outage whether nothing could be decoded, so that grey stands in
   * @param trial id of the trial
   */
  public record Decoded(
      String codec,
      String role,
      Image picture,
      Image error,
      double bitsPerPixel,
      double psnrDb,
      double ssim,
      boolean outage,
      String trial) {}
}
