package linkworthy.noise;

/** What becomes of a sensor's value in a picture. */
final class Levels {
  private Levels() {}

  /** The nearest whole grey level from 0 to the peak; halves go up. */
  static int of(double value, int peak) {
    return (int) Math.max(0, Math.min(peak, Math.floor(value + 0.5)));
  }
}
