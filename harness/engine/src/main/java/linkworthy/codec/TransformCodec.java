package linkworthy.codec;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.function.IntPredicate;
import linkworthy.corpus.Picture;
import linkworthy.input.BadInput;
import linkworthy.link.Link;
import linkworthy.link.Packet;
import linkworthy.link.Packetizer;
import org.jspecify.annotations.Nullable;

/**
 * The transform codec: centre, project onto the first K directions of a basis, quantise, code by
 * Golomb-Rice, cut into units that decode alone, pack.
 *
 * <p>Missing coefficients become 0, missing means are interpolated from their neighbours, a
 * direction of which any part is missing drops its component, and mid-grey is shown when nothing
 * arrived.
 */
final class TransformCodec implements Codec {
  private final String label;
  private final Arrangement arrangement;
  private final Basis basis;
  private final Keep keep;
  private final Quantization quantization;
  private final Link link;

  /**
   * @param label empty for the one derived from the parameters
   */
  TransformCodec(
      String label,
      Arrangement arrangement,
      Basis basis,
      Keep keep,
      Quantization quantization,
      Link link) {
    this.arrangement = arrangement;
    this.basis = keep instanceof Keep.First first ? basis.forAtMost(first.components()) : basis;
    this.keep = keep;
    this.quantization = quantization;
    this.link = link;
    this.label = label.isEmpty() ? derivedLabel() : label;
  }

  @Override
  public Codec forChroma() {
    return quantization instanceof FrequencySteps steps
        ? new TransformCodec(label, arrangement, basis, keep, steps.forChroma(), link)
        : this;
  }

  private String derivedLabel() {
    List<String> words = new ArrayList<>(List.of(basis.id(), arrangement.id()));
    if (!keep.label().isEmpty()) {
      words.add(keep.label());
    }
    if (!sendsMeansOnly()) {
      words.add(quantization.label());
    }
    return String.join(" ", words);
  }

  private boolean sendsMeansOnly() {
    return keep instanceof Keep.First first && first.components() == 0;
  }

  @Override
  public String label() {
    return label;
  }

  @Override
  public Description description() {
    return new Description(
        basis.id(), arrangement.id(), sendsMeansOnly() ? "" : quantization.column());
  }

  @Override
  public Map<String, Object> settings() {
    Map<String, Object> settings = new LinkedHashMap<>();
    if (basis instanceof SharedPcaBasis) {
      settings.put("transform", PcaBasis.ID);
      settings.put("basis", "shared");
    } else {
      settings.put("transform", basis.id());
    }
    if (arrangement instanceof Arrangement.Blocks blocks) {
      settings.put("over", "blocks");
      settings.put("side", blocks.side());
    } else {
      settings.put("over", arrangement.id());
    }
    if (keep instanceof Keep.First first) {
      settings.put("keep", first.components());
    } else if (keep instanceof Keep.Share share) {
      settings.put("share", share.share());
    } else if (keep instanceof Keep.Rate rate) {
      settings.put("bits-per-pixel", rate.bitsPerPixel());
    } else if (keep instanceof Keep.NoiseFloor floor) {
      settings.put("noise-floor", floor.isUnknown() ? true : (Object) floor.deviation());
    }
    if (quantization instanceof Quantizer quantizer) {
      settings.put("step", quantizer.isNone() ? "none" : (Object) quantizer.step());
    } else if (quantization instanceof FrequencySteps steps) {
      settings.put("weights", FrequencySteps.ID);
      settings.put("quality", steps.quality());
    }
    settings.put("label", label);
    return settings;
  }

  @Override
  public void check(PictureShape shape) {
    arrangement.check(shape);
    named(() -> basis.check(arrangement, shape));
    int d = arrangement.variables(shape);
    if (keep instanceof Keep.First first && first.components() > d) {
      throw new BadInput(
          "codec '"
              + label
              + "' keeps "
              + first.components()
              + " components, and a picture of "
              + shape.width()
              + " x "
              + shape.height()
              + " samples has "
              + d
              + "; accepted: 0 to "
              + d);
    }
  }

  /** Runs a check and puts the codec's name before its complaint. */
  private void named(Runnable check) {
    try {
      check.run();
    } catch (BadInput e) {
      throw new BadInput("codec '" + label + "': " + e.getMessage(), e);
    }
  }

