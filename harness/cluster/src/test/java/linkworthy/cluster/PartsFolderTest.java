package linkworthy.cluster;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.stream.Stream;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;
import linkworthy.input.YamlNode;
import linkworthy.results.PartFile;
import linkworthy.study.StudyReader;
import linkworthy.trial.Plan;
import linkworthy.trial.Stretch;
import org.apache.hadoop.conf.Configuration;
import org.junit.jupiter.api.BeforeEach;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;

/** Parts are there whole or not at all, and belong to one run. */
class PartsFolderTest {
  private static final String RUN = "0123456789abcdef0123";
  private static final Stretch STRETCH = new Stretch(0, 4);
  private static final Plan PLAN =
      Plan.of(
          StudyReader.read(
              YamlNode.parse(
                  "study.yaml",
                  """
                  name: parts
                  pictures: {select: [cat], longest-side: 16}
                  impairments: [{noise: gaussian, snr-db: [20]}]
                  codecs: [{transform: mean, step: 16}]
                  """),
              Path.of("")));

  @TempDir private Path temporary;
  private Path own = Path.of("");

  @BeforeEach
  void nameTheFolder() {
    own = temporary.resolve("parts/linkworthy-0123456789abcdef");
  }

  private PartsFolder folder() {
    return PartsFolder.at(
        temporary.resolve("parts").toUri().toString(), RUN, new Configuration(false));
  }

  private static void write(PartsFolder folder) {
    folder.write(STRETCH, out -> new PartFile.Writer(out, PLAN, RUN, STRETCH).end());
  }

  private List<String> names() throws IOException {
    try (Stream<Path> files = Files.list(own)) {
      return files.map(file -> file.getFileName().toString()).sorted().toList();
    }
  }

  @Test
  void aPartThatIsWrittenTwiceIsThereOnce() throws IOException {
    PartsFolder folder = folder();
    folder.hold("here");
    write(folder);
    write(folder);
    assertThat(names()).containsExactly("holder", "part-0000000000-0000000004");
    assertThat(folder.whole()).containsExactly(STRETCH);
  }

  @Test
  void whatIsNotWholeIsRemoved() throws IOException {
    PartsFolder folder = folder();
    folder.hold("here");
    write(folder);
    Files.write(own.resolve("part-0000000004-0000000009"), new byte[] {1, 2});
    Files.write(own.resolve(".attempt-part-0000000004-0000000009-x"), new byte[0]);
    Files.write(own.resolve("not-ours"), new byte[0]);
    assertThat(folder.whole()).containsExactly(STRETCH);
    assertThat(names()).containsExactly("holder", "not-ours", "part-0000000000-0000000004");
  }

  @Test
  void aTaskThatFailsLeavesNothing() throws IOException {
    PartsFolder folder = folder();
    folder.hold("here");
    assertThatExceptionOfType(Unavailable.class)
        .isThrownBy(
            () ->
                folder.write(
                    STRETCH,
                    out -> {
                      out.write(1);
                      throw new IOException("No space left on device");
                    }))
        .withMessage("cannot write " + folder.path(STRETCH) + ": No space left on device");
    assertThat(names()).containsExactly("holder");
    assertThat(folder.isWhole(STRETCH)).isFalse();
  }

  @Test
  void itIsHeldByOneResultsFolder() {
    folder().hold("host:/results/a");
    folder().hold("host:/results/a");
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> folder().hold("host:/results/b"))
        .withMessage(
            folder()
                + " holds the parts of a run into host:/results/a; accepted: another --parts, or"
                + " none; if that run is dead, remove "
                + folder()
                + "/holder");
  }

  @Test
  void aMachineThatDoesNotSeeItSaysSo() {
    assertThatExceptionOfType(Unavailable.class)
        .isThrownBy(() -> folder().requireShared())
        .withMessageStartingWith("an executor does not see " + folder());
    folder().hold("here");
    folder().requireShared();
  }

  @Test
  void removingItLeavesWhatElseIsThere() throws IOException {
    folder().hold("here");
    Path other = Files.write(temporary.resolve("parts/other"), new byte[0]);
    folder().remove();
    assertThat(own).doesNotExist();
    assertThat(other).exists();
    folder().hold("here");
    Files.delete(other);
    folder().remove();
    assertThat(temporary.resolve("parts")).doesNotExist();
  }

  @Test
  void whatIsNoFolderOrNoAddressIsRefused() throws IOException {
    Files.write(temporary.resolve("parts"), "a file".getBytes(StandardCharsets.UTF_8));
    assertThatExceptionOfType(Unavailable.class)
        .isThrownBy(() -> folder().hold("here"))
        .withMessageStartingWith("cannot write file:" + own + ": ");
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> PartsFolder.at("", RUN, new Configuration(false)))
        .withMessage(
            "--parts is ''; accepted: a path that Hadoop knows, such as hdfs://host:port/folder");
    assertThatExceptionOfType(Unavailable.class)
        .isThrownBy(() -> PartsFolder.at("no://host/a", RUN, new Configuration(false)))
        .withMessage("cannot use no://host/a: No FileSystem for scheme \"no\"");
  }
}
