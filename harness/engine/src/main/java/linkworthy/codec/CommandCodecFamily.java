package linkworthy.codec;

import java.nio.file.Path;
import java.util.Arrays;
import java.util.List;
import java.util.Optional;
import java.util.function.Supplier;
import linkworthy.input.Key;
import linkworthy.input.KeyGroup;
import linkworthy.input.Kind;
import linkworthy.input.YamlNode;
import linkworthy.link.Link;

/**
 * Reads codecs that are programs of the user's own: {@code command: {encode: [...], decode:
 * [...]}}. Refuses every entry unless the user has allowed programs to be run.
 */
public final class CommandCodecFamily implements CodecFamily {
  private static final String ID = "command";
  private static final String AUTO = "auto";
  private static final int DEFAULT_SECONDS = 30;
  private static final int DEFAULT_MEMORY = 1024;
  private static final Kind.Words ON_LOSS =
      new Kind.Words(Arrays.stream(OnLoss.values()).map(OnLoss::id).toList());
  private static final Kind.Whole SECONDS = new Kind.Whole(1, 3600);
  private static final Kind.Whole MEMORY = new Kind.Whole(1, 1 << 20);
  private static final Kind.Whole BYTES = new Kind.Whole(1, 1 << 30);
  private static final Kind.WordOr OUTPUT =
      new Kind.WordOr(
          AUTO,
          BYTES,
          "a whole number from 1 to "
              + BYTES.max()
              + ", or auto: 4 times the raw picture and 1 MiB");
  private static final Kind ARGUMENTS = new Kind.Items(Kind.Text.any("a word"));
  private static final String PROGRAM =
      "program (a name on the PATH or an absolute path) and arguments, `{input}` and `{output}`"
          + " among them";
  private static final KeyGroup PROGRAMS =
      KeyGroup.of(
          "programs",
          Key.required("encode", ARGUMENTS, PROGRAM),
          Key.required("decode", ARGUMENTS, PROGRAM));
  private static final KeyGroup KEYS =
      KeyGroup.of(
          ID,
          Key.required(ID, PROGRAMS, "the two programs"),
          Key.optional(
              "on-loss",
              ON_LOSS,
              "`" + OnLoss.TRUNCATE.id() + "`",
              "what is decoded where bytes are missing"),
          Key.optional(
              "seconds", SECONDS, Integer.toString(DEFAULT_SECONDS), "longest time for a call"),
          Key.optional("output-bytes", OUTPUT, "`" + AUTO + "`", "most that a call may write"),
          Key.optional(
              "memory-mib",
              MEMORY,
              Integer.toString(DEFAULT_MEMORY),
              "address space of each process, MiB"),
          Codec.LABEL);

  private final boolean allowed;
  private final Supplier<Confinement> confinement;

  /** The family as it is found on the class path: it runs nothing. */
  public CommandCodecFamily() {
    this(false, Confinement::ofThisMachine);
  }

  /**
   * @param allowed whether programs may be run
   * @param confinement of the programs, asked for when one is run
   */
  CommandCodecFamily(boolean allowed, Supplier<Confinement> confinement) {
    this.allowed = allowed;
    this.confinement = confinement;
  }

  @Override
  public String id() {
    return ID;
  }

  @Override
  public Optional<KeyGroup> keys() {
    return Optional.of(KEYS);
  }

  @Override
  public String help() {
    return """
        command: {encode: [PROGRAM, ARGUMENT, ...], decode: [PROGRAM, ARGUMENT, ...]}
          Any two programs of this machine, run only with --allow-commands. encode gets a PGM file
          (8 or 16 bits a sample) and writes any bytes; decode gets those bytes and writes a PGM
          of the same size and depth. {input}, {output}, {width} and {height} in the arguments are
          replaced; no shell reads them, so spaces and other characters stay as they are. A PROGRAM
          is a name on the PATH or an absolute path.
          on-loss:      truncate (decode what came before the first missing byte), zero-fill (zeros
                        in place of the missing bytes) or drop-picture (any loss is an outage)
                        (truncate)
          seconds:      longest time for one call, 1 to 3600 (30)
          output-bytes: most that one call may write to its folder, or auto: 4 times the raw
                        picture and 1 MiB (auto)
          memory-mib:   most address space of each process, in MiB (1024); not limited where the
                        program prlimit of util-linux is missing
          label:        name in tables (command, PROGRAM of encode, on-loss)
        Each call has a folder of its own, deleted afterwards, as its current folder, HOME and
        TMPDIR; of the environment it sees PATH alone, and no input but the file. A call that takes
        too long or writes too much is ended with all its processes. Whatever goes wrong is an
        outage of that one trial, named in the column failure; so is an output that is a symbolic
        link. Where bubblewrap (bwrap) is on the PATH and works, a program can write to its own
        folder alone and has no network. Elsewhere it may do all that you may do, write outside its
        folder and use the network included; assess says which of the two at its start. Either way
        run programs that you trust: they can read all that you can read.
        Sent, and counted: every byte that encode writes, and 10 bytes a packet that say where it
        belongs. What it costs at the node is the program's affair.""";
  }

  @Override
  public List<Codec> read(YamlNode entry, Link link) {
    KEYS.check(entry);
    YamlNode command = entry.get(ID);
    List<String> encode = arguments(command.get("encode"));
    List<String> decode = arguments(command.get("decode"));
    if (!allowed) {
      throw command.refuse(
          "runs programs of this machine ("
              + encode.get(0)
              + ", "
              + decode.get(0)
              + "); accepted: only with --allow-commands");
    }
    OnLoss onLoss =
        entry
            .find("on-loss")
            .map(
                node ->
                    List.of(OnLoss.values()).get(ON_LOSS.accepted().indexOf(ON_LOSS.read(node))))
            .orElse(OnLoss.TRUNCATE);
    String label = entry.find("label").map(node -> node.line(Codec.MAX_LABEL)).orElse("");
    return List.of(
        new CommandCodec(
            label, encode, decode, onLoss, limits(entry), confinement, link.payloadBytes()));
  }

  private static CommandRun.Limits limits(YamlNode entry) {
    return new CommandRun.Limits(
        entry.find("seconds").map(SECONDS::read).orElse(DEFAULT_SECONDS),
        entry.find("output-bytes").map(CommandCodecFamily::outputBytes).orElse(0L),
        entry.find("memory-mib").map(MEMORY::read).orElse(DEFAULT_MEMORY));
  }

  private static long outputBytes(YamlNode node) {
    return OUTPUT.isWord(node) ? 0 : BYTES.readLong(node);
  }

  private static List<String> arguments(YamlNode list) {
    List<String> arguments = list.items().stream().map(YamlNode::text).toList();
    String program = arguments.get(0);
    if (program.contains("/") && !Path.of(program).isAbsolute()) {
      throw list.refuse(
          "begins with '" + program + "'; accepted: a name on the PATH or an absolute path");
    }
    for (String file : List.of(CommandRun.INPUT, CommandRun.OUTPUT)) {
      if (arguments.stream().skip(1).noneMatch(argument -> argument.contains(file))) {
        throw list.refuse(
            "has no " + file + " in its arguments; accepted: arguments with {input} and {output}");
      }
    }
    return arguments;
  }
}
