package linkworthy.corpus;

import java.io.IOException;
import java.io.InputStream;
import java.nio.file.Files;
import java.nio.file.InvalidPathException;
import java.nio.file.NoSuchFileException;
import java.nio.file.Path;
import java.util.Arrays;
import java.util.Optional;
import java.util.function.Function;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;

/** Where a manifest's files are: a folder, or the class path. */
interface PictureStore {
  /**
   * The first {@code limit} bytes of a file, or nothing if there is no such file.
   *
   * @param file path below the manifest's folder, already checked by {@link ManifestEntry}
   * @throws BadInput if the path leaves the folder or is no regular file
   * @throws Unavailable if the file cannot be opened
   */
  Optional<byte[]> read(String file, int limit);

  /** The file's name for messages. */
  String describe(String file);

  /**
   * @throws BadInput if the path leaves the folder through a symbolic link
   */
  void requireInside(String file);

  /** Files in a folder. */
  record Folder(Path folder) implements PictureStore {
    @Override
    public Optional<byte[]> read(String file, int limit) {
      Optional<Path> found = find(file);
      if (found.isEmpty()) {
        return Optional.empty();
      }
      if (!Files.isRegularFile(found.get())) {
        throw new BadInput(describe(file) + " is no regular file");
      }
      try (InputStream in = Files.newInputStream(found.get())) {
        return Optional.of(in.readNBytes(limit));
      } catch (NoSuchFileException e) {
        return Optional.empty();
      } catch (IOException e) {
        throw Unavailable.cannot("read picture " + describe(file), e);
      }
    }

    @Override
    public String describe(String file) {
      return folder + "/" + file;
    }

    @Override
    public void requireInside(String file) {
      find(file);
    }

    private Optional<Path> find(String file) {
      try {
        Path real = folder.resolve(file).toRealPath();
        if (!real.startsWith(folder.toRealPath())) {
          throw new BadInput(
              "file is '"
                  + file
                  + "', a link that leaves the manifest's folder; accepted: a file below it");
        }
        return Optional.of(real);
      } catch (NoSuchFileException e) {
        return Optional.empty();
      } catch (InvalidPathException e) {
        throw new BadInput("file is '" + file + "'; this system has no such names", e);
      } catch (IOException e) {
        throw Unavailable.cannot("read picture " + describe(file), e);
      }
    }
  }

  /** Files that somebody hands over. */
  record Handed(String source, Function<String, Optional<byte[]>> files) implements PictureStore {
    @Override
    public Optional<byte[]> read(String file, int limit) {
      return files
          .apply(file)
          .map(bytes -> bytes.length <= limit ? bytes : Arrays.copyOf(bytes, limit));
    }

    @Override
    public String describe(String file) {
      return source + "/" + file;
    }

    @Override
    public void requireInside(String file) {
      // There is no folder to leave.
    }
  }

  /** Files packed beside this class. */
  record Shipped(String prefix) implements PictureStore {
    @Override
    public Optional<byte[]> read(String file, int limit) {
      try (InputStream in = Manifest.class.getResourceAsStream(prefix + file)) {
        return in == null ? Optional.empty() : Optional.of(in.readNBytes(limit));
      } catch (IOException e) {
        throw Unavailable.cannot("read picture " + describe(file), e);
      }
    }

    @Override
    public String describe(String file) {
      return "shipped corpus/" + file;
    }

    @Override
    public void requireInside(String file) {
      // A jar has no links.
    }
  }
}
