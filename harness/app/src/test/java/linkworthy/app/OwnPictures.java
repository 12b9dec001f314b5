package linkworthy.app;

import java.awt.image.BufferedImage;
import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import javax.imageio.ImageIO;
import linkworthy.corpus.Manifest;
import linkworthy.corpus.ManifestEntry;

/** A folder of pictures with its manifest, as a user might have one. */
final class OwnPictures {
  static final int WIDTH = 24;
  static final int HEIGHT = 20;

  private final Path folder;
  private final List<ManifestEntry> entries = new ArrayList<>();

  OwnPictures(Path folder) {
    this.folder = folder;
  }

  /** A picture of smooth gray in a format of the Java platform. */
  static byte[] picture(String format, int width, int height, int bitDepth) {
    int type = bitDepth > 8 ? BufferedImage.TYPE_USHORT_GRAY : BufferedImage.TYPE_BYTE_GRAY;
    BufferedImage image = new BufferedImage(width, height, type);
    for (int y = 0; y < height; y++) {
      for (int x = 0; x < width; x++) {
        image.getRaster().setSample(x, y, 0, level(x, y) << (bitDepth - 8));
      }
    }
    ByteArrayOutputStream out = new ByteArrayOutputStream();
    try {
      if (!ImageIO.write(image, format, out)) {
        throw new AssertionError("no writer for " + format);
      }
    } catch (IOException e) {
      throw new UncheckedIOException(e);
    }
    return out.toByteArray();
  }

  /** The same picture as binary PGM. */
  static byte[] pgm() {
    ByteArrayOutputStream out = new ByteArrayOutputStream();
    out.writeBytes(("P5\n" + WIDTH + " " + HEIGHT + "\n255\n").getBytes(StandardCharsets.US_ASCII));
    for (int y = 0; y < HEIGHT; y++) {
      for (int x = 0; x < WIDTH; x++) {
        out.write(level(x, y));
      }
    }
    return out.toByteArray();
  }

  private static int level(int x, int y) {
    return (40 + 5 * x + 3 * y) & 0xff;
  }

  OwnPictures add(String file, byte[] bytes) {
    return add(file, bytes, 8, Manifest.sha256(bytes), "the user");
  }

  OwnPictures add(String file, byte[] bytes, int bitDepth, String sha256, String attribution) {
    return add(file, bytes, WIDTH, HEIGHT, bitDepth, sha256, attribution);
  }

  OwnPictures add(
      String file,
      byte[] bytes,
      int width,
      int height,
      int bitDepth,
      String sha256,
      String attribution) {
    try {
      Files.write(folder.resolve(file), bytes);
    } catch (IOException e) {
      throw new UncheckedIOException(e);
    }
    entries.add(
        new ManifestEntry(
            file.replace(' ', '_').replaceAll("[^a-z0-9._-]", "x"),
            "own",
            file,
            width,
            height,
            1,
            bitDepth,
            "<b>yard</b>",
            "CC0-1.0",
            attribution,
            "",
            sha256,
            ""));
    return this;
  }

  Path manifest() {
    return manifest(Manifest.toCsv(entries));
  }

  Path manifest(String csv) {
    try {
      return Files.writeString(folder.resolve("manifest.csv"), csv);
    } catch (IOException e) {
      throw new UncheckedIOException(e);
    }
  }

  String csv() {
    return Manifest.toCsv(entries);
  }

  /** A study of these pictures, beside the manifest. */
  Path study() {
    return SmallStudy.write(
        folder,
        SmallStudy.TEXT.replace(
            "{select: [canyon, cat], longest-side: 32}",
            "{manifest: manifest.csv, select: [own]}"));
  }
}
