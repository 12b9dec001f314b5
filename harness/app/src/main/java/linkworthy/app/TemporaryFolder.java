package linkworthy.app;

import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Comparator;
import java.util.Objects;
import java.util.stream.Stream;
import linkworthy.input.Unavailable;
import org.jspecify.annotations.Nullable;

/** A folder that is removed when it is closed, or when the program is told to stop before that. */
final class TemporaryFolder implements AutoCloseable {
  private static final int MOST_TRIES = 100;

  private final Thread onSignal = new Thread(this::removeOnSignal, "remove");
  private volatile @Nullable Path path;
  private volatile boolean stopped;

  /**
   * @param prefix of its name
   * @throws Unavailable if the program is being stopped
   */
  TemporaryFolder(String prefix) throws IOException {
    try {
      Runtime.getRuntime().addShutdownHook(onSignal);
    } catch (IllegalStateException e) {
      throw new Unavailable("stopped", e);
    }
    try {
      path = Files.createTempDirectory(prefix);
    } finally {
      if (path == null) {
        Assessment.release(onSignal);
      }
    }
  }

  Path path() {
    return Objects.requireNonNull(path);
  }

  /** Whether it was removed, or is being removed, because the program is told to stop. */
  boolean isStopped() {
    return stopped;
  }

  /** The folder may still be written to. */
  private void removeOnSignal() {
    stopped = true;
    for (int i = 0; path != null && i < MOST_TRIES && Files.exists(path()); i++) {
      try {
        remove();
      } catch (UncheckedIOException e) {
        Thread.onSpinWait();
      }
    }
  }

  private void remove() {
    try (Stream<Path> paths = Files.walk(path())) {
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
    if (!stopped && Files.exists(path())) {
      remove();
    }
    Assessment.release(onSignal);
  }
}
