package linkworthy.codec;

import java.nio.charset.StandardCharsets;
import java.nio.file.Path;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.function.Supplier;
import java.util.function.UnaryOperator;
import java.util.stream.Stream;
import java.util.zip.CRC32C;
import linkworthy.corpus.Picture;
import linkworthy.corpus.PictureHeader;
import linkworthy.corpus.PictureReader;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;
import linkworthy.link.Packet;

/**
 * Two programs as a codec: one turns a PGM file into bytes, the other turns them back. The bytes
 * travel as a {@link ByteStream}. What the programs do wrong is a {@link Failure}; that this
 * machine has no room for their files is {@link Unavailable}.
 */
final class CommandCodec implements Codec {
  /** The decoder's output is no picture. */
  static final String DECODE_UNREADABLE = "decode-unreadable";

  private final String label;
  private final List<String> encode;
  private final List<String> decode;
  private final OnLoss onLoss;
  private final CommandRun.Limits limits;
  private final Supplier<Confinement> confinement;
  private final int payloadBytes;

  /**
   * @param label empty for the one derived from the parameters
   * @param confinement asked for when a program is run, not before
   */
  CommandCodec(
      String label,
      List<String> encode,
      List<String> decode,
      OnLoss onLoss,
      CommandRun.Limits limits,
      Supplier<Confinement> confinement,
      int payloadBytes) {
    this.encode = List.copyOf(encode);
    this.decode = List.copyOf(decode);
    this.onLoss = onLoss;
    this.limits = limits;
    this.confinement = confinement;
    this.payloadBytes = payloadBytes;
    this.label =
        label.isEmpty()
            ? "command " + Path.of(encode.get(0)).getFileName() + " " + onLoss.id()
            : label;
  }

  @Override
  public String label() {
    return label;
  }

  @Override
  public Description description() {
    return new Description("", "", "");
  }

  @Override
  public Map<String, Object> settings() {
    Map<String, Object> command = new LinkedHashMap<>();
    command.put("encode", encode);
    command.put("decode", decode);
    Map<String, Object> settings = new LinkedHashMap<>();
    settings.put("command", command);
    settings.put("on-loss", onLoss.id());
    settings.put("seconds", limits.seconds());
    settings.put("output-bytes", limits.outputBytes() == 0 ? "auto" : limits.outputBytes());
    settings.put("memory-mib", limits.memoryMib());
    return settings;
  }

  @Override
  public List<String> programs() {
    return Stream.of(encode.get(0), decode.get(0)).distinct().toList();
  }

  /**
   * @throws BadInput if a program is not there
   */
  @Override
  public void check(PictureShape shape) {
    for (String program : programs()) {
      if (CommandRun.find(program).isEmpty()) {
        throw new BadInput(
            "codec '"
                + label
                + "' runs '"
                + program
                + "', which is not there; accepted: a program that is "
                + (program.contains("/") ? "an executable file" : "on the PATH"));
      }
    }
  }

  private CommandRun.Limits limits(PictureShape shape) {
    return limits.outputBytes() > 0
        ? limits
        : new CommandRun.Limits(
            limits.seconds(), 4L * Pgm.sampleBytes(shape) + (1 << 20), limits.memoryMib());
  }

  private ByteStream stream(PictureShape shape) {
    CRC32C crc = new CRC32C();
    crc.update((settings() + " " + shape).getBytes(StandardCharsets.UTF_8));
    return new ByteStream((int) crc.getValue(), payloadBytes);
  }

  @Override
  public Encoding encode(Picture picture, Memo memo) {
    PictureShape shape = PictureShape.of(picture);
    byte[] bytes =
        CommandRun.encoding(encode, shape, limits(shape), confinement.get())
            .run(Pgm.write(picture));
    return new Encoding(packets(shape, bytes), -1);
  }

  /** The packets that carry an encoder's bytes. */
  List<Packet> packets(PictureShape shape, byte[] bytes) {
    return stream(shape).cut(bytes);
  }

  @Override
  public Decoding decode(PictureShape shape, List<byte[]> arrived) {
    return decode(
        shape, arrived, CommandRun.decoding(decode, shape, limits(shape), confinement.get())::run);
  }

  /**
   * @param program makes a PGM file of bytes or throws a {@link CodecFailure}
   */
  Decoding decode(PictureShape shape, List<byte[]> arrived, UnaryOperator<byte[]> program) {
    ByteStream.Arrived stream = stream(shape).join(arrived, onLoss, limits(shape).outputBytes());
    if (stream.bytes().length == 0) {
      return Decoding.nothing(shape);
    }
    try {
      byte[] file = program.apply(stream.bytes());
      return new Decoding(
          picture(shape, file),
          stream.complete() ? Decoding.Completeness.COMPLETE : Decoding.Completeness.PARTIAL);
    } catch (CodecFailure e) {
      return Decoding.failed(shape, e.failure());
    }
  }

  private static Picture picture(PictureShape shape, byte[] file) {
    String name = "the decoder's output";
    PictureHeader wanted = new PictureHeader(shape.width(), shape.height(), 1, shape.bitDepth());
    try {
      PictureHeader found = PictureReader.header(name, file);
      if (!found.equals(wanted)) {
        throw new CodecFailure(
            new Failure(Failure.DECODE_SIZE, name + " is " + found + "; accepted: " + wanted));
      }
      return PictureReader.read(name, file, wanted).channels().get(0);
    } catch (BadInput | Unavailable e) {
      throw new CodecFailure(new Failure(DECODE_UNREADABLE, String.valueOf(e.getMessage())));
    }
  }
}
