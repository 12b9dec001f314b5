package linkworthy.app;

import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Comparator;
import java.util.stream.Stream;

/** A folder that is removed when it is closed, or when the program is told to stop before that. */
final class TemporaryFolder implements AutoCloseable {
  private static final int MOST_TRIES = 100;

  private final Path path;
  private final Thread onSignal;

  /**
   * @param prefix of its name
   */
  TemporaryFolder(String prefix) throws IOException {
    this.path = Files.createTempDirectory(prefix);
    this.onSignal = new Thread(this::removeOnSignal, "remove");
    Runtime.getRuntime().addShutdownHook(onSignal);
  }

  Path path() {
    return path;
  }

  /** The folder may still be written to. */
  private void removeOnSignal() {
    for (int i = 0; i < MOST_TRIES && Files.exists(path); i++) {
      try {
        remove();
      } catch (UncheckedIOException e) {
        Thread.onSpinWait();
      }
    }
  }

  private void remove() {
    try (Stream<Path> paths = Files.walk(path)) {
      for (Path each : paths.sorted(Comparator.reverseOrder()).toList()) {
        Files.deleteIfExists(each);
      }
    } catch (IOException e) {
      throw new UncheckedIOException(e);
    }
  }

  /**
   * @throws UncheckedIOException if it cannot be removed
   */
  @Override
  public void close() {
    if (Files.exists(path)) {
      remove();
    }
    Assessment.release(onSignal);
  }
}