  @Override
  public boolean needsTraining() {
    return basis instanceof SharedPcaBasis;
  }

  @Override
  public Codec trainedOn(Training training) {
    if (!needsTraining()) {
      return this;
    }
    SharedPcaBasis trained = new SharedPcaBasis(training);
    named(() -> trained.checkTraining(arrangement));
    return new TransformCodec(label, arrangement, trained, keep, quantization, link);
  }

  @Override
  public String training() {
    return basis instanceof SharedPcaBasis shared ? shared.fingerprint() : "";
  }

  @Override
  public Encoding encode(Picture picture, Memo memo) {
    Analysis analysis = analysis(picture, memo);
    Symbols symbols = symbols(picture, memo);
    PictureShape shape = PictureShape.of(picture);
    int kept =
        keep instanceof Keep.Rate rate
            ? largestWithin(rate.bitsPerPixel() * picture.size(), shape, analysis, symbols, memo)
            : analysis.kept(keep);
    WholePicture whole =
        memo.once(
            new WholeKey(arrangement, work(shape), quantization),
            WholePicture.class,
            () -> new WholePicture(shape, arrangement, basis, analysis, symbols, quantization));
    return new Encoding(pack(shape, analysis, symbols, kept), kept, "", () -> whole.upTo(kept));
  }

  private String work(PictureShape shape) {
    return basis.work(arrangement.variables(shape));
  }

  Analysis analysis(Picture picture, Memo memo) {
    return memo.once(
        new AnalysisKey(arrangement, work(PictureShape.of(picture))),
        Analysis.class,
        () -> Analysis.of(picture, arrangement, basis));
  }

  Symbols symbols(Picture picture, Memo memo) {
    Analysis analysis = analysis(picture, memo);
    return memo.once(
        new SymbolsKey(arrangement, work(PictureShape.of(picture)), quantization),
        Symbols.class,
        () -> new Symbols(analysis, quantization));
  }

  Basis basis() {
    return basis;
  }

  Keep keep() {
    return keep;
  }

  Quantization quantization() {
    return quantization;
  }

  /** The largest K whose sent bits stay within a budget; 0 where none does. */
  private int largestWithin(
      double budget, PictureShape shape, Analysis analysis, Symbols symbols, Memo memo) {
    return largest(
        analysis.components(),
        k ->
            memo.once(
                    new SentBitsKey(arrangement, work(shape), quantization, link, k),
                    Long.class,
                    () -> sentBits(pack(shape, analysis, symbols, k)))
                <= budget);
  }

  private long sentBits(List<Packet> packets) {
    return link.sentBits(packets.size(), packets.stream().mapToLong(p -> 8L * p.length()).sum());
  }

  /**
   * The largest number up to {@code most} that fits, where every smaller one does too; by doubling
   * and halving, so that few numbers much larger than the result are tried.
   */
  private static int largest(int most, IntPredicate fits) {
    int good = 0;
    int next = 1;
    while (next <= most && fits.test(next)) {
      good = next;
      next *= 2;
    }
    int bad = Math.min(next, most + 1);
    while (bad - good > 1) {
      int middle = (good + bad) >>> 1;
      if (fits.test(middle)) {
        good = middle;
      } else {
        bad = middle;
      }
    }
    return good;
  }

  private List<Packet> pack(PictureShape shape, Analysis analysis, Symbols symbols, int kept) {
    List<Packetizer.Strip> strips = new ArrayList<>();
    strips.add(Units.Run.ofMeans(analysis.means(), shape.bitDepth()));
    for (int k = 0; k < kept && basis.isSent(); k++) {
      strips.add(Units.Run.ofDirection(k, symbols, quantization.component(k)));
      if (link.order() == Link.Order.BY_COMPONENT) {
        strips.add(Units.Run.ofComponent(k, kept, symbols, quantization.component(k)));
      }
    }
    if (link.order() == Link.Order.BY_REGION) {
      int[][] components = new int[kept][];
      Arrays.setAll(components, symbols::component);
      strips.add(new Units.Region(components, quantization.isNone()));
    } else if (!basis.isSent()) {
      for (int k = 0; k < kept; k++) {
        strips.add(Units.Run.ofComponent(k, kept, symbols, quantization.component(k)));
      }
    }
    return Packetizer.pack(preamble(shape).bytes(kept), strips, link.payloadBytes());
  }

