package linkworthy.input;

import java.io.IOException;
import java.nio.file.AccessDeniedException;
import java.nio.file.FileAlreadyExistsException;
import java.nio.file.FileSystemException;
import java.nio.file.NoSuchFileException;

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

  /**
   * The message {@code cannot <task>: <reason>}, where the reason is readable even for the
   * exceptions that carry no more than a file's name.
   *
   * @param task what was tried, as in {@code read my.csv}
   */
  public static Unavailable cannot(String task, IOException problem) {
    return new Unavailable("cannot " + task + ": " + reason(problem), problem);
  }

  private static String reason(IOException problem) {
    if (problem instanceof AccessDeniedException) {
      return "permission denied";
    }
    if (problem instanceof FileAlreadyExistsException) {
      return "there is a file of that name in the way";
    }
    if (problem instanceof NoSuchFileException) {
      return "no such file or folder";
    }
    String reason =
        problem instanceof FileSystemException file ? file.getReason() : problem.getMessage();
    String words = reason == null ? problem.getClass().getSimpleName() : reason;
    return words.lines().findFirst().orElse(words);
  }

  @Override
  public String getMessage() {
    return String.valueOf(super.getMessage());
  }
}
