package linkworthy.report;

/**
 * One option compared: a column of a table. The label alone tells codecs apart; transform and
 * arrangement say which of them stand under one heading.
 *
 * @param label how the codec is named, as in {@code pca rows K16 step8}
 * @param transform {@code mean}, {@code dct}, {@code pca}, or empty
 * @param over arrangement, as in {@code blocks8}, or empty
 * @param keep components in force, or empty
 * @param step quantiser step in grey levels, {@code none}, or empty
 */
public record CodecColumn(String label, String transform, String over, String keep, String step) {
  /**
   * @throws IllegalArgumentException if the label is blank
   */
  public CodecColumn {
    if (label.isBlank()) {
      throw new IllegalArgumentException("codec label is empty; accepted: some text");
    }
  }
}
