package linkworthy.corpus;

import java.awt.Transparency;
import java.awt.color.ColorSpace;
import java.awt.image.BufferedImage;
import java.awt.image.ComponentColorModel;
import java.awt.image.DataBuffer;
import java.awt.image.WritableRaster;
import java.io.ByteArrayOutputStream;
import java.io.DataOutputStream;
import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.Iterator;
import java.util.List;
import java.util.Locale;
import java.util.Random;
import java.util.zip.CRC32;
import javax.imageio.ImageIO;
import javax.imageio.ImageWriter;
import javax.imageio.stream.MemoryCacheImageOutputStream;

/** Files of every format, made from known samples. */
final class PictureFiles {
  static final List<String> FORMATS = List.of("png", "jpeg", "tiff", "pnm", "bmp");

  private PictureFiles() {}

  /** Planes of reproducible noise that reach both ends of the range. */
  static List<Picture> noise(int width, int height, int channels, int bitDepth, long seed) {
    Random random = new Random(seed);
    List<Picture> planes = new ArrayList<>();
    for (int channel = 0; channel < channels; channel++) {
      int[] samples = random.ints((long) width * height, 0, 1 << bitDepth).toArray();
      samples[channel] = 0;
      samples[samples.length - 1 - channel] = (1 << bitDepth) - 1;
      planes.add(new Picture(width, height, bitDepth, samples));
    }
    return planes;
  }

  /** A smooth ramp, which JPEG keeps nearly unchanged. */
  static List<Picture> ramp(int width, int height, int channels) {
    List<Picture> planes = new ArrayList<>();
    for (int channel = 0; channel < channels; channel++) {
      int[] samples = new int[width * height];
      for (int i = 0; i < samples.length; i++) {
        samples[i] = 20 + 40 * channel + 2 * (i % width) + 3 * (i / width);
      }
      planes.add(new Picture(width, height, 8, samples));
    }
    return planes;
  }

  static byte[] write(String format, List<Picture> planes) {
    return format.equals("pnm") ? pnm(planes) : written(format, image(planes));
  }

  /** Binary PGM or PPM; netpbm's pgm(5) and ppm(5): most significant byte first. */
  static byte[] pnm(List<Picture> planes) {
    Picture first = planes.get(0);
    ByteArrayOutputStream out = new ByteArrayOutputStream();
    String header =
        String.format(
            Locale.ROOT,
            "P%d\n%d %d\n%d\n",
            planes.size() == 1 ? 5 : 6,
            first.width(),
            first.height(),
            first.peak());
    out.writeBytes(header.getBytes(StandardCharsets.US_ASCII));
    for (int i = 0; i < first.size(); i++) {
      for (Picture plane : planes) {
        if (first.bitDepth() > 8) {
          out.write(plane.samples()[i] >> 8);
        }
        out.write(plane.samples()[i]);
      }
    }
    return out.toByteArray();
  }

  static BufferedImage image(List<Picture> planes) {
    Picture first = planes.get(0);
    int bands = planes.size();
    BufferedImage image;
    if (first.bitDepth() > 8) {
      ComponentColorModel colours =
          new ComponentColorModel(
              ColorSpace.getInstance(bands == 1 ? ColorSpace.CS_GRAY : ColorSpace.CS_sRGB),
              false,
              false,
              Transparency.OPAQUE,
              DataBuffer.TYPE_USHORT);
      WritableRaster raster = colours.createCompatibleWritableRaster(first.width(), first.height());
      image = new BufferedImage(colours, raster, false, null);
    } else {
      int type = bands == 1 ? BufferedImage.TYPE_BYTE_GRAY : BufferedImage.TYPE_3BYTE_BGR;
      image = new BufferedImage(first.width(), first.height(), type);
    }
    for (int band = 0; band < bands; band++) {
      image
          .getRaster()
          .setSamples(
              0, 0, first.width(), first.height(), band, planes.get(band).samples().clone());
    }
    return image;
  }

  /** Written by the writer that the Java platform itself has. */
  static byte[] written(String format, BufferedImage image) {
    for (Iterator<ImageWriter> writers = ImageIO.getImageWritersByFormatName(format);
        writers.hasNext(); ) {
      ImageWriter writer = writers.next();
      if (writer.getClass().getName().startsWith("com.sun.imageio.")) {
        ByteArrayOutputStream bytes = new ByteArrayOutputStream();
        try (MemoryCacheImageOutputStream out = new MemoryCacheImageOutputStream(bytes)) {
          writer.setOutput(out);
          writer.write(image);
        } catch (IOException e) {
          throw new UncheckedIOException(e);
        } finally {
          writer.dispose();
        }
        return bytes.toByteArray();
      }
    }
    throw new IllegalStateException("no writer for " + format);
  }

  /** The header that a file of these planes announces. */
  static PictureHeader header(List<Picture> planes) {
    Picture first = planes.get(0);
    return new PictureHeader(first.width(), first.height(), planes.size(), first.bitDepth());
  }

  /** A PNG of chunks with right checksums and whatever content (PNG specification, section 5). */
  static byte[] pngOfChunks(Object... namesAndContents) {
    ByteArrayOutputStream bytes = new ByteArrayOutputStream();
    bytes.writeBytes("\u0089PNG\r\n\u001a\n".getBytes(StandardCharsets.ISO_8859_1));
    try (DataOutputStream out = new DataOutputStream(bytes)) {
      for (int i = 0; i < namesAndContents.length; i += 2) {
        byte[] name = namesAndContents[i].toString().getBytes(StandardCharsets.US_ASCII);
        byte[] content = (byte[]) namesAndContents[i + 1];
        CRC32 crc = new CRC32();
        crc.update(name);
        crc.update(content);
        out.writeInt(content.length);
        out.write(name);
        out.write(content);
        out.writeInt((int) crc.getValue());
      }
    } catch (IOException e) {
      throw new UncheckedIOException(e);
    }
    return bytes.toByteArray();
  }

  /** Content of an IHDR chunk. */
  static byte[] ihdr(int width, int height, int bitDepth, int colourType) {
    return new byte[] {
      (byte) (width >> 24),
      (byte) (width >> 16),
      (byte) (width >> 8),
      (byte) width,
      (byte) (height >> 24),
      (byte) (height >> 16),
      (byte) (height >> 8),
      (byte) height,
      (byte) bitDepth,
      (byte) colourType,
      0,
      0,
      0
    };
  }
}
