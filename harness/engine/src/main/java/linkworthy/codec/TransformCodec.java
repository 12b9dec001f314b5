package linkworthy.codec;

import java.nio.charset.StandardCharsets;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.zip.CRC32C;
import linkworthy.corpus.Picture;
import linkworthy.input.BadInput;
import linkworthy.input.Decimal;
import linkworthy.link.Link;
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
  private final Quantizer quantizer;
  private final Link link;

  /**
   * @param label empty for the one derived from the parameters
   */
  TransformCodec(
      String label,
      Arrangement arrangement,
      Basis basis,
      Keep keep,
      Quantizer quantizer,
      Link link) {
    this.arrangement = arrangement;
    this.basis = basis;
    this.keep = keep;
    this.quantizer = quantizer;
    this.link = link;
    this.label = label.isEmpty() ? derivedLabel() : label;
  }

  private String derivedLabel() {
    List<String> words = new ArrayList<>(List.of(basis.id(), arrangement.id()));
    if (!keep.label().isEmpty()) {
      words.add(keep.label());
    }
    if (!sendsMeansOnly()) {
      words.add(quantizer.label());
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
        basis.id(),
        arrangement.id(),
        sendsMeansOnly() ? "" : quantizer.isNone() ? "none" : Decimal.shortest(quantizer.step()));
  }

  @Override
  public Map<String, Object> settings() {
    Map<String, Object> settings = new LinkedHashMap<>();
    settings.put("transform", basis.id());
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
    }
    settings.put("step", quantizer.isNone() ? "none" : (Object) quantizer.step());
    settings.put("label", label);
    return settings;
  }

  @Override
  public void check(PictureShape shape) {
    arrangement.check(shape);
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

  @Override
  public Encoding encode(Picture picture, Memo memo) {
    Analysis analysis =
        memo.once(
            new AnalysisKey(arrangement, basis.id()),
            Analysis.class,
            () -> Analysis.of(picture, arrangement, basis));
    Symbols symbols =
        memo.once(
            new SymbolsKey(arrangement, basis.id(), quantizer),
            Symbols.class,
            () -> new Symbols(analysis, quantizer));
    int kept = analysis.kept(keep);
    List<Packetizer.Strip> strips = new ArrayList<>();
    strips.add(Units.Run.ofMeans(analysis.means(), picture.bitDepth()));
    for (int k = 0; k < kept && basis.isSent(); k++) {
      strips.add(Units.Run.ofDirection(k, symbols, quantizer));
      if (link.order() == Link.Order.BY_COMPONENT) {
        strips.add(Units.Run.ofComponent(k, kept, symbols, quantizer));
      }
    }
    if (link.order() == Link.Order.BY_REGION) {
      int[][] components = new int[kept][];
      Arrays.setAll(components, symbols::component);
      strips.add(new Units.Region(components, quantizer.isNone()));
    } else if (!basis.isSent()) {
      for (int k = 0; k < kept; k++) {
        strips.add(Units.Run.ofComponent(k, kept, symbols, quantizer));
      }
    }
    return new Encoding(
        Packetizer.pack(preamble(PictureShape.of(picture), kept), strips, link.payloadBytes()),
        kept);
  }

  private byte[] preamble(PictureShape shape, int kept) {
    BitWriter out = new BitWriter();
    out.write(tag(shape), 16);
    out.writeVarint(shape.width());
    out.writeVarint(shape.height());
    out.writeVarint(kept);
    return out.toByteArray();
  }

  /** What the two ends agree on besides the picture's size, in 16 bits. */
  private int tag(PictureShape shape) {
    CRC32C crc = new CRC32C();
    String agreed =
        basis.id()
            + " "
            + arrangement.id()
            + " "
            + keep.label()
            + " "
            + quantizer.label()
            + " "
            + shape.bitDepth();
    crc.update(agreed.getBytes(StandardCharsets.UTF_8));
    return (int) crc.getValue() & 0xFFFF;
  }

  @Override
  public Decoding decode(PictureShape shape, List<byte[]> arrived) {
    int d = arrangement.variables(shape);
    int most = keep instanceof Keep.First first ? Math.min(d, first.components()) : d;
    Received received =
        new Received(
            tag(shape), shape, d, arrangement.observations(shape), most, basis.isSent(), quantizer);
    arrived.forEach(received::add);
    Decoding.Completeness completeness =
        received.isNothing()
            ? Decoding.Completeness.NOTHING
            : received.isComplete()
                ? Decoding.Completeness.COMPLETE
                : Decoding.Completeness.PARTIAL;
    return new Decoding(reconstruct(shape, received), completeness);
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
      arrangement.scatter(values, i, shape, samples);
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

  private record AnalysisKey(Arrangement arrangement, String basis) {}

  private record SymbolsKey(Arrangement arrangement, String basis, Quantizer quantizer) {}
}
