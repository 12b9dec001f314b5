package linkworthy.bench;

import java.util.Arrays;
import java.util.Locale;
import java.util.concurrent.CountDownLatch;
import java.util.function.Supplier;

/**
 * What the machine can do in plain Java, as the just-in-time compiler reaches it: double
 * multiply-adds per second (a multiplication and an addition, not fused, as in the engine) on data
 * in the first-level cache, and bytes per second of {@code a[i] = b[i] + s c[i]} on arrays far
 * larger than any cache (24 bytes an element, as STREAM counts; McCalpin 1995). The best of several
 * rounds, with one thread and with one for each processor.
 *
 * <p>{@link Roofline} holds the stages of a trial against these and, on one thread, against the
 * triad within the first and the second cache, divisions of doubles in the first-level cache and
 * steps on integers that no vector instruction can take.
 */
public final class MachineLimits {
  private static final int ROUNDS = 12;
  private static final int IN_CACHE = 1024;
  private static final int SWEEPS = 20_000;
  private static final int MULTIPLY_ADDS = 16;
  private static final int FAR_ABOVE_CACHE = 1 << 24;
  private static final int BYTES_OF_TRIAD = 24;
  private static final int IN_SECOND_CACHE = 1 << 14;
  private static final int CHAINS = 4;
  private static final int STEPS = 4;

  private MachineLimits() {}

  /** One round of work on data of one thread. */
  interface Kernel {
    /** Works, and returns how much was done. */
    double run();
  }

  /** No arguments. */
  public static void main(String[] args) {
    int all = Runtime.getRuntime().availableProcessors();
    for (int threads = 1; ; threads = all) {
      System.out.printf(
          Locale.ROOT,
          "%d thread(s): %.1f G double multiply-adds/s, %.1f GB/s%n",
          threads,
          best(threads, ROUNDS, () -> new MultiplyAdds(SWEEPS)) / 1e9,
          best(threads, ROUNDS, () -> new Triad(FAR_ABOVE_CACHE)) / 1e9);
      if (threads == all) {
        return;
      }
    }
  }

  /**
   * What one thread reaches.
   *
   * @param multiplyAdds a second, double precision
   * @param divisions a second, double precision
   * @param steps a second on 64-bit integers: shifts, exclusive ors and additions
   * @param nearBytes a second within the first-level cache
   * @param cacheBytes a second within the second-level cache
   * @param memoryBytes a second from and to memory
   */
  record OneThread(
      double multiplyAdds,
      double divisions,
      double steps,
      double nearBytes,
      double cacheBytes,
      double memoryBytes) {
    static OneThread measure(int rounds) {
      return new OneThread(
          best(1, rounds, () -> new MultiplyAdds(SWEEPS / 4)),
          best(1, rounds, () -> new Divisions(SWEEPS / 4)),
          best(1, rounds, () -> new Steps(SWEEPS * 100)),
          best(1, rounds, () -> new Triad(IN_CACHE, SWEEPS)),
          best(1, rounds, () -> new Triad(IN_SECOND_CACHE, SWEEPS / 16)),
          best(1, rounds, () -> new Triad(FAR_ABOVE_CACHE)));
    }
  }

  /** Work per second of all threads together in the best round. */
  static double best(int threads, int rounds, Supplier<Kernel> kernels) {
    Kernel[] own = new Kernel[threads];
    for (int i = 0; i < threads; i++) {
      own[i] = kernels.get();
    }
    double best = 0;
    for (int round = 0; round < rounds; round++) {
      best = Math.max(best, rate(own));
    }
    return best;
  }

  private static double rate(Kernel[] kernels) {
    CountDownLatch start = new CountDownLatch(1);
    double[] done = new double[kernels.length];
    Thread[] threads = new Thread[kernels.length];
    for (int i = 0; i < threads.length; i++) {
      int own = i;
      threads[i] =
          new Thread(
              () -> {
                await(start);
                done[own] = kernels[own].run();
              },
              "limit " + i);
      threads[i].start();
    }
    long begun = System.nanoTime();
    start.countDown();
    double work = 0;
    for (int i = 0; i < threads.length; i++) {
      join(threads[i]);
      work += done[i];
    }
    return work / ((System.nanoTime() - begun) / 1e9);
  }

