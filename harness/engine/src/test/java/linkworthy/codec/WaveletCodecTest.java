package linkworthy.codec;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.stream.IntStream;
import linkworthy.corpus.Picture;
import linkworthy.corpus.TestPattern;
import linkworthy.input.BadInput;
import linkworthy.input.YamlNode;
import linkworthy.link.Importance;
import linkworthy.link.Link;
import linkworthy.link.Packet;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.EnumSource;
import org.junit.jupiter.params.provider.ValueSource;

class WaveletCodecTest extends CodecContractTest {
  private static final Link LINK = new Link(96, 23, Link.Order.BY_COMPONENT);

  @Override
  protected String family() {
    return "wavelet";
  }

  @Override
  protected List<String> entries() {
    return List.of(
        "wavelet: cdf-9-7\nstep: [2, 16, none]",
        "wavelet: cdf-5-3\nstep: [none, 1, 8]",
        "wavelet: cdf-9-7\nlevels: 10",
        "wavelet: cdf-5-3\nlevels: 1\nbits-per-pixel: 3",
        "wavelet: cdf-9-7\nbits-per-pixel: [0.5, 2]");
  }

  private static Codec codec(String entry, Link link) {
    List<Codec> codecs = CodecFamilies.installed().read(YamlNode.parse("study.yaml", entry), link);
    assertThat(codecs).hasSize(1);
    return codecs.get(0);
  }

