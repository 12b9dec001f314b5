package linkworthy.app;

import java.nio.file.Path;
import java.util.List;
import linkworthy.codec.CodecContractTest;
import linkworthy.codec.CodecFamilies;
import linkworthy.codec.PluginFolder;
import org.junit.jupiter.api.AfterAll;
import org.junit.jupiter.api.BeforeAll;
import org.junit.jupiter.api.io.TempDir;

/** The contract, for the handbook's example as a jar. */
class ExamplePluginContractTest extends CodecContractTest {
  @TempDir private static Path folder;

  private static PluginFolder plugins = PluginFolder.none();

  @BeforeAll
  static void makeJar() {
    Path unused = PluginJars.makeExample(folder);
    plugins = PluginFolder.open(folder);
  }

  @AfterAll
  static void close() {
    plugins.close();
  }

  @Override
  protected CodecFamilies families() {
    return CodecFamilies.installed().with(plugins.families());
  }

  @Override
  protected String family() {
    return "thumbnail";
  }

  @Override
  protected List<String> entries() {
    return List.of("thumbnail: 2", "thumbnail: 4", "thumbnail: 8\nlabel: small");
  }
}
