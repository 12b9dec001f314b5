package linkworthy.codec;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Optional;
import org.jspecify.annotations.Nullable;

/**
 * What keeps the programs of codecs from the rest of the machine: bubblewrap, the program {@code
 * bwrap}, where it is on the PATH and works. A confined program sees all files but can write to its
 * own folder alone, and has no network. Elsewhere programs run unconfined.
 */
public final class Confinement {
  private static final List<String> COPY = List.of("cp", CommandRun.INPUT, CommandRun.OUTPUT);
  private static final CommandRun.Limits PROBE_LIMITS = new CommandRun.Limits(5, 1 << 20, 1024);

  private final @Nullable Path bubblewrap;

  private Confinement(@Nullable Path bubblewrap) {
    this.bubblewrap = bubblewrap;
  }

  private static final class OfThisMachine {
    private static final Confinement FOUND = probed(CommandRun.find("bwrap"), PROBE_LIMITS);
  }

  /** What there is on this machine, tried once. */
  public static Confinement ofThisMachine() {
    return OfThisMachine.FOUND;
  }

  /** None. */
  static Confinement none() {
    return new Confinement(null);
  }

  /**
   * Confinement by a program, if a confined copy of a file succeeds.
   *
   * @param limits of the attempt
   */
  static Confinement probed(Optional<Path> bubblewrap, CommandRun.Limits limits) {
    if (bubblewrap.isEmpty()) {
      return none();
    }
    Confinement confined = new Confinement(bubblewrap.get());
    byte[] something = {1, 2, 3};
    try {
      byte[] copy =
          CommandRun.decoding(COPY, new PictureShape(1, 1, 8), limits, confined).run(something);
      return Arrays.equals(copy, something) ? confined : none();
    } catch (CodecFailure doesNotWork) {
      return none();
    }
  }

  /** Whether programs are confined. */
  public boolean isOn() {
    return bubblewrap != null;
  }

  /** As in {@code run.json}: {@code bubblewrap} or {@code none}. */
  public String id() {
    return isOn() ? "bubblewrap" : "none";
  }

  /** One line that says what holds. */
  public String sentence() {
    return isOn()
        ? "commands run confined by bubblewrap: they write to their own folder alone and have no"
            + " network"
        : "commands run unconfined, as there is no bubblewrap (bwrap) that works: they may do all"
            + " that you may do";
  }

  /** What stands before a program and its arguments; empty if it is not confined. */
  List<String> before(Path folder) {
    List<String> line = new ArrayList<>();
    if (bubblewrap != null) {
      String own = folder.toString();
      line.add(bubblewrap.toString());
      line.addAll(List.of("--unshare-all", "--die-with-parent", "--new-session"));
      line.addAll(List.of("--ro-bind", "/", "/", "--dev", "/dev", "--proc", "/proc"));
      line.addAll(List.of("--bind", own, own, "--chdir", own, "--"));
    }
    return line;
  }
}
