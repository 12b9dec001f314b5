package linkworthy.input;

/**
 * Checks that return the value they checked, so that a record can be made of them. Every message
 * names the value, its range and its unit; NaN fails every check.
 */
public final class Require {
  private Require() {}

  /**
   * @throws IllegalArgumentException unless {@code min <= value <= max}
   */
  public static int inRange(int value, int min, int max, String name) {
    if (value < min || value > max) {
      throw new IllegalArgumentException(
          name + " is " + value + "; accepted: " + min + " to " + max);
    }
    return value;
  }

  /**
   * @throws IllegalArgumentException unless {@code min <= value <= max}; NaN is refused
   */
  public static double inRange(double value, double min, double max, String name) {
    if (!(value >= min && value <= max)) {
      throw new IllegalArgumentException(
          name + " is " + value + "; accepted: " + min + " to " + max);
    }
    return value;
  }

  /**
   * @throws IllegalArgumentException unless the value is above 0 and finite
   */
  public static double positive(double value, String name) {
    if (!(value > 0 && value <= Double.MAX_VALUE)) {
      throw new IllegalArgumentException(
          name + " is " + value + "; accepted: a finite number above 0");
    }
    return value;
  }

  /**
   * @throws IllegalArgumentException unless the value is at least 0 and finite
   */
  public static double notNegative(double value, String name) {
    if (!(value >= 0 && value <= Double.MAX_VALUE)) {
      throw new IllegalArgumentException(
          name + " is " + value + "; accepted: a finite number of at least 0");
    }
    return value;
  }

  /**
   * @throws IllegalArgumentException unless the value is finite
   */
  public static double finite(double value, String name) {
    if (!Double.isFinite(value)) {
      throw new IllegalArgumentException(name + " is " + value + "; accepted: a finite number");
    }
    return value;
  }

  /**
   * @throws IllegalArgumentException if the text is empty or blank
   */
  public static String notBlank(String value, String name) {
    if (value.isBlank()) {
      throw new IllegalArgumentException(name + " is empty; accepted: some text");
    }
    return value;
  }
}
