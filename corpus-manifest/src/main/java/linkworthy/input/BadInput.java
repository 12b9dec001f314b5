package linkworthy.input;

/**
 * Something the user gave cannot be used. The message is one line: where, what was found, what is
 * accepted. The command line ends with exit code 2.
 */
public final class BadInput extends RuntimeException {
  private static final long serialVersionUID = 1L;

  public BadInput(String message) {
    super(OneLine.of(message));
  }

  public BadInput(String message, Throwable cause) {
    super(OneLine.of(message), cause);
  }

  @Override
  public String getMessage() {
    return String.valueOf(super.getMessage());
  }
}
