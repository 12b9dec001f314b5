package linkworthy.app;

import java.io.IOException;
import java.io.InputStream;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.util.Objects;

/** Files in the program's own jar, beside this class. */
final class Resources {
  private Resources() {}

  static String text(String name) {
    return new String(bytes(name), StandardCharsets.UTF_8);
  }

  static byte[] bytes(String name) {
    try (InputStream in = Resources.class.getResourceAsStream(name)) {
      return Objects.requireNonNull(in, name).readAllBytes();
    } catch (IOException e) {
      throw new UncheckedIOException(e);
    }
  }
}
