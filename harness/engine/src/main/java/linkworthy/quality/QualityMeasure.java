package linkworthy.quality;

import linkworthy.codec.PictureShape;
import linkworthy.corpus.Picture;
import linkworthy.input.BadInput;

/** A quality figure, found by its id through {@link java.util.ServiceLoader}. */
public interface QualityMeasure {
  /** Stable id, as written in studies. */
  String id();

  /**
   * Column in the results, unit included, such as {@code psnr_db}: lower-case letters, digits and
   * underscores; not one that {@code trials.csv} has already.
   */
  String column();

  /**
   * Checks that pictures of this shape can be measured.
   *
   * @throws BadInput if not; one line that says why and what is accepted
   */
  void check(PictureShape shape);

  /** Prepares what depends on the clean picture alone, once. */
  Judge against(Picture clean);

  /** Compares decoded pictures with one clean picture. Safe for several threads. */
  interface Judge {
    /** The figure for a decoded picture of the same size and depth as the clean one. */
    double of(Picture decoded);
  }
}
