package linkworthy.noise;

import java.io.IOException;
import java.io.InputStream;
import java.nio.ByteBuffer;
import java.nio.charset.CharacterCodingException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.InvalidPathException;
import java.nio.file.NoSuchFileException;
import java.nio.file.Path;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;

/** Reads the files that model files name. */
final class SettingFiles {
  private static final int MAX_BYTES = 16 << 20;

  private SettingFiles() {}

  /**
   * The text of a file in UTF-8, up to 16 MiB, by its name relative to the model file.
   *
   * @throws BadInput if it is missing, a folder, too large or not UTF-8
   * @throws Unavailable if it exists and cannot be read
   */
  static String read(Path model, String name) {
    Path file;
    try {
      file = model.toAbsolutePath().resolveSibling(name);
    } catch (InvalidPathException e) {
      throw new BadInput("it is no name of a file", e);
    }
    if (Files.isDirectory(file)) {
      throw new BadInput(name + " is a folder; accepted: a text file");
    }
    try (InputStream in = Files.newInputStream(file)) {
      byte[] bytes = in.readNBytes(MAX_BYTES + 1);
      if (bytes.length > MAX_BYTES) {
        throw new BadInput(name + " is larger than 16 MiB; accepted: up to 16 MiB");
      }
      return StandardCharsets.UTF_8.newDecoder().decode(ByteBuffer.wrap(bytes)).toString();
    } catch (NoSuchFileException e) {
      throw new BadInput(name + " does not exist", e);
    } catch (CharacterCodingException e) {
      throw new BadInput(name + " is not UTF-8 text; accepted: a text file in UTF-8", e);
    } catch (IOException e) {
      throw Unavailable.cannot("read " + file, e);
    }
  }
}
