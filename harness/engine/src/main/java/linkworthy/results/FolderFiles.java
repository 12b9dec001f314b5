package linkworthy.results;

import java.io.IOException;
import java.nio.ByteBuffer;
import java.nio.channels.FileChannel;
import java.nio.channels.WritableByteChannel;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardCopyOption;
import java.nio.file.StandardOpenOption;
import linkworthy.input.Unavailable;

/** Writing that leaves whole files only, and one-line words for what the machine refuses. */
public final class FolderFiles {
  /** Ends the name of a file that is still being written. */
  static final String UNFINISHED = ".part";

  private FolderFiles() {}

  /**
   * Writes a file under a temporary name, to the disk, and then moves it into place.
   *
   * @throws Unavailable if that fails; what stood there before is unchanged
   */
  public static void replace(Path file, String text) {
    replace(file, text.getBytes(StandardCharsets.UTF_8));
  }

  /**
   * Writes a file under a temporary name, to the disk, and then moves it into place.
   *
   * @throws Unavailable if that fails; what stood there before is unchanged
   */
  public static void replace(Path file, byte[] bytes) {
    Path unfinished = file.resolveSibling(file.getFileName() + UNFINISHED);
    try {
      try (FileChannel channel =
          FileChannel.open(
              unfinished,
              StandardOpenOption.CREATE,
              StandardOpenOption.TRUNCATE_EXISTING,
              StandardOpenOption.WRITE)) {
        writeFully(channel, bytes);
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
    writeFully(channel, text.getBytes(StandardCharsets.UTF_8));
  }

  private static void writeFully(WritableByteChannel channel, byte[] all) throws IOException {
    ByteBuffer bytes = ByteBuffer.wrap(all);
    while (bytes.hasRemaining()) {
      channel.write(bytes);
    }
  }

  /** The machine's refusal in one line. */
  static Unavailable unavailable(String verb, Path file, IOException cause) {
    return Unavailable.cannot(verb + " " + file, cause);
  }
}
