package linkworthy.codec;

import java.util.List;
import java.util.Optional;
import java.util.function.Function;
import linkworthy.input.YamlNode;

/** Reads how many components a transform codec keeps: one of four keys, each with a list. */
final class KeepReader {
  /** The keys, in the order of their naming in messages. */
  static final List<String> KEYS = List.of("keep", "share", "bits-per-pixel", "noise-floor");

  private static final int MOST = 1 << 20;

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
      case "keep" -> each(node.get(), item -> new Keep.First((int) item.integer(0, MOST)));
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
    if (items.size() == 1 && items.get(0).integer(0, MOST) == 0) {
      return List.of(new Keep.First(0));
    }
    throw node.get().bad("0 (the means alone), or no 'keep' for all, with 'transform: mean'");
  }

  private static List<Keep> each(YamlNode node, Function<YamlNode, Keep> item) {
    return node.oneOrMore().stream().map(item).toList();
  }

  private static Keep share(YamlNode node) {
    String accepted = "a share above 0, up to 1";
    double share = node.number(accepted);
    if (!(share > 0 && share <= 1)) {
      throw node.bad(accepted);
    }
    return new Keep.Share(share);
  }

  private static Keep rate(YamlNode node) {
    String accepted = "sent bits per pixel above 0, up to " + Keep.Rate.MOST;
    double rate = node.number(accepted);
    if (!(rate > 0 && rate <= Keep.Rate.MOST)) {
      throw node.bad(accepted);
    }
    return new Keep.Rate(rate);
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
    String accepted = "true, or the noise's standard deviation in grey levels from 0.001 to 65536";
    if (!node.isMapping() && !node.isSequence() && node.text().equals("true")) {
      return Keep.NoiseFloor.UNKNOWN;
    }
    double deviation = node.number(accepted);
    if (!(deviation >= 0.001 && deviation <= 65_536)) {
      throw node.bad(accepted);
    }
    return new Keep.NoiseFloor(deviation);
  }
}
