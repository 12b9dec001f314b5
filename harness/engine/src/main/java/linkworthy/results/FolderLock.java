package linkworthy.results;

import java.io.IOException;
import java.nio.channels.FileChannel;
import java.nio.channels.FileLock;
import java.nio.channels.OverlappingFileLockException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardOpenOption;
import linkworthy.input.BadInput;
import org.jspecify.annotations.Nullable;

/**
 * Keeps two writers out of one results folder. The lock is the system's, on a file {@code lock}: it
 * goes with the process that holds it, so a killed run leaves at most an empty file.
 */
final class FolderLock implements AutoCloseable {
  static final String FILE = "lock";

  private final Path file;
  private final FileChannel channel;

  private FolderLock(Path file, FileChannel channel) {
    this.file = file;
    this.channel = channel;
  }

  /**
   * @throws BadInput if another run holds the folder
   * @throws linkworthy.input.Unavailable if the folder cannot be written
   */
  static FolderLock take(Path folder) {
    Path file = folder.resolve(FILE);
    try {
      FileChannel channel =
          FileChannel.open(file, StandardOpenOption.CREATE, StandardOpenOption.WRITE);
      if (tryLock(channel) == null) {
        channel.close();
        throw held(folder);
      }
      return new FolderLock(file, channel);
    } catch (IOException e) {
      throw FolderFiles.unavailable("write", file, e);
    }
  }

  /** Whether the lock file is one of ours: an empty file. */
  static boolean isBare(Path folder) throws IOException {
    Path file = folder.resolve(FILE);
    return Files.isRegularFile(file) && Files.size(file) == 0;
  }

  /**
   * Looks without taking, creating or removing anything.
   *
   * @throws BadInput if another run holds the folder
   */
  static void requireNotHeld(Path folder) throws IOException {
    if (!isBare(folder)) {
      return;
    }
    try (FileChannel channel = FileChannel.open(folder.resolve(FILE), StandardOpenOption.WRITE)) {
      if (tryLock(channel) == null) {
        throw held(folder);
      }
    }
  }

  private static BadInput held(Path folder) {
    return new BadInput(
        folder + " is being written by another run; accepted: another folder, or wait");
  }

  private static @Nullable FileLock tryLock(FileChannel channel) throws IOException {
    try {
      return channel.tryLock();
    } catch (OverlappingFileLockException e) {
      return null;
    }
  }

  /** Removes the file while it is still locked, then lets go. */
  @Override
  public void close() {
    try (channel) {
      Files.deleteIfExists(file);
    } catch (IOException e) {
      throw FolderFiles.unavailable("remove", file, e);
    }
  }
}
