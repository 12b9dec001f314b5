package linkworthy.codec;

import java.util.concurrent.ConcurrentHashMap;
import java.util.concurrent.atomic.AtomicInteger;
import java.util.function.Supplier;
import org.jspecify.annotations.Nullable;

/**
 * Work on one picture that several codecs share, done once. Keys are records that say what the work
 * depends on besides the picture. Safe for several threads; suppliers may ask the memo for other
 * keys.
 */
public final class Memo {
  private final ConcurrentHashMap<Object, Once<?>> results = new ConcurrentHashMap<>();
  private final AtomicInteger computed = new AtomicInteger();

  /** The result for this key, computed at the first request. */
  public <T> T once(Object key, Class<T> type, Supplier<T> work) {
    return type.cast(results.computeIfAbsent(key, k -> new Once<>(work)).get());
  }

  /** How many results have been computed. */
  public int computed() {
    return computed.get();
  }

  private final class Once<T> {
    private final Supplier<T> work;
    private @Nullable T result;

    Once(Supplier<T> work) {
      this.work = work;
    }

    synchronized T get() {
      T known = result;
      if (known == null) {
        known = work.get();
        computed.incrementAndGet();
        result = known;
      }
      return known;
    }
  }
}
