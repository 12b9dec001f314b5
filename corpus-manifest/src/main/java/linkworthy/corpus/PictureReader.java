package linkworthy.corpus;

import com.twelvemonkeys.imageio.stream.ByteArrayImageInputStream;
import java.awt.color.ColorSpace;
import java.awt.image.BufferedImage;
import java.awt.image.ColorModel;
import java.awt.image.DataBuffer;
import java.awt.image.IndexColorModel;
import java.awt.image.Raster;
import java.awt.image.SampleModel;
import java.io.EOFException;
import java.io.IOException;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.Iterator;
import java.util.List;
import javax.imageio.ImageReadParam;
import javax.imageio.ImageReader;
import javax.imageio.ImageTypeSpecifier;
import javax.imageio.stream.ImageInputStream;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;
import org.jspecify.annotations.Nullable;

/**
 * Reads picture files from memory: PNG, JPEG, TIFF, PNM (PBM, PGM, PPM) and BMP, gray or red, green
 * and blue, up to 16 bits. The format is told by the first bytes, never by the name. Samples are
 * returned as stored: profiles, gamma and orientation are not applied, and the first picture of
 * several is taken. A palette of gray levels counts as gray of 8 bits, any other as colour of 8
 * bits, the plain ramp of less than 8 bits as gray of that depth. Transparency, four-colour print,
 * signed and floating-point samples are refused.
 *
 * <p>The header is compared with what was announced before any sample is decoded. A reader's
 * warning counts as damage, except for BMP, whose reader warns of short palettes only.
 */
public final class PictureReader {
  private PictureReader() {}

  /**
   * What a file says of itself.
   *
   * @param name names the file in messages
   * @throws BadInput if it holds a kind of picture that is not accepted
   * @throws Unavailable if it is damaged or of another format
   */
  public static PictureHeader header(String name, byte[] bytes) {
    return open(name, bytes, (reader, stored) -> header(name, reader, stored));
  }

  /**
   * Reads a picture that must be as announced. Its depth may be announced as fewer bits than the 8
   * or 16 that hold each sample, if all samples are below 2^bits.
   *
   * @param name names the file in messages
   * @throws BadInput if it is not as announced, or of a kind that is not accepted
   * @throws Unavailable if it is damaged, of another format, or too large for the memory
   */
  public static ReadPicture read(String name, byte[] bytes, PictureHeader announced) {
    return open(
        name,
        bytes,
        (reader, stored) -> {
          requireAnnounced(name, header(name, reader, stored), announced);
          requireMemory(name, announced);
          BufferedImage image = reader.read(0, asStored(reader));
          requireAnnounced(name, header(name, image, stored), announced);
          return new ReadPicture(channels(name, image, announced), reader.getClass().getName());
        });
  }

  private interface Work<T> {
    T with(ImageReader reader, StoredBytes stored) throws IOException;
  }

  /**
   * Gives the bytes to the format's reader. Whatever it throws on a damaged file becomes one line;
   * so do the errors of readers that recurse or allocate by numbers in the file.
   */
  private static <T> T open(String name, byte[] bytes, Work<T> work) {
    PictureFormat format =
        PictureFormat.of(bytes)
            .orElseThrow(
                () ->
                    new Unavailable(unreadable(name) + "no PNG, JPEG, TIFF, PNM or BMP signature"));
    StoredBytes stored = StoredBytes.of(format, name, bytes);
    try (ImageInputStream in = new ByteArrayImageInputStream(stored.bytes())) {
      ImageReader reader = format.newReader();
      try {
        if (format != PictureFormat.BMP) {
          reader.addIIOReadWarningListener(
              (from, warning) -> {
                throw new IllegalStateException(warning);
              });
        }
        reader.setInput(in, false, true);
        return work.with(reader, stored);
      } finally {
        reader.dispose();
      }
    } catch (BadInput | Unavailable e) {
      throw e;
    } catch (IOException
        | RuntimeException
        | AssertionError
        | OutOfMemoryError
        | StackOverflowError e) {
      throw new Unavailable(unreadable(name) + "damaged " + format + ", " + reason(e), e);
    }
  }

  private static String reason(Throwable problem) {
    for (@Nullable Throwable cause = problem; cause != null; cause = cause.getCause()) {
      if (cause instanceof EOFException) {
        return "it ends too early";
      }
    }
    String message = problem.getMessage();
    return message == null ? problem.getClass().getSimpleName() : message;
  }

  private static String unreadable(String name) {
    return "picture " + name + " cannot be read: ";
  }

  private static PictureHeader header(String name, ImageReader reader, StoredBytes stored)
      throws IOException {
    int width = reader.getWidth(0);
    int height = reader.getHeight(0);
    ImageTypeSpecifier raw = reader.getRawImageType(0);
    ImageTypeSpecifier type = raw == null ? reader.getImageTypes(0).next() : raw;
    return header(name, width, height, type.getColorModel(), type.getSampleModel(), stored);
  }

  private static PictureHeader header(String name, BufferedImage image, StoredBytes stored) {
    return header(
        name,
        image.getWidth(),
        image.getHeight(),
        image.getColorModel(),
        image.getSampleModel(),
        stored);
  }

