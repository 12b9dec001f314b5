package linkworthy.corpus;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.IOException;
import java.net.URL;
import java.net.URLClassLoader;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.jar.JarEntry;
import java.util.jar.JarOutputStream;
import java.util.stream.Stream;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.MethodSource;

class ManifestTest {
  private static final String HEADER = String.join(",", Manifest.COLUMNS);
  private static final List<Picture> PLANES = PictureFiles.noise(13, 9, 1, 8, 1);
  private static final byte[] PNG = PictureFiles.write("png", PLANES);

  @TempDir Path folder;

  static Stream<ManifestEntry> shippedEntries() {
    return Manifest.shipped().entries().stream();
  }

  @ParameterizedTest
  @MethodSource("shippedEntries")
  void everyShippedPictureIsAsListed(ManifestEntry entry) {
    Manifest shipped = Manifest.shipped();
    assertThat(shipped.check(entry)).isEmpty();
    Picture picture = shipped.load(entry);
    assertThat(picture.width()).isEqualTo(entry.width());
    assertThat(picture.height()).isEqualTo(entry.height());
    assertThat(picture.bitDepth()).isEqualTo(entry.bitDepth());
    ReadPicture read = shipped.readPicture(entry);
    assertThat(read.channels()).hasSize(entry.channels());
    assertThat(read.reader()).isEqualTo("com.sun.imageio.plugins.png.PNGImageReader");
    assertThat(picture.variance()).as("no picture is flat").isGreaterThan(100);
  }

  @Test
  void theShippedCorpusHasItsSets() {
    Manifest shipped = Manifest.shipped();
    assertThat(shipped.check()).isEmpty();
    assertThat(shipped.source()).isEqualTo("the shipped corpus");
    assertThat(shipped.select(List.of())).hasSize(17).isEqualTo(shipped.entries());
    assertThat(shipped.select(List.of("field"))).hasSize(12);
    assertThat(shipped.select(List.of("colour"))).hasSize(3);
    assertThat(shipped.select(List.of("deep"))).hasSize(2);
  }

  @Test
  void theShippedManifestReadsTheSameFromItsFolder() {
    Manifest read = Manifest.read(Path.of("manifest.csv"));
    assertThat(read.entries()).isEqualTo(Manifest.shipped().entries());
    assertThat(read.fingerprint()).isEqualTo(Manifest.shipped().fingerprint());
    assertThat(read.check()).isEmpty();
  }

  @Test
  void picturesAreTheSameWhenReadAtOnce() {
    Manifest shipped = Manifest.shipped();
    List<int[]> together =
        shipped.entries().parallelStream().map(entry -> shipped.load(entry).samples()).toList();
    for (int i = 0; i < together.size(); i++) {
      assertThat(together.get(i)).isEqualTo(shipped.load(shipped.entries().get(i)).samples());
    }
  }

  @Test
  void everyShippedPictureIsCredited() throws IOException {
    String credits = Files.readString(Path.of("ATTRIBUTION.md"));
    for (ManifestEntry entry : Manifest.shipped().entries()) {
      assertThat(credits).contains("`" + entry.file() + "` | " + entry.licence() + " |");
    }
  }

  @Test
  void worksInsideAJar() throws Exception {
    Path jar = folder.resolve("corpus.jar");
    Path classes =
        Path.of(Manifest.class.getProtectionDomain().getCodeSource().getLocation().toURI());
    try (JarOutputStream out = new JarOutputStream(Files.newOutputStream(jar));
        Stream<Path> files = Files.walk(classes)) {
      for (Path file : files.filter(Files::isRegularFile).sorted().toList()) {
        out.putNextEntry(new JarEntry(classes.relativize(file).toString().replace('\\', '/')));
        Files.copy(file, out);
        out.closeEntry();
      }
    }
    ClassLoader outside = new ClassLoader(Manifest.class.getClassLoader()) {};
    try (URLClassLoader inJar = new JarFirst(jar.toUri().toURL(), outside)) {
      Class<?> manifest = inJar.loadClass("linkworthy.corpus.Manifest");
      assertThat(manifest.getProtectionDomain().getCodeSource().getLocation().toString())
          .endsWith("corpus.jar");
      Object shipped = manifest.getMethod("shipped").invoke(null);
      assertThat(manifest.getMethod("check").invoke(shipped)).isEqualTo(List.of());
    }
  }

