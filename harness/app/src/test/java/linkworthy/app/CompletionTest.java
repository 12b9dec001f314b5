package linkworthy.app;

import static org.assertj.core.api.Assertions.assertThat;

import java.io.File;
import java.io.IOException;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.List;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

/** The scripts for shells. */
class CompletionTest {
  @TempDir Path folder;

  private Path script(String shell) throws IOException {
    Outcome outcome = Program.run(folder, "completion", shell);
    assertThat(outcome.code()).isZero();
    assertThat(outcome.err()).isEmpty();
    return Files.writeString(folder.resolve("complete." + shell), outcome.out());
  }

  private static boolean isInstalled(String shell) {
    return List.of("/bin", "/usr/bin", "/usr/local/bin", "/opt/homebrew/bin").stream()
        .anyMatch(bin -> new File(bin, shell).canExecute());
  }

  /** Bash is always there; of zsh and fish at least the text is looked at. */
  @ParameterizedTest
  @ValueSource(strings = {"bash", "zsh", "fish"})
  void theScriptIsOneOfItsShell(String shell) throws IOException {
    Path script = script(shell);
    assertThat(Files.readString(script))
        .contains("assess", "resume", "handbook", "completion")
        .doesNotContain("\r");
    if (shell.equals("bash") || isInstalled(shell)) {
      assertThat(Program.execute(List.of(shell, "-n", script.toString())))
          .isEqualTo(new Outcome(0, "", ""));
    }
  }

  private List<String> offered(String... words) throws IOException {
    String line =
        "compopt() { :; }; source '%s'; COMP_WORDS=(%s); COMP_CWORD=%d; _complete_linkworthy; printf '%%s\\n' \"${COMPREPLY[@]}\""
            .formatted(script("bash"), String.join(" ", words), words.length - 1);
    Outcome outcome = Program.execute(List.of("bash", "-c", line));
    assertThat(outcome.err()).isEmpty();
    return outcome.out().lines().map(String::strip).toList();
  }

  @Test
  void bashOffersCommandsOptionsAndWords() throws IOException {
    assertThat(offered("linkworthy", "''"))
        .contains("assess", "report", "shortlist", "schema", "completion", "handbook");
    assertThat(offered("linkworthy", "assess", "--"))
        .contains("--resume", "--set", "--format", "--dry-run", "--help");
    assertThat(offered("linkworthy", "assess", "--format", "j")).contains("json");
    assertThat(offered("linkworthy", "corpus", "''")).contains("list", "check", "add", "fetch");
  }

  @Test
  void fishKnowsEveryCommandAndItsOptions() throws IOException {
    assertThat(Files.readString(script("fish")))
        .contains(
            "complete -c linkworthy -n '__fish_seen_subcommand_from assess' -l format -x -a 'text json'",
            "complete -c linkworthy -n '__fish_seen_subcommand_from shortlist' -l need -r -F",
            "-n '__fish_seen_subcommand_from corpus; and not __fish_seen_subcommand_from ",
            "-n '__fish_seen_subcommand_from noise; and __fish_seen_subcommand_from fit' -l column");
  }

  @Test
  void anotherShellIsRefused() {
    Outcome outcome = Program.run(folder, "completion", "ksh");
    assertThat(outcome.code()).isEqualTo(Main.BAD_INPUT);
    assertThat(outcome.errors()).singleElement().asString().contains("accepted: bash, zsh, fish");
  }
}
