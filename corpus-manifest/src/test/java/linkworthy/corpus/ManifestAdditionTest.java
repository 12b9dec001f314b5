package linkworthy.corpus;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.awt.image.BufferedImage;
import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.stream.Stream;
import javax.imageio.IIOImage;
import javax.imageio.ImageIO;
import javax.imageio.ImageWriteParam;
import javax.imageio.ImageWriter;
import javax.imageio.stream.MemoryCacheImageOutputStream;
import linkworthy.input.BadInput;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.MethodSource;

class ManifestAdditionTest {
  private static final ManifestAddition OWN =
      new ManifestAddition("LicenseRef-own-work", "me", "yard", "yard");

  @TempDir private Path folder;

  private static byte[] png(int side, long seed) {
    return PictureFiles.write("png", PictureFiles.noise(side, side, 1, 8, seed));
  }

  private Path write(String file, byte[] bytes) throws IOException {
    Path path = folder.resolve(file);
    Files.createDirectories(folder.resolve(file).resolveSibling(""));
    return Files.write(path, bytes);
  }

  @Test
  void picturesAreAddedWithSizeDepthAndChecksum() throws IOException {
    write("day/yard 1.png", png(20, 1));
    write("day/yard_1.png", png(21, 2));
    write("day/yard 1.pgm", PictureFiles.write("pnm", PictureFiles.noise(22, 22, 3, 16, 3)));
    write("day/.hidden", new byte[0]);
    write("day/broken.png", new byte[] {(byte) 0x89, 'P', 'N', 'G', 13, 10, 26, 10, 0});
    write("day/notes.txt", "hello".getBytes(StandardCharsets.UTF_8));
    Path manifest = folder.resolve("manifest.csv");
    ManifestAddition.Result result = OWN.add(manifest, folder.resolve("day"));
    assertThat(result.added())
        .extracting(ManifestEntry::id)
        .containsExactly("yard-1", "yard-1-2", "yard_1");
    assertThat(result.refused())
        .satisfiesExactly(
            line -> assertThat(line).contains("broken.png", "cannot be read"),
            line -> assertThat(line).contains("notes.txt", "no PNG, JPEG"));
    Manifest read = Manifest.read(manifest);
    assertThat(read.check()).isEmpty();
    assertThat(read.entries().get(0).file()).isEqualTo("day/yard 1.pgm");
    assertThat(read.entries().get(0).header()).isEqualTo(new PictureHeader(22, 22, 3, 16));
    assertThat(folder).isDirectoryNotContaining("glob:**.part");
    ManifestAddition.Result again = OWN.add(manifest, folder.resolve("day"));
    assertThat(again.added()).isEmpty();
    assertThat(again.listed()).hasSize(3);
    write("day/yard_1.png", png(21, 9));
    write("day/z.png", png(9, 9));
    ManifestAddition.Result changed = OWN.add(manifest, folder.resolve("day"));
    assertThat(changed.refused()).anyMatch(line -> line.contains("listed with another SHA-256"));
    assertThat(Manifest.read(manifest).entries()).hasSize(4);
  }

  @Test
  void theManifestMayStandInTheFolderButNotBesideIt() throws IOException {
    write("a.png", png(20, 1));
    Path manifest = folder.resolve("manifest.csv");
    assertThat(OWN.add(manifest, folder).added()).hasSize(1);
    assertThat(OWN.add(manifest, folder).refused()).isEmpty();
    write("other/b.png", png(20, 1));
    Path other = folder.resolve("third/manifest.csv");
    Files.createDirectories(folder.resolve("third"));
    assertThatThrownBy(() -> OWN.add(other, folder.resolve("other")))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("is outside of");
    assertThat(other).doesNotExist();
    assertThatThrownBy(() -> OWN.add(manifest, folder.resolve("nowhere")))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("does not exist");
    assertThatThrownBy(() -> OWN.add(manifest, folder.resolve("a.png")))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("is no folder");
  }