  @Test
  void selectsBySetCategoryAndIdInOrderAndOnce() {
    Manifest manifest =
        manifest(
            row("one", "a.png").replace("mine,", "near,"),
            row("two", "a.png").replace("barn", "yard"),
            row("three", "a.png"));
    assertThat(ids(manifest.select(List.of("three", "one", "near"))))
        .containsExactly("one", "three");
    assertThat(ids(manifest.select(List.of("yard")))).containsExactly("two");
    assertThat(ids(manifest.select(List.of("mine", "two")))).containsExactly("two", "three");
    assertThatThrownBy(() -> manifest.select(List.of("thre")))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("has no set, category or picture 'thre'; did you mean 'three'?")
        .hasMessageContaining("accepted: near, mine, barn, yard, one, two, three");
  }

  @Test
  void loadsAPicture() throws IOException {
    put("a.png", PNG);
    Manifest manifest = manifest(row("one", "a.png"));
    assertThat(manifest.check()).isEmpty();
    assertThat(manifest.load(manifest.entries().get(0)).samples())
        .isEqualTo(PLANES.get(0).samples());
  }

  @Test
  void findsAWrongChecksum() throws IOException {
    byte[] other = PNG.clone();
    other[PNG.length - 1] ^= 1;
    put("a.png", other);
    String found = Manifest.sha256(other);
    String message =
        "picture " + folder + "/a.png has SHA-256 " + found + "; expected " + Manifest.sha256(PNG);
    assertRefused(manifest(row("one", "a.png")), Finding.Kind.CHECKSUM, BadInput.class, message);
  }

  @Test
  void findsAMissingPicture() {
    assertRefused(
        manifest(row("one", "a.png")),
        Finding.Kind.MISSING,
        BadInput.class,
        "picture " + folder + "/a.png does not exist");
  }

  @Test
  void findsAFolderInPlaceOfAPicture() throws IOException {
    Files.createDirectory(folder.resolve("a.png"));
    assertRefused(
        manifest(row("one", "a.png")),
        Finding.Kind.MISSING,
        BadInput.class,
        folder + "/a.png is no regular file");
  }

  @ParameterizedTest
  @CsvSource({"12,9", "14,9", "13,8", "13,10"})
  void findsAnotherSize(String width, String height) throws IOException {
    put("a.png", PNG);
    assertRefused(
        manifest(row("one", "a.png").replace("13,9,", width + "," + height + ",")),
        Finding.Kind.SIZE,
        BadInput.class,
        "picture "
            + folder
            + "/a.png is 13 x 9, 1 channel, 8 bits; announced: "
            + width
            + " x "
            + height
            + ", 1 channel, 8 bits");
  }

  @Test
  void readsNoMoreThanTheAnnouncedPictureNeeds() throws IOException {
    byte[] longer = new byte[2 * 13 * 9 + (1 << 20) + 1];
    put("a.png", longer);
    assertRefused(
        manifest(row("one", "a.png").replace(Manifest.sha256(PNG), Manifest.sha256(longer))),
        Finding.Kind.SIZE,
        BadInput.class,
        "picture "
            + folder
            + "/a.png is longer than 1048810 bytes; accepted for 13 x 9, 1 channel, 8 bits: twice"
            + " its samples and 1 MiB");
  }

  @ParameterizedTest
  @CsvSource({
    "'', no PNG",
    "'Some words, not a picture.', no PNG",
    "'P5 13 9 255 abc', damaged PNM"
  })
  void findsAnUnreadablePicture(String content, String reason) throws IOException {
    byte[] bytes = content.getBytes(StandardCharsets.US_ASCII);
    put("a.png", bytes);
    Manifest manifest =
        manifest(row("one", "a.png").replace(Manifest.sha256(PNG), Manifest.sha256(bytes)));
    assertRefused(
        manifest,
        Finding.Kind.UNREADABLE,
        Unavailable.class,
        "picture " + folder + "/a.png cannot be read: " + reason);
  }

