package linkworthy.corpus;

import java.util.Locale;
import java.util.regex.Pattern;
import linkworthy.input.Require;

/**
 * One line of a manifest: a picture, what it announces to be, and whose it is.
 *
 * @param id letters, digits, dots, underscores and hyphens, at most 64, the first a letter or digit
 * @param set the set it belongs to, one line of any text
 * @param file path below the manifest's folder, with {@code /} between the names
 * @param width samples, 1 to {@link Picture#MAX_SIDE}
 * @param height samples, 1 to {@link Picture#MAX_SIDE}
 * @param channels 1 (gray) or 3 (red, green, blue)
 * @param bitDepth bits per sample, 1 to 16
 * @param category what it shows, one line of any text
 * @param licence identifiers of {@link Licences} joined by {@code " AND "}
 * @param attribution the credit, one line of any text
 * @param source where it is from, one line of any text, may be empty
 * @param sha256 SHA-256 of the file, 64 hexadecimal digits, kept in lower case
 * @param derivation how it was made, one line of any text, may be empty
 * @param address where it can be fetched, {@code https://}, or {@code http://} on this machine
 *     alone; may be empty
 */
public record ManifestEntry(
    String id,
    String set,
    String file,
    int width,
    int height,
    int channels,
    int bitDepth,
    String category,
    String licence,
    String attribution,
    String source,
    String sha256,
    String derivation,
    String address) {
  private static final Pattern ID = Pattern.compile("[A-Za-z0-9][A-Za-z0-9._-]{0,63}");
  private static final Pattern SHA_256 = Pattern.compile("[0-9a-fA-F]{64}");
  private static final Pattern DRIVE = Pattern.compile("[A-Za-z]:.*");

  /**
   * @throws IllegalArgumentException if a value is outside its range; the message begins with the
   *     name of the manifest's column
   */
  public ManifestEntry {
    require(
        ID.matcher(id).matches(),
        "id",
        id,
        "1 to 64 letters, digits, dots, underscores or hyphens, the first a letter or digit");
    line(set, "set");
    file(file);
    Require.inRange(width, 1, Picture.MAX_SIDE, "width");
    Require.inRange(height, 1, Picture.MAX_SIDE, "height");
    require(channels == 1 || channels == 3, "channels", Integer.toString(channels), "1 or 3");
    Require.inRange(bitDepth, 1, 16, "bit_depth");
    line(category, "category");
    Licences.require(licence);
    line(attribution, "attribution");
    lineOrEmpty(source, "source");
    require(SHA_256.matcher(sha256).matches(), "sha256", sha256, "64 hexadecimal digits");
    sha256 = sha256.toLowerCase(Locale.ROOT);
    lineOrEmpty(derivation, "derivation");
    require(
        address.isEmpty() || Address.of(address).isPresent(), "address", address, Address.ACCEPTED);
  }

  /**
   * A picture that is not to be fetched.
   *
   * @throws IllegalArgumentException as the other constructor
   */
  public ManifestEntry(
      String id,
      String set,
      String file,
      int width,
      int height,
      int channels,
      int bitDepth,
      String category,
      String licence,
      String attribution,
      String source,
      String sha256,
      String derivation) {
    this(
        id,
        set,
        file,
        width,
        height,
        channels,
        bitDepth,
        category,
        licence,
        attribution,
        source,
        sha256,
        derivation,
        "");
  }

  /** What the file has to be. */
  public PictureHeader header() {
    return new PictureHeader(width, height, channels, bitDepth);
  }

  private static void file(String file) {
    line(file, "file");
    boolean inside = file.indexOf('\\') < 0 && !DRIVE.matcher(file).matches();
    for (String step : file.split("/", -1)) {
      inside &= !step.isBlank() && !step.equals(".") && !step.equals("..");
    }
    require(
        inside,
        "file",
        file,
        "a path below the manifest's folder, names joined by '/', without '.', '..', a backslash or"
            + " a drive");
  }

  private static void line(String text, String column) {
    require(!text.isBlank(), column, text, "one line of text");
    lineOrEmpty(text, column);
  }

  private static void lineOrEmpty(String text, String column) {
    boolean control =
        text.chars().anyMatch(c -> Character.isISOControl(c) || c == 0x2028 || c == 0x2029);
    require(!control, column, text, "one line of text without control characters");
  }

  private static void require(boolean good, String column, String found, String accepted) {
    if (!good) {
      String shown = found.length() > 80 ? found.substring(0, 77) + "..." : found;
      throw new IllegalArgumentException(
          column
              + " is "
              + (shown.isEmpty() ? "empty" : "'" + shown + "'")
              + "; accepted: "
              + accepted);
    }
  }
}
