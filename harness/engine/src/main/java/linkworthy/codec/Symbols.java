package linkworthy.codec;

import java.util.function.Supplier;
import org.jspecify.annotations.Nullable;

/**
 * What an analysis becomes under a quantiser: the whole numbers that are coded. Computed when first
 * asked for; shared by every codec that keeps a number of the same components. Safe for several
 * threads.
 */
final class Symbols {
  private final Analysis analysis;
  private final Quantization quantization;
  private final int[] @Nullable [] coefficients;
  private final int[] @Nullable [] directions;
  private final @Nullable RiceCosts[] coefficientCosts;
  private final @Nullable RiceCosts[] directionCosts;

  Symbols(Analysis analysis, Quantization quantization) {
    this.analysis = analysis;
    this.quantization = quantization;
    this.coefficients = new int[analysis.components()][];
    this.directions = new int[analysis.components()][];
    this.coefficientCosts = new RiceCosts[analysis.components()];
    this.directionCosts = new RiceCosts[analysis.components()];
  }

  /** Symbols of component k, one for each observation. */
  synchronized int[] component(int k) {
    return once(coefficients, k, () -> quantization.component(k).symbols(analysis.component(k)));
  }

  /** Symbols of the entries of direction k. */
  synchronized int[] direction(int k) {
    return once(directions, k, () -> directionQuantizer(k).symbols(analysis.direction(k)));
  }

  /** What the symbols of component k cost as Rice codes. */
  synchronized RiceCosts componentCosts(int k) {
    return once(coefficientCosts, k, () -> new RiceCosts(component(k)));
  }

  /** What the symbols of direction k cost as Rice codes. */
  synchronized RiceCosts directionCosts(int k) {
    return once(directionCosts, k, () -> new RiceCosts(direction(k)));
  }

  private static <T> T once(@Nullable T[] all, int k, Supplier<T> work) {
    T known = all[k];
    if (known == null) {
      known = work.get();
      all[k] = known;
    }
    return known;
  }

  /**
   * The quantiser of direction k: step / sqrt(d lambda_k), which makes the error through the
   * direction equal to the error through its coefficients. Rounded to a 32-bit float, as it is
   * sent.
   */
  Quantizer directionQuantizer(int k) {
    Quantizer quantizer = quantization.component(k);
    return quantizer.isNone()
        ? quantizer
        : new Quantizer(
            (float) (quantizer.step() / Math.sqrt(analysis.variables() * analysis.variance(k))));
  }
}
