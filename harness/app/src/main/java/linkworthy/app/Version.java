package linkworthy.app;

import java.util.Objects;
import picocli.CommandLine.IVersionProvider;

/** The program's version, from the jar's manifest. */
final class Version implements IVersionProvider {
  static String text() {
    return Objects.requireNonNullElse(
        Version.class.getPackage().getImplementationVersion(), "development");
  }

  @Override
  public String[] getVersion() {
    return new String[] {"linkworthy " + text()};
  }
}
