package linkworthy.link;

import static org.assertj.core.api.Assertions.assertThat;

import com.sun.management.ThreadMXBean;
import java.lang.management.ManagementFactory;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.Collections;
import java.util.List;
import java.util.Random;
import java.util.concurrent.TimeUnit;
import java.util.function.Supplier;

/**
 * What can happen to packets on the way and in the memory of a receiver, and what a receiver may
 * take to get over it.
 */
public final class Damages {
  private static final ThreadMXBean THREAD = (ThreadMXBean) ManagementFactory.getThreadMXBean();

  /** Far above what any case takes on a slow machine; a loop without an end is what it finds. */
  private static final long MOST_SECONDS = 10;

  private Damages() {}

  /** Damages to try: 400, or as many as {@code -Dlinkworthy.fuzz=N} says. */
  public static int rounds() {
    return Integer.getInteger("linkworthy.fuzz", 400);
  }

  /**
   * Packets of which some are flipped in one or a few bits, cut short, lengthened, lost, doubled,
   * replaced by foreign ones or by random bytes, random behind a sound beginning, or out of order.
   *
   * @param foreign packets of another picture or stream, at least one
   */
  public static List<byte[]> of(List<byte[]> packets, List<byte[]> foreign, Random random) {
    List<byte[]> result = new ArrayList<>();
    int calm = 1 + random.nextInt(10);
    for (byte[] packet : packets) {
      byte[] copy = packet.clone();
      switch (random.nextInt(8 + calm)) {
        case 0 -> flip(copy, random);
        case 1 -> copy = Arrays.copyOf(copy, random.nextInt(copy.length + 1));
        case 2 -> copy = Arrays.copyOf(copy, copy.length + random.nextInt(20));
        case 3 -> copy = foreign.get(random.nextInt(foreign.size()));
        case 4 -> copy = bytes(random, 200);
        case 5 -> randomBehind(random.nextInt(copy.length + 1), copy, random);
        case 6 -> result.add(copy);
        case 7 -> {
          continue;
        }
        default -> {}
      }
      result.add(copy);
    }
    if (random.nextInt(3) > 0) {
      Collections.shuffle(result, random);
    }
    return result;
  }

  /** Random bytes, fewer than {@code most}. */
  public static byte[] bytes(Random random, int most) {
    byte[] bytes = new byte[random.nextInt(most)];
    random.nextBytes(bytes);
    return bytes;
  }

  private static void flip(byte[] bytes, Random random) {
    for (int i = 1 + random.nextInt(4); i > 0 && bytes.length > 0; i--) {
      bytes[random.nextInt(bytes.length)] ^= (byte) (1 << random.nextInt(8));
    }
  }

  private static void randomBehind(int from, byte[] bytes, Random random) {
    for (int i = from; i < bytes.length; i++) {
      bytes[i] = (byte) random.nextInt();
    }
  }

  /**
   * Does work and sees that it took at most so many bytes of memory, all objects together, and at
   * most ten seconds of processor time.
   *
   * @param what names the case where it fails
   */
  public static <T> T bounded(long mostBytes, String what, Supplier<T> work) {
    long bytes = THREAD.getCurrentThreadAllocatedBytes();
    long time = THREAD.getCurrentThreadCpuTime();
    T result;
    try {
      result = work.get();
    } catch (RuntimeException e) {
      throw new AssertionError(what + " threw", e);
    }
    assertThat(THREAD.getCurrentThreadAllocatedBytes() - bytes)
        .as("bytes of memory, %s", what)
        .isLessThanOrEqualTo(mostBytes);
    assertThat(THREAD.getCurrentThreadCpuTime() - time)
        .as("processor time, %s", what)
        .isLessThan(TimeUnit.SECONDS.toNanos(MOST_SECONDS));
    return result;
  }
}