  private static void await(CountDownLatch start) {
    try {
      start.await();
    } catch (InterruptedException e) {
      throw new IllegalStateException(e);
    }
  }

  private static void join(Thread thread) {
    try {
      thread.join();
    } catch (InterruptedException e) {
      throw new IllegalStateException(e);
    }
  }

  /** Chains of multiply-adds, one for each element, independent of each other. */
  static final class MultiplyAdds implements Kernel {
    private final double[] values = new double[IN_CACHE];
    private final int sweeps;

    MultiplyAdds(int sweeps) {
      this.sweeps = sweeps;
    }

    @Override
    public double run() {
      for (int sweep = 0; sweep < sweeps; sweep++) {
        sweep(values, 0.5, 1);
      }
      return (double) sweeps * values.length * MULTIPLY_ADDS;
    }

    private static void sweep(double[] x, double m, double a) {
      for (int i = 0; i < x.length; i++) {
        double v = x[i];
        v = (((v * m + a) * m + a) * m + a) * m + a;
        v = (((v * m + a) * m + a) * m + a) * m + a;
        v = (((v * m + a) * m + a) * m + a) * m + a;
        v = (((v * m + a) * m + a) * m + a) * m + a;
        x[i] = v;
      }
    }

    /** Every value, which tends to 2. */
    double[] values() {
      return values;
    }
  }

  /** Quotients in the first-level cache. */
  static final class Divisions implements Kernel {
    private final double[] values = new double[IN_CACHE];
    private final int sweeps;

    Divisions(int sweeps) {
      this.sweeps = sweeps;
      Arrays.fill(values, 1);
    }

    @Override
    public double run() {
      for (int sweep = 0; sweep < sweeps; sweep++) {
        divide(values, 2);
      }
      return (double) sweeps * values.length;
    }

    private static void divide(double[] x, double numerator) {
      for (int i = 0; i < x.length; i++) {
        x[i] = numerator / x[i];
      }
    }

    /** Every value, which is 1 and 2 in turn. */
    double[] values() {
      return values;
    }
  }

  /** Four independent chains of shift, exclusive or, shift and addition. */
  static final class Steps implements Kernel {
    private final int rounds;
    private long sum;

    Steps(int rounds) {
      this.rounds = rounds;
    }

    @Override
    public double run() {
      long a = 1;
      long b = 2;
      long c = 3;
      long d = 4;
      for (int i = 0; i < rounds; i++) {
        a = (a ^ a >>> 7) + (a << 3);
        b = (b ^ b >>> 7) + (b << 3);
        c = (c ^ c >>> 7) + (c << 3);
        d = (d ^ d >>> 7) + (d << 3);
      }
      sum = a + b + c + d;
      return (double) rounds * CHAINS * STEPS;
    }

    long sum() {
      return sum;
    }
  }

  /** The triad of STREAM. */
  static final class Triad implements Kernel {
    private final double[] a;
    private final double[] b;
    private final double[] c;
    private final int sweeps;

    Triad(int length) {
      this(length, 1);
    }

    Triad(int length, int sweeps) {
      this.sweeps = sweeps;
      a = new double[length];
      b = new double[length];
      c = new double[length];
      for (int i = 0; i < length; i++) {
        b[i] = i;
        c[i] = 1;
      }
    }

    @Override
    public double run() {
      for (int sweep = 0; sweep < sweeps; sweep++) {
        triad(a, b, c, 3);
      }
      return (double) BYTES_OF_TRIAD * a.length * sweeps;
    }

    private static void triad(double[] a, double[] b, double[] c, double s) {
      for (int i = 0; i < a.length; i++) {
        a[i] = b[i] + s * c[i];
      }
    }

    /** The sums: {@code i + 3} at place i. */
    double[] sums() {
      return a;
    }
  }
}
