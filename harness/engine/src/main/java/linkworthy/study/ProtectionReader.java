package linkworthy.study;

import java.util.ArrayList;
import java.util.EnumSet;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Locale;
import java.util.Set;
import linkworthy.input.YamlNode;
import linkworthy.link.HammingCode;
import linkworthy.link.Importance;
import linkworthy.link.Link;
import linkworthy.link.Protection;
import org.jspecify.annotations.Nullable;

/** Reads the value of {@code protect}. */
final class ProtectionReader {
  private static final List<String> PARTS =
      List.of("repeat", "reed-solomon", "hamming", "retransmit");
  private static final List<String> KEYS =
      List.of("repeat", "reed-solomon", "hamming", "retransmit", "ack-bytes", "only");
  private static final List<String> CODE_KEYS = List.of("n", "k", "depth");
  private static final List<String> CLASSES =
      List.of(Importance.values()).stream().map(Importance::id).toList();

  private final YamlNode defaults;
  private final Link link;

  /**
   * @param defaults what a group under {@code protect} leaves out
   * @param link whose packets must have room for what protection writes
   */
  ProtectionReader(YamlNode defaults, Link link) {
    this.defaults = defaults;
    this.link = link;
  }

  Protection read(YamlNode node) {
    if (!node.isMapping() && !node.isSequence()) {
      if (node.text().equals(Protection.NONE_ID)) {
        return Protection.NONE;
      }
      throw node.bad("none, a group of keys, or a list of such groups for classes of their own");
    }
    Set<Importance> taken = EnumSet.noneOf(Importance.class);
    List<Protection.Rule> rules = new ArrayList<>();
    for (YamlNode group : node.oneOrMore()) {
      rules.add(rule(group, taken));
    }
    Protection protection = new Protection(rules);
    int least = protection.leastPayload(Link.MIN_PAYLOAD);
    if (link.payloadBytes() < least) {
      throw node.refuse(
          "takes up to "
              + protection.overheadBytes(link.payloadBytes())
              + " bytes of a payload, and payload-bytes is "
              + link.payloadBytes()
              + "; accepted: no reed-solomon and no hamming, or payload-bytes of at least "
              + least);
    }
    return protection;
  }

  private Protection.Rule rule(YamlNode group, Set<Importance> taken) {
    group.onlyKeys(new LinkedHashSet<>(KEYS));
    if (PARTS.stream().noneMatch(part -> group.find(part).isPresent())) {
      throw group.refuse("protects nothing; accepted: one or more of " + String.join(", ", PARTS));
    }
    int retransmit = whole(group, "retransmit", 0, Protection.MAX_RETRANSMIT);
    if (retransmit == 0 && group.find("ack-bytes").isPresent()) {
      throw group
          .get("ack-bytes")
          .refuse("belongs to retransmit; accepted: retransmit of at least 1, or no ack-bytes");
    }
    return new Protection.Rule(
        classes(group, taken),
        whole(group, "repeat", 1, Protection.MAX_REPEAT),
        code(given(group, "reed-solomon")),
        hamming(given(group, "hamming")),
        retransmit,
        whole(group, "ack-bytes", 0, Link.MAX_PAYLOAD));
  }

  private YamlNode given(YamlNode group, String key) {
    return group.find(key).orElseGet(() -> defaults.get(key));
  }

  private int whole(YamlNode group, String key, int min, int max) {
    return (int) given(group, key).integer(min, max);
  }

  private Set<Importance> classes(YamlNode group, Set<Importance> taken) {
    Set<Importance> classes = EnumSet.noneOf(Importance.class);
    for (YamlNode item : given(group, "only").oneOrMore()) {
      Importance importance = Importance.valueOf(item.oneOf(CLASSES).toUpperCase(Locale.ROOT));
      if (!taken.add(importance)) {
        throw (group.find("only").isPresent() ? item : group)
            .refuse(
                "names the class '"
                    + importance.id()
                    + "' a second time; accepted: each class once, in one group");
      }
      classes.add(importance);
    }
    return classes;
  }

  private Protection.@Nullable ErasureCode code(YamlNode node) {
    if (!node.isMapping()) {
      if (!node.isSequence() && node.text().equals(Protection.NONE_ID)) {
        return null;
      }
      throw node.bad("none, or a group with n, k and depth");
    }
    node.onlyKeys(new LinkedHashSet<>(CODE_KEYS));
    int n = (int) node.get("n").integer(2, 255);
    int k = (int) node.get("k").integer(1, 254);
    if (k >= n) {
      throw node.get("k").refuse("is " + k + "; accepted: 1 to " + (n - 1) + ", below n");
    }
    return new Protection.ErasureCode(n, k, whole(node, "depth", 1, Protection.MAX_DEPTH));
  }

  private @Nullable HammingCode hamming(YamlNode node) {
    if (!node.isMapping()) {
      if (!node.isSequence() && node.text().equals(Protection.NONE_ID)) {
        return null;
      }
      throw node.bad("none, or a group with depth");
    }
    node.onlyKeys(Set.of("depth"));
    return new HammingCode(whole(node, "depth", 1, Protection.MAX_DEPTH));
  }
}
