package linkworthy.codec;

/**
 * Why a codec gave no result in one trial.
 *
 * @param word as the record has it: small letters and dashes
 * @param detail one line for the user, up to 300 characters; not recorded
 */
public record Failure(String word, String detail) {
  /** A codec of Java threw something. */
  public static final String THREW = "threw";

  /** A codec of Java returned null. */
  public static final String NO_RESULT = "no-result";

  /** A packet is longer than the link's payload. */
  public static final String PACKET_SIZE = "packet-size";

  /** The decoded picture has another size or depth than the one that was sent. */
  public static final String DECODE_SIZE = "decode-size";

  private static final int MAX_DETAIL = 300;

  /**
   * @throws IllegalArgumentException if the word is none
   */
  public Failure {
    if (!word.matches("[a-z]+(-[a-z]+)*")) {
      throw new IllegalArgumentException(
          "failure is '" + word + "'; accepted: small letters and dashes");
    }
    String line = detail.replaceAll("[\\s\\p{Cntrl}]+", " ").strip();
    detail = line.length() > MAX_DETAIL ? line.substring(0, MAX_DETAIL - 3) + "..." : line;
  }
}
