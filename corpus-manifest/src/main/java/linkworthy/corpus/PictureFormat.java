package linkworthy.corpus;

import com.twelvemonkeys.imageio.plugins.bmp.BMPImageReaderSpi;
import com.twelvemonkeys.imageio.plugins.jpeg.JPEGImageReaderSpi;
import com.twelvemonkeys.imageio.plugins.pnm.PNMImageReaderSpi;
import com.twelvemonkeys.imageio.plugins.tiff.TIFFImageReaderSpi;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.util.Arrays;
import java.util.Iterator;
import java.util.Optional;
import java.util.regex.Pattern;
import javax.imageio.ImageReader;
import javax.imageio.spi.IIORegistry;
import javax.imageio.spi.ImageReaderSpi;
import linkworthy.input.Unavailable;

/**
 * The picture formats read here, each known by its first bytes and read by one reader, which is
 * looked up by the name of its class, so that what else is registered makes no difference.
 */
enum PictureFormat {
  PNG("com.sun.imageio.plugins.png.PNGImageReaderSpi", "\u0089PNG\r\n\u001a\n"),
  JPEG(JPEGImageReaderSpi.class.getName(), "\u00ff\u00d8\u00ff"),
  TIFF(TIFFImageReaderSpi.class.getName(), "II\\*\0|MM\0\\*"),
  PNM(PNMImageReaderSpi.class.getName(), "P[1-6]"),
  BMP(BMPImageReaderSpi.class.getName(), "BM");

  /** So many bytes tell the format. */
  static final int LONGEST_SIGNATURE = 8;

  private final String providerClass;
  private final Pattern signature;

  PictureFormat(String providerClass, String signature) {
    this.providerClass = providerClass;
    this.signature = Pattern.compile(signature);
  }

  /** The format whose signature the bytes begin with. */
  static Optional<PictureFormat> of(byte[] bytes) {
    String start =
        new String(
            bytes, 0, Math.min(bytes.length, LONGEST_SIGNATURE), StandardCharsets.ISO_8859_1);
    return Arrays.stream(values())
        .filter(format -> format.signature.matcher(start).lookingAt())
        .findFirst();
  }

  /**
   * A new reader.
   *
   * @throws Unavailable if this Java platform has none
   */
  ImageReader newReader() throws IOException {
    return provider().createReaderInstance(null);
  }

  private ImageReaderSpi provider() {
    synchronized (PictureFormat.class) {
      IIORegistry registry = IIORegistry.getDefaultInstance();
      Iterator<ImageReaderSpi> all = registry.getServiceProviders(ImageReaderSpi.class, false);
      while (all.hasNext()) {
        ImageReaderSpi provider = all.next();
        if (provider.getClass().getName().equals(providerClass)) {
          return provider;
        }
      }
      ImageReaderSpi made = make();
      registry.registerServiceProvider(made);
      return made;
    }
  }

  /** For programs whose class loader hides the service files from the registry. */
  private ImageReaderSpi make() {
    return switch (this) {
      case PNG -> throw new Unavailable("this Java platform has no reader for PNG");
      case JPEG -> new JPEGImageReaderSpi();
      case TIFF -> new TIFFImageReaderSpi();
      case PNM -> new PNMImageReaderSpi();
      case BMP -> new BMPImageReaderSpi();
    };
  }
}
