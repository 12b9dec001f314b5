package linkworthy.report;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;

/** Writes the sample page to the file named by the first argument, to be looked at. */
final class SampleFile {
  private SampleFile() {}

  public static void main(String[] arguments) throws IOException {
    Files.writeString(Path.of(arguments[0]), new ReportRenderer().render(SamplePages.rich()));
  }
}
