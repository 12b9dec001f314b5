package linkworthy.codec;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.Collections;
import java.util.List;
import java.util.Random;
import java.util.function.Supplier;
import linkworthy.corpus.Picture;
import linkworthy.corpus.TestPattern;
import linkworthy.input.BadInput;
import linkworthy.input.YamlNode;
import linkworthy.link.Damages;
import linkworthy.link.Link;
import org.junit.jupiter.api.Test;
import tools.jackson.dataformat.yaml.YAMLMapper;

/**
 * What every codec promises. Extend it, give the study entries to be tested, and the registry is
 * asked for the codec like a study would.
 */
public abstract class CodecContractTest {
  private static final Link LINK = new Link(96, 23, Link.Order.BY_COMPONENT);

  private static final Training TRAINING =
      new Training(2, i -> TestPattern.cvp(50 + 30 * i, 40), "two patterns");

  /** Id of the family, as its service line and the study key have it. */
  protected abstract String family();

  /**
   * Entries of a study's codec list, as YAML with a key a line, that work on pictures of 40 x 24
   * and more.
   */
  protected abstract List<String> entries();

  /** The families that are asked for the codec; those on the class path unless overridden. */
  protected CodecFamilies families() {
    return CodecFamilies.installed();
  }

  /**
   * Whether a single packet without the others shows something. Overridden by codecs whose stream
   * is of use from its beginning only; for them a packet alone may be an outage.
   */
  protected boolean packetsDecodeAlone() {
    return true;
  }

  /** Codecs of every entry in both packet orders. */
  protected final List<Codec> codecs() {
    List<Codec> codecs = new ArrayList<>();
    for (Link.Order order : Link.Order.values()) {
      for (String entry : entries()) {
        families().read(YamlNode.parse("test", entry), new Link(96, 23, order)).stream()
            .map(codec -> codec.trainedOn(TRAINING))
            .forEach(codecs::add);
      }
    }
    return codecs;
  }

  /** Pictures that a codec accepts; only deep ones may be refused. */
  private static List<Picture> picturesFor(Codec codec) {
    return pictures().stream().filter(p -> accepts(codec, PictureShape.of(p))).toList();
  }

  private static boolean accepts(Codec codec, PictureShape shape) {
    try {
      codec.check(shape);
      return true;
    } catch (BadInput refusal) {
      assertThat(shape.bitDepth()).as(refusal.getMessage()).isGreaterThan(8);
      assertThat(refusal).hasMessageNotContaining("\n").hasMessageContaining("accepted: ");
      return false;
    }
  }

  private static List<Picture> pictures() {
    Picture pattern = TestPattern.cvp(61, 45);
    int[] deep = Arrays.stream(pattern.samples()).map(s -> s * 257).toArray();
    return List.of(
        pattern,
        TestPattern.cvp(40, 24),
        new Picture(40, 24, 8, new int[40 * 24]),
        new Picture(61, 45, 16, deep));
  }

  @Test
  void theRegistryKnowsTheFamily() {
    assertThat(families().all()).extracting(CodecFamily::id).contains(family());
    assertThat(
            families().all().stream()
                .filter(f -> f.id().equals(family()))
                .findAny()
                .orElseThrow()
                .help())
        .isNotBlank();
  }

  @Test
  void unknownKeysAreRefusedWithTheNearestOne() {
    for (String entry : entries()) {
      assertThatThrownBy(() -> families().read(YamlNode.parse("test", entry + "\nlabbel: x"), LINK))
          .isInstanceOf(BadInput.class)
          .hasMessageContaining("labbel")
          .hasMessageContaining("label");
    }
  }

  @Test
  void settingsReadBackGiveTheSameCodec() {
    for (Codec codec : codecs()) {
      String entry = new YAMLMapper().writeValueAsString(codec.settings());
      List<Codec> again = families().read(YamlNode.parse("test", entry), LINK);
      assertThat(again).hasSize(1);
      assertThat(again.get(0).settings()).isEqualTo(codec.settings());
    }
  }

  @Test
  void packetsKeepToTheLinkAndTheSameEncodingComesTwice() {
    for (Codec codec : codecs()) {
      for (Picture picture : picturesFor(codec)) {
        Encoding encoding = codec.encode(picture, new Memo());
        assertThat(encoding.payloads()).isNotEmpty().allMatch(p -> p.length > 0 && p.length <= 96);
        assertThat(encoding.payloadBits())
            .isEqualTo(8L * encoding.payloads().stream().mapToInt(p -> p.length).sum());
        assertThat(codec.encode(picture, new Memo()).payloads())
            .usingElementComparator(Arrays::compare)
            .containsExactlyElementsOf(encoding.payloads());
      }
    }
  }

