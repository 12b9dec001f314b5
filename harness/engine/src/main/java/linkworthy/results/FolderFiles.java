package linkworthy.results;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.channels.FileChannel;
import java.nio.channels.WritableByteChannel;
import java.nio.charset.StandardCharsets;
import java.nio.file.AccessDeniedException;
import java.nio.file.FileAlreadyExistsException;
import java.nio.file.FileSystemException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardCopyOption;
import java.nio.file.StandardOpenOption;
import linkworthy.input.Unavailable;

/** Writing that leaves whole files only, and one-line words for what the machine refuses. */
final class FolderFiles {
  /** Ends the name of a file that is still being written. */
  static final String UNFINISHED = ".part";

  private FolderFiles() {}

  /**
   * Writes a file under a temporary name, to the disk, and then moves it into place.
   *
   * @throws Unavailable if that fails; what stood there before is unchanged
   */
  static void replace(Path file, String text) {
    Path unfinished = file.resolveSibling(file.getFileName() + UNFINISHED);
    try {
      try (FileChannel channel =
          FileChannel.open(
              unfinished,
              StandardOpenOption.CREATE,
              StandardOpenOption.TRUNCATE_EXISTING,
              StandardOpenOption.WRITE)) {
        writeFully(channel, text);
        channel.force(true);
      }
      Files.move(
          unfinished, file, StandardCopyOption.ATOMIC_MOVE, StandardCopyOption.REPLACE_EXISTING);
    } catch (IOException e) {
      Unavailable failure = unavailable("write", file, e);
      try {
        Files.deleteIfExists(unfinished);
      } catch (IOException alsoFailed) {
        failure.addSuppressed(alsoFailed);
      }
      throw failure;
    }
  }

  static void writeFully(WritableByteChannel channel, String text) throws IOException {
    ByteBuffer bytes = ByteBuffer.wrap(text.getBytes(StandardCharsets.UTF_8));
    while (bytes.hasRemaining()) {
      channel.write(bytes);
    }
  }

  /** The machine's refusal in one line. */
  static Unavailable unavailable(String verb, Path file, IOException cause) {
    return new Unavailable("cannot " + verb + " " + file + ": " + reason(cause), cause);
  }

  private static String reason(IOException cause) {
    if (cause instanceof AccessDeniedException) {
      return "permission denied";
    }
    if (cause instanceof FileAlreadyExistsException) {
      return "there is a file of that name in the way";
    }
    String reason =
        cause instanceof FileSystemException system ? system.getReason() : cause.getMessage();
    String words = reason == null ? cause.getClass().getSimpleName() : reason;
    return words.lines().findFirst().orElse(words);
  }
}
