package linkworthy.study;

import java.util.ArrayList;
import java.util.EnumSet;
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
    StudyKeys.protect().check(node);
    if (StudyKeys.protect().isWord(node)) {
      return Protection.NONE;
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
    if (PARTS.stream().noneMatch(part -> group.find(part).isPresent())) {
      throw group.refuse("protects nothing; accepted: one or more of " + String.join(", ", PARTS));
    }
    int retransmit = StudyKeys.RETRANSMIT.read(given(group, "retransmit"));
    if (retransmit == 0 && group.find("ack-bytes").isPresent()) {
      throw group
          .get("ack-bytes")
          .refuse("belongs to retransmit; accepted: retransmit of at least 1, or no ack-bytes");
    }
    return new Protection.Rule(
        classes(group, taken),
        StudyKeys.REPEAT.read(given(group, "repeat")),
        code(given(group, "reed-solomon")),
        hamming(given(group, "hamming")),
        retransmit,
        StudyKeys.ACK.read(given(group, "ack-bytes")));
  }

  private YamlNode given(YamlNode group, String key) {
    return group.find(key).orElseGet(() -> defaults.get(key));
  }

  private Set<Importance> classes(YamlNode group, Set<Importance> taken) {
    Set<Importance> classes = EnumSet.noneOf(Importance.class);
    for (YamlNode item : given(group, "only").oneOrMore()) {
      Importance importance =
          Importance.valueOf(StudyKeys.CLASSES.read(item).toUpperCase(Locale.ROOT));
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
      return null;
    }
    int n = StudyKeys.N.read(node.get("n"));
    int k = StudyKeys.K.read(node.get("k"));
    if (k >= n) {
      throw node.get("k").refuse("is " + k + "; accepted: 1 to " + (n - 1) + ", below n");
    }
    return new Protection.ErasureCode(
        n,
        k,
        StudyKeys.DEPTH.read(given(node, "depth")),
        StudyKeys.CORRECTS.read(given(node, "corrects")).equals(Protection.ErasureCode.ERRORS));
  }

  private @Nullable HammingCode hamming(YamlNode node) {
    return node.isMapping() ? new HammingCode(StudyKeys.DEPTH.read(given(node, "depth"))) : null;
  }
}
