package linkworthy.codec;

import java.util.Arrays;
import java.util.List;
import java.util.Optional;
import linkworthy.input.Key;
import linkworthy.input.KeyGroup;
import linkworthy.input.Kind;
import linkworthy.input.YamlNode;
import linkworthy.link.Link;

/** Reads wavelet codecs from a study: {@code wavelet: cdf-9-7} and so on. */
public final class WaveletCodecFamily implements CodecFamily {
  private static final int DEFAULT_LEVELS = 5;
  private static final double DEFAULT_STEP = 8;
  private static final Kind.Whole LEVELS = new Kind.Whole(1, 10);
  private static final KeyGroup KEYS =
      KeyGroup.of(
          "wavelet",
          Key.required(
              "wavelet",
              new Kind.Words(Arrays.stream(Wavelet.values()).map(Wavelet::id).toList()),
              ""),
          Key.optional(
              "levels",
              LEVELS,
              Integer.toString(DEFAULT_LEVELS),
              "times the lowest band is split again"),
          Key.optional(
              "step",
              new Kind.OneOrMore(Quantizer.KIND),
              Quantizer.plain(DEFAULT_STEP),
              "width of a quantiser step"),
          RateTarget.KEY,
          Codec.LABEL);

  @Override
  public String id() {
    return "wavelet";
  }

  @Override
  public Optional<KeyGroup> keys() {
    return Optional.of(KEYS);
  }

  @Override
  public String help() {
    return """
        wavelet: cdf-9-7 | cdf-5-3
          levels:         times the lowest band is split again, 1 to 10 (5)
          step:           quantiser step in grey levels, or none; cdf-5-3 with none or 1 is
                          lossless, cdf-9-7 with none sends 32-bit floats; a list means one codec
                          for each (8)
          bits-per-pixel: instead of step, the sent bits that the finest step may reach; each packet
                          counts once, protection's copies, parity and tries come on top
          label:          name in tables (derived from the above)
        Sent, and counted: the coefficients, zeros as their number, Golomb-Rice coded; by component
        the lowest band and then band by band, by region the lowest band and then all others square
        by square (32 samples a side, or 2 to the power of the levels if that is more). At the node,
        for W x H samples and L levels, W H (1 + 6 s) multiply-accumulates with cdf-9-7 and
        W H (1 + 2 s) with cdf-5-3, where s = (1 - 1 / 4^L) 4 / 3, and 4 W H + 4 max(W, H) bytes for
        coefficients and a line; bits-per-pixel quantises up to 9 times.""";
  }

  @Override
  public List<Codec> read(YamlNode entry, Link link) {
    KEYS.check(entry);
    String id = entry.get("wavelet").text();
    Wavelet wavelet =
        Arrays.stream(Wavelet.values()).filter(w -> w.id().equals(id)).findFirst().orElseThrow();
    int levels = entry.find("levels").map(LEVELS::read).orElse(DEFAULT_LEVELS);
    String label = entry.find("label").map(node -> node.line(Codec.MAX_LABEL)).orElse("");
    List<Codec> codecs =
        RateTarget.readEither(
            entry,
            "step",
            node -> WaveletCodec.of(label, wavelet, levels, Quantizer.read(node), link),
            rate -> WaveletCodec.of(label, wavelet, levels, rate, link));
    return codecs.isEmpty()
        ? List.of(WaveletCodec.of(label, wavelet, levels, new Quantizer(DEFAULT_STEP), link))
        : codecs;
  }
}