  @Test
  void wrongTextsAreRefused() {
    assertThatThrownBy(() -> new ManifestAddition("CC-BY-NC-4.0", "me", "a", "b"))
        .isInstanceOf(IllegalArgumentException.class)
        .hasMessageStartingWith("licence has 'CC-BY-NC-4.0'");
    assertThatThrownBy(() -> new ManifestAddition("MIT", " ", "a", "b"))
        .isInstanceOf(IllegalArgumentException.class)
        .hasMessageStartingWith("attribution is");
  }

  @Test
  void jpegFilesAndThoseThatWereAreToldOf() throws IOException {
    Picture cat = Manifest.shipped().load(Manifest.shipped().select(List.of("cat")).get(0));
    byte[] coded = jpeg(PictureFiles.image(List.of(cat)), 50);
    write("a.jpg", coded);
    Picture decoded = PictureReader.read("a", coded, PictureReader.header("a", coded)).luma();
    write("b.png", PictureFiles.write("png", List.of(decoded)));
    write("c.png", PictureFiles.write("png", List.of(cat)));
    ManifestAddition.Result result = OWN.add(folder.resolve("manifest.csv"), folder);
    assertThat(result.warnings())
        .satisfiesExactly(
            line -> assertThat(line).contains("a.jpg is a JPEG file"),
            line -> assertThat(line).contains("b.png shows a grid of 8 x 8 blocks"));
  }

  static Stream<ManifestEntry> shipped() {
    return Manifest.shipped().entries().stream();
  }

  /** Every shipped picture stays below the threshold; coded at quality 30 to 75 none does. */
  @ParameterizedTest
  @MethodSource("shipped")
  void theGridIsFoundWhereItIs(ManifestEntry entry) throws IOException {
    Picture clean = Manifest.shipped().load(entry);
    assertThat(BlockGrid.excess(clean)).isLessThan(BlockGrid.THRESHOLD / 2);
    if (entry.bitDepth() > 8) {
      return;
    }
    for (int quality : new int[] {30, 40, 50, 60, 75}) {
      byte[] coded = jpeg(PictureFiles.image(List.of(clean)), quality);
      Picture decoded = PictureReader.read("q", coded, PictureReader.header("q", coded)).luma();
      assertThat(BlockGrid.excess(decoded))
          .as("quality %d", quality)
          .isGreaterThan(1.5 * BlockGrid.THRESHOLD);
    }
  }

  /**
   * Of 300 pictures of noise 64 samples wide at most 15 warn: each does with a chance of at most
   * 1/64, so more happen with probability 3e-5 (binomial; recomputed independently with SciPy).
   */
  @Test
  void noiseHasSeldomAGrid() {
    int warned = 0;
    for (int seed = 0; seed < 300; seed++) {
      warned += BlockGrid.isIn(PictureFiles.noise(64, 64, 1, 8, seed).get(0)) ? 1 : 0;
    }
    assertThat(warned).isLessThanOrEqualTo(15);
    assertThat(BlockGrid.excess(new Picture(64, 64, 8, new int[64 * 64]))).isEqualTo(-1);
    assertThat(BlockGrid.excess(PictureFiles.noise(31, 64, 1, 8, 1).get(0))).isEqualTo(-1);
  }

  private static byte[] jpeg(BufferedImage image, int quality) throws IOException {
    ImageWriter writer = ImageIO.getImageWritersByFormatName("jpeg").next();
    ByteArrayOutputStream bytes = new ByteArrayOutputStream();
    try (MemoryCacheImageOutputStream out = new MemoryCacheImageOutputStream(bytes)) {
      ImageWriteParam parameters = writer.getDefaultWriteParam();
      parameters.setCompressionMode(ImageWriteParam.MODE_EXPLICIT);
      parameters.setCompressionQuality(quality / 100f);
      writer.setOutput(out);
      writer.write(null, new IIOImage(image, null, null), parameters);
    } finally {
      writer.dispose();
    }
    return bytes.toByteArray();
  }
}
