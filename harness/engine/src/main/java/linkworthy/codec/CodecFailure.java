package linkworthy.codec;

/** Thrown by an encoder that cannot code a picture, to say why in a word of its own. */
public final class CodecFailure extends RuntimeException {
  private static final long serialVersionUID = 1L;

  private final String word;
  private final String detail;

  /** A failure that the trial's row will name. */
  public CodecFailure(Failure failure) {
    super(failure.word() + ": " + failure.detail());
    this.word = failure.word();
    this.detail = failure.detail();
  }

  public Failure failure() {
    return new Failure(word, detail);
  }
}