  @Test
  void followsNoLinkOutOfTheFolder() throws IOException {
    Path outside = Files.createDirectory(folder.resolve("outside"));
    Path inside = Files.createDirectory(folder.resolve("inside"));
    Files.write(outside.resolve("a.png"), PNG);
    Path csv = inside.resolve("manifest.csv");
    Files.writeString(csv, HEADER + "\n" + row("one", "b/a.png") + "\n");
    Manifest early = Manifest.read(csv);
    Files.createSymbolicLink(inside.resolve("b"), outside);
    String complaint = "file is 'b/a.png', a link that leaves the manifest's folder";
    assertThatThrownBy(() -> Manifest.read(csv))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("manifest.csv, line 2: " + complaint);
    assertRefused(early, Finding.Kind.MISSING, BadInput.class, complaint);
  }

  @Test
  void followsALinkWithinTheFolder() throws IOException {
    put("a.png", PNG);
    Files.createSymbolicLink(folder.resolve("b.png"), folder.resolve("a.png"));
    assertThat(manifest(row("one", "b.png")).check()).isEmpty();
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "one,|-one,|id is '-one'; accepted: 1 to 64 letters",
        "one,|,|id is empty; accepted",
        "one,|o/e,|id is 'o/e'",
        "mine|' '|set is ' '; accepted: one line of text",
        "a.png|../a.png|file is '../a.png'; accepted: a path below",
        "a.png|b/../../a.png|file is 'b/../../a.png'",
        "a.png|/etc/passwd|file is '/etc/passwd'",
        "a.png|b\\a.png|file is 'b\\a.png'",
        "a.png|C:a.png|file is 'C:a.png'",
        "a.png|./a.png|file is './a.png'",
        "a.png|b//a.png|file is 'b//a.png'",
        "13,9|0,9|width is 0; accepted: 1 to 16384",
        "13,9|-1,9|width is '-1'; accepted: a whole number",
        "13,9|13.5,9|width is '13.5'; accepted: a whole number",
        "13,9|99999999999,9|width is '99999999999'",
        "13,9|13,16385|height is 16385; accepted: 1 to 16384",
        "9,1,8|9,2,8|channels is '2'; accepted: 1 or 3",
        "9,1,8|9,1,17|bit_depth is 17; accepted: 1 to 16",
        "9,1,8|9,1,|bit_depth is ''; accepted: a whole number",
        "barn|''|category is empty",
        "CC0-1.0|CC0|licence has 'CC0', joined by ' AND '; accepted: 0BSD",
        "CC0-1.0|CC-BY-4|licence has 'CC-BY-4', joined by ' AND '; did you mean 'CC-BY-",
        "CC0-1.0|CC-BY-NC-4.0|licence has 'CC-BY-NC-4.0'",
        "CC0-1.0|CC0-1.0 AND|licence has 'CC0-1.0 AND'",
        "CC0-1.0|CC0-1.0 OR MIT|licence has 'CC0-1.0 OR MIT'",
        "A name|''|attribution is empty",
      })
  void refusesAValueWithLineAndColumn(String from, String to, String complaint) {
    String row = row("one", "a.png").replace(from, to == null ? "" : to);
    assertThatThrownBy(() -> manifest(row("zero", "a.png"), row))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("manifest.csv, line 3: " + complaint)
        .hasMessageMatching("[^\n]*");
  }

  @Test
  void refusesTextOfSeveralLinesAndControlCharacters() {
    String row = row("one", "a.png");
    assertThatThrownBy(() -> manifest(row, row.replace("A name", "\"A\nname\"")))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("line 3: attribution is 'A\\u000aname'; accepted: one line of text");
    assertThatThrownBy(() -> manifest(row, row.replace("where", "a\0b")))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("line 3: source is 'a\\u0000b'; accepted: one line of text");
  }

  @Test
  void refusesAChecksumThatIsNone() {
    String row = row("one", "a.png").replace(Manifest.sha256(PNG), "abc");
    assertThatThrownBy(() -> manifest(row))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("line 2: sha256 is 'abc'; accepted: 64 hexadecimal digits");
  }

  @Test
  void refusesAnIdThatStandsTwice() {
    assertThatThrownBy(
            () -> manifest(row("one", "a.png"), row("two", "a.png"), row("one", "b.png")))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("line 4: id is 'one', which stands twice");
  }

  @Test
  void refusesWrongColumns() {
    assertRefusedText(HEADER.replace(",sha256", "") + "\n", "line 1: missing column 'sha256'");
    assertRefusedText(
        HEADER.replace("licence", "license") + "\n",
        "line 1: unknown column 'license'; did you mean 'licence'? accepted: id, set, file,");
    assertRefusedText(HEADER + ",id\n", "line 1: a column stands twice");
    assertRefusedText(
        HEADER + "\n\n" + row("one", "a.png") + ",more\n",
        "line 3: 14 values; accepted: 13, one for each column");
  }

  @Test
  void refusesWhatIsNoManifest() throws IOException {
    assertRefusedText("", "is empty; accepted: a manifest in CSV");
    assertRefusedText("\uFEFF", "is empty; accepted: a manifest in CSV");
    assertRefusedText(HEADER + "\n", "lists no picture");
    assertRefusedText("\0\0\0", "line 1: unknown column '\\u0000\\u0000\\u0000'");
    assertRefusedText(HEADER + "\none,\"open", "line 2: is not CSV: ");
    assertThatThrownBy(() -> Manifest.read(folder))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("is a folder");
    assertThatThrownBy(() -> Manifest.read(folder.resolve("none.csv")))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("none.csv does not exist");
    Path csv = folder.resolve("latin.csv");
    Files.write(csv, new byte[] {(byte) 0xE9, '\n'});
    assertThatThrownBy(() -> Manifest.read(csv))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("is not UTF-8 text");
    Path large = folder.resolve("large.csv");
    Files.write(large, new byte[(16 << 20) + 1]);
    assertThatThrownBy(() -> Manifest.read(large))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("is larger than 16 MiB");
  }

  @Test
  void readsTheSameWithMarkCarriageReturnsAndOpenEnd() {
    String text = HEADER + "\n" + row("one", "a.png") + "\n" + row("two", "b.png") + "\n";
    List<ManifestEntry> expected = read(text).entries();
    assertThat(expected).hasSize(2);
    assertThat(read("\uFEFF" + text).entries()).isEqualTo(expected);
    assertThat(read(text.replace("\n", "\r\n")).entries()).isEqualTo(expected);
    assertThat(read(text.stripTrailing()).entries()).isEqualTo(expected);
    assertThatThrownBy(() -> read(text + row("one", "c.png")))
        .as("the last line has no end")
        .hasMessageContaining("line 4: id is 'one'");
    assertThatThrownBy(() -> read((text + row("one", "c.png")).replace("\n", "\r\n")))
        .hasMessageContaining("line 4: id is 'one'");
  }

  @Test
  void takesAnyTextAsData() {
    String html = "<script>alert('x')</script> &amp; <b>";
    Manifest manifest =
        manifest(
            row("one", "a.png")
                .replace("mine", html)
                .replace("barn", html)
                .replace("A name", "\"" + html + ", \"\"Jr.\"\"\""));
    ManifestEntry entry = manifest.entries().get(0);
    assertThat(entry.set()).isEqualTo(html);
    assertThat(entry.category()).isEqualTo(html);
    assertThat(entry.attribution()).isEqualTo(html + ", \"Jr.\"");
    assertThat(manifest.select(List.of(html))).containsExactly(entry);
  }

  @Test
  void sourceAndDerivationMayBeEmpty() {
    ManifestEntry entry =
        manifest(row("one", "a.png").replace("where", "").replace("how", "")).entries().get(0);
    assertThat(entry.source()).isEmpty();
    assertThat(entry.derivation()).isEmpty();
  }

  @Test
  void theFingerprintIsOfContentAndOrder() {
    String one = row("one", "a.png");
    String two = row("two", "b.png");
    String fingerprint = manifest(one, two).fingerprint();
    String line = " " + Manifest.sha256(PNG) + " 13 9 1 8\n";
    assertThat(fingerprint)
        .isEqualTo(Manifest.sha256(("one" + line + "two" + line).getBytes(StandardCharsets.UTF_8)));
    assertThat(
            manifest(one.replace("A name", "Another"), two.replace("b.png", "c.png")).fingerprint())
        .as("texts and file names do not count")
        .isEqualTo(fingerprint);
    assertThat(
            manifest(
                    one.replace(
                        Manifest.sha256(PNG),
                        Manifest.sha256(PNG).toUpperCase(java.util.Locale.ROOT)),
                    two)
                .fingerprint())
        .as("digits in either case")
        .isEqualTo(fingerprint);
    assertThat(manifest(two, one).fingerprint()).isNotEqualTo(fingerprint);
    assertThat(manifest(one, two.replace("13,9,1,8", "13,9,1,7")).fingerprint())
        .isNotEqualTo(fingerprint);
  }

  @Test
  void whatIsWrittenReadsTheSame() throws IOException {
    String html = "<b>\"quoted\", and more</b>";
    List<ManifestEntry> entries = new ArrayList<>(Manifest.shipped().entries());
    ManifestEntry e = entries.get(0);
    entries.add(
        new ManifestEntry(
            "mine", html, "a.png", 1, 1, 3, 16, html, "MIT", html, "", e.sha256(), ""));
    assertThat(read(Manifest.toCsv(entries)).entries()).isEqualTo(entries);
    assertThat(Manifest.toCsv(Manifest.shipped().entries()))
        .isEqualTo(Files.readString(Path.of("manifest.csv")));
  }

  /** A checksum that does not fit is found however the bytes came. */
  @Test
  void filesMayBeHandedOver() {
    byte[] csv = (HEADER + "\n" + row("one", "a.png") + "\n").getBytes(StandardCharsets.UTF_8);
    Manifest right = Manifest.of("the parcel", csv, file -> Optional.of(PNG));
    ManifestEntry one = right.entries().get(0);
    assertThat(right.readFile(one)).isEqualTo(PNG);
    assertThat(right.load(one).size()).isEqualTo(13 * 9);
    byte[] other = PNG.clone();
    other[other.length - 1] ^= 1;
    assertThatThrownBy(() -> Manifest.of("the parcel", csv, file -> Optional.of(other)).load(one))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("picture the parcel/a.png has SHA-256 " + Manifest.sha256(other));
    assertThatThrownBy(() -> Manifest.of("the parcel", csv, file -> Optional.empty()).load(one))
        .isInstanceOf(BadInput.class)
        .hasMessage("picture the parcel/a.png does not exist");
  }

  private static String row(String id, String file) {
    return id
        + ",mine,"
        + file
        + ",13,9,1,8,barn,CC0-1.0,A name,where,"
        + Manifest.sha256(PNG)
        + ",how";
  }

  private Manifest manifest(String... rows) {
    return read(HEADER + "\n" + String.join("\n", rows) + "\n");
  }

  private Manifest read(String text) {
    try {
      return Manifest.read(Files.writeString(folder.resolve("manifest.csv"), text));
    } catch (IOException e) {
      throw new java.io.UncheckedIOException(e);
    }
  }

  private void put(String name, byte[] bytes) throws IOException {
    Files.write(folder.resolve(name), bytes);
  }

  private void assertRefusedText(String text, String complaint) {
    assertThatThrownBy(() -> read(text))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining(complaint)
        .hasMessageContaining("manifest.csv");
  }

  private static void assertRefused(
      Manifest manifest, Finding.Kind kind, Class<? extends Throwable> type, String message) {
    assertThat(manifest.check())
        .singleElement()
        .satisfies(
            finding -> {
              assertThat(finding.id()).isEqualTo("one");
              assertThat(finding.kind()).isEqualTo(kind);
              assertThat(finding.message()).contains(message);
            });
    assertThatThrownBy(() -> manifest.load(manifest.entries().get(0)))
        .isInstanceOf(type)
        .hasMessageContaining(message);
  }

  private static List<String> ids(List<ManifestEntry> entries) {
    return entries.stream().map(ManifestEntry::id).toList();
  }

  /** Loads this module's classes and resources from a jar only. */
  private static final class JarFirst extends URLClassLoader {
    JarFirst(URL jar, ClassLoader parent) {
      super(new URL[] {jar}, parent);
    }

    @Override
    protected Class<?> loadClass(String name, boolean resolve) throws ClassNotFoundException {
      if (!name.startsWith("linkworthy.")) {
        return super.loadClass(name, resolve);
      }
      Class<?> loaded = findLoadedClass(name);
      return loaded == null ? findClass(name) : loaded;
    }

    @Override
    public URL getResource(String name) {
      return name.startsWith("linkworthy/") ? findResource(name) : super.getResource(name);
    }
  }
}
