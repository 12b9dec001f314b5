package linkworthy.corpus;

import java.io.IOException;
import java.io.InputStream;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.NoSuchFileException;
import java.nio.file.Path;
import java.security.MessageDigest;
import java.security.NoSuchAlgorithmException;
import java.util.ArrayList;
import java.util.HexFormat;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Optional;
import java.util.Set;
import java.util.function.Function;
import linkworthy.input.BadInput;
import linkworthy.input.Spelling;
import linkworthy.input.Unavailable;

/**
 * The list of a corpus's pictures. A manifest is a CSV file (RFC 4180, UTF-8, at most 16 MiB) with
 * one line a picture and the columns of {@link #COLUMNS}, in any order, and perhaps {@code
 * address}; files are found relative to the manifest's own folder.
 */
public final class Manifest {
  /** The columns, all of them needed; {@code source} and {@code derivation} may be empty. */
  public static final List<String> COLUMNS =
      List.of(
          "id",
          "set",
          "file",
          "width",
          "height",
          "channels",
          "bit_depth",
          "category",
          "licence",
          "attribution",
          "source",
          "sha256",
          "derivation");

  /** The column that may be left out: where a picture can be fetched. */
  static final String ADDRESS = "address";

  private static final int MAX_BYTES = 16 << 20;
  private static final int SPARE_BYTES = 1 << 20;
  private static final String SHIPPED = "shipped/";

  private final String source;
  private final PictureStore store;
  private final List<ManifestEntry> entries;

  private Manifest(String source, PictureStore store, byte[] csv) {
    if (csv.length > MAX_BYTES) {
      throw new BadInput(source + " is larger than 16 MiB; accepted: a manifest up to 16 MiB");
    }
    this.source = source;
    this.store = store;
    this.entries = new ManifestCsv(source, store).read(csv);
  }

  /**
   * The corpus packed with the program.
   *
   * @throws Unavailable if it is not on the class path
   */
  public static Manifest shipped() {
    String source = "the shipped corpus";
    try (InputStream in = Manifest.class.getResourceAsStream(SHIPPED + "manifest.csv")) {
      if (in == null) {
        throw new Unavailable(source + " is not on the class path");
      }
      byte[] csv = in.readNBytes(MAX_BYTES + 1);
      return new Manifest(source, new PictureStore.Shipped(SHIPPED), csv);
    } catch (IOException e) {
      throw Unavailable.cannot("read " + source, e);
    }
  }

  /**
   * Reads a manifest; the pictures themselves are not opened.
   *
   * @throws BadInput if it is missing or anything in it is not accepted, with line and column
   * @throws Unavailable if it exists and cannot be read
   */
  public static Manifest read(Path csv) {
    if (Files.isDirectory(csv)) {
      throw new BadInput(csv + " is a folder; accepted: a manifest in CSV");
    }
    byte[] bytes;
    try (InputStream in = Files.newInputStream(csv)) {
      bytes = in.readNBytes(MAX_BYTES + 1);
    } catch (NoSuchFileException e) {
      throw new BadInput(csv + " does not exist; accepted: a manifest in CSV", e);
    } catch (IOException e) {
      throw Unavailable.cannot("read " + csv, e);
    }
    Path parent = csv.toAbsolutePath().getParent();
    PictureStore store = new PictureStore.Folder(parent == null ? csv.toAbsolutePath() : parent);
    return new Manifest(csv.toString(), store, bytes);
  }

  /**
   * A manifest whose files are not in a folder.
   *
   * @param source names it in messages
   * @param csv the manifest
   * @param files the bytes of a file by its path in the manifest, or nothing if there is none such
   * @throws BadInput if anything in it is not accepted, with line and column
   */
  public static Manifest of(String source, byte[] csv, Function<String, Optional<byte[]>> files) {
    return new Manifest(source, new PictureStore.Handed(source, files), csv);
  }

  /** The manifest's path, or a phrase for the shipped one. */
  public String source() {
    return source;
  }

  /** All pictures, in the manifest's order. */
  public List<ManifestEntry> entries() {
    return entries;
  }

  /**
   * The pictures that any of these words names, in the manifest's order, each once; all pictures if
   * there are no words.
   *
   * @param words sets, categories or ids
   * @throws BadInput if a word names no picture; the nearest spelling is given
   */
  public List<ManifestEntry> select(List<String> words) {
    Set<String> known = new LinkedHashSet<>();
    entries.forEach(entry -> known.add(entry.set()));
    entries.forEach(entry -> known.add(entry.category()));
    entries.forEach(entry -> known.add(entry.id()));
    for (String word : words) {
      if (!known.contains(word)) {
        throw new BadInput(
            source
                + " has no set, category or picture '"
                + word
                + "'; "
                + Spelling.hint(word, known));
      }
    }
    Set<String> wanted = Set.copyOf(words);
    return entries.stream()
        .filter(
            entry ->
                wanted.isEmpty()
                    || wanted.contains(entry.set())
                    || wanted.contains(entry.category())
                    || wanted.contains(entry.id()))
        .toList();
  }

  /**
   * The luma plane of a picture; see {@link #readPicture}.
   *
   * @throws BadInput as {@link #readPicture}
   * @throws Unavailable as {@link #readPicture}
   */
  public Picture load(ManifestEntry entry) {
    return readPicture(entry).luma();
  }

