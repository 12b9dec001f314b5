package linkworthy.quality;

import linkworthy.codec.PictureShape;
import linkworthy.corpus.Picture;

/**
 * Mean over all samples of the absolute difference, in grey levels; 0 for identical pictures. Known
 * to the registry in tests only: it shows that a further measure reaches the record.
 */
public final class MeanAbsoluteError implements QualityMeasure {
  @Override
  public String id() {
    return "mean-absolute-error";
  }

  @Override
  public String column() {
    return "mean_absolute_error";
  }

  @Override
  public void check(PictureShape shape) {}

  @Override
  public Judge against(Picture clean) {
    return decoded -> {
      Psnr.requireSameShape(clean, decoded);
      int[] left = clean.samples();
      int[] right = decoded.samples();
      long sum = 0;
      for (int i = 0; i < left.length; i++) {
        sum += Math.abs(left[i] - right[i]);
      }
      return (double) sum / left.length;
    };
  }
}
