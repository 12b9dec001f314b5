package linkworthy.bench;

import java.util.Locale;
import java.util.concurrent.CountDownLatch;
import java.util.function.Supplier;

/**
 * What the machine can do in plain Java, as the just-in-time compiler reaches it: double
 * multiply-adds per second (a multiplication and an addition, not fused, as in the engine) on data
 * in the first-level cache, and bytes per second of {@code a[i] = b[i] + s c[i]} on arrays far
 * larger than any cache (24 bytes an element, as STREAM counts; McCalpin 1995). The best of several
 * rounds, with one thread and with one for each processor.
 */
public final class MachineLimits {
  private static final int ROUNDS = 12;
  private static final int IN_CACHE = 1024;
  private static final int SWEEPS = 20_000;
  private static final int MULTIPLY_ADDS = 16;
  private static final int FAR_ABOVE_CACHE = 1 << 24;
  private static final int BYTES_OF_TRIAD = 24;

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

  /** The triad of STREAM. */
  static final class Triad implements Kernel {
    private final double[] a;
    private final double[] b;
    private final double[] c;

    Triad(int length) {
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
      triad(a, b, c, 3);
      return (double) BYTES_OF_TRIAD * a.length;
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
