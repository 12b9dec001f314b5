package linkworthy.codec;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.ArrayList;
import java.util.List;
import java.util.Random;
import linkworthy.corpus.Picture;
import linkworthy.corpus.TestPattern;
import linkworthy.link.Damages;
import linkworthy.link.Packet;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.EnumSource;

/** The stream of two programs under damage, with the decoding program run in this process. */
class CommandStreamTest {
  private static final List<String> COPY = List.of("cp", CommandRun.INPUT, CommandRun.OUTPUT);
  private static final Picture PICTURE = TestPattern.cvp(61, 45);
  private static final PictureShape SHAPE = PictureShape.of(PICTURE);

  /** A program that copies, and now and then ends badly or writes any bytes. */
  private static byte[] program(byte[] bytes, Random random) {
    return switch (random.nextInt(10)) {
      case 0 -> throw new CodecFailure(new Failure("decode-exit", "exit code 1"));
      case 1 -> Damages.bytes(random, 4000);
      case 2 -> "P5 16000000 16000000 255 ".getBytes(java.nio.charset.StandardCharsets.US_ASCII);
      default -> bytes;
    };
  }

  private static List<byte[]> payloads(CommandCodec codec, Picture picture) {
    return codec.packets(PictureShape.of(picture), Pgm.write(picture)).stream()
        .map(Packet::payload)
        .toList();
  }

  /**
   * Whatever arrives and whatever the program does: a picture of the right size, an outage where
   * there is a failure, and memory of at most 2 MiB and 200 bytes for each sample and each byte
   * that arrived.
   */
  @ParameterizedTest
  @EnumSource(OnLoss.class)
  void damageIsOrdinaryInput(OnLoss onLoss) {
    CommandCodec codec =
        new CommandCodec(
            "", COPY, COPY, onLoss, new CommandRun.Limits(30, 0, 1024), Confinement::none, 96);
    List<byte[]> sent = payloads(codec, PICTURE);
    List<byte[]> foreign = new ArrayList<>(payloads(codec, TestPattern.cvp(40, 24)));
    foreign.addAll(sent);
    assertThat(codec.decode(SHAPE, sent, file -> file).picture().samples())
        .isEqualTo(PICTURE.samples());
    for (int round = 0; round < Damages.rounds(); round++) {
      Random random = new Random(round);
      List<byte[]> arrived = Damages.of(sent, foreign, random);
      if (random.nextInt(4) == 0) {
        arrived = sent;
      }
      List<byte[]> input = arrived;
      long bytes = input.stream().mapToLong(p -> p.length).sum();
      Decoding decoding =
          Damages.bounded(
              (2 << 20) + 200 * (bytes + SHAPE.size()),
              onLoss + ", damage " + round,
              () -> codec.decode(SHAPE, input, file -> program(file, random)));
      assertThat(PictureShape.of(decoding.picture())).isEqualTo(SHAPE);
      if (decoding.failure() != null) {
        assertThat(decoding.completeness()).isEqualTo(Decoding.Completeness.NOTHING);
        assertThat(decoding.picture().samples()).containsOnly(128);
      }
    }
  }
}
