package linkworthy.cluster;

import java.io.FileNotFoundException;
import java.io.IOException;
import java.io.InputStream;
import java.io.OutputStream;
import java.nio.charset.StandardCharsets;
import java.util.Locale;
import java.util.SortedSet;
import java.util.TreeSet;
import java.util.UUID;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;
import linkworthy.results.PartFile;
import linkworthy.trial.Stretch;
import org.apache.hadoop.conf.Configuration;
import org.apache.hadoop.fs.FileStatus;
import org.apache.hadoop.fs.FileSystem;
import org.apache.hadoop.fs.LocalFileSystem;
import org.apache.hadoop.fs.Path;

/**
 * Where executors leave their rows: a folder {@code linkworthy-<run>} on any file system that
 * Hadoop knows, with a file for each stretch. A file is written under a name of its own and then
 * renamed, so a part is there whole or not at all; a second one for the same stretch, from a task
 * that was retried or run twice, has the same rows and may replace the first or be dropped.
 */
final class PartsFolder {
  private static final int SHORT_RUN = 16;
  private static final String HOLDER = "holder";
  private static final String ATTEMPT = ".attempt-";
  private static final Pattern PART = Pattern.compile("part-(\\d{10})-(\\d{10})");

  private final FileSystem files;
  private final Path folder;
  private final String run;

  private PartsFolder(FileSystem files, Path folder, String run) {
    this.files = files;
    this.folder = folder;
    this.run = run;
  }

  /** Writes one part. */
  interface Content {
    void writeTo(OutputStream out) throws IOException;
  }

  /**
   * @param parts address of the folder above, of any scheme that Hadoop knows
   * @param run checksum of what is run
   * @throws BadInput if it is no address
   * @throws Unavailable if there is no such file system
   */
  static PartsFolder at(String parts, String run, Configuration hadoop) {
    try {
      Path folder = new Path(parts, "linkworthy-" + run.substring(0, SHORT_RUN));
      FileSystem found = folder.getFileSystem(hadoop);
      // The checksum files beside local files would not be renamed in one step with them.
      FileSystem files = found instanceof LocalFileSystem local ? local.getRawFileSystem() : found;
      return new PartsFolder(files, files.makeQualified(folder), run);
    } catch (IllegalArgumentException e) {
      throw new BadInput(
          "--parts is '"
              + parts
              + "'; accepted: a path that Hadoop knows, such as hdfs://host:port/folder",
          e);
    } catch (IOException e) {
      throw Unavailable.cannot("use " + parts, e);
    }
  }

  /**
   * Makes the folder and marks it as this holder's. A mark of the same holder is from a run that
   * was killed.
   *
   * @param holder names the results folder, which itself keeps a second run out
   * @throws BadInput if it is another's
   * @throws Unavailable if it cannot be written
   */
  void hold(String holder) {
    Path mark = new Path(folder, HOLDER);
    try {
      if (!files.mkdirs(folder)) {
        throw new IOException("not made");
      }
      try (OutputStream out = files.create(mark, false)) {
        out.write(holder.getBytes(StandardCharsets.UTF_8));
      } catch (IOException e) {
        String other = files.exists(mark) ? text(mark) : "";
        if (other.isEmpty()) {
          throw e;
        }
        if (!other.equals(holder)) {
          throw new BadInput(
              folder
                  + " holds the parts of a run into "
                  + other
                  + "; accepted: another --parts, or none; if that run is dead, remove "
                  + mark,
              e);
        }
      }
    } catch (IOException e) {
      throw Unavailable.cannot("write " + folder, e);
    }
  }

  private String text(Path file) throws IOException {
    try (InputStream in = files.open(file)) {
      return new String(in.readAllBytes(), StandardCharsets.UTF_8);
    }
  }

  /**
   * @throws Unavailable if this machine does not see the folder that the driver made
   */
  void requireShared() {
    try {
      if (!files.exists(new Path(folder, HOLDER))) {
        throw new Unavailable(
            "an executor does not see "
                + folder
                + ", which the driver made; accepted: --parts on a file system that all machines"
                + " share");
      }
    } catch (IOException e) {
      throw Unavailable.cannot("read " + folder, e);
    }
  }

  /**
   * The whole parts, in order; what else tasks left is removed.
   *
   * @throws Unavailable if the folder cannot be read
   */
  SortedSet<Stretch> whole() {
    SortedSet<Stretch> whole =
        new TreeSet<>((a, b) -> a.first() == b.first() ? a.end() - b.end() : a.first() - b.first());
    try {
      for (FileStatus file : files.listStatus(folder)) {
        String name = file.getPath().getName();
        Matcher part = PART.matcher(name);
        if (part.matches()) {
          Stretch stretch =
              new Stretch(Integer.parseInt(part.group(1)), Integer.parseInt(part.group(2)));
          if (isWhole(stretch)) {
            whole.add(stretch);
            continue;
          }
        }
        if (part.matches() || name.startsWith(ATTEMPT)) {
          boolean unused = files.delete(file.getPath(), false);
        }
      }
      return whole;
    } catch (IOException e) {
      throw Unavailable.cannot("read " + folder, e);
    }
  }

  /**
   * Whether a part is there; it appears in one step.
   *
   * @throws Unavailable if the folder cannot be read
   */
  boolean isThere(Stretch stretch) {
    try {
      return files.exists(path(stretch));
    } catch (IOException e) {
      throw Unavailable.cannot("read " + folder, e);
    }
  }

  /** Whether a stretch is there, whole. */
  boolean isWhole(Stretch stretch) throws IOException {
    try (InputStream in = open(stretch)) {
      return PartFile.isWhole(in, run, stretch);
    } catch (FileNotFoundException e) {
      return false;
    }
  }

  /** Full address of the folder above this one. */
  String above() {
    return String.valueOf(folder.getParent());
  }

  InputStream open(Stretch stretch) throws IOException {
    return files.open(path(stretch));
  }

  /** The name of a part in messages. */
  Path path(Stretch stretch) {
    return new Path(
        folder, String.format(Locale.ROOT, "part-%010d-%010d", stretch.first(), stretch.end()));
  }

  /**
   * Writes a part; it is there once this returns.
   *
   * @throws Unavailable if it cannot be written
   */
  void write(Stretch stretch, Content content) {
    Path part = path(stretch);
    Path attempt = new Path(folder, ATTEMPT + part.getName() + "-" + UUID.randomUUID());
    try {
      try {
        try (OutputStream out = files.create(attempt, false)) {
          content.writeTo(out);
        }
        if (!files.rename(attempt, part) && !files.exists(part)) {
          throw new IOException("not renamed");
        }
      } finally {
        boolean unused = files.delete(attempt, false);
      }
    } catch (IOException e) {
      throw Unavailable.cannot("write " + part, e);
    }
  }

  /**
   * Removes the folder with all parts.
   *
   * @throws Unavailable if it cannot be removed
   */
  void remove() {
    try {
      boolean unused = files.delete(folder, true);
      Path above = folder.getParent();
      if (above != null && files.listStatus(above).length == 0) {
        unused = files.delete(above, false);
      }
    } catch (IOException e) {
      throw Unavailable.cannot("remove " + folder, e);
    }
  }

  @Override
  public String toString() {
    return folder.toString();
  }
}
