package linkworthy.codec;

import java.nio.charset.StandardCharsets;
import java.util.Arrays;
import linkworthy.corpus.Picture;

/** Writes pictures as PGM files (netpbm's pgm(5), binary), up to 16 bits a sample. */
final class Pgm {
  private Pgm() {}

  /** One byte a sample up to 8 bits, otherwise two, the high one first. */
  static byte[] write(Picture picture) {
    String head = "P5\n" + picture.width() + " " + picture.height() + "\n" + picture.peak() + "\n";
    byte[] start = head.getBytes(StandardCharsets.US_ASCII);
    byte[] file =
        Arrays.copyOf(start, Math.toIntExact(start.length + sampleBytes(PictureShape.of(picture))));
    int at = start.length;
    for (int sample : picture.samples()) {
      if (picture.bitDepth() > 8) {
        file[at++] = (byte) (sample >> 8);
      }
      file[at++] = (byte) sample;
    }
    return file;
  }

  /** Bytes of the samples alone. */
  static long sampleBytes(PictureShape shape) {
    return (long) shape.size() * (shape.bitDepth() > 8 ? 2 : 1);
  }
}
