package linkworthy.app;

import java.awt.image.BufferedImage;
import java.awt.image.WritableRaster;
import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.io.UncheckedIOException;
import javax.imageio.ImageIO;
import javax.imageio.stream.MemoryCacheImageOutputStream;
import linkworthy.corpus.Picture;

/** Pictures as PNG in grey: 8 bits a sample up to a bit depth of 8, else 16, values unchanged. */
final class Pngs {
  private static final int BYTE = 8;

  private Pngs() {}

  /** A picture with its very samples. */
  static byte[] picture(Picture picture) {
    return png(picture.width(), picture.height(), picture.bitDepth(), picture.samples());
  }

  /** Samples of 8 bits. */
  static byte[] grey(int width, int height, int[] samples) {
    return png(width, height, BYTE, samples);
  }

  /** Where {@link #error} shows no error: 128, or 32768 in 16 bits. */
  static int middle(int bitDepth) {
    return bitDepth <= BYTE ? 1 << 7 : 1 << 15;
  }

  /** Decoded minus clean in grey levels, added to the middle of the range and clipped to it. */
  static byte[] error(Picture clean, Picture decoded) {
    int middle = middle(clean.bitDepth());
    int[] samples = new int[clean.size()];
    for (int i = 0; i < samples.length; i++) {
      int error = decoded.samples()[i] - clean.samples()[i];
      samples[i] = Math.max(0, Math.min(2 * middle - 1, middle + error));
    }
    return png(clean.width(), clean.height(), clean.bitDepth(), samples);
  }

  private static byte[] png(int width, int height, int bitDepth, int[] samples) {
    int type = bitDepth <= BYTE ? BufferedImage.TYPE_BYTE_GRAY : BufferedImage.TYPE_USHORT_GRAY;
    BufferedImage image = new BufferedImage(width, height, type);
    WritableRaster raster = image.getRaster();
    raster.setSamples(0, 0, width, height, 0, samples);
    ByteArrayOutputStream bytes = new ByteArrayOutputStream();
    try (MemoryCacheImageOutputStream out = new MemoryCacheImageOutputStream(bytes)) {
      if (!ImageIO.write(image, "png", out)) {
        throw new IllegalStateException("every Java writes PNG");
      }
    } catch (IOException e) {
      throw new UncheckedIOException(e);
    }
    return bytes.toByteArray();
  }
}
