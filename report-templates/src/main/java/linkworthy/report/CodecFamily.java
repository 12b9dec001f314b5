package linkworthy.report;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.LinkedHashMap;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.stream.Collectors;

/**
 * Codecs of one transform over one arrangement, under a common heading.
 *
 * @param index place among the families, from 0
 * @param name transform and arrangement, or {@code other codecs}
 * @param common the words that all its labels share, or empty
 * @param members in the study's order
 */
record CodecFamily(int index, String name, String common, List<Member> members) {
  /**
   * A codec of the family.
   *
   * @param index place in the family, from 0
   * @param label what is left of its label when the heading is taken away
   */
  record Member(CodecColumn codec, int index, String label) {}

  /** The family with some of its members alone, each under its own index and label. */
  CodecFamily only(Set<String> labels) {
    return new CodecFamily(
        index,
        name,
        common,
        members.stream().filter(m -> labels.contains(m.codec().label())).toList());
  }

  /** Name and common words. */
  String heading() {
    return common.isEmpty() ? name : name + ", " + common;
  }

  static List<CodecFamily> of(List<CodecColumn> codecs) {
    Map<String, List<CodecColumn>> groups = new LinkedHashMap<>();
    for (CodecColumn codec : codecs) {
      String name = (codec.transform() + " " + codec.over()).strip();
      groups
          .computeIfAbsent(name.isEmpty() ? "other codecs" : name, key -> new ArrayList<>())
          .add(codec);
    }
    List<CodecFamily> families = new ArrayList<>();
    groups.forEach((name, members) -> families.add(family(families.size(), name, members)));
    return families;
  }

  private static CodecFamily family(int index, String name, List<CodecColumn> codecs) {
    List<List<String>> words = codecs.stream().map(codec -> words(codec, name)).toList();
    Set<String> common = new LinkedHashSet<>(words.get(0));
    words.forEach(common::retainAll);
    List<String> labels =
        words.stream()
            .map(w -> w.stream().filter(x -> !common.contains(x)).collect(Collectors.joining(" ")))
            .toList();
    boolean split =
        codecs.size() > 1
            && codecs.stream().allMatch(codec -> codec.label().startsWith(name + " "))
            && labels.stream().distinct().count() == codecs.size()
            && labels.stream().noneMatch(String::isEmpty);
    List<Member> members = new ArrayList<>();
    for (int i = 0; i < codecs.size(); i++) {
      members.add(
          new Member(codecs.get(i), i, split ? labels.get(i) : String.join(" ", words.get(i))));
    }
    return new CodecFamily(index, name, split ? String.join(" ", common) : "", members);
  }

  private static List<String> words(CodecColumn codec, String name) {
    String label = codec.label();
    String rest = label.startsWith(name + " ") ? label.substring(name.length() + 1) : label;
    return Arrays.asList(rest.strip().split("\\s+"));
  }
}
