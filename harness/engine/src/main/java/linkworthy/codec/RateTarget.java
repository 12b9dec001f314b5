package linkworthy.codec;

import java.util.List;
import java.util.function.Function;
import java.util.function.IntFunction;
import linkworthy.input.Key;
import linkworthy.input.Kind;
import linkworthy.input.Require;
import linkworthy.input.YamlNode;
import linkworthy.link.Link;

/**
 * How many bits a codec may send of a picture, packet headers included, before protection: every
 * packet counts once, with the bytes that protection takes from it.
 *
 * @param bitsPerPixel above 0, up to 64
 */
record RateTarget(double bitsPerPixel) {
  private static final double LARGEST = 64;
  private static final Kind.Real KIND =
      Kind.Real.above(0, LARGEST, "bits per pixel above 0, up to 64");

  /** What a study may write. */
  static final Key KEY =
      Key.optional(
          "bits-per-pixel",
          new Kind.OneOrMore(KIND),
          "none",
          "in place of the key above: sent bits over samples, [before protection](methods.md#which-k), with `planes: luma`");

  RateTarget {
    Require.inRange(bitsPerPixel, Double.MIN_VALUE, LARGEST, "bits-per-pixel (bits)");
  }

  static RateTarget read(YamlNode node) {
    return new RateTarget(KIND.read(node));
  }

  /**
   * Reads the codecs of an entry that gives either a key of its own or {@code bits-per-pixel}, one
   * for each value; none if it gives neither.
   */
  static List<Codec> readEither(
      YamlNode entry,
      String key,
      Function<YamlNode, Codec> byKey,
      Function<RateTarget, Codec> byRate) {
    var own = entry.find(key);
    var target = entry.find("bits-per-pixel");
    if (own.isPresent() && target.isPresent()) {
      throw target.get().refuse("stands beside '" + key + "'; accepted: one of the two");
    }
    List<Codec> codecs =
        own.isPresent()
            ? own.get().oneOrMore().stream().map(byKey).toList()
            : target.isPresent()
                ? target.get().oneOrMore().stream().map(n -> byRate.apply(read(n))).toList()
                : List.of();
    if (codecs.size() > 1 && entry.find("label").isPresent()) {
      throw entry
          .get("label")
          .refuse("names several codecs; accepted: one " + key + " with a label");
    }
    return codecs;
  }

  /** As in labels: {@code 0.5bpp}. */
  String label() {
    return Quantizer.plain(bitsPerPixel) + "bpp";
  }

  /**
   * The encoding of the highest level, found by bisection, whose sent bits keep to the target; that
   * of the lowest level if none does.
   *
   * @param encoded the encoding at a level; higher levels send more
   */
  Encoding best(int lowest, int highest, IntFunction<Encoding> encoded, Link link, int pixels) {
    double most = bitsPerPixel * pixels;
    Encoding best = encoded.apply(lowest);
    int low = lowest;
    int high = highest + 1;
    while (high - low > 1) {
      int middle = (low + high) >>> 1;
      Encoding tried = encoded.apply(middle);
      if (link.sentBits(tried.packets().size(), tried.payloadBits()) <= most) {
        low = middle;
        best = tried;
      } else {
        high = middle;
      }
    }
    return best;
  }
}
