package linkworthy.corpus;

import java.util.List;

/**
 * A picture as its file stores it, and the name of the class that read it.
 *
 * @param channels one gray plane, or red, green and blue
 * @param reader fully qualified class name of the reader
 */
public record ReadPicture(List<Picture> channels, String reader) {
  /**
   * @throws IllegalArgumentException unless there are 1 or 3 channels
   */
  public ReadPicture {
    channels = List.copyOf(channels);
    if (channels.size() != 1 && channels.size() != 3) {
      throw new IllegalArgumentException(
          "a picture has " + channels.size() + " channels; accepted: 1 or 3");
    }
  }

  /** The luma plane: the gray samples as stored, or Y of {@link YCbCr}. */
  public Picture luma() {
    return channels.size() == 1
        ? channels.get(0)
        : YCbCr.luma(channels.get(0), channels.get(1), channels.get(2));
  }

  /** All planes to be coded: the gray plane, or Y, Cb and Cr of {@link YCbCr}. */
  public List<Picture> planes() {
    return channels.size() == 1
        ? channels
        : YCbCr.planes(channels.get(0), channels.get(1), channels.get(2));
  }
}
