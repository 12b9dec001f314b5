package linkworthy.codec;

import java.util.List;
import java.util.Optional;
import java.util.function.Function;
import linkworthy.input.Key;
import linkworthy.input.Kind;
import linkworthy.input.YamlNode;

/** Reads how many components a transform codec keeps: one of four keys, each with a list. */
final class KeepReader {
  /** The keys, in the order of their naming in messages. */
  static final List<String> KEYS = List.of("keep", "share", "bits-per-pixel", "noise-floor");

  private static final int MOST = 1 << 20;
  private static final Kind.Whole COUNT = new Kind.Whole(0, MOST);
  private static final Kind.Real SHARE = Kind.Real.above(0, 1, "a share above 0, up to 1");
  private static final Kind.Real RATE =
      Kind.Real.above(0, Keep.Rate.MOST, "sent bits per pixel above 0, up to " + Keep.Rate.MOST);
  private static final Kind.Real DEVIATION =
      Kind.Real.from(0.001, 65_536, "a standard deviation in grey levels from 0.001 to 65536");
  private static final Kind.WordOr NOISE_FLOOR =
      new Kind.WordOr(
          "true",
          DEVIATION,
          "true, or the noise's standard deviation in grey levels from 0.001 to 65536");
  private static final String OTHERS = "another of the four must be given";

  /** The four keys. */
  static List<Key> keys() {
    return List.of(
        Key.optional(
            "keep",
            new Kind.OneOrMore(COUNT),
            OTHERS + "; mean: all",
            "components; mean takes 0 or no key at all"),
        Key.optional(
            "share", new Kind.OneOrMore(SHARE), OTHERS, "share of the variance to be reached"),
        Key.optional(
            "bits-per-pixel",
            new Kind.OneOrMore(RATE),
            OTHERS,
            "sent bits over samples, [before protection](methods.md#which-k), with `planes: luma`"),
        Key.optional(
            "noise-floor",
            new Kind.OneOrMore(NOISE_FLOOR),
            OTHERS,
            "noise in the picture, true if unknown; pca with its own basis"));
  }

  private KeepReader() {}

  static List<Keep> read(YamlNode entry, Basis basis) {
    List<String> given = KEYS.stream().filter(key -> entry.find(key).isPresent()).toList();
    if (given.size() > 1) {
      throw entry
          .get(given.get(1))
          .refuse("stands beside '" + given.get(0) + "'; accepted: one of the two");
    }
    Optional<YamlNode> node = given.stream().findFirst().map(entry::get);
    if (basis.isIdentity()) {
      return ofIdentity(node, given);
    }
    if (node.isEmpty()) {
      throw entry.refuse("has none of " + String.join(", ", KEYS) + "; accepted: one of them");
    }
    return switch (given.get(0)) {
      case "keep" -> each(node.get(), item -> new Keep.First(COUNT.read(item)));
      case "share" -> each(node.get(), KeepReader::share);
      case "bits-per-pixel" -> each(node.get(), KeepReader::rate);
      default -> noiseFloors(node.get(), basis);
    };
  }

  private static List<Keep> ofIdentity(Optional<YamlNode> node, List<String> given) {
    if (node.isEmpty()) {
      return List.of(new Keep.All());
    }
    if (!given.get(0).equals("keep")) {
      throw node.get().refuse("does not go with 'transform: mean'; accepted: keep: 0, or nothing");
    }
    List<YamlNode> items = node.get().oneOrMore();
    if (items.size() == 1 && COUNT.read(items.get(0)) == 0) {
      return List.of(new Keep.First(0));
    }
    throw node.get().bad("0 (the means alone), or no 'keep' for all, with 'transform: mean'");
  }

  private static List<Keep> each(YamlNode node, Function<YamlNode, Keep> item) {
    return node.oneOrMore().stream().map(item).toList();
  }

  private static Keep share(YamlNode node) {
    return new Keep.Share(SHARE.read(node));
  }

  private static Keep rate(YamlNode node) {
    return new Keep.Rate(RATE.read(node));
  }

  private static List<Keep> noiseFloors(YamlNode node, Basis basis) {
    if (!basis.isSent()) {
      throw node.refuse(
          "goes by the singular values of each picture; accepted with 'transform: pca' and a basis"
              + " of the picture's own");
    }
    return each(node, KeepReader::noiseFloor);
  }

  private static Keep noiseFloor(YamlNode node) {
    NOISE_FLOOR.check(node);
    return NOISE_FLOOR.isWord(node)
        ? Keep.NoiseFloor.UNKNOWN
        : new Keep.NoiseFloor(DEVIATION.read(node));
  }
}
