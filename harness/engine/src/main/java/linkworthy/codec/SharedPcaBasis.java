package linkworthy.codec;

import java.util.List;
import linkworthy.corpus.Picture;
import linkworthy.input.BadInput;
import org.ejml.data.DMatrixRMaj;
import org.jspecify.annotations.Nullable;

/**
 * Principal components of other pictures, installed at both ends and never sent: eigenvectors of
 * the pooled covariance {@code sum(n_p C_p) / sum(n_p)} of the training pictures, each centred by
 * its own means, largest eigenvalue first. Unlike a picture's own components all d are there, since
 * the picture tested may need those that the training pictures do not.
 */
final class SharedPcaBasis implements Basis {
  private final @Nullable Training training;

  /**
   * @param training null for a basis that is still to be trained
   */
  SharedPcaBasis(@Nullable Training training) {
    this.training = training;
  }

  @Override
  public String id() {
    return "pca-shared";
  }

  @Override
  public boolean isSent() {
    return false;
  }

  private Training training() {
    if (training == null) {
      throw new IllegalStateException("a shared basis was used before its training");
    }
    return training;
  }

  /** See {@link Codec#training}. */
  String fingerprint() {
    return training == null ? "" : training.fingerprint();
  }

  /**
   * Checks that the training pictures go together.
   *
   * @throws BadInput if they are of different depths, or of different numbers of rows over rows, or
   *     too small for the arrangement
   */
  void checkTraining(Arrangement arrangement) {
    List<PictureShape> shapes = training().shapes();
    PictureShape first = shapes.get(0);
    for (PictureShape shape : shapes) {
      arrangement.check(shape);
      if (shape.bitDepth() != first.bitDepth()) {
        throw new BadInput(
            "training pictures have "
                + first.bitDepth()
                + " and "
                + shape.bitDepth()
                + " bits per sample; accepted: one depth");
      }
      if (arrangement.variables(shape) != arrangement.variables(first)) {
        throw new BadInput(
            "training pictures have "
                + first.height()
                + " and "
                + shape.height()
                + " rows; accepted over rows: one number of rows (over blocks: any)");
      }
    }
  }

  @Override
  public void check(Arrangement arrangement, PictureShape shape) {
    PictureShape first = training().shapes().get(0);
    if (arrangement.variables(shape) != arrangement.variables(first)) {
      throw new BadInput(
          "a picture has "
              + shape.height()
              + " rows, the training pictures have "
              + first.height()
              + "; accepted over rows: the same number (over blocks: any)");
    }
  }

  @Override
  public Directions directions(Arrangement arrangement, PictureShape shape, double[][] centred) {
    return training()
        .memo()
        .once(arrangement, Directions.class, () -> learn(training(), arrangement));
  }

  private static Directions learn(Training training, Arrangement arrangement) {
    DMatrixRMaj pooled = new DMatrixRMaj(0, 0);
    long observations = 0;
    for (int p = 0; p < training.size(); p++) {
      Picture picture = training.picture(p);
      double[][] values = arrangement.gather(picture);
      for (double[] variable : values) {
        double unused = Matrices.centre(variable);
      }
      DMatrixRMaj covariance = Matrices.covariance(values);
      int n = values[0].length;
      if (p == 0) {
        pooled.reshape(values.length, values.length);
        pooled.zero();
      }
      for (int i = 0; i < pooled.getNumElements(); i++) {
        pooled.data[i] += n * covariance.data[i];
      }
      observations += n;
    }
    for (int i = 0; i < pooled.getNumElements(); i++) {
      pooled.data[i] /= observations;
    }
    return new Directions(PcaBasis.allOf(pooled).rows(), new double[0]);
  }
}
