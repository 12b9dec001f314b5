package linkworthy.corpus;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import com.sun.management.ThreadMXBean;
import java.awt.Transparency;
import java.awt.color.ColorSpace;
import java.awt.color.ICC_Profile;
import java.awt.image.BufferedImage;
import java.awt.image.ComponentColorModel;
import java.awt.image.DataBuffer;
import java.awt.image.IndexColorModel;
import java.io.ByteArrayInputStream;
import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.lang.management.ManagementFactory;
import java.nio.ByteBuffer;
import java.nio.charset.StandardCharsets;
import java.util.Arrays;
import java.util.Iterator;
import java.util.List;
import javax.imageio.ImageIO;
import javax.imageio.ImageReader;
import javax.imageio.stream.MemoryCacheImageInputStream;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class PictureReaderTest {
  private static final String JDK = "com.sun.imageio.plugins.";
  private static final String TWELVE_MONKEYS = "com.twelvemonkeys.imageio.plugins.";

  @ParameterizedTest
  @CsvSource({
    "png, 1, 8, png.PNGImageReader",
    "png, 3, 8, png.PNGImageReader",
    "png, 1, 16, png.PNGImageReader",
    "png, 3, 16, png.PNGImageReader",
    "tiff, 1, 8, tiff.TIFFImageReader",
    "tiff, 3, 8, tiff.TIFFImageReader",
    "tiff, 1, 16, tiff.TIFFImageReader",
    "tiff, 3, 16, tiff.TIFFImageReader",
    "pnm, 1, 8, pnm.PNMImageReader",
    "pnm, 3, 8, pnm.PNMImageReader",
    "pnm, 1, 16, pnm.PNMImageReader",
    "pnm, 3, 16, pnm.PNMImageReader",
    "pnm, 1, 1, pnm.PNMImageReader",
    "pnm, 3, 5, pnm.PNMImageReader",
    "pnm, 1, 12, pnm.PNMImageReader",
    "bmp, 1, 8, bmp.BMPImageReader",
    "bmp, 3, 8, bmp.BMPImageReader",
  })
  void givesTheSamplesAsWritten(String format, int channels, int bitDepth, String reader) {
    List<Picture> written = PictureFiles.noise(33, 21, channels, bitDepth, 7);
    byte[] file = PictureFiles.write(format, written);
    PictureHeader header = PictureFiles.header(written);
    assertThat(PictureReader.header("p", file)).isEqualTo(header);
    ReadPicture read = PictureReader.read("p", file, header);
    assertSameSamples(read, written);
    String owner = format.equals("png") ? JDK : TWELVE_MONKEYS;
    assertThat(read.reader()).isEqualTo(owner + reader);
  }

  @ParameterizedTest
  @ValueSource(ints = {1, 3})
  void readsJpegAsThePlatformsOwnReaderDoes(int channels) throws IOException {
    byte[] file = PictureFiles.write("jpeg", PictureFiles.ramp(32, 24, channels));
    ReadPicture read = PictureReader.read("p", file, new PictureHeader(32, 24, channels, 8));
    assertThat(read.reader()).isEqualTo(TWELVE_MONKEYS + "jpeg.JPEGImageReader");
    BufferedImage expected = platformJpeg(file);
    for (int channel = 0; channel < channels; channel++) {
      int[] samples = expected.getRaster().getSamples(0, 0, 32, 24, channel, (int[]) null);
      assertThat(read.channels().get(channel).samples()).isEqualTo(samples);
    }
  }

  @Test
  void doesNotApplyAnEmbeddedProfile() {
    byte[] plain = PictureFiles.write("jpeg", PictureFiles.ramp(32, 24, 3));
    byte[] profile = ICC_Profile.getInstance(ColorSpace.CS_LINEAR_RGB).getData();
    ByteBuffer segment = ByteBuffer.allocate(18 + profile.length);
    segment.putShort((short) 0xFFE2).putShort((short) (16 + profile.length));
    segment.put("ICC_PROFILE\0".getBytes(StandardCharsets.ISO_8859_1)).put((byte) 1).put((byte) 1);
    segment.put(profile);
    ByteArrayOutputStream tagged = new ByteArrayOutputStream();
    tagged.write(plain, 0, 20);
    tagged.writeBytes(segment.array());
    tagged.write(plain, 20, plain.length - 20);
    PictureHeader header = new PictureHeader(32, 24, 3, 8);
    assertSameSamples(
        PictureReader.read("p", tagged.toByteArray(), header),
        PictureReader.read("p", plain, header).channels());
  }

  @ParameterizedTest
  @ValueSource(strings = {"png", "tiff", "bmp"})
  void expandsPalettes(String format) {
    byte[] red = Arrays.copyOf(new byte[] {10, 20, (byte) 200, 0}, 256);
    byte[] green = Arrays.copyOf(new byte[] {10, 30, (byte) 201, 0}, 256);
    byte[] blue = Arrays.copyOf(new byte[] {10, 40, (byte) 202, (byte) 255}, 256);
    int[] indices = {0, 1, 2, 3, 2, 1};
    ReadPicture colour =
        PictureReader.read(
            "p",
            PictureFiles.written(
                format, indexed(new IndexColorModel(8, 256, red, green, blue), indices)),
            new PictureHeader(3, 2, 3, 8));
    assertThat(colour.channels().get(0).samples()).containsExactly(10, 20, 200, 0, 200, 20);
    assertThat(colour.channels().get(1).samples()).containsExactly(10, 30, 201, 0, 201, 30);
    assertThat(colour.channels().get(2).samples()).containsExactly(10, 40, 202, 255, 202, 40);
    ReadPicture gray =
        PictureReader.read(
            "p",
            PictureFiles.written(
                format, indexed(new IndexColorModel(8, 256, red, red, red), indices)),
            new PictureHeader(3, 2, 1, 8));
    assertThat(gray.luma().samples()).containsExactly(10, 20, 200, 0, 200, 20);
  }

  @Test
  void readsPlainAndCommentedPnm() {
    byte[] plain =
        "P2 # one\n3 2 # size\n15\n0 1 2\n13 14 15\n".getBytes(StandardCharsets.US_ASCII);
    assertThat(PictureReader.read("p", plain, new PictureHeader(3, 2, 1, 4)).luma().samples())
        .containsExactly(0, 1, 2, 13, 14, 15);
    byte[] bitmap = "P1\n3 2\n0 1 0\n1 1 0\n".getBytes(StandardCharsets.US_ASCII);
    assertThat(PictureReader.read("p", bitmap, new PictureHeader(3, 2, 1, 1)).luma().samples())
        .as("in a bitmap 1 is black: netpbm's pbm(5)")
        .containsExactly(1, 0, 1, 0, 0, 1);
  }

  @Test
  void readsFewerBitsFromSixteen() {
    List<Picture> ten = PictureFiles.noise(9, 8, 1, 10, 4);
    List<Picture> stored = List.of(new Picture(9, 8, 16, ten.get(0).samples()));
    byte[] file = PictureFiles.write("png", stored);
    assertThat(PictureReader.read("p", file, new PictureHeader(9, 8, 1, 10)).luma().peak())
        .isEqualTo(1023);
    assertThatThrownBy(() -> PictureReader.read("p", file, new PictureHeader(9, 8, 1, 9)))
        .isInstanceOf(BadInput.class)
        .hasMessage("picture p has a sample of 1023; announced: 9 x 8, 1 channel, 9 bits");
  }

  @Test
  void refusesAPnmWhoseLargestValueIsNoDepth() {
    byte[] file = "P2 1 1 200 150 ".getBytes(StandardCharsets.US_ASCII);
    assertThatThrownBy(() -> PictureReader.read("p", file, new PictureHeader(1, 1, 1, 8)))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("samples up to 200; accepted: 1, 3, 7");
  }

  @Test
  void refusesTransparency() {
    BufferedImage image = new BufferedImage(3, 2, BufferedImage.TYPE_4BYTE_ABGR);
    byte[] file = PictureFiles.written("png", image);
    assertThatThrownBy(() -> PictureReader.read("p", file, new PictureHeader(3, 2, 3, 8)))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("picture p has transparency; accepted: gray or red, green and blue");
  }

  @Test
  void refusesFloatingPointSamples() {
    ComponentColorModel colours =
        new ComponentColorModel(
            ColorSpace.getInstance(ColorSpace.CS_GRAY),
            false,
            false,
            Transparency.OPAQUE,
            DataBuffer.TYPE_FLOAT);
    byte[] file =
        PictureFiles.written(
            "tiff",
            new BufferedImage(colours, colours.createCompatibleWritableRaster(3, 2), false, null));
    assertThatThrownBy(() -> PictureReader.read("p", file, new PictureHeader(3, 2, 1, 16)))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("signed or floating-point samples");
  }

  @ParameterizedTest
  @CsvSource({
    "12, 9, 1, 8",
    "14, 9, 1, 8",
    "13, 8, 1, 8",
    "13, 10, 1, 8",
    "13, 9, 3, 8",
    "13, 9, 1, 16"
  })
  void refusesWhatIsNotAsAnnounced(int width, int height, int channels, int bitDepth) {
    for (String format : PictureFiles.FORMATS) {
      byte[] file = PictureFiles.write(format, PictureFiles.noise(13, 9, 1, 8, 5));
      PictureHeader announced = new PictureHeader(width, height, channels, bitDepth);
      assertThatThrownBy(() -> PictureReader.read("p", file, announced))
          .isInstanceOf(BadInput.class)
          .hasMessage("picture p is 13 x 9, 1 channel, 8 bits; announced: " + announced.describe());
    }
  }

  @Test
  void refusesAHugeHeaderWithoutAllocating() {
    byte[] file =
        PictureFiles.pngOfChunks(
            "IHDR",
            PictureFiles.ihdr(60_000, 60_000, 8, 0),
            "IDAT",
            new byte[0],
            "IEND",
            new byte[0]);
    PictureHeader small = new PictureHeader(8, 8, 1, 8);
    assertThat(PictureReader.header("p", file)).isEqualTo(new PictureHeader(60_000, 60_000, 1, 8));
    ThreadMXBean threads = (ThreadMXBean) ManagementFactory.getThreadMXBean();
    long before = threads.getCurrentThreadAllocatedBytes();
    assertThatThrownBy(() -> PictureReader.read("p", file, small))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("60000 x 60000");
    assertThat(threads.getCurrentThreadAllocatedBytes() - before)
        .as("bytes; the samples would be 3.6e9, one row 60000")
        .isLessThan(4_000_000);
  }

  @Test
  void refusesWhatTheMemoryCannotHold() {
    byte[] file =
        PictureFiles.pngOfChunks(
            "IHDR",
            PictureFiles.ihdr(500_000, 500_000, 16, 2),
            "IDAT",
            new byte[0],
            "IEND",
            new byte[0]);
    PictureHeader announced = new PictureHeader(500_000, 500_000, 3, 16);
    assertThatThrownBy(() -> PictureReader.read("p", file, announced))
        .isInstanceOf(Unavailable.class)
        .hasMessageContaining("needs about")
        .hasMessageContaining("-Xmx");
  }

  @ParameterizedTest
  @ValueSource(strings = {"png", "jpeg", "tiff", "pnm", "bmp"})
  void saysThatAFileEndsTooEarly(String format) {
    List<Picture> planes = PictureFiles.noise(33, 21, 3, 8, 3);
    byte[] file = PictureFiles.write(format, planes);
    byte[] half = Arrays.copyOf(file, file.length / 2);
    assertThatThrownBy(() -> PictureReader.read("p", half, PictureFiles.header(planes)))
        .isInstanceOf(Unavailable.class)
        .hasMessageStartingWith("picture p cannot be read: damaged ")
        .hasMessageMatching(".*(too early|Truncated).*");
  }

  @ParameterizedTest
  @ValueSource(
      strings = {"", "This is no picture, whatever it is called.\n", "\0\0\0\0\0\0\0\0", "P7"})
  void refusesWhatHasNoSignature(String content) {
    byte[] file = content.getBytes(StandardCharsets.US_ASCII);
    assertThatThrownBy(() -> PictureReader.header("words.png", file))
        .isInstanceOf(Unavailable.class)
        .hasMessage("picture words.png cannot be read: no PNG, JPEG, TIFF, PNM or BMP signature");
  }

  @Test
  void goesByTheContentNotTheName() {
    List<Picture> planes = PictureFiles.noise(5, 4, 1, 8, 6);
    byte[] file = PictureFiles.write("tiff", planes);
    assertSameSamples(PictureReader.read("a.png", file, PictureFiles.header(planes)), planes);
  }

  private static void assertSameSamples(ReadPicture read, List<Picture> expected) {
    assertThat(read.channels()).hasSameSizeAs(expected);
    for (int channel = 0; channel < expected.size(); channel++) {
      assertThat(read.channels().get(channel).samples()).isEqualTo(expected.get(channel).samples());
    }
  }

  private static BufferedImage indexed(IndexColorModel palette, int[] indices) {
    BufferedImage image = new BufferedImage(3, 2, BufferedImage.TYPE_BYTE_INDEXED, palette);
    image.getRaster().setPixels(0, 0, 3, 2, indices);
    return image;
  }

  private static BufferedImage platformJpeg(byte[] file) throws IOException {
    for (Iterator<ImageReader> all = ImageIO.getImageReadersByFormatName("jpeg"); all.hasNext(); ) {
      ImageReader reader = all.next();
      if (reader.getClass().getName().startsWith(JDK)) {
        reader.setInput(new MemoryCacheImageInputStream(new ByteArrayInputStream(file)));
        return reader.read(0);
      }
    }
    throw new IllegalStateException("this platform has no JPEG reader of its own");
  }
}
