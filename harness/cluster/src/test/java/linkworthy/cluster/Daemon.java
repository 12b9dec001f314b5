package linkworthy.cluster;

import java.io.BufferedReader;
import java.io.IOException;
import java.io.InputStreamReader;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.util.List;
import java.util.Map;
import java.util.Queue;
import java.util.concurrent.CompletableFuture;
import java.util.concurrent.ConcurrentLinkedQueue;
import java.util.concurrent.ExecutionException;
import java.util.concurrent.TimeUnit;
import java.util.concurrent.TimeoutException;
import java.util.regex.Matcher;
import java.util.regex.Pattern;

/** A process of its own whose words are read; waits are for words or the end, with a deadline. */
final class Daemon implements AutoCloseable {
  private static final int DEADLINE_S = 120;

  private final Process process;
  private final Queue<String> lines = new ConcurrentLinkedQueue<>();
  private final CompletableFuture<String> wanted = new CompletableFuture<>();
  private final Thread reader;
  private final long start = System.nanoTime();
  private final CompletableFuture<Long> took;

  /**
   * @param wanted words that {@link #await} waits for; their first group is what it gives
   */
  Daemon(List<String> command, Path folder, Map<String, String> environment, Pattern wanted) {
    try {
      ProcessBuilder builder =
          new ProcessBuilder(command).directory(folder.toFile()).redirectErrorStream(true);
      builder.environment().putAll(environment);
      process = builder.start();
    } catch (IOException e) {
      throw new UncheckedIOException(e);
    }
    took = process.onExit().thenApply(ended -> (System.nanoTime() - start) / 1_000_000_000L);
    reader = new Thread(() -> read(wanted), "words");
    reader.setDaemon(true);
    reader.start();
  }

  private void read(Pattern pattern) {
    try (BufferedReader words =
        new BufferedReader(
            new InputStreamReader(process.getInputStream(), StandardCharsets.UTF_8))) {
      for (String line = words.readLine(); line != null; line = words.readLine()) {
        lines.add(line);
        Matcher found = pattern.matcher(line);
        if (found.find()) {
          boolean unused = wanted.complete(found.group(1));
        }
      }
    } catch (IOException e) {
      lines.add(e.toString());
    }
    boolean unused = wanted.completeExceptionally(new AssertionError(words()));
  }

  /** Waits for the wanted words. */
  String await() {
    return get(wanted);
  }

  /** Waits for the end; the exit code. */
  int exitCode() {
    int code = get(process.onExit()).exitValue();
    try {
      reader.join(TimeUnit.SECONDS.toMillis(DEADLINE_S));
    } catch (InterruptedException e) {
      throw new AssertionError(e);
    }
    return code;
  }

  /** Seconds from the start to the end. */
  long seconds() {
    return get(took);
  }

  private <T> T get(CompletableFuture<T> future) {
    try {
      return future.get(DEADLINE_S, TimeUnit.SECONDS);
    } catch (InterruptedException | ExecutionException | TimeoutException e) {
      throw new AssertionError(words(), e);
    }
  }

  String words() {
    return String.join("\n", lines);
  }

  ProcessHandle handle() {
    return process.toHandle();
  }

  /** Whether a process descends from this one. */
  boolean hasStarted(long pid) {
    return process.descendants().anyMatch(child -> child.pid() == pid);
  }

  /** Tells it and all that it started to stop, and waits until it has. */
  @Override
  public void close() {
    List<ProcessHandle> all = process.descendants().toList();
    process.destroy();
    boolean ended = true;
    try {
      ended = process.waitFor(10, TimeUnit.SECONDS);
    } catch (InterruptedException e) {
      Thread.currentThread().interrupt();
    }
    if (!ended) {
      process.destroyForcibly();
    }
    all.forEach(ProcessHandle::destroyForcibly);
  }
}
