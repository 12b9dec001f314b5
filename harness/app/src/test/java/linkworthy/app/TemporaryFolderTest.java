package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import org.junit.jupiter.api.Test;

class TemporaryFolderTest {
  @Test
  void itIsRemovedWithAllThatIsInIt() throws IOException {
    Path path;
    try (TemporaryFolder folder = new TemporaryFolder("linkworthy-test")) {
      path = folder.path();
      Path inner = Files.createDirectories(path.resolve("a/b"));
      Files.writeString(inner.resolve("rows.csv"), "1\n");
      assertThat(path).isDirectory();
    }
    assertThat(path).doesNotExist();
  }

  @Test
  void oneThatIsGoneAlreadyIsNoMishap() throws IOException {
    try (TemporaryFolder folder = new TemporaryFolder("linkworthy-test")) {
      Files.delete(folder.path());
      assertThat(folder.path()).doesNotExist();
    }
  }
}
