package linkworthy.corpus;

import java.io.IOException;
import java.io.InputStream;
import java.nio.file.Files;
import java.nio.file.NoSuchFileException;
import java.nio.file.NotDirectoryException;
import java.nio.file.Path;
import java.util.List;
import java.util.Optional;
import java.util.stream.Stream;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;

/**
 * A picture file that no manifest announces: what it says of itself is believed.
 *
 * @param path the file
 * @param header what it says of itself
 * @param sha256 SHA-256 of the file, in lower-case hexadecimal digits
 * @param jpeg whether it is a JPEG file
 * @param luma its luma plane
 */
public record PictureFile(
    Path path, PictureHeader header, String sha256, boolean jpeg, Picture luma) {
  private static final int MAX_BYTES = 512 << 20;

  /**
   * The files of a folder, in the order of their names; not those of folders in it, and not hidden
   * ones.
   *
   * @throws BadInput if it is no folder
   * @throws Unavailable if it cannot be read
   */
  public static List<Path> in(Path folder) {
    try (Stream<Path> files = Files.list(folder)) {
      return files
          .filter(Files::isRegularFile)
          .filter(file -> !String.valueOf(file.getFileName()).startsWith("."))
          .sorted()
          .toList();
    } catch (NoSuchFileException e) {
      throw new BadInput(folder + " does not exist; accepted: a folder of pictures", e);
    } catch (NotDirectoryException e) {
      throw new BadInput(folder + " is no folder; accepted: a folder of pictures", e);
    } catch (IOException e) {
      throw Unavailable.cannot("read " + folder, e);
    }
  }

  /**
   * Whether a file begins as the pictures do that are read here.
   *
   * @throws Unavailable if it cannot be opened
   */
  public static boolean hasSignature(Path file) {
    try (InputStream in = Files.newInputStream(file)) {
      return PictureFormat.of(in.readNBytes(PictureFormat.LONGEST_SIGNATURE)).isPresent();
    } catch (IOException e) {
      throw Unavailable.cannot("read " + file, e);
    }
  }

  /**
   * Reads a picture.
   *
   * @throws BadInput if it is of a kind that is not accepted, or too large
   * @throws Unavailable if it is damaged, of an unknown format or cannot be opened
   */
  public static PictureFile read(Path file) {
    byte[] bytes;
    try (InputStream in = Files.newInputStream(file)) {
      bytes = in.readNBytes(MAX_BYTES + 1);
    } catch (IOException e) {
      throw Unavailable.cannot("read picture " + file, e);
    }
    PictureHeader header = PictureReader.header(file.toString(), bytes);
    long limit = Math.min(MAX_BYTES, Manifest.limit(header));
    if (Math.max(header.width(), header.height()) > Picture.MAX_SIDE || bytes.length > limit) {
      throw new BadInput(
          "picture %s is %s in %d bytes; accepted: sides up to %d and up to %d bytes"
              .formatted(file, header.describe(), bytes.length, Picture.MAX_SIDE, limit));
    }
    Picture luma = PictureReader.read(file.toString(), bytes, header).luma();
    boolean jpeg = PictureFormat.of(bytes).equals(Optional.of(PictureFormat.JPEG));
    return new PictureFile(file, header, Manifest.sha256(bytes), jpeg, luma);
  }
}