  /**
   * Reads a picture after checking its length, its SHA-256 and its header, in this order. A file
   * may have twice the bytes of its announced samples and 1 MiB more.
   *
   * @throws BadInput if the file is missing, outside the manifest's folder, or not what the
   *     manifest announces
   * @throws Unavailable if it is damaged, of an unknown format, or cannot be opened
   */
  public ReadPicture readPicture(ManifestEntry entry) {
    return PictureReader.read(store.describe(entry.file()), readFile(entry), entry.header());
  }

  /**
   * The bytes of a picture's file after checking their length and their SHA-256.
   *
   * @throws BadInput if the file is missing, outside the manifest's folder, or not what the
   *     manifest announces
   * @throws Unavailable if it cannot be opened
   */
  public byte[] readFile(ManifestEntry entry) {
    byte[] bytes = bytes(entry).orElseThrow(() -> new BadInput(missing(entry)));
    if (bytes.length > limit(entry)) {
      throw new BadInput(tooLong(entry));
    }
    String found = sha256(bytes);
    if (!found.equals(entry.sha256())) {
      throw new BadInput(otherChecksum(entry, found));
    }
    return bytes;
  }

  /** What is wrong with the pictures, in the manifest's order; empty if all is well. */
  public List<Finding> check() {
    List<Finding> findings = new ArrayList<>();
    for (ManifestEntry entry : entries) {
      check(entry).ifPresent(findings::add);
    }
    return List.copyOf(findings);
  }

  /** What is wrong with one picture, if anything is. */
  public Optional<Finding> check(ManifestEntry entry) {
    Optional<byte[]> bytes;
    try {
      bytes = bytes(entry);
    } catch (BadInput e) {
      return finding(entry, Finding.Kind.MISSING, e.getMessage());
    } catch (Unavailable e) {
      return finding(entry, Finding.Kind.UNREADABLE, e.getMessage());
    }
    if (bytes.isEmpty()) {
      return finding(entry, Finding.Kind.MISSING, missing(entry));
    }
    if (bytes.get().length > limit(entry)) {
      return finding(entry, Finding.Kind.SIZE, tooLong(entry));
    }
    String found = sha256(bytes.get());
    if (!found.equals(entry.sha256())) {
      return finding(entry, Finding.Kind.CHECKSUM, otherChecksum(entry, found));
    }
    try {
      PictureReader.read(store.describe(entry.file()), bytes.get(), entry.header());
      return Optional.empty();
    } catch (BadInput e) {
      return finding(entry, Finding.Kind.SIZE, e.getMessage());
    } catch (Unavailable e) {
      return finding(entry, Finding.Kind.UNREADABLE, e.getMessage());
    }
  }

  /**
   * SHA-256 over a line for each picture, in order: id, SHA-256, width, height, channels and bit
   * depth, separated by spaces and ended by a line feed. Texts and file names do not count.
   */
  public String fingerprint() {
    StringBuilder lines = new StringBuilder();
    for (ManifestEntry e : entries) {
      lines
          .append(e.id())
          .append(' ')
          .append(e.sha256())
          .append(' ')
          .append(e.width())
          .append(' ')
          .append(e.height())
          .append(' ')
          .append(e.channels())
          .append(' ')
          .append(e.bitDepth())
          .append('\n');
    }
    return sha256(lines.toString().getBytes(StandardCharsets.UTF_8));
  }

  /** Writes entries as a manifest that {@link #read} accepts. */
  public static String toCsv(List<ManifestEntry> entries) {
    return ManifestCsv.write(entries);
  }

  /** Where the pictures are, if they are in a folder. */
  Optional<Path> folder() {
    return store instanceof PictureStore.Folder files
        ? Optional.of(files.folder())
        : Optional.empty();
  }

  private Optional<byte[]> bytes(ManifestEntry entry) {
    return store.read(entry.file(), limit(entry) + 1);
  }

  /** The most bytes that a picture's file may have. */
  static int limit(ManifestEntry entry) {
    return limit(entry.header());
  }

  /** The most bytes that a file of this header may have. */
  static int limit(PictureHeader header) {
    long limit = 2 * header.rawBytes() + SPARE_BYTES;
    return (int) Math.min(limit, Integer.MAX_VALUE - 64);
  }

  private String missing(ManifestEntry entry) {
    return "picture " + store.describe(entry.file()) + " does not exist";
  }

  private String tooLong(ManifestEntry entry) {
    return "picture "
        + store.describe(entry.file())
        + " is longer than "
        + limit(entry)
        + " bytes; accepted for "
        + entry.header().describe()
        + ": twice its samples and 1 MiB";
  }

  private String otherChecksum(ManifestEntry entry, String found) {
    return "picture "
        + store.describe(entry.file())
        + " has SHA-256 "
        + found
        + "; expected "
        + entry.sha256();
  }

  private static Optional<Finding> finding(ManifestEntry entry, Finding.Kind kind, String message) {
    return Optional.of(new Finding(entry.id(), kind, message));
  }

  /** SHA-256 in lower-case hexadecimal digits. */
  public static String sha256(byte[] bytes) {
    try {
      return HexFormat.of().formatHex(MessageDigest.getInstance("SHA-256").digest(bytes));
    } catch (NoSuchAlgorithmException e) {
      throw new IllegalStateException("every Java platform has SHA-256", e);
    }
  }
}