  @Test
  void aSharedMemoChangesNoByte() {
    for (Picture picture : pictures()) {
      Memo shared = new Memo();
      for (Codec codec : codecs()) {
        if (!accepts(codec, PictureShape.of(picture))) {
          continue;
        }
        assertThat(codec.encode(picture, shared).payloads())
            .usingElementComparator(Arrays::compare)
            .containsExactlyElementsOf(codec.encode(picture, new Memo()).payloads());
      }
    }
  }

  @Test
  void allPacketsInAnyOrderAndTwiceDecodeAlike() {
    for (Codec codec : codecs()) {
      for (Picture picture : picturesFor(codec)) {
        PictureShape shape = PictureShape.of(picture);
        List<byte[]> packets = codec.encode(picture, new Memo()).payloads();
        Decoding plain = codec.decode(shape, packets);
        List<byte[]> twice = new ArrayList<>(packets);
        twice.addAll(packets);
        Collections.reverse(twice);
        Decoding mixed = codec.decode(shape, twice);
        assertThat(plain.completeness()).isEqualTo(Decoding.Completeness.COMPLETE);
        assertThat(mixed.completeness()).isEqualTo(Decoding.Completeness.COMPLETE);
        assertThat(mixed.picture().samples()).isEqualTo(plain.picture().samples());
        assertThat(PictureShape.of(plain.picture())).isEqualTo(shape);
      }
    }
  }

  /** With one memo for all, so that pictures are built on each other, up and down again. */
  @Test
  void theWholePictureIsWhatAllPacketsDecodeTo() {
    for (Picture picture : pictures()) {
      Memo shared = new Memo();
      List<Codec> there = new ArrayList<>(codecs());
      there.removeIf(codec -> !accepts(codec, PictureShape.of(picture)));
      List<Codec> back = new ArrayList<>(there);
      Collections.reverse(back);
      there.addAll(back);
      for (Codec codec : there) {
        Encoding encoding = codec.encode(picture, shared);
        Supplier<Picture> whole = encoding.whole();
        if (whole != null) {
          assertThat(whole.get().samples())
              .as(codec.label())
              .isEqualTo(
                  codec.decode(PictureShape.of(picture), encoding.payloads()).picture().samples());
        }
      }
    }
  }

  @Test
  void nothingReceivedIsAnOutageAndShowsMidGrey() {
    for (Codec codec : codecs()) {
      Decoding nothing = codec.decode(new PictureShape(61, 45, 8), List.of());
      assertThat(nothing.completeness()).isEqualTo(Decoding.Completeness.NOTHING);
      assertThat(nothing.picture().samples()).containsOnly(128);
    }
  }

  @Test
  void everySinglePacketDecodesAlone() {
    for (Codec codec : codecs()) {
      Picture picture = TestPattern.cvp(61, 45);
      List<byte[]> packets = codec.encode(picture, new Memo()).payloads();
      for (byte[] packet : packets) {
        Decoding alone = codec.decode(PictureShape.of(picture), List.of(packet));
        if (packets.size() == 1) {
          assertThat(alone.completeness()).isEqualTo(Decoding.Completeness.COMPLETE);
        } else if (packetsDecodeAlone()) {
          assertThat(alone.completeness()).isEqualTo(Decoding.Completeness.PARTIAL);
        } else {
          assertThat(alone.completeness()).isNotEqualTo(Decoding.Completeness.COMPLETE);
        }
      }
    }
  }

  /** Random damages tried; {@code -Dlinkworthy.fuzz=N} sets another number. */
  protected int damages() {
    return Damages.rounds();
  }

  /**
   * No damage makes a decoder throw, loop, give a picture of another size, or take more memory than
   * 2 MiB and 200 bytes for each sample and each byte that arrived, all short-lived objects
   * included.
   */
  @Test
  void damagedStreamsGiveAPictureOfTheRightSize() {
    List<Codec> codecs = codecs();
    Picture picture = TestPattern.cvp(61, 45);
    Picture another = TestPattern.cvp(40, 24);
    PictureShape shape = PictureShape.of(picture);
    List<List<byte[]>> streams = new ArrayList<>();
    List<byte[]> foreign = new ArrayList<>();
    for (Codec codec : codecs) {
      streams.add(codec.encode(picture, new Memo()).payloads());
      foreign.addAll(streams.get(streams.size() - 1));
      foreign.addAll(codec.encode(another, new Memo()).payloads());
      assertThat(codec.decode(shape, foreign).picture().size()).isEqualTo(picture.size());
    }
    for (int trial = 0; trial < damages(); trial++) {
      Random random = new Random(trial);
      int which = random.nextInt(codecs.size());
      List<byte[]> arrived = Damages.of(streams.get(which), foreign, random);
      long bytes = arrived.stream().mapToLong(p -> p.length).sum();
      Decoding decoding =
          Damages.bounded(
              (2 << 20) + 200 * (bytes + shape.size()),
              codecs.get(which).label() + ", damage " + trial,
              () -> codecs.get(which).decode(shape, arrived));
      assertThat(PictureShape.of(decoding.picture())).isEqualTo(shape);
    }
  }
}