  private Preamble preamble(PictureShape shape) {
    return Preamble.of(
        basis.id()
            + " "
            + arrangement.id()
            + " "
            + keep.label()
            + " "
            + quantization.label()
            + " "
            + shape.bitDepth(),
        shape);
  }

  @Override
  public Decoding decode(PictureShape shape, List<byte[]> arrived) {
    Received received = received(shape, arrived);
    return new Decoding(reconstruct(shape, received), received.completeness());
  }

  /** What a decoder gathers of these packets. */
  Received received(PictureShape shape, List<byte[]> arrived) {
    int d = arrangement.variables(shape);
    int most = keep instanceof Keep.First first ? Math.min(d, first.components()) : d;
    int[] lengths = new int[most];
    Arrays.fill(lengths, arrangement.observations(shape));
    Received received = new Received(shape.bitDepth(), d, lengths, basis.isSent(), quantization);
    Preamble preamble = preamble(shape);
    for (byte[] packet : arrived) {
      BitReader in = new BitReader(packet);
      int announced = preamble.read(in);
      if (announced >= 0 && announced <= most) {
        received.addUnits(in, announced);
      }
    }
    return received;
  }

  private Picture reconstruct(PictureShape shape, Received received) {
    double[] means = received.means();
    double[][] rows = new double[received.most()][];
    double[][] directions = new double[received.most()][];
    double[][] fixed =
        basis.isSent() || basis.isIdentity()
            ? new double[0][]
            : basis.directions(arrangement, shape, new double[0][]).rows();
    int usable = 0;
    for (int k = 0; k < rows.length; k++) {
      double[] coefficients = received.coefficients(k);
      double[] direction =
          basis.isSent() ? received.direction(k) : k < fixed.length ? fixed[k] : null;
      if (coefficients != null && direction != null) {
        rows[usable] = coefficients;
        directions[usable++] = direction;
      }
    }
    int[] samples = new int[shape.size()];
    double[] values = new double[arrangement.observations(shape)];
    double[] factors = new double[usable];
    for (int i = 0; i < means.length; i++) {
      Arrays.fill(values, means[i]);
      if (basis.isIdentity()) {
        addRow(values, i < rows.length ? received.coefficients(i) : null);
      } else {
        for (int k = 0; k < usable; k++) {
          factors[k] = directions[k][i];
        }
        Matrices.addCombination(values, factors, rows);
      }
      arrangement.scatter(values, i, shape, values, samples);
    }
    return new Picture(shape.width(), shape.height(), shape.bitDepth(), samples);
  }

  private static void addRow(double[] values, double @Nullable [] row) {
    if (row != null) {
      for (int j = 0; j < values.length; j++) {
        values[j] += row[j];
      }
    }
  }

  /**
   * With d variables, n observations and K components. Multiply-accumulates: d n for the means; K d
   * n to project (none for the identity) and K n to quantise; for a basis found in the picture also
   * n d (d + 1) / 2 for the covariance, 9 d^3 / 2 for its eigenvectors (Golub and Van Loan: about 9
   * d^3 floating-point operations for the symmetric QR algorithm with vectors, from memory) and K d
   * to quantise the directions. Memory: the picture, the means, one component, one packet, and the
   * directions in use, or for a basis found in the picture the covariance and its eigenvectors.
   */
  @Override
  public List<Workload> workloads(PictureShape shape, int kept) {
    long d = arrangement.variables(shape);
    long n = arrangement.observations(shape);
    long macs = d * n + kept * n + (basis.isIdentity() ? 0 : kept * d * n);
    long numbers = d + n + (basis.isIdentity() ? 0 : kept * d);
    if (basis.isSent()) {
      macs += n * d * (d + 1) / 2 + 9 * d * d * d / 2 + kept * d;
      numbers = d + n + 2 * d * d;
    }
    return List.of(
        Workload.alone(
            macs,
            Workload.pictureBytes(shape) + Workload.NUMBER_BYTES * numbers + link.payloadBytes()));
  }

  private record AnalysisKey(Arrangement arrangement, String basis) {}

  private record SymbolsKey(Arrangement arrangement, String basis, Quantization quantization) {}

  private record WholeKey(Arrangement arrangement, String basis, Quantization quantization) {}

  private record SentBitsKey(
      Arrangement arrangement, String basis, Quantization quantization, Link link, int kept) {}
}