  private static Codec codec(String entry) {
    return codec(entry, LINK);
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "{wavelet: cdf-9-7} | cdf-9-7 levels5 step8",
        "{wavelet: cdf-5-3, levels: 3, step: none} | cdf-5-3 levels3 stepnone",
        "{wavelet: cdf-9-7, bits-per-pixel: 0.5} | cdf-9-7 levels5 0.5bpp",
        "{wavelet: cdf-9-7, step: 2, label: ours} | ours"
      })
  void labelsFollowFromTheParameters(String entry, String label) {
    assertThat(codec(entry).label()).isEqualTo(label);
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "{wavelet: cdf-9-8} | did you mean 'cdf-9-7'",
        "{wavelet: cdf-9-7, levels: 0} | '0'; accepted: a whole number from 1",
        "{wavelet: cdf-9-7, levels: 11} | accepted: a whole number from 1",
        "{wavelet: cdf-9-7, step: 0} | '0'; accepted: a step in grey levels",
        "{wavelet: cdf-9-7, step: 8, bits-per-pixel: 1} | one of the two",
        "{wavelet: cdf-9-7, step: [4, 8], label: x} | names several codecs",
        "{wavelet: cdf-9-7, level: 3} | did you mean 'levels'"
      })
  void wrongEntriesAreRefusedInOneLine(String entry, String complaint) {
    assertThatThrownBy(
            () -> CodecFamilies.installed().read(YamlNode.parse("study.yaml", entry), LINK))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining(complaint)
        .hasMessageStartingWith("study.yaml, line 1: ")
        .hasMessageNotContaining("\n");
  }

  private static double[] every(double[] line, int first) {
    return IntStream.range(0, line.length)
        .filter(i -> i % 2 == first)
        .mapToDouble(i -> line[i])
        .toArray();
  }

  /** T.800 Annex F (from memory); recomputed by hand from its two lifting rules. */
  @Test
  void theReversibleTransformOfALine() {
    double[] line = {10, 12, 14, 20, 30, 28, 26, 25};
    Wavelet.CDF_5_3.forward(line, line.length, true);
    assertThat(every(line, 0)).containsExactly(10, 14, 30, 26);
    assertThat(every(line, 1)).containsExactly(0, -2, 0, -1);
  }

  /** Low-pass taps from the centre outwards: PyWavelets' bior4.4 over the root of 2. */
  @Test
  void lowPassTapsOfTheNineSeven() {
    double[] taps = {0.6029490182, 0.2668641184, -0.07822326653, -0.01686411844, 0.02674875741};
    for (int k = 0; k < taps.length; k++) {
      for (int sign = -1; sign <= 1; sign += 2) {
        double[] line = new double[32];
        line[16 + sign * k] = 1;
        Wavelet.CDF_9_7.forward(line, 32, false);
        assertThat(line[16]).isCloseTo(taps[k], within(1e-9));
      }
    }
  }

  /**
   * Recomputed independently with PyWavelets 1.1.1, edges included: {@code x = [(7*i*i + 3*i) % 64
   * for i in range(16)]; a, d = pywt.dwt(x, 'bior4.4', mode='reflect'); a[2:10] / sqrt(2), -d[2:10]
   * * sqrt(2)}, where {@code d} has the opposite sign of T.800.
   */
  @Test
  void theNineSevenOfALine() {
    double[] line = new double[16];
    Arrays.setAll(line, i -> (7 * i * i + 3 * i) % 64);
    Wavelet.CDF_9_7.forward(line, line.length, false);
    assertThat(every(line, 0))
        .containsExactly(
            new double[] {
              2.9581252391, 20.6801485881, 50.8340203737, 31.324586787,
              28.1722686841, 29.5396517902, 24.1281244532, 8.8421367042
            },
            within(1e-8));
    assertThat(every(line, 1))
        .containsExactly(
            new double[] {
              -1.4086071607, -49.5241785178, 27.6827856787, 29.8413928394,
              -11.6827856785, 27.6827856787, -9.6748068901, 18.1668281016
            },
            within(1e-8));
  }

  /**
   * Gains of the lowest, a right and a diagonal band, in the middle of a large picture. Recomputed
   * independently with PyWavelets 1.1.1: the norm of {@code pywt.idwt} of a 1 in one band, up to
   * the picture with 'periodization', times the root of 2 for each low and over it for each high
   * step, of bior4.4 and bior2.2; products of both directions.
   */
  @ParameterizedTest
  @CsvSource({
    "CDF_9_7, 1, 1.96590731, 1.01128648, 0.52021798",
    "CDF_9_7, 2, 4.12240987, 1.99681246, 0.96721581",
    "CDF_9_7, 5, 33.92492680, 17.16672576, 8.68672393",
    "CDF_5_3, 1, 1.50000000, 1.03832798, 0.71875000",
    "CDF_5_3, 2, 2.75000000, 1.59221740, 0.92187500",
    "CDF_5_3, 5, 21.34375000, 11.33671280, 6.02148438"
  })
  void gainsOfTheBands(Wavelet wavelet, int level, double lowest, double right, double diagonal) {
    Subbands subbands = new Subbands(wavelet, false, new PictureShape(1024, 1024, 8), level);
    List<Subbands.Band> bands = subbands.bands();
    assertThat(bands).hasSize(1 + 3 * level);
    assertThat(bands.get(0).gain()).isCloseTo(lowest, within(1e-7 * lowest));
    assertThat(bands.get(1).gain()).isCloseTo(right, within(1e-7 * right));
    assertThat(bands.get(2).gain()).isCloseTo(right, within(1e-7 * right));
    assertThat(bands.get(3).gain()).isCloseTo(diagonal, within(1e-7 * diagonal));
  }

  @ParameterizedTest
  @CsvSource({
    "1, 1", "1, 7", "7, 1", "2, 1", "2, 2", "3, 5", "61, 45", "64, 64", "65, 33", "33, 2"
  })
  void theInverseGivesThePictureBack(int width, int height) {
    int[] samples = TestPattern.cvp(width, height).samples();
    double[] picture = Arrays.stream(samples).mapToDouble(s -> s - 128).toArray();
    for (int levels : new int[] {1, 2, 5, 10}) {
      for (Wavelet wavelet : Wavelet.values()) {
        PictureShape shape = new PictureShape(width, height, 8);
        double[] values = picture.clone();
        new Subbands(wavelet, false, shape, levels).forward(values);
        new Subbands(wavelet, false, shape, levels).inverse(values);
        assertThat(values).containsExactly(picture, within(1e-9));
      }
      Subbands reversible =
          new Subbands(Wavelet.CDF_5_3, true, new PictureShape(width, height, 8), levels);
      double[] values = picture.clone();
      reversible.forward(values);
      assertThat(Arrays.stream(values)).allMatch(v -> v == Math.rint(v));
      reversible.inverse(values);
      assertThat(values).containsExactly(picture);
    }
  }

  @ParameterizedTest
  @EnumSource(Link.Order.class)
  void bandsAndRegionsHoldEachCoefficientOnce(Link.Order order) {
    for (int width : new int[] {1, 2, 31, 33, 64, 100}) {
      for (int levels : new int[] {1, 5, 7}) {
        PictureShape shape = new PictureShape(width, 45, 8);
        WaveletLayout layout =
            new WaveletLayout(
                new Subbands(Wavelet.CDF_9_7, true, shape, levels), shape, levels, order);
        double[] seen = new double[shape.size()];
        for (int k = 0; k < layout.components(); k++) {
          double[] ones = layout.gather(new double[shape.size()], k);
          Arrays.fill(ones, 1);
          double[] here = new double[shape.size()];
          layout.scatter(ones, k, here);
          Arrays.setAll(seen, i -> seen[i] + here[i]);
        }
        assertThat(seen).containsOnly(1);
      }
    }
  }

  private static Decoding through(Codec codec, Picture picture) {
    return codec.decode(PictureShape.of(picture), codec.encode(picture, new Memo()).payloads());
  }

  @ParameterizedTest
  @ValueSource(
      strings = {
        "{wavelet: cdf-5-3, step: none}",
        "{wavelet: cdf-5-3, step: 1, levels: 2}",
        "{wavelet: cdf-9-7, step: none}"
      })
  void nothingIsLostWithoutAStep(String entry) {
    int[] deep =
        IntStream.range(0, 50 * 37).map(i -> (TestPattern.noise(i, 3) + 16) * 2113).toArray();
    for (Picture picture :
        List.of(TestPattern.cvp(61, 45), TestPattern.cvp(1, 1), new Picture(50, 37, 16, deep))) {
      for (Link.Order order : Link.Order.values()) {
        Codec codec = codec(entry, new Link(96, 23, order));
        assertThat(through(codec, picture).picture().samples()).isEqualTo(picture.samples());
      }
    }
  }

  private static double meanSquaredError(Picture a, Picture b) {
    double sum = 0;
    for (int i = 0; i < a.size(); i++) {
      double e = a.samples()[i] - b.samples()[i];
      sum += e * e;
    }
    return sum / a.size();
  }

  /**
   * The expected error of uniform quantisation at high rate is step^2 / 12 a coefficient (Bennett
   * 1948, from memory), and with equal gains as much a sample, rounding aside (1 / 12). The bands
   * are not quite orthogonal and the pattern's finest values are not many steps wide: within a
   * tenth.
   */
  @ParameterizedTest
  @EnumSource(Wavelet.class)
  void anErrorInACoefficientIsAsLargeInThePicture(Wavelet wavelet) {
    Picture picture = TestPattern.cvp(256);
    for (double step : new double[] {1.5, 3}) {
      Codec codec = WaveletCodec.of("", wavelet, 5, new Quantizer(step), LINK);
      double expected = step * step / 12 + 1.0 / 12;
      assertThat(meanSquaredError(picture, through(codec, picture).picture()) / expected)
          .isBetween(0.9, 1.1);
    }
  }

  @Test
  void theFinestStepWithinTheTargetIsFound() {
    Picture picture = TestPattern.cvp(256);
    for (double target : new double[] {0.5, 1, 2}) {
      Encoding encoding =
          codec("{wavelet: cdf-9-7, bits-per-pixel: " + target + "}").encode(picture, new Memo());
      assertThat(LINK.sentBits(encoding.packets().size(), encoding.payloadBits()))
          .isLessThanOrEqualTo((long) (target * picture.size()));
      double finer = Double.parseDouble(encoding.step()) / StrictMath.pow(2, 0.125);
      Encoding next =
          WaveletCodec.of("", Wavelet.CDF_9_7, 5, new Quantizer(finer), LINK)
              .encode(picture, new Memo());
      assertThat(LINK.sentBits(next.packets().size(), next.payloadBits()))
          .isGreaterThan((long) (target * picture.size()));
    }
  }

  @Test
  void aLostPacketTakesPartOfABandOrOneRegion() {
    Picture picture = TestPattern.cvp(256);
    PictureShape shape = PictureShape.of(picture);
    for (Link.Order order : Link.Order.values()) {
      Codec codec = codec("{wavelet: cdf-9-7}", new Link(96, 23, order));
      List<byte[]> packets = new ArrayList<>(codec.encode(picture, new Memo()).payloads());
      int[] whole = codec.decode(shape, packets).picture().samples();
      packets.remove(packets.size() / 2);
      Decoding damaged = codec.decode(shape, packets);
      assertThat(damaged.completeness()).isEqualTo(Decoding.Completeness.PARTIAL);
      int[] shown = damaged.picture().samples();
      int[] hurt = IntStream.range(0, whole.length).filter(i -> whole[i] != shown[i]).toArray();
      int columns =
          Arrays.stream(hurt).map(i -> i % 256).max().orElseThrow()
              - Arrays.stream(hurt).map(i -> i % 256).min().orElseThrow();
      if (order == Link.Order.BY_REGION) {
        assertThat(columns).as("two regions at most, and their surroundings").isLessThan(130);
      } else {
        assertThat(columns).isGreaterThan(200);
      }
    }
  }

  @Test
  void theLowestBandIsFilledFromItsNeighboursOrMidGrey() {
    int[] samples = new int[128 * 128];
    for (int i = 0; i < samples.length; i++) {
      samples[i] = 60 + i / 128;
    }
    Picture picture = new Picture(128, 128, 8, samples);
    Codec codec = codec("{wavelet: cdf-5-3, levels: 3}", new Link(96, 0, Link.Order.BY_COMPONENT));
    List<Packet> packets = codec.encode(picture, new Memo()).packets();
    List<byte[]> lowest =
        packets.stream()
            .filter(p -> p.importance() == Importance.HEADER)
            .map(Packet::payload)
            .toList();
    assertThat(lowest).hasSizeGreaterThan(2);
    List<byte[]> arrived = new ArrayList<>(packets.stream().map(Packet::payload).toList());
    arrived.remove(lowest.get(1));
    int[] shown = codec.decode(PictureShape.of(picture), arrived).picture().samples();
    for (int i = 0; i < samples.length; i++) {
      assertThat(shown[i]).isBetween(samples[i] - 12, samples[i] + 12);
    }
    arrived.removeAll(lowest);
    int[] grey = codec.decode(PictureShape.of(picture), arrived).picture().samples();
    assertThat(Arrays.stream(grey)).allMatch(s -> Math.abs(s - 128) < 30);
  }

  /** What a run costs is what it writes, and reading gives it back. */
  @ParameterizedTest
  @ValueSource(ints = {1, 3, 40, 2000})
  void sparseValuesCostWhatTheyWriteAndReadBack(int rarity) {
    int[] values = new int[300];
    for (int i = 0; i < values.length; i++) {
      int noise = TestPattern.noise(i, rarity);
      values[i] = (noise + 16) % rarity == 0 ? noise * rarity : 0;
    }
    for (int count : new int[] {1, 2, 17, 300}) {
      SparseCoder.Cost cost = new SparseCoder.Cost(1 << 17);
      for (int i = 0; i < count; i++) {
        cost.add(RiceCoder.fold(values[i]));
      }
      BitWriter out = new BitWriter();
      SparseCoder.write(out, values, 0, count, cost);
      byte[] bytes = out.toByteArray();
      assertThat((cost.least() + 7) / 8).isEqualTo(bytes.length);
      int[] read = new int[count];
      assertThat(SparseCoder.read(new BitReader(bytes), read, 0, count)).isEqualTo(count);
      assertThat(read).isEqualTo(Arrays.copyOf(values, count));
      int[] cut = new int[count];
      byte[] shorter = Arrays.copyOf(bytes, bytes.length / 2);
      int there = SparseCoder.read(new BitReader(shorter), cut, 0, count);
      assertThat(Arrays.copyOf(cut, there)).isEqualTo(Arrays.copyOf(values, there));
    }
  }
}
