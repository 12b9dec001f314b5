package linkworthy.codec;

import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import linkworthy.corpus.Picture;
import linkworthy.link.Link;
import linkworthy.link.Packetizer;
import org.jspecify.annotations.Nullable;

/**
 * The wavelet codec: samples less half their range through {@link Subbands}, each coefficient times
 * its band's gain, quantised, coded by {@link SparseCoder}, cut and packed like the transform
 * codec's components.
 *
 * <p>The 5/3 without a step, or with step 1, is the reversible one of whole numbers and loses
 * nothing. Missing coefficients are 0; those of the lowest band lie between their neighbours, as
 * {@link Gaps#fill} has it, and are mid-grey if none of it arrived.
 */
final class WaveletCodec implements Codec {
  /** Largest fineness; see {@link #stepOf}. */
  private static final int FINEST = 200;

  private final String label;
  private final Wavelet wavelet;
  private final int levels;
  private final Quantizer quantizer;
  private final @Nullable RateTarget rate;
  private final Link link;

  private WaveletCodec(
      String label,
      Wavelet wavelet,
      int levels,
      Quantizer quantizer,
      @Nullable RateTarget rate,
      Link link) {
    this.wavelet = wavelet;
    this.levels = levels;
    this.quantizer = quantizer;
    this.rate = rate;
    this.link = link;
    this.label = label.isEmpty() ? derivedLabel() : label;
  }

  /**
   * @param label empty for the one derived from the parameters
   */
  static WaveletCodec of(
      String label, Wavelet wavelet, int levels, Quantizer quantizer, Link link) {
    return new WaveletCodec(label, wavelet, levels, quantizer, null, link);
  }

  /** A codec that chooses the finest step within a rate; steps are those of {@link #stepOf}. */
  static WaveletCodec of(String label, Wavelet wavelet, int levels, RateTarget rate, Link link) {
    return new WaveletCodec(label, wavelet, levels, Quantizer.NONE, rate, link);
  }

  private String derivedLabel() {
    return wavelet.id()
        + " levels"
        + levels
        + " "
        + (rate == null ? quantizer.label() : rate.label());
  }

  /** The step of a fineness from 1 to 200: 2 to the power of (136 - fineness) / 8. */
  private static double stepOf(int fineness) {
    return StrictMath.pow(2, (136 - fineness) / 8.0);
  }

  private boolean isReversible() {
    return rate == null
        && wavelet == Wavelet.CDF_5_3
        && (quantizer.isNone() || quantizer.step() == 1);
  }

  @Override
  public String label() {
    return label;
  }

  @Override
  public Description description() {
    return new Description(wavelet.id(), "levels" + levels, rate != null ? "" : quantizer.column());
  }

  @Override
  public Map<String, Object> settings() {
    Map<String, Object> settings = new LinkedHashMap<>();
    settings.put("wavelet", wavelet.id());
    settings.put("levels", levels);
    if (rate == null) {
      settings.put("step", quantizer.isNone() ? "none" : (Object) quantizer.step());
    } else {
      settings.put("bits-per-pixel", rate.bitsPerPixel());
    }
    settings.put("label", label);
    return settings;
  }

  @Override
  public void check(PictureShape shape) {}

  /**
   * For W x H samples and L levels, with s = (1 - 4^-L) 4/3 for the samples of all levels together:
   * a lifting step is half a multiply-accumulate a sample and direction; cdf-9-7 has four and a
   * scaling, cdf-5-3 two, and quantising is one more. Memory: the coefficients and a line.
   */
  @Override
  public List<Workload> workloads(PictureShape shape, int keep) {
    double allLevels = (1 - StrictMath.pow(4, -levels)) * 4 / 3;
    int each = wavelet == Wavelet.CDF_9_7 ? 6 : 2;
    return List.of(
        Workload.alone(
            (long) StrictMath.ceil(shape.size() * (1 + each * allLevels)),
            Workload.NUMBER_BYTES * ((long) shape.size() + Math.max(shape.width(), shape.height()))
                + link.payloadBytes()));
  }

  private Subbands subbands(PictureShape shape) {
    return new Subbands(wavelet, isReversible(), shape, levels);
  }

