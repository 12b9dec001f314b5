package linkworthy.codec;

import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.OptionalInt;
import linkworthy.corpus.Picture;
import linkworthy.input.BadInput;
import linkworthy.link.Link;
import linkworthy.link.Packetizer;
import org.jspecify.annotations.Nullable;

/**
 * Baseline JPEG (ITU-T T.81) of one 8-bit component with restart intervals, the typical tables of
 * Annex K and the steps of {@link FrequencySteps}. Colour planes have the steps of table K.2 and,
 * unlike common files, the Huffman tables of luminance.
 *
 * <p>Both ends know the tables, and every packet carries the picture's size and the quality, so the
 * file's header is not sent: the receiver rebuilds it, the byte stuffing and the restart markers
 * ({@link #file}). Packets hold whole codes of restart intervals and decode alone; what is missing
 * is filled as {@link JpegScan.Reader#filled} says, so that the file is a valid one that any
 * decoder shows.
 *
 * <p>Both transforms are computed here rather than by the Java platform's JPEG plug-in, whose
 * arithmetic belongs to the library that the platform was built with: T.81 leaves it open, and
 * figures must be the same on every machine. The inverse is the usual one in whole numbers ({@link
 * JpegInverse}), so a file decodes to the very samples that the Java platform shows.
 */
final class JpegCodec implements Codec {
  private static final int MOST_BLOCKS_PER_INTERVAL = 65_535;

  private final String label;
  private final OptionalInt quality;
  private final @Nullable RateTarget rate;
  private final int restartEvery;
  private final boolean chroma;
  private final Link link;

  private JpegCodec(
      String label,
      OptionalInt quality,
      @Nullable RateTarget rate,
      int restartEvery,
      boolean chroma,
      Link link) {
    this.chroma = chroma;
    this.quality = quality;
    this.rate = rate;
    this.restartEvery = restartEvery;
    this.link = link;
    this.label = label.isEmpty() ? derivedLabel() : label;
  }

  /**
   * @param label empty for the one derived from the parameters
   * @param restartEvery rows of blocks in a restart interval
   */
  static JpegCodec of(String label, int quality, int restartEvery, Link link) {
    return new JpegCodec(label, OptionalInt.of(quality), null, restartEvery, false, link);
  }

  static JpegCodec of(String label, RateTarget rate, int restartEvery, Link link) {
    return new JpegCodec(label, OptionalInt.empty(), rate, restartEvery, false, link);
  }

  @Override
  public Codec forChroma() {
    return new JpegCodec(label, quality, rate, restartEvery, true, link);
  }

  private FrequencySteps steps(int inForce) {
    return new FrequencySteps(inForce, chroma);
  }

  private String derivedLabel() {
    return "jpeg "
        + (rate == null ? "Q" + quality.orElseThrow() : rate.label())
        + (restartEvery == 1 ? "" : " restart" + restartEvery);
  }

  @Override
  public String label() {
    return label;
  }

  /** The step differs from coefficient to coefficient, so that column stays empty. */
  @Override
  public Description description() {
    return new Description("jpeg", "blocks8", "");
  }

  @Override
  public Map<String, Object> settings() {
    Map<String, Object> settings = new LinkedHashMap<>();
    settings.put("jpeg", "baseline");
    if (rate == null) {
      settings.put("quality", quality.orElseThrow());
    } else {
      settings.put("bits-per-pixel", rate.bitsPerPixel());
    }
    settings.put("restart-every", restartEvery);
    settings.put("label", label);
    return settings;
  }

  @Override
  public void check(PictureShape shape) {
    if (shape.bitDepth() != 8) {
      throw new BadInput(
          "codec '"
              + label
              + "' is baseline JPEG, and the picture has "
              + shape.bitDepth()
              + " bits a sample; accepted: 8");
    }
    int blocks = blocksPerInterval(shape);
    if (blocks > MOST_BLOCKS_PER_INTERVAL) {
      throw new BadInput(
          "codec '"
              + label
              + "' has "
              + blocks
              + " blocks in a restart interval; accepted: up to "
              + MOST_BLOCKS_PER_INTERVAL);
    }
  }

  /**
   * For W x H samples padded to whole blocks: 16 multiply-accumulates a sample for the separable
   * transform and one to quantise. Memory: eight rows of samples, 1 KiB for tables and a block, and
   * a packet; with a target rate the coefficients of the picture instead, 2 bytes each.
   */
  @Override
  public List<Workload> workloads(PictureShape shape, int keep) {
    long width = (shape.width() + 7L) / 8 * 8;
    long height = (shape.height() + 7L) / 8 * 8;
    long samples = rate == null ? 8 * width : 2 * width * height;
    return List.of(Workload.alone(17 * width * height, samples + 1024 + link.payloadBytes()));
  }

  private int blocksPerInterval(PictureShape shape) {
    JpegBlocks blocks = new JpegBlocks(shape);
    return blocks.across() * Math.min(restartEvery, blocks.down());
  }

  private Preamble preamble(PictureShape shape) {
    return Preamble.of(
        "jpeg "
            + (rate == null ? "Q" + quality.orElseThrow() : rate.label())
            + " "
            + restartEvery
            + " "
            + shape.bitDepth(),
        shape);
  }

  /** The quality in force stands where other codecs have the number of components. */
  @Override
  public Encoding encode(Picture picture, Memo memo) {
    double[] coefficients =
        memo.once(
            new CoefficientsKey(),
            double[].class,
            () -> new JpegBlocks(PictureShape.of(picture)).forward(picture));
    return rate == null
        ? encode(coefficients, PictureShape.of(picture), quality.orElseThrow())
        : rate.best(
            1, 100, q -> encode(coefficients, PictureShape.of(picture), q), link, picture.size());
  }

  private Encoding encode(double[] coefficients, PictureShape shape, int inForce) {
    int[] indices = JpegBlocks.quantised(coefficients, steps(inForce));
    return new Encoding(
        Packetizer.pack(
            preamble(shape).bytes(inForce),
            JpegScan.strips(indices, blocksPerInterval(shape)),
            link.payloadBytes()),
        inForce);
  }

  @Override
  public Decoding decode(PictureShape shape, List<byte[]> arrived) {
    Arrival arrival = arrival(shape, arrived);
    return new Decoding(
        new JpegBlocks(shape).inverse(arrival.reader().filled(), steps(arrival.quality())),
        arrival.reader().completeness());
  }

  /** The standard JPEG file that the receiver builds from what arrived. */
  byte[] file(PictureShape shape, List<byte[]> arrived) {
    Arrival arrival = arrival(shape, arrived);
    return JpegScan.file(
        shape, steps(arrival.quality()), arrival.reader().filled(), blocksPerInterval(shape));
  }

  private record Arrival(int quality, JpegScan.Reader reader) {}

  private Arrival arrival(PictureShape shape, List<byte[]> arrived) {
    Preamble preamble = preamble(shape);
    int inForce = preamble.mostCommon(arrived, quality.orElse(1), quality.orElse(100));
    JpegBlocks blocks = new JpegBlocks(shape);
    JpegScan.Reader reader = new JpegScan.Reader(blocks, blocksPerInterval(shape));
    for (byte[] packet : arrived) {
      BitReader in = new BitReader(packet);
      if (inForce > 0 && preamble.read(in) == inForce) {
        reader.addUnits(packet, in);
      }
    }
    return new Arrival(Math.max(1, inForce), reader);
  }

  private record CoefficientsKey() {}
}
