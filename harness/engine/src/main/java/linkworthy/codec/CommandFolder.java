package linkworthy.codec;

import java.io.IOException;
import java.nio.file.DirectoryStream;
import java.nio.file.FileVisitResult;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.SimpleFileVisitor;
import java.nio.file.attribute.BasicFileAttributes;
import java.util.ArrayList;
import java.util.List;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.locks.LockSupport;

/** The folder of one call of a program: what is in it, who works in it, and its end. */
final class CommandFolder {
  private static final Path PROCESSES = Path.of("/proc");

  /** Processes that start others while they are being ended are chased this often. */
  private static final int ROUNDS = 200;

  private static final long PAUSE_NS = 2_000_000;
  private static final long PATIENCE_MS = 2000;

  private CommandFolder() {}

  /** Bytes in all files below the folder, one of them left out; symbolic links are not followed. */
  static long bytesBesides(Path folder, String leftOut) throws IOException {
    Path own = folder.resolve(leftOut);
    long[] sum = new long[1];
    Files.walkFileTree(
        folder,
        new Lenient() {
          @Override
          public FileVisitResult visitFile(Path file, BasicFileAttributes attributes) {
            if (attributes.isRegularFile() && !file.equals(own)) {
              sum[0] += attributes.size();
            }
            return FileVisitResult.CONTINUE;
          }
        });
    return sum[0];
  }

  /**
   * Ends a process, its descendants, and on systems with {@code /proc} whatever else has its
   * current folder in this one, as background processes do whose parent has ended.
   */
  static void endProcesses(Path folder, Process process) {
    List<ProcessHandle> descendants = process.descendants().toList();
    process.destroyForcibly();
    descendants.forEach(ProcessHandle::destroyForcibly);
    awaitEnd(process);
    List<ProcessHandle> left = workingIn(folder);
    for (int round = 0; round < ROUNDS && !left.isEmpty(); round++) {
      left.forEach(ProcessHandle::destroyForcibly);
      LockSupport.parkNanos(PAUSE_NS);
      left = workingIn(folder);
    }
  }

  private static void awaitEnd(Process process) {
    boolean interrupted = Thread.interrupted();
    try {
      boolean unused = process.waitFor(PATIENCE_MS, TimeUnit.MILLISECONDS);
    } catch (InterruptedException e) {
      interrupted = true;
    }
    if (interrupted) {
      Thread.currentThread().interrupt();
    }
  }

  private static List<ProcessHandle> workingIn(Path folder) {
    if (!Files.isDirectory(PROCESSES)) {
      return List.of();
    }
    List<ProcessHandle> found = new ArrayList<>();
    try (DirectoryStream<Path> processes = Files.newDirectoryStream(PROCESSES, "[0-9]*")) {
      Path real = folder.toRealPath();
      for (Path process : processes) {
        if (isIn(process.resolve("cwd"), real)) {
          ProcessHandle.of(Long.parseLong(String.valueOf(process.getFileName())))
              .filter(ProcessHandle::isAlive)
              .ifPresent(found::add);
        }
      }
    } catch (IOException e) {
      return found;
    }
    return found;
  }

  private static boolean isIn(Path link, Path folder) {
    try {
      return Files.readSymbolicLink(link).startsWith(folder);
    } catch (IOException notOursOrGone) {
      return false;
    }
  }

  /** Deletes the folder with all that is in it, as far as this is possible. */
  static void delete(Path folder) throws IOException {
    Files.walkFileTree(
        folder,
        new Lenient() {
          @Override
          public FileVisitResult preVisitDirectory(Path inside, BasicFileAttributes attributes) {
            boolean unused =
                inside.toFile().setReadable(true)
                    && inside.toFile().setWritable(true)
                    && inside.toFile().setExecutable(true);
            return FileVisitResult.CONTINUE;
          }

          @Override
          public FileVisitResult visitFile(Path file, BasicFileAttributes attributes) {
            return remove(file);
          }

          @Override
          public FileVisitResult postVisitDirectory(Path inside, IOException problem) {
            return remove(inside);
          }
        });
  }

  /** What cannot be deleted stays, for the system's own cleaning of temporary files. */
  private static FileVisitResult remove(Path file) {
    try {
      Files.deleteIfExists(file);
      return FileVisitResult.CONTINUE;
    } catch (IOException leftBehind) {
      return FileVisitResult.CONTINUE;
    }
  }

  /** Goes on when a file vanishes or may not be looked at. */
  private abstract static class Lenient extends SimpleFileVisitor<Path> {
    @Override
    public FileVisitResult visitFileFailed(Path file, IOException problem) {
      return FileVisitResult.CONTINUE;
    }

    @Override
    public FileVisitResult postVisitDirectory(Path inside, IOException problem) {
      return FileVisitResult.CONTINUE;
    }
  }
}
