package linkworthy.input;

/**
 * The machine refused: a full disk, a folder that cannot be written, a picture that cannot be read.
 * The message is one line. The command line ends with exit code 3.
 */
public final class Unavailable extends RuntimeException {
  private static final long serialVersionUID = 1L;

  public Unavailable(String message) {
    super(OneLine.of(message));
  }

  public Unavailable(String message, Throwable cause) {
    super(OneLine.of(message), cause);
  }

  @Override
  public String getMessage() {
    return String.valueOf(super.getMessage());
  }
}
