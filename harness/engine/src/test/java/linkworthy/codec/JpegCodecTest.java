package linkworthy.codec;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.awt.image.BufferedImage;
import java.awt.image.Raster;
import java.io.ByteArrayInputStream;
import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.Iterator;
import java.util.List;
import java.util.Map;
import java.util.Random;
import java.util.TreeMap;
import java.util.stream.IntStream;
import javax.imageio.IIOImage;
import javax.imageio.ImageIO;
import javax.imageio.ImageReader;
import javax.imageio.ImageWriteParam;
import javax.imageio.ImageWriter;
import linkworthy.corpus.Manifest;
import linkworthy.corpus.ManifestEntry;
import linkworthy.corpus.Picture;
import linkworthy.corpus.TestPattern;
import linkworthy.input.BadInput;
import linkworthy.input.YamlNode;
import linkworthy.link.Link;
import linkworthy.link.Packetizer;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class JpegCodecTest extends CodecContractTest {
  private static final Link LINK = new Link(96, 23, Link.Order.BY_COMPONENT);
  private static final String JDK_PLUG_IN = "com.sun.imageio.plugins.jpeg.";

  @Override
  protected String family() {
    return "jpeg";
  }

  @Override
  protected List<String> entries() {
    return List.of(
        "jpeg: baseline\nquality: [1, 30, 60, 100]",
        "jpeg: baseline\nquality: 75\nrestart-every: 3",
        "jpeg: baseline\nbits-per-pixel: [0.5, 2]");
  }

  private static JpegCodec codec(String entry) {
    List<Codec> codecs = CodecFamilies.installed().read(YamlNode.parse("study.yaml", entry), LINK);
    assertThat(codecs).hasSize(1);
    return (JpegCodec) codecs.get(0);
  }

  private static List<byte[]> packets(Codec codec, Picture picture) {
    return codec.encode(picture, new Memo()).payloads();
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "{jpeg: baseline, quality: 30} | jpeg Q30",
        "{jpeg: baseline, quality: 30, restart-every: 2} | jpeg Q30 restart2",
        "{jpeg: baseline, bits-per-pixel: 0.5} | jpeg 0.5bpp",
        "{jpeg: baseline, bits-per-pixel: 1, label: ours} | ours"
      })
  void labelsFollowFromTheParameters(String entry, String label) {
    assertThat(codec(entry).label()).isEqualTo(label);
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "{jpeg: baselin, quality: 30} | did you mean 'baseline'",
        "{jpeg: baseline} | neither 'quality' nor 'bits-per-pixel'",
        "{jpeg: baseline, quality: 0} | '0'; accepted: a whole number from 1",
        "{jpeg: baseline, quality: 101} | accepted: a whole number from 1",
        "{jpeg: baseline, quality: 30, bits-per-pixel: 1} | one of the two",
        "{jpeg: baseline, bits-per-pixel: 0} | '0'; accepted: bits per pixel above 0, up to 64",
        "{jpeg: baseline, bits-per-pixel: .nan} | accepted: bits per pixel",
        "{jpeg: baseline, quality: 30, restart-every: 0} | accepted: a whole number from 1",
        "{jpeg: baseline, quality: [30, 60], label: x} | names several codecs",
        "{jpeg: baseline, qualty: 30} | did you mean 'quality'"
      })
  void wrongEntriesAreRefusedInOneLine(String entry, String complaint) {
    assertThatThrownBy(
            () -> CodecFamilies.installed().read(YamlNode.parse("study.yaml", entry), LINK))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining(complaint)
        .hasMessageStartingWith("study.yaml, line 1: ")
        .hasMessageNotContaining("\n");
  }

  @Test
  void deepPicturesAndTooLongIntervalsAreRefused() {
    JpegCodec codec = codec("{jpeg: baseline, quality: 30, restart-every: 40}");
    assertThatThrownBy(() -> codec.check(new PictureShape(64, 64, 16)))
        .isInstanceOf(BadInput.class)
        .hasMessage(
            "codec 'jpeg Q30 restart40' is baseline JPEG, and the picture has 16 bits a"
                + " sample; accepted: 8");
    assertThatThrownBy(() -> codec.check(new PictureShape(16_384, 400, 8)))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("81920 blocks in a restart interval; accepted: up to 65535");
    codec.check(new PictureShape(16_384, 64, 8));
  }

  @ParameterizedTest
  @ValueSource(ints = {1, 50, 95})
  void theQuantiserTableIsThatOfTheQualityAlongTheZigZag(int quality) {
    FrequencySteps steps = new FrequencySteps(quality);
    int[] natural = new int[64];
    for (int i = 0; i < 64; i++) {
      natural[JpegTables.natural(i)] = JpegTables.steps(steps)[i];
    }
    assertThat(natural).isEqualTo(IntStream.range(0, 64).map(steps::step).toArray());
  }

  /**
   * The pattern through the quantised 8 x 8 DCT; recomputed independently in Python with SciPy
   * (ties half away from zero after rounding to 9 decimals, samples rounded half up).
   */
  @ParameterizedTest
  @CsvSource({
    "10, 135.575592, 5427, 0.3163848065",
    "50, 36.51565552, 13686, 0.9795282992",
    "90, 5.52557373, 25872, 2.161066173"
  })
  void thePatternThroughTheQuantisedTransform(
      int quality, double error, int nonZero, double entropy) {
    Picture picture = TestPattern.cvp(256);
    JpegBlocks blocks = new JpegBlocks(PictureShape.of(picture));
    int[] indices = JpegBlocks.quantised(blocks.forward(picture), new FrequencySteps(quality));
    assertThat(Arrays.stream(indices).filter(i -> i != 0).count()).isEqualTo(nonZero);
    assertThat(meanSquaredError(picture, exactInverse(blocks, indices, quality)))
        .isCloseTo(error, within(1e-6));
    double bits = 0;
    for (int k = 0; k < 64; k++) {
      Map<Integer, Integer> counts = new TreeMap<>();
      for (int i = k; i < indices.length; i += 64) {
        counts.merge(indices[i], 1, Integer::sum);
      }
      for (int count : counts.values()) {
        bits -= count * StrictMath.log(count / 1024.0) / StrictMath.log(2);
      }
    }
    assertThat(bits / picture.size()).isCloseTo(entropy, within(1e-6));
  }

  /** The inverse transform in floating point, rounded half up and clipped. */
  private static Picture exactInverse(JpegBlocks blocks, int[] indices, int quality) {
    double[][] cosines = DctBasis.oneDimensional(8);
    int[] steps = JpegTables.steps(new FrequencySteps(quality));
    int[] samples = new int[64 * blocks.count()];
    int width = 8 * blocks.across();
    PictureShape shape = new PictureShape(width, 8 * blocks.down(), 8);
    for (int block = 0; block < blocks.count(); block++) {
      for (int i = 0; i < 64; i++) {
        double sum = 0;
        for (int k = 0; k < 64; k++) {
          int natural = JpegTables.natural(k);
          sum +=
              indices[64 * block + k]
                  * steps[k]
                  * cosines[natural / 8][i / 8]
                  * cosines[natural % 8][i % 8];
        }
        int y = block / blocks.across() * 8 + i / 8;
        samples[y * width + block % blocks.across() * 8 + i % 8] = shape.toSample(sum + 128);
      }
    }
    return new Picture(width, shape.height(), 8, samples);
  }

  /**
   * Every shipped picture of 8 bits, and qualities 5, 10 ... 95: no sample differs from what the
   * Java platform shows, nor, at every third quality, from what djpeg shows.
   */
  @Test
  void shippedPicturesWithNoLossEqualTheJavaPlatformAndDjpeg(@TempDir Path folder)
      throws IOException, InterruptedException {
    Manifest manifest = Manifest.shipped();
    int pictures = 0;
    for (ManifestEntry entry : manifest.entries()) {
      if (entry.bitDepth() > 8) {
        continue;
      }
      pictures++;
      Picture picture = manifest.load(entry);
      PictureShape shape = PictureShape.of(picture);
      for (int quality = 5; quality <= 95; quality += 5) {
        JpegCodec codec = JpegCodec.of("", quality, 1 + quality % 3, LINK);
        List<byte[]> packets = packets(codec, picture);
        int[] ours = codec.decode(shape, packets).picture().samples();
        byte[] file = codec.file(shape, packets);
        String what = entry.id() + " Q" + quality;
        assertThat(Arrays.equals(readByJava(file), ours)).as(what).isTrue();
        if (quality % 15 == 5) {
          assertThat(Arrays.equals(readByDjpeg(file, folder), ours)).as(what).isTrue();
        }
      }
    }
    assertThat(pictures).isEqualTo(15);
  }

  /**
   * Coefficients that no picture has: of all sizes whose samples stay within two full scales of
   * mid-grey. Beyond that decoders clip in ways of their own.
   */
  @Test
  void randomCoefficientsGiveTheSamplesOfTheJavaPlatformAndDjpeg(@TempDir Path folder)
      throws IOException, InterruptedException {
    PictureShape shape = new PictureShape(256, 64, 8);
    JpegBlocks blocks = new JpegBlocks(shape);
    for (int round = 0; round < 60; round++) {
      Random random = new Random(round);
      int quality = 5 + random.nextInt(91);
      int[] steps = JpegTables.steps(new FrequencySteps(quality));
      int[] indices = new int[64 * blocks.count()];
      for (int block = 0; block < blocks.count(); block++) {
        double energy = StrictMath.pow(2, 11 * random.nextDouble());
        int filled = 1 + random.nextInt(64);
        for (int i = 0; i < filled; i++) {
          double most = energy / Math.sqrt(filled) / steps[i];
          indices[64 * block + i] = (int) Math.rint((2 * random.nextDouble() - 1) * most);
        }
      }
      int[] ours = blocks.inverse(indices, new FrequencySteps(quality)).samples();
      byte[] file = JpegScan.file(shape, new FrequencySteps(quality), indices, blocks.across());
      assertThat(Arrays.equals(readByJava(file), ours)).as("round %d", round).isTrue();
      assertThat(Arrays.equals(readByDjpeg(file, folder), ours)).as("round %d", round).isTrue();
    }
  }

  /**
   * Accuracy as a transform: over random blocks of samples no sample is farther than 1 from the
   * exact inverse, and the mean square is below 0.02 (limits of IEEE 1180-1990, from memory).
   */
  @Test
  void theInverseIsCloseToTheExactOne() {
    PictureShape shape = new PictureShape(800, 80, 8);
    JpegBlocks blocks = new JpegBlocks(shape);
    int[] samples = new int[shape.size()];
    Random random = new Random(1180);
    Arrays.setAll(samples, i -> random.nextInt(256));
    int[] indices =
        JpegBlocks.quantised(
            blocks.forward(new Picture(800, 80, 8, samples)), new FrequencySteps(100));
    Picture ours = blocks.inverse(indices, new FrequencySteps(100));
    Picture exact = exactInverse(blocks, indices, 100);
    assertThat(IntStream.range(0, samples.length))
        .allMatch(i -> Math.abs(ours.samples()[i] - exact.samples()[i]) <= 1);
    assertThat(meanSquaredError(ours, exact)).isLessThan(0.02);
  }

  private static double meanSquaredError(Picture a, Picture b) {
    double sum = 0;
    for (int i = 0; i < a.size(); i++) {
      double e = a.samples()[i] - b.samples()[i];
      sum += e * e;
    }
    return sum / a.size();
  }

  private static Picture random(int width, int height) {
    int[] samples = new int[width * height];
    for (int i = 0; i < samples.length; i++) {
      samples[i] = TestPattern.noise(i, 5) >= 0 ? 255 : 0;
    }
    return new Picture(width, height, 8, samples);
  }

  private static List<Picture> manyPictures() {
    return List.of(
        TestPattern.cvp(256),
        TestPattern.cvp(61, 45),
        TestPattern.cvp(8, 8),
        TestPattern.cvp(1, 1),
        TestPattern.cvp(3, 70),
        random(64, 40));
  }

  /** The very same samples, with no loss and of the files that stand in for lost packets. */
  @Test
  void theFileIsReadByTheJavaPlatformAndByDjpeg(@TempDir Path folder)
      throws IOException, InterruptedException {
    for (String entry :
        List.of(
            "{jpeg: baseline, quality: 10}",
            "{jpeg: baseline, quality: 75, restart-every: 2}",
            "{jpeg: baseline, quality: 100}")) {
      for (Picture picture : manyPictures()) {
        JpegCodec codec = codec(entry);
        PictureShape shape = PictureShape.of(picture);
        List<byte[]> packets = packets(codec, picture);
        byte[] file = codec.file(shape, packets);
        assertAgree(codec.decode(shape, packets).picture(), readByJava(file));
        assertAgree(codec.decode(shape, packets).picture(), readByDjpeg(file, folder));
        List<byte[]> rest = new ArrayList<>();
        for (int i = 0; i < packets.size(); i++) {
          if (i % 3 != 1) {
            rest.add(packets.get(i));
          }
        }
        byte[] damaged = codec.file(shape, rest);
        assertAgree(codec.decode(shape, rest).picture(), readByJava(damaged));
        assertAgree(codec.decode(shape, rest).picture(), readByDjpeg(damaged, folder));
      }
    }
  }

  private static void assertAgree(Picture ours, int[] theirs) {
    assertThat(theirs).isEqualTo(ours.samples());
  }

  private static int[] readByJava(byte[] file) throws IOException {
    for (Iterator<ImageReader> all = ImageIO.getImageReadersByFormatName("jpeg"); all.hasNext(); ) {
      ImageReader reader = all.next();
      if (reader.getClass().getName().startsWith(JDK_PLUG_IN)) {
        reader.setInput(ImageIO.createImageInputStream(new ByteArrayInputStream(file)));
        Raster raster = reader.read(0).getRaster();
        reader.dispose();
        return raster.getSamples(0, 0, raster.getWidth(), raster.getHeight(), 0, (int[]) null);
      }
    }
    throw new AssertionError("the Java platform has no JPEG reader");
  }

  /** The decoder of libjpeg-turbo, from Debian's package libjpeg-turbo-progs. */
  private static int[] readByDjpeg(byte[] file, Path folder)
      throws IOException, InterruptedException {
    Path in = Files.write(folder.resolve("in.jpg"), file);
    Path out = folder.resolve("out.pgm");
    Process process =
        new ProcessBuilder(
                "djpeg",
                "-dct",
                "int",
                "-strict",
                "-pnm",
                "-outfile",
                out.toString(),
                in.toString())
            .redirectErrorStream(true)
            .start();
    String said =
        new String(process.getInputStream().readAllBytes(), StandardCharsets.UTF_8).strip();
    assertThat(process.waitFor()).as("djpeg: %s", said).isZero();
    assertThat(said).isEmpty();
    byte[] bytes = Files.readAllBytes(out);
    String[] header =
        new String(bytes, 0, Math.min(30, bytes.length), StandardCharsets.ISO_8859_1)
            .split("\\s+", 5);
    assertThat(header[0]).isEqualTo("P5");
    int size = Integer.parseInt(header[1]) * Integer.parseInt(header[2]);
    return IntStream.range(bytes.length - size, bytes.length).map(i -> bytes[i] & 0xFF).toArray();
  }

  /**
   * The Java platform's own writer makes nearly the same file: the same tables, a length within one
   * in a hundred, an error within 0.05 dB (its transform is an integer approximation).
   */
  @ParameterizedTest
  @CsvSource({"10, 0.1", "50, 0.5", "75, 0.75", "90, 0.9"})
  void theJavaPlatformWritesNearlyTheSameFile(int quality, float asJavaHasIt) throws IOException {
    Picture picture = TestPattern.cvp(256);
    PictureShape shape = PictureShape.of(picture);
    byte[] theirs = writtenByJava(picture, asJavaHasIt);
    JpegBlocks blocks = new JpegBlocks(shape);
    int[] indices = JpegBlocks.quantised(blocks.forward(picture), new FrequencySteps(quality));
    byte[] ours = JpegScan.file(shape, new FrequencySteps(quality), indices, blocks.count());
    for (int marker : new int[] {0xDB, 0xC0}) {
      assertThat(segment(ours, marker)).isEqualTo(segment(theirs, marker));
    }
    assertThat((double) ours.length / theirs.length).isBetween(0.99, 1.01);
    double error = meanSquaredError(picture, new Picture(256, 256, 8, readByJava(theirs)));
    assertThat(
            10
                * Math.abs(
                    StrictMath.log10(
                        error
                            / meanSquaredError(
                                picture, blocks.inverse(indices, new FrequencySteps(quality))))))
        .isLessThan(0.05);
  }

  private static byte[] writtenByJava(Picture picture, float quality) throws IOException {
    BufferedImage image =
        new BufferedImage(picture.width(), picture.height(), BufferedImage.TYPE_BYTE_GRAY);
    image.getRaster().setSamples(0, 0, picture.width(), picture.height(), 0, picture.samples());
    for (Iterator<ImageWriter> all = ImageIO.getImageWritersByFormatName("jpeg"); all.hasNext(); ) {
      ImageWriter writer = all.next();
      if (writer.getClass().getName().startsWith(JDK_PLUG_IN)) {
        ByteArrayOutputStream out = new ByteArrayOutputStream();
        ImageWriteParam param = writer.getDefaultWriteParam();
        param.setCompressionMode(ImageWriteParam.MODE_EXPLICIT);
        param.setCompressionQuality(quality);
        writer.setOutput(ImageIO.createImageOutputStream(out));
        writer.write(null, new IIOImage(image, null, null), param);
        ((javax.imageio.stream.ImageOutputStream) writer.getOutput()).flush();
        writer.dispose();
        return out.toByteArray();
      }
    }
    throw new AssertionError("the Java platform has no JPEG writer");
  }

  private static byte[] segment(byte[] file, int marker) {
    for (int at = 2; at < file.length; at += 2 + length(file, at)) {
      if ((file[at + 1] & 0xFF) == marker) {
        return Arrays.copyOfRange(file, at + 4, at + 2 + length(file, at));
      }
    }
    throw new AssertionError("no segment " + Integer.toHexString(marker));
  }

  private static int length(byte[] file, int at) {
    return (file[at + 2] & 0xFF) << 8 | (file[at + 3] & 0xFF);
  }

  /** The file of a whole reception is the one that a sender would store. */
  @Test
  void aWholeReceptionRebuildsTheSendersFile() {
    for (Picture picture : manyPictures()) {
      PictureShape shape = PictureShape.of(picture);
      JpegBlocks blocks = new JpegBlocks(shape);
      int[] indices = JpegBlocks.quantised(blocks.forward(picture), new FrequencySteps(60));
      JpegCodec codec = codec("{jpeg: baseline, quality: 60}");
      assertThat(codec.file(shape, packets(codec, picture)))
          .isEqualTo(JpegScan.file(shape, new FrequencySteps(60), indices, blocks.across()));
    }
  }

  /** Codes of any block fit the smallest packets: cut within a block, they still add up. */
  @Test
  void blocksLargerThanAPacketAreCutBetweenTheirCodes() {
    Picture picture = random(16, 16);
    PictureShape shape = PictureShape.of(picture);
    int[] indices =
        JpegBlocks.quantised(new JpegBlocks(shape).forward(picture), new FrequencySteps(100));
    var packets = Packetizer.pack(new byte[9], JpegScan.strips(indices, 2), 32);
    assertThat(packets).hasSizeGreaterThan(8).allMatch(p -> p.length() <= 32);
    JpegScan.Reader reader = new JpegScan.Reader(new JpegBlocks(shape), 2);
    for (int i = packets.size() - 1; i >= 0; i--) {
      BitReader in = new BitReader(packets.get(i).payload());
      in.skip(72);
      assertThat(reader.completeness()).isNotEqualTo(Decoding.Completeness.COMPLETE);
      reader.addUnits(packets.get(i).payload(), in);
    }
    assertThat(reader.completeness()).isEqualTo(Decoding.Completeness.COMPLETE);
    assertThat(reader.filled()).isEqualTo(indices);
  }

  @Test
  void theHighestQualityWithinTheTargetIsFound() {
    Picture picture = TestPattern.cvp(256);
    for (double target : new double[] {0.5, 1, 2}) {
      Encoding encoding =
          codec("{jpeg: baseline, bits-per-pixel: " + target + "}").encode(picture, new Memo());
      assertThat(LINK.sentBits(encoding.packets().size(), encoding.payloadBits()))
          .isLessThanOrEqualTo((long) (target * picture.size()));
      Encoding next =
          codec("{jpeg: baseline, quality: " + (encoding.keep() + 1) + "}")
              .encode(picture, new Memo());
      assertThat(LINK.sentBits(next.packets().size(), next.payloadBits()))
          .isGreaterThan((long) (target * picture.size()));
    }
    assertThat(codec("{jpeg: baseline, bits-per-pixel: 0.001}").encode(picture, new Memo()).keep())
        .as("the lowest quality where none keeps to the target")
        .isEqualTo(1);
  }

  @Test
  void aLostPacketHurtsItsRowsOfBlocksOnly() {
    Picture picture = TestPattern.cvp(256);
    PictureShape shape = PictureShape.of(picture);
    JpegCodec codec = codec("{jpeg: baseline, quality: 60}");
    List<byte[]> packets = new ArrayList<>(packets(codec, picture));
    int[] whole = codec.decode(shape, packets).picture().samples();
    packets.remove(packets.size() / 2);
    Decoding damaged = codec.decode(shape, packets);
    int[] shown = damaged.picture().samples();
    assertThat(damaged.completeness()).isEqualTo(Decoding.Completeness.PARTIAL);
    long blocksHurt =
        IntStream.range(0, whole.length)
            .filter(i -> whole[i] != shown[i])
            .map(i -> i / 256 / 8 * 32 + i % 256 / 8)
            .distinct()
            .count();
    assertThat(blocksHurt).isBetween(1L, 40L);
  }

  /** Missing blocks of a smooth slope are filled from above and below. */
  @Test
  void missingBlocksLieBetweenTheirNeighbours() {
    int[] samples = new int[64 * 64];
    for (int i = 0; i < samples.length; i++) {
      samples[i] = 60 + i / 64 * 2;
    }
    Picture picture = new Picture(64, 64, 8, samples);
    JpegCodec codec = JpegCodec.of("", 90, 1, new Link(40, 0, Link.Order.BY_COMPONENT));
    List<byte[]> packets = new ArrayList<>(packets(codec, picture));
    packets.remove(packets.size() / 2);
    int[] shown = codec.decode(PictureShape.of(picture), packets).picture().samples();
    for (int i = 0; i < samples.length; i++) {
      assertThat(shown[i]).isBetween(samples[i] - 10, samples[i] + 10);
    }
  }
}
