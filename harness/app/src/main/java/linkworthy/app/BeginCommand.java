package linkworthy.app;

import java.io.IOException;
import java.nio.file.FileAlreadyExistsException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.nio.file.StandardOpenOption;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;
import linkworthy.study.StudyTemplate;
import picocli.CommandLine.Command;
import picocli.CommandLine.Parameters;

/** Writes a study file to start from. */
@Command(
    name = "begin",
    description = "Write a commented study file to start from.",
    mixinStandardHelpOptions = true,
    footer = {"", "Example: linkworthy begin yard.yaml"})
final class BeginCommand implements Runnable {
  private final Surroundings surroundings;

  @Parameters(
      arity = "0..1",
      paramLabel = "FILE",
      defaultValue = "study.yaml",
      description = "File to write; must not exist (default: ${DEFAULT-VALUE}).")
  private Path file = Path.of("study.yaml");

  BeginCommand(Surroundings surroundings) {
    this.surroundings = surroundings;
  }

  @Override
  public void run() {
    try {
      Files.writeString(file, StudyTemplate.text(), StandardOpenOption.CREATE_NEW);
    } catch (FileAlreadyExistsException e) {
      throw new BadInput(file + " exists already; accepted: a name that is free", e);
    } catch (IOException e) {
      throw Unavailable.cannot("write " + file, e);
    }
    surroundings.out().println("wrote " + file + "; run it with: linkworthy assess " + file);
  }
}
