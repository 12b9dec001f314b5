package linkworthy.codec;

import linkworthy.corpus.Picture;
import org.ejml.data.DMatrixRMaj;

/**
 * The eigendecomposition of a PCA codec over rows by itself, to be timed. It stands in the codecs'
 * package because nobody else needs it.
 */
public final class EigenStage {
  private final DMatrixRMaj covariance;

  /** Takes the covariance of the rows of a picture. */
  public EigenStage(Picture picture) {
    double[][] values = new Arrangement.Rows().gather(picture);
    for (double[] row : values) {
      double unused = Matrices.centre(row);
    }
    covariance = Matrices.covariance(values);
  }

  /** Finds the eigenvectors of the largest 64 eigenvalues and returns the first of these. */
  public double leading() {
    return largest(PcaBasis.leading(covariance, 64));
  }

  /** Finds all eigenvectors and returns the largest eigenvalue. */
  public double all() {
    return largest(PcaBasis.allOf(covariance));
  }

  private static double largest(Basis.Directions directions) {
    return made(directions).variances()[0];
  }

  /** Makes the directions that would be made when asked for. */
  public static Basis.Directions made(Basis.Directions directions) {
    if (directions.rows().length == 0) {
      throw new IllegalStateException("there is no direction");
    }
    return directions;
  }
}