  private static PictureHeader header(
      String name,
      int width,
      int height,
      ColorModel colours,
      SampleModel samples,
      StoredBytes stored) {
    if (colours.hasAlpha()) {
      throw refuse(name, "transparency");
    }
    if (colours instanceof IndexColorModel palette) {
      int depth = isRamp(palette) ? palette.getPixelSize() : 8;
      return new PictureHeader(width, height, isGray(palette) ? 1 : 3, depth);
    }
    int type = colours.getColorSpace().getType();
    int bands = samples.getNumBands();
    if (!((type == ColorSpace.TYPE_GRAY && bands == 1)
        || (type == ColorSpace.TYPE_RGB && bands == 3))) {
      throw refuse(name, bands + " channels that are neither gray nor red, green and blue");
    }
    int data = samples.getDataType();
    if (data != DataBuffer.TYPE_BYTE
        && data != DataBuffer.TYPE_USHORT
        && data != DataBuffer.TYPE_INT) {
      throw refuse(name, "signed or floating-point samples");
    }
    int depth = samples.getSampleSize(0);
    for (int band = 1; band < bands; band++) {
      depth = samples.getSampleSize(band) == depth ? depth : 0;
    }
    if (depth < 1 || depth > 16) {
      throw refuse(name, "samples of different sizes or of more than 16 bits");
    }
    return new PictureHeader(
        width, height, bands, stored.bitDepth() > 0 ? stored.bitDepth() : depth);
  }

  private static BadInput refuse(String name, String found) {
    return new BadInput(
        "picture "
            + name
            + " has "
            + found
            + "; accepted: gray or red, green and blue, 1 to 16 bits, no transparency");
  }

  private static void requireAnnounced(String name, PictureHeader found, PictureHeader announced) {
    if (!found.holds(announced)) {
      throw new BadInput(
          "picture " + name + " is " + found.describe() + "; announced: " + announced.describe());
    }
  }

  /** The decoded raster, its channels and the luma plane have to fit. */
  private static void requireMemory(String name, PictureHeader announced) {
    long samples = (long) announced.width() * announced.height();
    long needed = 2 * announced.rawBytes() + samples * Integer.BYTES * (announced.channels() + 1);
    long available = Runtime.getRuntime().maxMemory();
    if (needed > available) {
      throw new Unavailable(
          unreadable(name)
              + announced.describe()
              + " needs about "
              + (needed >> 20)
              + " MiB of memory; available: "
              + (available >> 20)
              + " MiB (Java option -Xmx)");
    }
  }

  /** Asks for the layout of the file, where the reader would prefer to convert it. */
  private static ImageReadParam asStored(ImageReader reader) throws IOException {
    ImageReadParam parameters = reader.getDefaultReadParam();
    ImageTypeSpecifier raw = reader.getRawImageType(0);
    for (Iterator<ImageTypeSpecifier> types = reader.getImageTypes(0); types.hasNext(); ) {
      if (types.next().equals(raw)) {
        parameters.setDestinationType(raw);
      }
    }
    return parameters;
  }

  private static List<Picture> channels(String name, BufferedImage image, PictureHeader announced) {
    List<int[]> planes = new ArrayList<>();
    for (int channel = 0; channel < announced.channels(); channel++) {
      planes.add(new int[image.getWidth() * image.getHeight()]);
    }
    copy(image, planes);
    int peak = (1 << announced.bitDepth()) - 1;
    List<Picture> channels = new ArrayList<>();
    for (int[] plane : planes) {
      int highest = Arrays.stream(plane).max().orElse(0);
      if (highest > peak) {
        throw new BadInput(
            "picture "
                + name
                + " has a sample of "
                + highest
                + "; announced: "
                + announced.describe());
      }
      channels.add(new Picture(image.getWidth(), image.getHeight(), announced.bitDepth(), plane));
    }
    return channels;
  }

  private static void copy(BufferedImage image, List<int[]> planes) {
    Raster raster = image.getRaster();
    int width = image.getWidth();
    int bands = raster.getNumBands();
    int[] @Nullable [] lookup =
        image.getColorModel() instanceof IndexColorModel palette ? levels(palette) : null;
    int[] row = new int[width * bands];
    for (int y = 0; y < image.getHeight(); y++) {
      raster.getPixels(0, y, width, 1, row);
      for (int channel = 0; channel < planes.size(); channel++) {
        int[] plane = planes.get(channel);
        for (int x = 0; x < width; x++) {
          plane[y * width + x] =
              lookup == null ? row[x * bands + channel] : lookup[channel][row[x]];
        }
      }
    }
  }

  /**
   * For each channel the level of every palette entry; a ramp's entries stand for themselves. An
   * index behind the last entry is left to fail as damage.
   */
  private static int[][] levels(IndexColorModel palette) {
    int[][] levels = new int[3][palette.getMapSize()];
    boolean ramp = isRamp(palette);
    for (int i = 0; i < palette.getMapSize(); i++) {
      levels[0][i] = ramp ? i : palette.getRed(i);
      levels[1][i] = palette.getGreen(i);
      levels[2][i] = palette.getBlue(i);
    }
    return levels;
  }

  private static boolean isGray(IndexColorModel palette) {
    for (int i = 0; i < palette.getMapSize(); i++) {
      if (palette.getRed(i) != palette.getGreen(i) || palette.getRed(i) != palette.getBlue(i)) {
        return false;
      }
    }
    return true;
  }

  /** Whether the palette is black to white in even steps over all values of its pixels. */
  private static boolean isRamp(IndexColorModel palette) {
    int last = palette.getMapSize() - 1;
    boolean ramp = isGray(palette) && palette.getPixelSize() <= 8;
    ramp &= last == (1 << palette.getPixelSize()) - 1;
    for (int i = 0; ramp && i <= last; i++) {
      ramp = palette.getRed(i) == 255 * i / last;
    }
    return ramp;
  }
}
