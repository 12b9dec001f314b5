package linkworthy.trial;

import java.util.concurrent.ExecutionException;
import java.util.concurrent.Future;
import linkworthy.input.Unavailable;

/** What tasks on other threads come to. */
public final class Awaited {
  private Awaited() {}

  /**
   * Waits for the result of a task. An unchecked exception or error of the task is thrown again.
   *
   * @throws Unavailable if this thread is interrupted, and it stays so
   */
  public static <T> T result(Future<T> task) {
    try {
      return task.get();
    } catch (InterruptedException e) {
      Thread.currentThread().interrupt();
      throw new Unavailable("interrupted", e);
    } catch (ExecutionException e) {
      throw failure(e);
    }
  }

  /** The unchecked exception of a task, to be thrown again; an error is thrown at once. */
  static RuntimeException failure(ExecutionException e) {
    if (e.getCause() instanceof Error serious) {
      throw serious;
    }
    return e.getCause() instanceof RuntimeException known
        ? known
        : new IllegalStateException(e.getCause());
  }
}
