package linkworthy.trial;

import static org.assertj.core.api.Assertions.assertThat;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.EnumSet;
import java.util.List;
import java.util.Random;
import linkworthy.codec.Codec;
import linkworthy.codec.Encoding;
import linkworthy.codec.PictureShape;
import linkworthy.input.YamlNode;
import linkworthy.link.Channel;
import linkworthy.link.Damages;
import linkworthy.link.HammingCode;
import linkworthy.link.Importance;
import linkworthy.link.Link;
import linkworthy.link.Protection;
import linkworthy.noise.Impairment;
import linkworthy.study.CodecChoice;
import linkworthy.study.StudyReader;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.ValueSource;

/**
 * Damage on the whole way: three planes, halved colour, a frame check or none, protection. Memory
 * is at most 4 MiB and 200 bytes for each sample and each byte that was sent.
 */
class DamagedTrialsTest {
  private static final Link LINK = new Link(96, 23, Link.Order.BY_COMPONENT);

  private static Plan plan(String codec, String planes) {
    String study =
        "name: damage\npictures: {select: [fig, dandelion], longest-side: 48, planes: "
            + planes
            + "}\nimpairments:\n  - {noise: burst-loss, loss-rate: 0.1}\ncodecs:\n  - "
            + codec
            + "\n";
    return Plan.of(StudyReader.read(YamlNode.parse("damage.yaml", study), Path.of("")));
  }

  /** A picture's way into packets. */
  private record Sender(Codec codec, Subject subject, Encoding encoding) {
    static Sender of(Plan plan, int picture) {
      Subject subject = new Subject(plan.planes(plan.pictures().get(picture)), plan.study());
      CodecChoice choice = plan.study().codecs().get(0);
      return new Sender(
          choice.codec(),
          subject,
          subject.coding().encode(choice.codec(), subject.coded(), subject.memos()));
    }

    void assertDecodes(List<byte[]> arrived, String what) {
      long bytes = arrived.stream().mapToLong(p -> p.length).sum();
      PlaneCoding.Decoded decoded =
          Damages.bounded(
              (4 << 20) + 200 * (bytes + 3L * subject.picture().size()),
              what,
              () ->
                  subject
                      .coding()
                      .decode(
                          (plane, shape, packets) ->
                              PlaneCoding.of(codec, plane).decode(shape, packets),
                          subject.shapes(),
                          arrived));
      assertThat(decoded.failure()).isNull();
      assertThat(decoded.planes())
          .hasSameSizeAs(subject.planes())
          .allMatch(p -> PictureShape.of(p).equals(PictureShape.of(subject.picture())), what);
    }
  }

  @ParameterizedTest
  @ValueSource(
      strings = {
        "{transform: pca, over: rows, keep: 8}",
        "{transform: dct, over: tiles, grid: 2x2, keep: 6}",
        "{jpeg: baseline, quality: 40}",
        "{wavelet: cdf-9-7}"
      })
  void damagedPacketsOfAllPlanes(String codec) {
    Plan plan = plan(codec, "all, chroma: 4:2:0");
    Sender sender = Sender.of(plan, 0);
    List<byte[]> foreign = new ArrayList<>(Sender.of(plan, 1).encoding().payloads());
    foreign.addAll(sender.encoding().payloads());
    sender.assertDecodes(foreign, "warm");
    for (int round = 0; round < Damages.rounds(); round++) {
      sender.assertDecodes(
          Damages.of(sender.encoding().payloads(), foreign, new Random(round)),
          codec + ", damage " + round);
    }
  }

  /** Independent flips of a rate from 1 in 30000 to 1 in 3, without a frame check and with one. */
  @ParameterizedTest
  @ValueSource(
      strings = {
        "{transform: pca, over: rows, keep: 8}",
        "{transform: dct, over: tiles, grid: 2x2, keep: 6}",
        "{jpeg: baseline, quality: 40}",
        "{wavelet: cdf-9-7}"
      })
  void damagedBitsReachTheDecoder(String codec) {
    Sender sender = Sender.of(plan(codec, "luma"), 0);
    List<Protection> protections =
        List.of(
            Protection.NONE,
            protection(2, null, 0),
            protection(1, null, 2),
            protection(1, new Protection.ErasureCode(12, 8, 2), 0),
            new Protection(
                List.of(
                    new Protection.Rule(
                        EnumSet.allOf(Importance.class), 1, null, new HammingCode(8), 0, 5))));
    sender.assertDecodes(sender.encoding().payloads(), "warm");
    for (int round = 0; round < Damages.rounds(); round++) {
      Random random = new Random(round);
      Impairment.Errors errors = errors(random);
      int checkBits = random.nextInt(4) == 0 ? 16 : 0;
      Passage.Crossing crossing = Passage.flipping(errors, checkBits, 23, 255).open();
      Channel.Outcome outcome =
          new Channel(LINK, protections.get(random.nextInt(protections.size())))
              .send(sender.encoding().packets(), crossing);
      sender.assertDecodes(outcome.payloads(), codec + ", bits " + round);
    }
  }

  private static Protection protection(
      int repeat, Protection.@org.jspecify.annotations.Nullable ErasureCode code, int retransmit) {
    return new Protection(
        List.of(new Protection.Rule(EnumSet.allOf(Importance.class), repeat, code, retransmit, 5)));
  }

  private static Impairment.Errors errors(Random random) {
    double rate = StrictMath.pow(10, -0.5 - 4 * random.nextDouble());
    return (index, bits) -> {
      java.util.BitSet flipped = new java.util.BitSet();
      for (double at = gap(random, rate); at < bits; at += 1 + gap(random, rate)) {
        flipped.set((int) at);
      }
      return flipped;
    };
  }

  private static double gap(Random random, double rate) {
    return Math.floor(StrictMath.log(1 - random.nextDouble()) / StrictMath.log1p(-rate));
  }
}
