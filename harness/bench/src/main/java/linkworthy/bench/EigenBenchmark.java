package linkworthy.bench;

import java.util.SplittableRandom;
import linkworthy.codec.Arrangement;
import linkworthy.codec.Basis;
import linkworthy.codec.EigenStage;
import linkworthy.codec.PictureShape;
import org.openjdk.jmh.annotations.Benchmark;
import org.openjdk.jmh.annotations.Param;
import org.openjdk.jmh.annotations.Scope;
import org.openjdk.jmh.annotations.Setup;
import org.openjdk.jmh.annotations.State;

/**
 * Principal directions of as many variables as the order says from as many observations: their
 * covariance and its eigendecomposition.
 */
@State(Scope.Benchmark)
public class EigenBenchmark {
  private final Basis pca =
      Basis.all().stream().filter(basis -> basis.id().equals("pca")).findFirst().orElseThrow();

  /** Number of variables. */
  @Param({"64", "256", "512"})
  public int order = 64;

  private double[][] centred = new double[0][];

  /** Fills the matrix with values that are uniform within one grey level of 0. */
  @Setup
  public void prepare() {
    SplittableRandom random = new SplittableRandom(1);
    centred = new double[order][order];
    for (double[] variable : centred) {
      for (int j = 0; j < order; j++) {
        variable[j] = 2 * random.nextDouble() - 1;
      }
    }
  }

  /** The directions of a codec that keeps up to 64 components. */
  @Benchmark
  public Basis.Directions leading() {
    return directions(pca.forAtMost(64));
  }

  @Benchmark
  public Basis.Directions directions() {
    return directions(pca);
  }

  private Basis.Directions directions(Basis basis) {
    return EigenStage.made(
        basis.directions(new Arrangement.Rows(), new PictureShape(order, order, 8), centred));
  }
}
