package linkworthy.report;

/**
 * Pareto dominance in rate (less is better) and quality (more is better), by means alone: whether a
 * difference is larger than its interval has no part in it.
 */
final class Dominance {
  private Dominance() {}

  /** Whether the first is at least as good in both and better in one; never with NaN. */
  static boolean over(double bits, double psnr, double otherBits, double otherPsnr) {
    return bits <= otherBits && psnr >= otherPsnr && (bits < otherBits || psnr > otherPsnr);
  }
}
