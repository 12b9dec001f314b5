package linkworthy.results;

import java.io.BufferedInputStream;
import java.io.ByteArrayOutputStream;
import java.io.IOException;
import java.io.InputStream;
import java.nio.file.Files;
import java.nio.file.Path;
import org.jspecify.annotations.Nullable;

/** The whole lines of a file as bytes, each with the LF that ends it. */
final class LineInput implements AutoCloseable {
  private final InputStream in;
  private byte[] rest = new byte[0];

  LineInput(Path file) throws IOException {
    this(Files.newInputStream(file));
  }

  LineInput(InputStream stream) {
    in = new BufferedInputStream(stream, 1 << 16);
  }

  /** The next line; null if no whole one is left. */
  byte @Nullable [] next() throws IOException {
    ByteArrayOutputStream line = new ByteArrayOutputStream(256);
    for (int b = in.read(); b >= 0; b = in.read()) {
      line.write(b);
      if (b == '\n') {
        return line.toByteArray();
      }
    }
    rest = line.toByteArray();
    return null;
  }

  /** What follows the last whole line, once {@link #next} has given null. */
  byte[] rest() {
    return rest;
  }

  /** Whether nothing follows the last whole line, once {@link #next} has given null. */
  boolean atEnd() {
    return rest.length == 0;
  }

  @Override
  public void close() throws IOException {
    in.close();
  }
}
