package linkworthy.noise;

import org.apache.commons.rng.UniformRandomProvider;

/**
 * Draws from the standard normal distribution N(0, 1) by the ziggurat method with 256 layers
 * (Marsaglia and Tsang 2000), the layer being chosen by other bits than the place within it
 * (Doornik 2005).
 *
 * <p>The samplers of Commons RNG call Math.exp, Math.log, Math.sin or Math.cos, whose last bit may
 * differ from one JVM to another; a draw near the edge of a layer would then be accepted on one
 * machine and refused on another, and the rest of the stream would shift. Here every such call is
 * StrictMath's. About one draw in 67 needs it, so it costs little.
 */
public final class GaussianDraws {
  private static final int LAYERS = 256;

  /** Where the tail starts. */
  static final double TAIL = 3.654152885361009;

  /** Area of each layer, and of the lowest one together with the tail. */
  private static final double AREA = 0.004928673233974655;

  /** Right edges of the layers, the widest first; the lowest layer's stands for its area. */
  static final double[] EDGES = new double[LAYERS + 1];

  /** The density exp(-x^2/2) at the edges. */
  private static final double[] DENSITIES = new double[LAYERS + 1];

  static {
    EDGES[0] = AREA / density(TAIL);
    EDGES[1] = TAIL;
    DENSITIES[1] = density(TAIL);
    for (int i = 2; i < LAYERS; i++) {
      DENSITIES[i] = DENSITIES[i - 1] + AREA / EDGES[i - 1];
      EDGES[i] = Math.sqrt(-2 * StrictMath.log(DENSITIES[i]));
    }
    DENSITIES[LAYERS] = 1;
  }

  private GaussianDraws() {}

  /** The next draw. */
  public static double next(UniformRandomProvider random) {
    while (true) {
      long bits = random.nextLong();
      int layer = (int) bits & (LAYERS - 1);
      double x = (bits >> 10) * 0x1p-53 * EDGES[layer];
      if (Math.abs(x) < EDGES[layer + 1]) {
        return x;
      }
      if (layer == 0) {
        return bits < 0 ? -tail(random) : tail(random);
      }
      double low = DENSITIES[layer];
      double high = DENSITIES[layer + 1];
      if (low + random.nextDouble() * (high - low) < density(x)) {
        return x;
      }
    }
  }

  /** A draw above the start of the tail (Marsaglia 1964). */
  private static double tail(UniformRandomProvider random) {
    while (true) {
      double beyond = -StrictMath.log(1 - random.nextDouble()) / TAIL;
      double height = -StrictMath.log(1 - random.nextDouble());
      if (2 * height > beyond * beyond) {
        return TAIL + beyond;
      }
    }
  }

  private static double density(double x) {
    return StrictMath.exp(-0.5 * x * x);
  }
}
