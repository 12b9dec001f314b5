package linkworthy.corpus;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardCopyOption;
import java.nio.file.StandardOpenOption;
import java.util.ArrayList;
import java.util.HashSet;
import java.util.List;
import java.util.Optional;
import java.util.Set;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;

/**
 * Adds the pictures of a folder to a manifest that stands in the folder or above it. The manifest
 * is written beside itself and then moved into place, so that it is the old one or the new one.
 *
 * @param licence licence of the pictures, see {@link Licences}
 * @param attribution whom to credit, one line
 * @param set the set they join, one line
 * @param category what they show, one line
 */
public record ManifestAddition(String licence, String attribution, String set, String category) {
  private static final int LONGEST_ID = 56;

  /**
   * Checks the texts before any file is read.
   *
   * @throws IllegalArgumentException if one is not as described; the message begins with its name
   */
  public ManifestAddition {
    new ManifestEntry(
        "x", set, "x", 1, 1, 1, 8, category, licence, attribution, "", "0".repeat(64), "");
  }

  /**
   * What became of the files of a folder.
   *
   * @param added entries added
   * @param listed files that were listed already, as they are
   * @param refused why each other file was not added
   * @param warnings what a user should know of those added
   */
  public record Result(
      List<ManifestEntry> added,
      List<String> listed,
      List<String> refused,
      List<String> warnings) {}

  /**
   * Adds a folder's pictures. Without one that can be added nothing is written.
   *
   * @throws BadInput if the folder does not exist, is empty or is outside the manifest's, the
   *     manifest cannot be used, or a text is not as described
   * @throws Unavailable if the manifest cannot be written
   */
  public Result add(Path manifest, Path folder) {
    List<Path> files =
        PictureFile.in(folder).stream().filter(file -> !isManifest(file, manifest)).toList();
    if (files.isEmpty()) {
      throw new BadInput(folder + " has no files; accepted: a folder of pictures");
    }
    if (!Files.isDirectory(folderOf(manifest))) {
      throw new BadInput("the folder of " + manifest + " does not exist");
    }
    List<ManifestEntry> entries = new ArrayList<>();
    if (Files.exists(manifest)) {
      entries.addAll(Manifest.read(manifest).entries());
    }
    Result result =
        new Result(new ArrayList<>(), new ArrayList<>(), new ArrayList<>(), new ArrayList<>());
    Path base = real(folderOf(manifest));
    Path real = real(folder);
    if (!real.startsWith(base)) {
      throw new BadInput(
          folder + " is outside of " + base + "; accepted: a folder with the manifest in or above");
    }
    Set<String> ids = new HashSet<>();
    entries.forEach(entry -> ids.add(entry.id()));
    for (Path file : files) {
      add(base.relativize(real.resolve(name(file))), file, entries, ids, result);
    }
    if (!result.added.isEmpty()) {
      entries.addAll(result.added);
      replace(manifest, Manifest.toCsv(entries));
    }
    return result;
  }

  private static boolean isManifest(Path file, Path manifest) {
    return Files.exists(manifest) && real(file).equals(real(manifest));
  }

  private void add(
      Path relative, Path file, List<ManifestEntry> entries, Set<String> ids, Result result) {
    String path = relative.toString().replace(relative.getFileSystem().getSeparator(), "/");
    try {
      PictureFile picture = PictureFile.read(file);
      Optional<ManifestEntry> known =
          entries.stream().filter(entry -> entry.file().equals(path)).findFirst();
      if (known.isPresent()) {
        boolean same = known.get().sha256().equals(picture.sha256());
        (same ? result.listed : result.refused)
            .add(file + (same ? "" : " is listed with another SHA-256"));
        return;
      }
      ManifestEntry entry = entry(id(name(file), ids), path, picture);
      ids.add(entry.id());
      result.added.add(entry);
      if (picture.jpeg()) {
        result.warnings.add(
            file + " is a JPEG file: its coding errors count as part of the picture");
      } else if (BlockGrid.isIn(picture.luma())) {
        result.warnings.add(
            file + " shows a grid of 8 x 8 blocks: it was a JPEG once, which favours block codecs");
      }
    } catch (BadInput | Unavailable e) {
      result.refused.add(String.valueOf(e.getMessage()));
    }
  }

  private ManifestEntry entry(String id, String path, PictureFile picture) {
    PictureHeader header = picture.header();
    try {
      return new ManifestEntry(
          id,
          set,
          path,
          header.width(),
          header.height(),
          header.channels(),
          header.bitDepth(),
          category,
          licence,
          attribution,
          "",
          picture.sha256(),
          "");
    } catch (IllegalArgumentException e) {
      throw new BadInput("picture " + picture.path() + ": " + e.getMessage(), e);
    }
  }

  /** The file's name without its ending, in the letters of an id, with a number if it is taken. */
  private static String id(String name, Set<String> taken) {
    String base =
        name.replaceFirst("(?<=.)\\.[A-Za-z0-9]+$", "")
            .replaceAll("[^A-Za-z0-9._-]+", "-")
            .replaceFirst("^[^A-Za-z0-9]+", "");
    base = base.isEmpty() ? "picture" : base.substring(0, Math.min(LONGEST_ID, base.length()));
    String id = base;
    for (int number = 2; taken.contains(id); number++) {
      id = base + "-" + number;
    }
    return id;
  }

  private static String name(Path file) {
    return String.valueOf(file.getFileName());
  }

  private static Path folderOf(Path manifest) {
    Path parent = manifest.toAbsolutePath().getParent();
    return parent == null ? manifest.toAbsolutePath() : parent;
  }

  private static Path real(Path path) {
    try {
      return path.toRealPath();
    } catch (IOException e) {
      throw Unavailable.cannot("find " + path, e);
    }
  }

  private static void replace(Path manifest, String csv) {
    Path part = manifest.resolveSibling(name(manifest) + ".part");
    try {
      Files.deleteIfExists(part);
      Files.write(part, csv.getBytes(StandardCharsets.UTF_8), StandardOpenOption.CREATE_NEW);
      Manifest.read(part);
      Files.move(part, manifest, StandardCopyOption.REPLACE_EXISTING);
    } catch (IOException e) {
      throw Unavailable.cannot("write " + manifest, e);
    } finally {
      delete(part);
    }
  }

  private static void delete(Path part) {
    try {
      Files.deleteIfExists(part);
    } catch (IOException e) {
      throw Unavailable.cannot("remove " + part, e);
    }
  }
}
