package linkworthy.codec;

import java.util.List;
import java.util.function.IntFunction;
import java.util.stream.IntStream;
import linkworthy.corpus.Picture;
import linkworthy.input.Require;

/**
 * Pictures that codecs learn from before they are tested on others, and the work on them that
 * several codecs share. Pictures are opened one at a time, whenever they are needed. Safe for
 * several threads.
 */
public final class Training {
  private final int size;
  private final IntFunction<Picture> pictures;
  private final String fingerprint;
  private final Memo memo = new Memo();

  /**
   * @param size how many pictures there are, from 1
   * @param pictures opens picture {@code 0 .. size - 1}; always the same one
   * @param fingerprint differs where the pictures do
   */
  public Training(int size, IntFunction<Picture> pictures, String fingerprint) {
    this.size = Require.inRange(size, 1, Integer.MAX_VALUE, "training pictures");
    this.pictures = pictures;
    this.fingerprint = Require.notBlank(fingerprint, "fingerprint of the training pictures");
  }

  int size() {
    return size;
  }

  Picture picture(int index) {
    return pictures.apply(index);
  }

  /** Shapes of all pictures, in order. */
  List<PictureShape> shapes() {
    return memo.once(Shapes.class, Shapes.class, this::openShapes).all();
  }

  private Shapes openShapes() {
    return new Shapes(IntStream.range(0, size).mapToObj(pictures).map(PictureShape::of).toList());
  }

  String fingerprint() {
    return fingerprint;
  }

  /** Work on all pictures together. */
  Memo memo() {
    return memo;
  }

  private record Shapes(List<PictureShape> all) {}
}
