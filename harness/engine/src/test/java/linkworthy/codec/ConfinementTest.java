package linkworthy.codec;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;

import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import java.util.Optional;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

/** Works with stand-ins for bubblewrap, so that it is the same where there is none. */
class ConfinementTest {
  private static final CommandRun.Limits LIMITS = new CommandRun.Limits(2, 100_000, 1024);
  private static final PictureShape SHAPE = new PictureShape(1, 1, 8);

  /** Skips the arguments of bubblewrap and runs the program. */
  private static final String RUNS =
      "while [ \"$1\" != -- ]; do echo \"$1\" >> LOG; shift; done; shift; exec \"$@\"";

  @TempDir private Path home;

  private Path standIn(String script) throws IOException {
    Path file =
        Files.writeString(
            home.resolve("bwrap"),
            "#!/bin/sh\n" + script.replace("LOG", home.resolve("log").toString()) + "\n");
    assertThat(file.toFile().setExecutable(true)).isTrue();
    return file;
  }

  private static byte[] copied(Confinement confinement, String... command) {
    return CommandRun.encoding(List.of(command), SHAPE, LIMITS, confinement).run(new byte[] {7, 8});
  }

  @Test
  void theArgumentsAllowTheOwnFolderAloneAndNoNetwork() throws IOException {
    Path bwrap = standIn(RUNS);
    Confinement confinement = Confinement.probed(Optional.of(bwrap), LIMITS);
    assertThat(confinement.isOn()).isTrue();
    assertThat(confinement.id()).isEqualTo("bubblewrap");
    assertThat(confinement.sentence()).contains("confined by bubblewrap").doesNotContain("\n");
    assertThat(confinement.before(Path.of("/own folder")))
        .containsExactly(
            bwrap.toString(),
            "--unshare-all",
            "--die-with-parent",
            "--new-session",
            "--ro-bind",
            "/",
            "/",
            "--dev",
            "/dev",
            "--proc",
            "/proc",
            "--bind",
            "/own folder",
            "/own folder",
            "--chdir",
            "/own folder",
            "--");
  }

  /** Every call goes through it, with the folder of that call, and gives the program's output. */
  @Test
  void programsRunInsideIt() throws IOException {
    Confinement confinement = Confinement.probed(Optional.of(standIn(RUNS)), LIMITS);
    Files.delete(home.resolve("log"));
    assertThat(copied(confinement, "cp", "{input}", "{output}")).containsExactly(7, 8);
    List<String> seen = Files.readAllLines(home.resolve("log"));
    String own = seen.get(seen.indexOf("--bind") + 1);
    assertThat(Path.of(own).getFileName().toString()).startsWith("linkworthy-");
    assertThat(seen).endsWith("--bind", own, own, "--chdir", own);
    assertThat(copied(confinement, "sh", "-c", "pwd > $1", "sh", "{output}", "{input}"))
        .isNotEmpty();
    assertThatExceptionOfType(CodecFailure.class)
        .isThrownBy(() -> copied(confinement, "sh", "-c", "exit 5", "{input}", "{output}"))
        .satisfies(e -> assertThat(e.failure().word()).isEqualTo("encode-exit"))
        .withMessageContaining("exit code 5");
  }

  /** Not allowed here, nothing done, another result, no end: programs then run unconfined. */
  @ParameterizedTest
  @ValueSource(
      strings = {
        "echo 'bwrap: No permissions to create new namespace' >&2; exit 1",
        "exit 0",
        "while [ \"$1\" != -- ]; do shift; done; echo else > $4",
        "sleep 3600"
      })
  void oneThatDoesNotWorkIsNotUsed(String script) throws IOException {
    Confinement confinement = Confinement.probed(Optional.of(standIn(script)), LIMITS);
    assertThat(confinement.isOn()).isFalse();
    assertThat(confinement.before(home)).isEmpty();
    assertThat(copied(confinement, "cp", "{input}", "{output}")).containsExactly(7, 8);
  }

  @Test
  void withoutAnyProgramsRunUnconfined() {
    Confinement confinement = Confinement.probed(Optional.empty(), LIMITS);
    assertThat(confinement.isOn()).isFalse();
    assertThat(confinement.id()).isEqualTo("none");
    assertThat(confinement.sentence()).contains("unconfined").doesNotContain("\n");
  }

  /** What this machine has holds what it says; a write outside fails exactly where it is on. */
  @Test
  void whatThisMachineHasDoesWhatItSays() {
    Confinement confinement = Confinement.ofThisMachine();
    Path outside = home.resolve("outside");
    byte[] said =
        copied(
            confinement,
            "sh",
            "-c",
            "cp $1 " + outside + " && echo yes > $2 || echo no > $2",
            "sh",
            "{input}",
            "{output}");
    assertThat(said[0]).isEqualTo((byte) (confinement.isOn() ? 'n' : 'y'));
    assertThat(Files.exists(outside)).isEqualTo(!confinement.isOn());
  }
}
