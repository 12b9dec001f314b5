package linkworthy.codec;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;
import static org.assertj.core.api.Assertions.within;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.Map;
import java.util.TreeMap;
import linkworthy.corpus.Picture;
import linkworthy.corpus.TestPattern;
import linkworthy.input.BadInput;
import linkworthy.input.YamlNode;
import linkworthy.link.Link;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class TransformCodecTest extends CodecContractTest {
  private static final Link LINK = new Link(96, 23, Link.Order.BY_COMPONENT);

  @Override
  protected String family() {
    return "transform";
  }

  @Override
  protected List<String> entries() {
    return List.of(
            "{transform: pca, over: rows, keep: [1, 5, 20], step: 8}",
            "{transform: pca, over: blocks, keep: 16, step: none}",
            "{transform: pca, over: rows, share: 0.85, step: 2}",
            "{transform: dct, over: blocks, keep: [1, 16], step: 8}",
            "{transform: dct, over: rows, keep: 7, step: 4}",
            "{transform: wht, over: blocks, keep: [1, 16], step: 8}",
            "{transform: wht, over: blocks, side: 4, bits-per-pixel: 2, step: none}",
            "{transform: pca, over: rows, bits-per-pixel: [0.05, 1, 6], step: 8}",
            "{transform: dct, over: blocks, bits-per-pixel: 1.5, step: 8}",
            "{transform: pca, over: rows, noise-floor: [true, 5], step: 8}",
            "{transform: pca, basis: shared, over: blocks, keep: [4, 64], step: 8}",
            "{transform: dct, keep: 64, weights: luminance, quality: [10, 50, 90]}",
            "{transform: mean, over: rows, step: 16}",
            "{transform: mean, over: blocks, step: 16}",
            "{transform: mean, keep: 0}",
            "{transform: pca, over: tiles, grid: 3x2, keep: 5, step: 8}",
            "{transform: dct, over: tiles, grid: 2x1, keep: 9, step: 4}")
        .stream()
        .map(flow -> flow.substring(1, flow.length() - 1).replaceAll(", (?=[a-z-]+:)", "\n"))
        .toList();
  }

  private static Codec codec(String entry) {
    List<Codec> codecs = CodecFamilies.installed().read(YamlNode.parse("test", entry), LINK);
    assertThat(codecs).hasSize(1);
    return codecs.get(0);
  }

  private static Decoding through(Codec codec, Picture picture) {
    return codec.decode(PictureShape.of(picture), codec.encode(picture, new Memo()).payloads());
  }

  private static double meanSquaredError(Picture a, Picture b) {
    double sum = 0;
    for (int i = 0; i < a.size(); i++) {
      double e = a.samples()[i] - b.samples()[i];
      sum += e * e;
    }
    return sum / a.size();
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "{transform: pca, over: rows, keep: 16, step: 8} | pca rows K16 step8",
        "{transform: mean, step: 16} | mean rows step16",
        "{transform: dct, keep: 16, step: 8} | dct blocks8 K16 step8",
        "{transform: pca, share: 0.85, step: 0.5} | pca rows share0.85 step0.5",
        "{transform: mean, keep: 0} | mean rows K0",
        "{transform: dct, side: 4, keep: 3, step: none} | dct blocks4 K3 stepnone",
        "{transform: dct, keep: 3, label: ' ours '} | ours",
        "{transform: dct, keep: 3, step: 2.0E-3} | dct blocks8 K3 step0.002",
        "{transform: pca, over: tiles, grid: 3x2, keep: 5} | pca tiles3x2 K5 step8",
        "{transform: wht, keep: 16} | wht blocks8 K16 step8",
        "{transform: wht, over: rows, share: 0.9} | wht rows share0.9 step8",
        "{transform: pca, bits-per-pixel: 0.5} | pca rows bpp0.5 step8",
        "{transform: dct, bits-per-pixel: 1} | dct blocks8 bpp1 step8",
        "{transform: pca, noise-floor: true} | pca rows floor step8",
        "{transform: pca, over: blocks, noise-floor: 5} | pca blocks8 floor5 step8",
        "{transform: dct, keep: 64, weights: luminance, quality: 50} | dct blocks8 K64 q50"
      })
  void labelsFollowFromTheParameters(String entry, String label) {
    assertThat(codec(entry).label()).isEqualTo(label);
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "{transform: pcs, keep: 4} | did you mean 'pca'",
        "{transform: pca} | none of keep, share",
        "{transform: pca, over: tiles, keep: 4} | missing key 'grid'",
        "{transform: pca, over: tiles, grid: 17x16, keep: 4} | up to 256 tiles",
        "{transform: pca, over: tiles, grid: four, keep: 4} | columns x rows",
        "{transform: pca, grid: 2x2, keep: 4} | belongs to 'over: tiles'",
        "{transform: pca, over: tiles, grid: 2x2, side: 8, keep: 4} | belongs to 'over: blocks'",
        "{transform: pca, over: tiles, grid: 2x2, basis: shared, keep: 4} | accepted over tiles: own",
        "{transform: pca, keep: 4, share: 0.5} | one of the two",
        "{transform: pca, keep: []} | an empty list",
        "{transform: pca, keep: -1} | '-1'; accepted: a whole number from 0",
        "{transform: pca, keep: 2.5} | '2.5'; accepted: a whole number",
        "{transform: pca, share: 1.5} | '1.5'; accepted: a share above 0, up to 1",
        "{transform: pca, keep: 4, step: 0} | '0'; accepted: a step",
        "{transform: pca, keep: 4, step: .nan} | accepted: a step",
        "{transform: pca, keep: 4, stepp: 1} | did you mean 'step'",
        "{transform: wht, side: 6, keep: 4} | '6'; accepted: 2, 4, 8, 16, 32 or 64",
        "{transform: pca, bits-per-pixel: 0} | '0'; accepted: sent bits per pixel above 0",
        "{transform: pca, bits-per-pixel: 1, keep: 4} | stands beside 'keep'",
        "{transform: mean, bits-per-pixel: 1} | does not go with 'transform: mean'",
        "{transform: pca, noise-floor: false} | 'false'; accepted: true, or the noise",
        "{transform: pca, noise-floor: -1} | '-1'; accepted: true, or the noise",
        "{transform: dct, noise-floor: true} | accepted with 'transform: pca'",
        "{transform: dct, keep: 4, weights: luminance} | missing key 'quality'",
        "{transform: dct, keep: 4, quality: 50} | stands without 'weights'",
        "{transform: dct, keep: 4, weights: luminance, quality: 0} | '0'; accepted: a whole number",
        "{transform: dct, keep: 4, weights: chroma, quality: 50} | 'chroma'",
        "{transform: dct, keep: 4, weights: luminance, quality: 9, step: 8} | beside 'weights'",
        "{transform: dct, side: 4, keep: 4, weights: luminance, quality: 50} | 'transform: dct'",
        "{transform: wht, keep: 4, weights: luminance, quality: 50} | with 'transform: dct', side 8",
        "{transform: dct, basis: shared, keep: 4} | does not go with 'transform: dct'",
        "{transform: pca, basis: shard, keep: 4} | did you mean 'shared'",
        "{transform: pca, basis: shared, noise-floor: 4} | accepted with 'transform: pca'",
        "{transform: mean, keep: 4} | accepted: 0 (the means alone)",
        "{transform: pca, over: rows, side: 8, keep: 4} | belongs to 'over: blocks'",
        "{transform: pca, keep: [4, 8], label: x} | names several codecs",
        "{transform: dct, keep: 4, label: \"a\\nb\"} | one line of up to 64 characters",
        "{transform: dct, keep: 4, label: \"a\\u2028b\"} | one line of up to 64 characters",
        "{transform: dct, keep: 4, label: "
            + "aaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaaa"
            + "} | one line of up to 64 characters",
        "{keep: 4} | names no codec"
      })
  void wrongEntriesAreRefusedInOneLine(String entry, String complaint) {
    assertThatThrownBy(
            () -> CodecFamilies.installed().read(YamlNode.parse("study.yaml", entry), LINK))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining(complaint)
        .hasMessageStartingWith("study.yaml, line 1: ")
        .hasMessageNotContaining("\n");
  }

  @Test
  void keepingMoreThanThereIsIsRefused() {
    assertThatThrownBy(() -> codec("{transform: pca, keep: 46}").check(new PictureShape(61, 45, 8)))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("46")
        .hasMessageContaining("0 to 45");
    assertThatThrownBy(() -> codec("{transform: dct, keep: 4}").check(new PictureShape(61, 7, 8)))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("smaller than a block");
    assertThatThrownBy(
            () -> codec("{transform: wht, over: rows, keep: 4}").check(new PictureShape(64, 45, 8)))
        .isInstanceOf(BadInput.class)
        .hasMessageContaining("has 45 rows; accepted for wht over rows: a power of two");
    codec("{transform: wht, over: rows, keep: 4}").check(new PictureShape(45, 64, 8));
  }

  /** Every basis is orthonormal, so keeping everything unquantised loses nothing. */
  @ParameterizedTest
  @ValueSource(
      strings = {
        "{transform: pca, over: rows, keep: 45, step: none}",
        "{transform: pca, over: blocks, keep: 64, step: none}",
        "{transform: dct, over: rows, keep: 45, step: none}",
        "{transform: dct, over: blocks, keep: 64, step: none}",
        "{transform: wht, over: blocks, keep: 64, step: none}",
        "{transform: wht, over: blocks, side: 16, keep: 256, step: none}",
        "{transform: mean, over: rows, step: none}",
        "{transform: mean, over: blocks, step: 1}"
      })
  void keepingEverythingIsLossless(String entry) {
    Picture picture = TestPattern.cvp(61, 45);
    assertThat(through(codec(entry), picture).picture().samples()).isEqualTo(picture.samples());
  }

  /** By trying every K: the largest that stays within the target, overhead included. */
  @ParameterizedTest
  @ValueSource(
      strings = {
        "transform: pca\nover: rows",
        "transform: pca\nover: blocks",
        "transform: dct\nover: blocks",
        "transform: wht\nover: rows"
      })
  void aTargetRateIsUsedUp(String transform) {
    Picture picture = TestPattern.cvp(72, 64);
    for (Link.Order order : Link.Order.values()) {
      Link link = new Link(96, 23, order);
      double[] rates = new double[65];
      Memo memo = new Memo();
      for (int k = 0; k <= 64; k++) {
        Encoding encoding =
            CodecFamilies.installed()
                .read(YamlNode.parse("test", transform + "\nkeep: " + k), link)
                .get(0)
                .encode(picture, memo);
        rates[k] =
            (double) link.sentBits(encoding.packets().size(), encoding.payloadBits())
                / picture.size();
      }
      for (double target : new double[] {0.01, 0.3, 0.5, 1, rates[3], rates[20], 4, 1000}) {
        int best = 0;
        for (int k = 0; k <= 64; k++) {
          best = rates[k] <= target ? k : best;
        }
        Codec codec =
            CodecFamilies.installed()
                .read(YamlNode.parse("test", transform + "\nbits-per-pixel: " + target), link)
                .get(0);
        int kept = codec.encode(picture, memo).keep();
        assertThat(rates[kept]).as("%s %s at %s", transform, order, target).isEqualTo(rates[best]);
      }
    }
  }

  /** A constant row costs its mean; a row equal to another up to a constant adds no component. */
  @Test
  void repeatedAndConstantRowsAddNoComponent() {
    int width = 64;
    int[] samples = new int[4 * width];
    for (int x = 0; x < width; x++) {
      int base = TestPattern.noise(x, 3) + 40;
      samples[x] = base;
      samples[width + x] = base + 90;
      samples[2 * width + x] = 77;
      samples[3 * width + x] = TestPattern.noise(x, 9) + 100;
    }
    Picture picture = new Picture(width, 4, 8, samples);
    Codec codec = codec("{transform: pca, over: rows, keep: 4, step: 0.25}");
    assertThat(codec.encode(picture, new Memo()).keep()).isEqualTo(2);
    assertThat(through(codec, picture).picture().samples()).isEqualTo(samples);
  }

  @Test
  void aConstantPictureCostsItsMeansAlone() {
    int[] samples = new int[64 * 32];
    Arrays.fill(samples, 93);
    Picture picture = new Picture(64, 32, 8, samples);
    Codec pca = codec("{transform: pca, over: rows, keep: 8, step: 8}");
    assertThat(pca.encode(picture, new Memo()).keep()).isZero();
    assertThat(through(pca, picture).picture().samples()).isEqualTo(samples);
    assertThat(pca.encode(picture, new Memo()).payloadBits()).isLessThan(8L * (32 + 16));
  }

  /**
   * The expected error of uniform quantisation at high rate is step^2 / 12 a coefficient (Bennett
   * 1948, from memory), through an orthonormal basis also step^2 / 12 a sample, and as much again
   * through a sent basis (by the choice of its steps), K / d of it where K of d components are
   * kept.
   */
  @Test
  void errorsThroughDirectionsAndCoefficientsAreEqual() {
    Picture picture = TestPattern.cvp(256);
    double step = 4;
    double fixed =
        meanSquaredError(
            picture, through(codec("{transform: dct, keep: 64, step: 4}"), picture).picture());
    assertThat(fixed).isCloseTo(step * step / 12 + 1.0 / 12, within(0.15));
    Analysis analysis = Analysis.of(picture, new Arrangement.Rows(), new PcaBasis());
    Symbols symbols = new Symbols(analysis, new Quantizer(step));
    double throughDirections = 0;
    double throughCoefficients = 0;
    int kept = 16;
    for (int k = 0; k < kept; k++) {
      throughCoefficients += meanSquare(analysis.component(k), symbols.component(k), step);
      throughDirections +=
          256
              * analysis.variance(k)
              * meanSquare(
                  analysis.direction(k),
                  symbols.direction(k),
                  symbols.directionQuantizer(k).step());
    }
    assertThat(throughCoefficients / kept).isCloseTo(step * step / 12, within(0.1));
    assertThat(throughDirections / kept).isCloseTo(step * step / 12, within(0.1));
  }

  private static double meanSquare(double[] values, int[] symbols, double step) {
    double sum = 0;
    for (int i = 0; i < values.length; i++) {
      double e = values[i] - symbols[i] * step;
      sum += e * e;
    }
    return sum / values.length;
  }

  /**
   * One analysis, one set of symbols and one growing picture serve every K; both steps share the
   * analysis.
   */
  @Test
  void workIsSharedBetweenCodecs() {
    Memo memo = new Memo();
    for (Codec codec :
        CodecFamilies.installed()
            .read(
                YamlNode.parse(
                    "test", "{transform: pca, over: rows, keep: [1, 2, 4, 8], step: [8, 16]}"),
                LINK)) {
      codec.encode(TestPattern.cvp(64), memo);
    }
    assertThat(memo.computed()).as("one analysis, two sets of symbols, two pictures").isEqualTo(5);
  }

  /** Below 192 variables a rule for K shares the analysis with numbers of components. */
  @Test
  void workOnFewVariablesIsSharedWithRulesForK() {
    Memo memo = new Memo();
    for (String rule : List.of("keep: 4", "share: 0.9")) {
      CodecFamilies.installed()
          .read(
              YamlNode.parse("test", "{transform: pca, over: blocks, " + rule + ", step: 8}"), LINK)
          .get(0)
          .encode(TestPattern.cvp(64), memo);
    }
    assertThat(memo.computed()).as("one analysis, set of symbols and picture").isEqualTo(3);
  }

  /**
   * A row-PCA figure pays for its basis: what is sent for K components lies near the order-0
   * entropy of the very indices, means and preambles aside.
   */
  @ParameterizedTest
  @ValueSource(
      strings = {
        "{transform: pca, over: rows, keep: 16, step: 8}",
        "{transform: pca, over: blocks, keep: 16, step: 8}",
        "{transform: dct, over: blocks, keep: 16, step: 8}",
        "{transform: mean, over: rows, step: 16}"
      })
  void payloadLiesNearTheEntropyOfItsIndices(String entry) {
    Picture picture = TestPattern.cvp(256);
    YamlNode node = YamlNode.parse("test", entry);
    Arrangement arrangement =
        node.get("over").text().equals("rows") ? new Arrangement.Rows() : new Arrangement.Blocks(8);
    Basis basis =
        Basis.all().stream()
            .filter(b -> b.id().equals(node.get("transform").text()))
            .findFirst()
            .orElseThrow();
    Quantizer quantizer = new Quantizer(node.get("step").number("a step"));
    Symbols symbols = new Symbols(Analysis.of(picture, arrangement, basis), quantizer);
    Encoding encoding = codec(entry).encode(picture, new Memo());
    double entropy = 8.0 * arrangement.variables(PictureShape.of(picture));
    for (int k = 0; k < encoding.keep(); k++) {
      entropy += entropyBits(symbols.component(k));
      if (basis.isSent()) {
        entropy += entropyBits(symbols.direction(k));
      }
    }
    assertThat(encoding.payloadBits() / entropy).isBetween(0.8, 1.6);
    if (basis.isSent() && entry.contains("rows")) {
      assertThat(encoding.payloadBits())
          .as("more than the coefficients alone could need")
          .isGreaterThan((long) (1.5 * encoding.keep() * entropyBits(symbols.component(15))));
    }
  }

  /** Entropies of the pattern's samples and horizontal differences, recomputed in Python. */
  @ParameterizedTest
  @CsvSource({"64, 7.079411497, 5.330620671", "256, 7.054560487, 5.92443315"})
  void entropyOfThePattern(int n, double samples, double differences) {
    int[] values = TestPattern.cvp(n).samples();
    int[] steps = new int[n * (n - 1)];
    for (int i = 0; i < steps.length; i++) {
      int at = i / (n - 1) * n + i % (n - 1) + 1;
      steps[i] = values[at] - values[at - 1];
    }
    assertThat(entropyBits(values) / values.length).isCloseTo(samples, within(1e-9));
    assertThat(entropyBits(steps) / steps.length).isCloseTo(differences, within(1e-8));
  }

  /** Order-0 entropy times the number of symbols, in bits (Shannon 1948). */
  private static double entropyBits(int[] symbols) {
    Map<Integer, Integer> counts = new TreeMap<>();
    for (int symbol : symbols) {
      counts.merge(symbol, 1, Integer::sum);
    }
    double bits = 0;
    for (int count : counts.values()) {
      bits -= count * StrictMath.log((double) count / symbols.length) / StrictMath.log(2);
    }
    return bits;
  }

  @Test
  void aLostPacketTakesOneComponentOrOneRegion() {
    Picture picture = TestPattern.cvp(256);
    for (Link.Order order : Link.Order.values()) {
      Codec codec =
          CodecFamilies.installed()
              .read(
                  YamlNode.parse("test", "{transform: dct, keep: 16, step: 8}"),
                  new Link(96, 23, order))
              .get(0);
      List<byte[]> packets = new ArrayList<>(codec.encode(picture, new Memo()).payloads());
      Picture whole = codec.decode(PictureShape.of(picture), packets).picture();
      packets.remove(packets.size() / 2);
      Decoding damaged = codec.decode(PictureShape.of(picture), packets);
      assertThat(damaged.completeness()).isEqualTo(Decoding.Completeness.PARTIAL);
      long blocksHurt = blocksThatDiffer(whole, damaged.picture());
      if (order == Link.Order.BY_REGION) {
        assertThat(blocksHurt).isBetween(1L, 20L);
      } else {
        assertThat(blocksHurt).isGreaterThan(50);
      }
    }
  }

  private static long blocksThatDiffer(Picture a, Picture b) {
    boolean[] hurt = new boolean[32 * 32];
    for (int i = 0; i < a.size(); i++) {
      hurt[i / 256 / 8 * 32 + i % 256 / 8] |= a.samples()[i] != b.samples()[i];
    }
    long count = 0;
    for (boolean h : hurt) {
      count += h ? 1 : 0;
    }
    return count;
  }

  @Test
  void missingMeansAreInterpolated() {
    int[] samples = new int[40 * 16];
    for (int i = 0; i < samples.length; i++) {
      samples[i] = 40 + i / 16;
    }
    Picture picture = new Picture(16, 40, 8, samples);
    Codec codec =
        CodecFamilies.installed()
            .read(
                YamlNode.parse("test", "{transform: mean, keep: 0}"),
                new Link(32, 0, Link.Order.BY_COMPONENT))
            .get(0);
    List<byte[]> packets = codec.encode(picture, new Memo()).payloads();
    assertThat(packets).hasSize(2);
    Decoding first = codec.decode(PictureShape.of(picture), packets.subList(0, 1));
    int[] shown = first.picture().samples();
    assertThat(first.completeness()).isEqualTo(Decoding.Completeness.PARTIAL);
    assertThat(shown[0]).isEqualTo(40);
    assertThat(shown[39 * 16]).as("the nearest mean that arrived").isBetween(55, 75);
  }
}
