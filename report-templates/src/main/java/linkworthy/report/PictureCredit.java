package linkworthy.report;

/**
 * A picture that was used, and whom to thank for it.
 *
 * @param id as in the manifest
 * @param width in samples, after any reduction
 * @param height in samples, after any reduction
 * @param licence its name or identifier
 * @param credit author and title
 * @param source where it came from; an http or https address becomes a link
 * @param sha256 checksum of its file, or empty
 */
public record PictureCredit(
    String id, int width, int height, String licence, String credit, String source, String sha256) {
  /** A picture without checksum. */
  public PictureCredit(
      String id, int width, int height, String licence, String credit, String source) {
    this(id, width, height, licence, credit, source, "");
  }

  /** The source as an address to follow, or empty text if it is none. */
  public String address() {
    return source.matches("https?://\\S+") ? source : "";
  }
}
