package linkworthy.codec;

import java.util.List;
import java.util.function.IntFunction;
import java.util.stream.IntStream;
import org.jspecify.annotations.Nullable;

/**
 * A set of orthonormal directions; the first K of them carry the picture.
 *
 * <p>All arithmetic is strict, so the same picture has the same directions on every machine.
 */
public interface Basis {
  /** Stable id, as in a study's key {@code transform}. */
  String id();

  /** Whether the directions depend on the picture and so travel with it. */
  boolean isSent();

  /** Whether direction k is the k-th unit vector, so that projecting is copying. */
  default boolean isIdentity() {
    return false;
  }

  /**
   * Checks that there are directions for pictures of this shape.
   *
   * @throws linkworthy.input.BadInput if not
   */
  default void check(Arrangement arrangement, PictureShape shape) {}

  /**
   * The directions for pictures of this shape, or for this very picture if the basis is sent.
   *
   * @param centred d variables by n observations, each variable with mean 0
   */
  Directions directions(Arrangement arrangement, PictureShape shape, double[][] centred);

  /** The same basis for a codec that uses no more directions, which may be quicker to find. */
  default Basis forAtMost(int components) {
    return this;
  }

  /**
   * Names the directions found, for codecs that share them.
   *
   * @param variables number of variables d
   */
  default String work(int variables) {
    return id();
  }

  /** Every basis of the transform codec. */
  static List<Basis> all() {
    return List.of(new MeanBasis(), new DctBasis(), new WalshBasis(), new PcaBasis());
  }

  /** Directions, most important first. */
  final class Directions {
    private final double[] @Nullable [] rows;
    private final IntFunction<double[]> maker;
    private final double[] variances;

    /**
     * @param rows up to d directions of d entries each, orthonormal; fewer than there are for a
     *     codec that uses no more
     * @param variances variance along each direction there is in grey levels squared (1/n), or
     *     empty if it is not known without projecting
     */
    Directions(double[][] rows, double[] variances) {
      this(rows.length, k -> rows[k], variances);
    }

    /** The same with directions that are made when first asked for. */
    Directions(int found, IntFunction<double[]> maker, double[] variances) {
      this.rows = new double[found][];
      this.maker = maker;
      this.variances = variances;
    }

    /** Direction k. */
    synchronized double[] row(int k) {
      double[] row = rows[k];
      if (row == null) {
        row = maker.apply(k);
        rows[k] = row;
      }
      return row;
    }

    /** All directions found. */
    double[][] rows() {
      return IntStream.range(0, rows.length).mapToObj(this::row).toArray(double[][]::new);
    }

    /** How many there are, those left out included. */
    int count() {
      return Math.max(rows.length, variances.length);
    }

    double[] variances() {
      return variances;
    }
  }
}
