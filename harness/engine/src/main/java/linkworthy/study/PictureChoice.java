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
 * @param planes {@link #LUMA}, or {@link #ALL}: Y, Cb and Cr (ITU-T T.871) of pictures in colour
 * @param chroma {@link #HALVED} or {@link #FULL} with all planes, else empty
 * @param signalPower what is called the power of a picture
 */
public record PictureChoice(
    @Nullable ManifestFile manifest,
    List<String> select,
    List<String> train,
    OptionalInt longestSide,
    String planes,
    String chroma,
    SignalPower signalPower) {
  /** Luma alone is coded. */
  public static final String LUMA = "luma";

  /** Luma and, of pictures in colour, both colour planes are coded. */
  public static final String ALL = "all";

  /** Colour planes of half the size in both directions. */
  public static final String HALVED = "4:2:0";

  /** Colour planes of full size. */
  public static final String FULL = "4:4:4";

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
   * @throws IllegalArgumentException if nothing is selected, the longest side is outside its range
   *     or planes and chroma do not go together
   */
  public PictureChoice {
    select = List.copyOf(select);
    train = List.copyOf(train);
    if (select.isEmpty()) {
      throw new IllegalArgumentException("select is empty; accepted: at least one word");
    }
    if (planes.equals(ALL)
        ? !List.of(HALVED, FULL).contains(chroma)
        : !planes.equals(LUMA) || !chroma.isEmpty()) {
      throw new IllegalArgumentException(
          "planes are '"
              + planes
              + "', chroma '"
              + chroma
              + "'; accepted: luma, or all and 4:2:0"
              + " or 4:4:4");
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
   * The luma plane of a picture in the size that the study wants.
   *
   * @throws linkworthy.input.BadInput if it is not what the manifest says
   * @throws linkworthy.input.Unavailable if it cannot be read
   */
  public Picture load(Manifest opened, ManifestEntry entry) {
    return sized(opened.load(entry));
  }

  /**
   * The planes of a picture, luma first, all in the size that the study wants: luma alone, or Y, Cb
   * and Cr where all planes are wanted and the picture is in colour.
   *
   * @throws linkworthy.input.BadInput if it is not what the manifest says
   * @throws linkworthy.input.Unavailable if it cannot be read
   */
  public List<Picture> planes(Manifest opened, ManifestEntry entry) {
    return hasAllPlanes()
        ? opened.readPicture(entry).planes().stream().map(this::sized).toList()
        : List.of(load(opened, entry));
  }

  private Picture sized(Picture plane) {
    return longestSide.isPresent()
        ? AreaAverage.toLongestSide(plane, longestSide.getAsInt())
        : plane;
  }

  /** Whether the colour planes are coded as well. */
  public boolean hasAllPlanes() {
    return planes.equals(ALL);
  }

  /** Samples coded for each sample of luma, edges aside. */
  public double codedSamples(ManifestEntry entry) {
    return !hasAllPlanes() || entry.channels() == 1 ? 1 : chroma.equals(HALVED) ? 1.5 : 3;
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
            chroma,
            signalPower);
  }
}
