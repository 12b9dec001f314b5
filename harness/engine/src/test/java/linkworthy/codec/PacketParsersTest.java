package linkworthy.codec;

import static org.assertj.core.api.Assertions.assertThat;

import java.util.Arrays;
import java.util.List;
import java.util.Random;
import linkworthy.link.Damages;
import org.junit.jupiter.api.Test;

/**
 * What reads packets and units, fed random bytes: nothing throws, loops or takes more memory than a
 * picture of the known size and the bytes at hand explain.
 */
class PacketParsersTest {
  private static final PictureShape SHAPE = new PictureShape(61, 45, 8);
  private static final Quantization STEPS = new Quantizer(8);

  /** At most 1 MiB, as classes may be used for the first time, and 100 bytes for each given. */
  private static long little(byte[] bytes) {
    return (1 << 20) + 100L * bytes.length;
  }

  @Test
  void preamblesAndNumbers() {
    Preamble preamble = Preamble.of("any", SHAPE);
    for (int round = 0; round < Damages.rounds(); round++) {
      byte[] bytes = Damages.bytes(new Random(round), 200);
      int inForce =
          Damages.bounded(
              little(bytes),
              "preamble " + round,
              () -> preamble.mostCommon(List.of(bytes, bytes), 1, 100));
      assertThat(inForce).isBetween(-1, 100);
      int numbers =
          Damages.bounded(
              little(bytes),
              "numbers " + round,
              () -> {
                BitReader in = new BitReader(bytes);
                int read = 0;
                while (in.hasByte()) {
                  in.readVarint();
                  read++;
                }
                return read;
              });
      assertThat(numbers).isLessThanOrEqualTo(bytes.length);
    }
  }

  @Test
  void entropyCodes() {
    for (int round = 0; round < Damages.rounds(); round++) {
      Random random = new Random(round);
      byte[] bytes = Damages.bytes(random, 200);
      int parameter = random.nextInt(16);
      BitReader rice = new BitReader(bytes);
      int values =
          Damages.bounded(
              little(bytes),
              "rice " + round,
              () -> {
                int read = 0;
                while (!rice.isExhausted()) {
                  RiceCoder.read(rice, parameter);
                  read++;
                }
                return read;
              });
      assertThat(values).isLessThanOrEqualTo(8 * bytes.length + 1);
      int[] symbols = new int[500];
      int there =
          Damages.bounded(
              little(bytes),
              "sparse " + round,
              () -> SparseCoder.read(new BitReader(bytes), symbols, 100, 400));
      assertThat(there).isBetween(0, 400);
      assertThat(Arrays.copyOf(symbols, 100)).containsOnly(0);
      assertThat(Arrays.copyOfRange(symbols, 400, 500)).containsOnly(0);
    }
  }

  /** Means, directions and components, and the sparse ones of wavelets. */
  @Test
  void unitsOfTransforms() {
    int[] lengths = new int[45];
    Arrays.fill(lengths, 61);
    for (int round = 0; round < Damages.rounds(); round++) {
      Random random = new Random(round);
      byte[] bytes = unit(random, 4 * lengths.length);
      boolean basis = random.nextBoolean();
      Quantization steps = random.nextInt(4) == 0 ? Quantizer.NONE : STEPS;
      Received dense = new Received(8, 45, lengths, basis, steps);
      Received sparse = Received.ofSparse(8, lengths, steps);
      for (Received received : List.of(dense, sparse)) {
        Decoding.Completeness completeness =
            Damages.bounded(
                little(bytes) + 32L * SHAPE.size(),
                "units " + round,
                () -> {
                  received.addUnits(new BitReader(bytes), 1 + random.nextInt(45));
                  return received.completeness();
                });
        assertThat(completeness).isNotEqualTo(Decoding.Completeness.COMPLETE);
        assertThat(Arrays.stream(received.means())).allMatch(mean -> mean >= 0 && mean <= 255);
        for (int k = 0; k < received.most(); k++) {
          assertThat(received.got(k).length()).isLessThanOrEqualTo(61);
        }
      }
    }
  }

  /** Random bytes, half of the time behind a code, an offset and a count that may well be sound. */
  private static byte[] unit(Random random, int codes) {
    byte[] bytes = Damages.bytes(random, 200);
    if (bytes.length > 4 && random.nextBoolean()) {
      bytes[0] = (byte) random.nextInt(Math.min(128, codes));
      bytes[1] = (byte) random.nextInt(20);
      bytes[2] = (byte) (1 + random.nextInt(40));
      bytes[3] = (byte) random.nextInt(60);
    }
    return bytes;
  }

  @Test
  void unitsOfJpeg() {
    JpegBlocks blocks = new JpegBlocks(SHAPE);
    for (int round = 0; round < Damages.rounds(); round++) {
      Random random = new Random(round);
      byte[] bytes = unit(random, blocks.count());
      JpegScan.Reader reader = new JpegScan.Reader(blocks, 1 + random.nextInt(blocks.count()));
      Decoding.Completeness completeness =
          Damages.bounded(
              little(bytes) + 32L * SHAPE.size(),
              "jpeg " + round,
              () -> {
                reader.addUnits(bytes, new BitReader(bytes));
                return reader.completeness();
              });
      assertThat(completeness).isNotEqualTo(Decoding.Completeness.COMPLETE);
      assertThat(reader.filled()).hasSize(64 * blocks.count());
      assertThat(blocks.inverse(reader.filled(), new FrequencySteps(50)).samples())
          .hasSize(SHAPE.size());
    }
  }

  /** The stream of programs believes no size beyond its limit. */
  @Test
  void byteStreams() {
    ByteStream stream = new ByteStream(0, 96);
    for (int round = 0; round < Damages.rounds(); round++) {
      Random random = new Random(round);
      byte[] first = Damages.bytes(random, 120);
      byte[] second = Damages.bytes(random, 120);
      for (byte[] packet : List.of(first, second)) {
        Arrays.fill(packet, 0, Math.min(4, packet.length), (byte) 0);
      }
      for (OnLoss onLoss : OnLoss.values()) {
        ByteStream.Arrived arrived =
            Damages.bounded(
                little(first) + little(second) + 3 * 100_000,
                "stream " + round,
                () -> stream.join(List.of(first, second), onLoss, 100_000));
        assertThat(arrived.bytes().length).isLessThanOrEqualTo(100_000);
      }
    }
  }
}
