package linkworthy.study;

import java.nio.file.Path;
import java.util.List;
import java.util.OptionalInt;
import linkworthy.corpus.AreaAverage;
import linkworthy.corpus.Manifest;
import linkworthy.corpus.ManifestEntry;
import linkworthy.corpus.Picture;
import linkworthy.input.Require;
import org.jspecify.annotations.Nullable;

/**
 * The pictures of a study.
 *
 * @param manifest a manifest of the user's own, or null for the shipped pictures
 * @param select sets, categories or ids in the manifest
 * @param train sets, categories or ids in the manifest of the pictures that codecs with a shared
 *     basis learn from, none of them tested; empty for none
 * @param longestSide longest side after area-averaged reduction, in samples, or empty for none
 * @param planes {@code luma}
 * @param signalPower what is called the power of a picture
 */
public record PictureChoice(
    @Nullable ManifestFile manifest,
    List<String> select,
    List<String> train,
    OptionalInt longestSide,
    String planes,
    SignalPower signalPower) {
  /** The only choice of planes so far. */
  public static final String LUMA = "luma";

  /** The smallest accepted longest side, in samples. */
  public static final int MIN_SIDE = 8;

  /**
   * A manifest file.
   *
   * @param written the path as the study has it
   * @param file where that is
   */
  public record ManifestFile(String written, Path file) {}

  /**
   * @throws IllegalArgumentException if nothing is selected or the longest side is outside its
   *     range
   */
  public PictureChoice {
    select = List.copyOf(select);
    train = List.copyOf(train);
    if (select.isEmpty()) {
      throw new IllegalArgumentException("select is empty; accepted: at least one word");
    }
    if (longestSide.isPresent()) {
      Require.inRange(longestSide.getAsInt(), MIN_SIDE, Picture.MAX_SIDE, "longest-side (samples)");
    }
  }

  /**
   * The manifest itself.
   *
   * @throws linkworthy.input.BadInput if it cannot be used
   */
  public Manifest open() {
    return manifest == null ? Manifest.shipped() : Manifest.read(manifest.file());
  }

  /**
   * A picture as the study wants it.
   *
   * @throws linkworthy.input.BadInput if it is not what the manifest says
   * @throws linkworthy.input.Unavailable if it cannot be read
   */
  public Picture load(Manifest opened, ManifestEntry entry) {
    Picture picture = opened.load(entry);
    return longestSide.isPresent()
        ? AreaAverage.toLongestSide(picture, longestSide.getAsInt())
        : picture;
  }

  PictureChoice withManifestAt(Path file) {
    return manifest == null
        ? this
        : new PictureChoice(
            new ManifestFile(manifest.written(), file),
            select,
            train,
            longestSide,
            planes,
            signalPower);
  }
}
