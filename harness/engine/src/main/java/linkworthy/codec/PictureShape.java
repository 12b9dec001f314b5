package linkworthy.codec;

import linkworthy.corpus.Picture;

/** Size of a picture in samples and its depth in bits per sample. */
public record PictureShape(int width, int height, int bitDepth) {
  public static PictureShape of(Picture picture) {
    return new PictureShape(picture.width(), picture.height(), picture.bitDepth());
  }

  /** Number of samples. */
  public int size() {
    return width * height;
  }
}
