package linkworthy.statistics;

import org.apache.commons.numbers.core.Sum;

/**
 * Count, mean and standard deviation of values given one at a time, in the order in which they
 * come.
 *
 * <p>The differences from the first value and their squares are summed in extended precision
 * (Apache Commons Numbers), so that a large common offset costs no digits: {@code mean = x0 + D/n}
 * and {@code s^2 = (Q - D^2/n) / (n - 1)} with {@code D = sum (x - x0)} and {@code Q = sum (x -
 * x0)^2}. Equal values have exactly their mean and a standard deviation of 0.
 */
public final class Moments {
  private final Sum differences = Sum.create();
  private final Sum squares = Sum.create();
  private double first = Double.NaN;
  private double nonFinite;
  private long count;

  /** The moments of these values. */
  public static Moments of(double... values) {
    Moments moments = new Moments();
    for (double value : values) {
      moments.add(value);
    }
    return moments;
  }

  /** Takes one more value. */
  public void add(double value) {
    count++;
    if (!Double.isFinite(value)) {
      nonFinite += value;
      return;
    }
    if (Double.isNaN(first)) {
      first = value;
    }
    double difference = value - first;
    differences.add(difference);
    squares.addProduct(difference, difference);
  }

  /** The moments of these values and one more; these stay as they are. */
  Moments with(double value) {
    Moments moments = new Moments();
    moments.differences.add(differences);
    moments.squares.add(squares);
    moments.first = first;
    moments.nonFinite = nonFinite;
    moments.count = count;
    moments.add(value);
    return moments;
  }

  /** How many values there were. */
  public long count() {
    return count;
  }

  /** Arithmetic mean; NaN without values; infinite if a value is, NaN if that is of both signs. */
  public double mean() {
    return nonFinite == 0 ? first + differences.getAsDouble() / count : nonFinite;
  }

  /** Sample variance (divisor n - 1); NaN for fewer than two values or if one is not finite. */
  public double variance() {
    if (count < 2 || nonFinite != 0) {
      return Double.NaN;
    }
    double sum = differences.getAsDouble();
    double scatter = Sum.create().add(squares).addProduct(sum, -sum / count).getAsDouble();
    return Math.max(0, scatter) / (count - 1);
  }

  /** Square root of {@link #variance()}. */
  public double standardDeviation() {
    return Math.sqrt(variance());
  }
}