  private Preamble preamble(PictureShape shape) {
    return Preamble.of(
        wavelet.id()
            + " "
            + levels
            + " "
            + (rate == null ? quantizer.label() : rate.label())
            + " "
            + link.order().id()
            + " "
            + shape.bitDepth(),
        shape);
  }

  @Override
  public Encoding encode(Picture picture, Memo memo) {
    PictureShape shape = PictureShape.of(picture);
    double[] coefficients =
        memo.once(
            new CoefficientsKey(wavelet, isReversible(), levels),
            double[].class,
            () -> transformed(picture));
    WaveletLayout layout = new WaveletLayout(subbands(shape), shape, levels, link.order());
    if (rate == null) {
      Quantizer inForce = isReversible() ? new Quantizer(1) : quantizer;
      return encode(coefficients, layout, inForce, preamble(shape).bytes(0), "");
    }
    return rate.best(
        1,
        FINEST,
        fineness ->
            encode(
                coefficients,
                layout,
                new Quantizer(stepOf(fineness)),
                preamble(shape).bytes(fineness),
                Double.toString(stepOf(fineness))),
        link,
        shape.size());
  }

  private double[] transformed(Picture picture) {
    double middle = 1 << (picture.bitDepth() - 1);
    double[] values = new double[picture.size()];
    for (int i = 0; i < values.length; i++) {
      values[i] = picture.samples()[i] - middle;
    }
    subbands(PictureShape.of(picture)).forward(values);
    return values;
  }

  private Encoding encode(
      double[] coefficients,
      WaveletLayout layout,
      Quantizer inForce,
      byte[] preamble,
      String step) {
    List<Packetizer.Strip> strips = new ArrayList<>();
    for (int k = 0; k < layout.components(); k++) {
      int[] symbols = inForce.symbols(layout.gather(coefficients, k));
      strips.add(
          inForce.isNone()
              ? Units.Run.ofFloats(k, symbols, layout.importance(k))
              : new Units.Sparse(k, symbols, layout.importance(k)));
    }
    return new Encoding(Packetizer.pack(preamble, strips, link.payloadBytes()), -1, step);
  }

  @Override
  public Decoding decode(PictureShape shape, List<byte[]> arrived) {
    WaveletLayout layout = new WaveletLayout(subbands(shape), shape, levels, link.order());
    Preamble preamble = preamble(shape);
    int inForce = preamble.mostCommon(arrived, rate == null ? 0 : 1, rate == null ? 0 : FINEST);
    Quantizer step =
        rate != null
            ? new Quantizer(stepOf(Math.max(1, inForce)))
            : isReversible() ? new Quantizer(1) : quantizer;
    Received received = Received.ofSparse(shape.bitDepth(), layout.lengths(), step);
    for (byte[] packet : arrived) {
      BitReader in = new BitReader(packet);
      if (inForce >= 0 && preamble.read(in) == inForce) {
        received.addUnits(in, layout.components());
      }
    }
    return new Decoding(reconstruct(shape, layout, received), received.completeness());
  }

  private Picture reconstruct(PictureShape shape, WaveletLayout layout, Received received) {
    double[] values = new double[shape.size()];
    for (int k = 0; k < layout.components(); k++) {
      double[] coefficients = received.coefficients(k);
      if (coefficients != null) {
        if (k == 0) {
          Gaps.fill(coefficients, received.got(0), layout.lowestWidth(), 0);
          for (int i = 0; isReversible() && i < coefficients.length; i++) {
            coefficients[i] = Math.rint(coefficients[i]);
          }
        }
        layout.scatter(coefficients, k, values);
      }
    }
    subbands(shape).inverse(values);
    int middle = 1 << (shape.bitDepth() - 1);
    int[] samples = new int[values.length];
    for (int i = 0; i < samples.length; i++) {
      samples[i] = shape.toSample(values[i] + middle);
    }
    return new Picture(shape.width(), shape.height(), shape.bitDepth(), samples);
  }

  private record CoefficientsKey(Wavelet wavelet, boolean reversible, int levels) {}
}
