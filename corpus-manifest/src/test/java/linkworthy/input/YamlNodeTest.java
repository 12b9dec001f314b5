package linkworthy.input;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatThrownBy;

import java.io.IOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.Files;
import java.nio.file.Path;
import java.util.Arrays;
import java.util.List;
import java.util.Random;
import java.util.Set;
import org.assertj.core.api.ThrowableAssert.ThrowingCallable;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.api.io.TempDir;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class YamlNodeTest {
  private static final String STUDY =
      """
      name: yard
      pictures:
        select: [field, deep]
      codecs:
        - transform: pca
          keep: [4, 8]
        - transform: dct
          step: 8
      empty: []
      quoted: "8"
      nothing:
      """;

  @TempDir Path folder;

  private static YamlNode study() {
    return YamlNode.parse("s.yaml", STUDY);
  }

  @Test
  void readsValuesWithTheirLines() {
    YamlNode study = study();
    assertThat(study.keys())
        .containsExactly("name", "pictures", "codecs", "empty", "quoted", "nothing");
    assertThat(study.get("name").text()).isEqualTo("yard");
    assertThat(study.source()).isEqualTo("s.yaml");
    assertThat(study.get("pictures").get("select").line()).isEqualTo(3);
    List<YamlNode> codecs = study.get("codecs").items();
    assertThat(codecs).hasSize(2);
    assertThat(codecs.get(1).get("step").integer(1, 100)).isEqualTo(8);
    assertThat(codecs.get(1).get("step").line()).isEqualTo(8);
    assertThat(codecs.get(1).get("step").text()).as("a number counts as text").isEqualTo("8");
    assertThat(codecs.get(0).isMapping()).isTrue();
    assertThat(codecs.get(0).get("keep").isSequence()).isTrue();
    assertThat(codecs.get(0).get("keep").oneOrMore()).hasSize(2);
    assertThat(codecs.get(1).get("step").oneOrMore()).hasSize(1);
    assertThat(study.find("other")).isEmpty();
  }

  @Test
  void namesTheNearestKeyAndTheLine() {
    assertBad(
        () -> study().get("codecs").items().get(1).onlyKeys(Set.of("transform", "steps")),
        "s.yaml, line 8: unknown key 'step' in codecs[1]; did you mean 'steps'? accepted: ");
    assertBad(() -> study().get("other"), "s.yaml, line 1: missing key 'other'");
    assertBad(
        () -> study().get("pictures").get("manifest"),
        "s.yaml, line 2: missing key 'manifest' in pictures");
    assertThat(study().get("pictures").onlyKeys(Set.of("select", "manifest")).line()).isEqualTo(2);
  }

  @Test
  void refusesTheWrongKindOfValue() {
    assertBad(
        () -> study().get("pictures").number("a number"),
        "s.yaml, line 2: 'pictures' is a group of keys; accepted: a number");
    assertBad(() -> study().get("codecs").text(), "'codecs' is a list; accepted: some text");
    assertBad(
        () -> study().get("name").get("x"),
        "s.yaml, line 1: 'name' is 'yard'; accepted: keys with values");
    assertBad(() -> study().get("name").items(), "'name' is 'yard'; accepted: a list");
    assertBad(
        () -> study().get("empty").items(), "'empty' is an empty list; accepted: a list with");
    assertBad(() -> study().get("empty").oneOrMore(), "'empty' is an empty list");
    assertBad(() -> study().get("nothing").text(), "'nothing' is empty; accepted: some text");
    assertBad(() -> study().get("nothing").number("a number"), "'nothing' is empty");
    assertBad(
        () -> study().get("quoted").number("a number"), "'quoted' is '8'; accepted: a number");
    assertBad(() -> study().get("quoted").integer(0, 9), "'quoted' is '8'");
    assertBad(() -> study().get("name").flag(), "'name' is 'yard'; accepted: true or false");
    assertBad(
        () -> study().get("name").oneOf(List.of("farm", "yards")),
        "'name' is 'yard'; did you mean 'yards'? accepted: farm, yards");
    assertThat(study().get("quoted").text()).isEqualTo("8");
    assertThat(study().get("name").oneOf(List.of("farm", "yard"))).isEqualTo("yard");
  }

  @ParameterizedTest
  @CsvSource({
    "8, 8",
    "-8.5, -8.5",
    "+3, 3",
    ".5, 0.5",
    "5., 5",
    "1e-3, 0.001",
    "1.5E+2, 150",
    "010, 10",
    "1e-400, 0",
    "-0, -0.0"
  })
  void readsNumbers(String text, double expected) {
    assertThat(value(text).number("a number")).isEqualTo(expected);
  }

  @ParameterizedTest
  @ValueSource(
      strings = {
        "NaN",
        ".nan",
        ".inf",
        "-.inf",
        "Infinity",
        "1e999",
        "0x10",
        "1_000",
        "1,5",
        "1:30",
        "'1'",
        "1 2",
        "e5",
        ".",
        "+",
        "٣",
        "true",
        "~",
        "1f",
        "0x1p3"
      })
  void refusesWhatIsNoFiniteNumber(String text) {
    assertBad(() -> value(text).number("a number above 0"), "accepted: a number above 0");
  }

  @ParameterizedTest
  @ValueSource(strings = {"2", "11", "3.0", "1e1", "٥", "99999999999999999999", "-5", "five"})
  void refusesWhatIsNoWholeNumberInItsRange(String text) {
    assertBad(() -> value(text).integer(3, 10), "accepted: a whole number from 3 to 10");
  }

  @Test
  void readsFlagsAndWholeNumbersAtTheirLimits() {
    assertThat(value("true").flag()).isTrue();
    assertThat(value("false").flag()).isFalse();
    assertThat(value("3").integer(3, 10)).isEqualTo(3);
    assertThat(value("10").integer(3, 10)).isEqualTo(10);
    for (String text : List.of("yes", "on", "True", "'true'", "1")) {
      assertBad(() -> value(text).flag(), "accepted: true or false");
    }
  }

  @Test
  void refusesAKeyThatStandsTwice() {
    assertBad(() -> parse("a: 1\nb: {c: 1,\n  c: 2}"), "s.yaml, line 3: key 'b.c' stands twice");
  }

  @ParameterizedTest
  @ValueSource(
      strings = {
        "a: &x 5",
        "a: &x [1]",
        "a: &x {b: 1}\nc: *x",
        "*x : 1",
        "&x a: 1",
        "base: &x {b: 1}\n<<: *x",
        "a: !!int 5",
        "a: ! 5",
        "a: !!binary aGk=",
        "a: !!java.net.URL [x]",
        "!!map {a: 1}",
        "a: !<tag:x> {}"
      })
  void refusesAnchorsAliasesTagsAndMergedKeys(String text) {
    assertBad(() -> parse(text), "anchors, aliases and tags are not accepted");
  }

  @Test
  void refusesAnExponentiallyExpandingFile() {
    StringBuilder text = new StringBuilder("a0: &a0 [x, x, x, x, x, x, x, x, x]\n");
    for (int i = 1; i < 20; i++) {
      String alias = "*a" + (i - 1);
      text.append("a").append(i).append(": &a").append(i).append(" [");
      text.append(String.join(", ", java.util.Collections.nCopies(9, alias))).append("]\n");
    }
    assertBad(() -> parse(text.toString()), "line 1: anchors, aliases and tags are not accepted");
  }

  @Test
  void refusesDeepNestingAndTooManyValues() {
    assertThat(parse("a: " + "[".repeat(31) + "]".repeat(31)).keys()).containsExactly("a");
    assertBad(() -> parse("a: " + "[".repeat(33) + "]".repeat(33)), "nested too deep or too long");
    assertBad(() -> parse("[".repeat(500_000)), "nested too deep or too long");
    assertBad(() -> parse("{a: ".repeat(200_000)), "nested too deep or too long");
    assertBad(() -> parse("a: [" + "1,".repeat(100_001) + "1]"), "nested too deep or too long");
  }

  @Test
  void refusesWhatIsNotOneDocument() {
    assertBad(() -> parse("a: 1\n---\nb: 1\n"), "s.yaml holds several documents; accepted: one");
    for (String text : List.of("", "\n\n", "# only a comment\n", "---\n", "\uFEFF", "---\n...\n")) {
      assertBad(() -> parse(text), "s.yaml is empty; accepted: keys with values");
    }
    assertBad(() -> parse("just words").keys(), "s.yaml, line 1: the document is 'just words'");
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "a:\\n\\t- 1|line 2: not valid YAML: found character '\\t(TAB)'",
        "a: [1,,2]|line 1: not valid YAML: expected the node content, but found ','",
        "a: [1\\nb: 2|line 2: not valid YAML: ",
        "a: 5\\n\\n b: 1|line 3: not valid YAML: ",
        "a: 'open|line 1: not valid YAML: ",
        "? [x]\\n: 1|line 1: a key is a list, a group or empty; accepted: a word",
        "'': 1|line 1: a key is a list, a group or empty",
        "%YAML 9.9\\n---\\na: 1|not valid YAML: ",
        "@a: 1|line 1: not valid YAML: ",
        "a: \\0|not valid YAML: "
      })
  void refusesWhatIsNotYaml(String text, String complaint) {
    assertBad(() -> parse(text.translateEscapes()), complaint);
  }

  @Test
  void readsAByteOrderMarkAndCarriageReturns() throws IOException {
    Path file = folder.resolve("s.yaml");
    Files.writeString(file, "\uFEFFname: yard\r\nstep: 8\r\n");
    YamlNode read = YamlNode.read(file);
    assertThat(read.get("name").text()).isEqualTo("yard");
    assertThat(read.get("step").line()).isEqualTo(2);
    assertThat(read.source()).isEqualTo(file.toString());
  }

  @Test
  void refusesFilesThatAreNoText() throws IOException {
    Path file = folder.resolve("s.yaml");
    assertBad(() -> YamlNode.read(file), "s.yaml does not exist");
    assertBad(() -> YamlNode.read(folder), "is a folder; accepted: a YAML file");
    Files.write(file, new byte[] {'a', ':', ' ', (byte) 0xFF});
    assertBad(() -> YamlNode.read(file), "is not UTF-8 text");
    Files.write(file, new byte[(1 << 20) + 1]);
    assertBad(() -> YamlNode.read(file), "is larger than 1 MiB");
    byte[] comment = new byte[1 << 20];
    Arrays.fill(comment, (byte) '#');
    System.arraycopy("a: 1\n".getBytes(StandardCharsets.US_ASCII), 0, comment, 0, 5);
    Files.write(file, comment);
    assertThat(YamlNode.read(file).keys()).containsExactly("a");
  }

  @Test
  void messagesStayOnOneLineAndShort() {
    String key = "k\u001b[31m\u2028" + "x".repeat(500);
    assertThatThrownBy(
            () -> parse("\"" + key.replace("\u001b", "\\e") + "\": 1").onlyKeys(Set.of("name")))
        .isInstanceOf(BadInput.class)
        .message()
        .hasSizeLessThan(200)
        .doesNotContain("\u001b", "\u2028")
        .contains("k\\u001b[31m");
    assertBad(() -> value("\"a\\nb" + "y".repeat(500) + "\"").number("a number"), "'a' is 'a by");
  }

  @Test
  void replacesAndAddsValues() {
    YamlNode study = study();
    assertThat(study.with("name", "farm").get("name").text()).isEqualTo("farm");
    assertThat(study.get("name").text()).as("the original is unchanged").isEqualTo("yard");
    YamlNode one = study.with("codecs.1.step", "[16, 32]");
    assertThat(one.get("codecs").items().get(1).get("step").items().get(1).integer(1, 99))
        .isEqualTo(32);
    assertThat(one.get("codecs").items().get(0).get("keep").items()).hasSize(2);
    assertThat(
            study.with("link.payload-bytes", "96").get("link").get("payload-bytes").integer(1, 99))
        .isEqualTo(96);
    YamlNode whole = study.with("codecs.0", "{transform: mean}").get("codecs").items().get(0);
    assertThat(whole.keys()).containsExactly("transform");
    assertThat(study.with("pictures.select", "colour").get("pictures").get("select").text())
        .isEqualTo("colour");
  }

  @Test
  void saysWhichOptionAReplacedValueIsFrom() {
    YamlNode replaced =
        study().with("codecs.1", "{stepp: 1, keep: [a]}").get("codecs").items().get(1);
    assertBad(
        () -> replaced.onlyKeys(Set.of("step", "keep")),
        "--set codecs.1: unknown key 'stepp' in codecs[1]; did you mean 'step'? accepted: ");
    assertBad(
        () -> replaced.get("keep").items().get(0).number("a number"),
        "--set codecs.1: 'codecs[1].keep[0]' is 'a'; accepted: a number");
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "codecs.2.step|1|--set codecs.2.step: '2' is no item of 'codecs'; accepted: 0 to 1",
        "codecs.-1|1|'-1' is no item of 'codecs'; accepted: 0 to 1",
        "codecs.first|1|'first' is no item of 'codecs'; accepted: 0 to 1",
        "codecs.9999999|1|is no item of 'codecs'",
        "empty.0|1|'0' is no item of 'empty'; accepted: nothing, the list is empty",
        "name.first|1|--set name.first: 'name' has no keys; accepted: a path to a value",
        "pictures..x|1|--set pictures..x: an empty key; accepted: a path to a value",
        "''|1|--set : an empty key",
        "name|''|--set name is empty; accepted: a value",
        "name|[1|--set name: not valid YAML",
        "name|&x 1|--set name: anchors, aliases and tags are not accepted",
      })
  void refusesAPathThatLeadsNowhere(String path, String text, String complaint) {
    assertBad(() -> study().with(path, text), complaint);
  }

  /** 2000 damaged studies; case i is drawn with seed i. */
  @Test
  void damageGivesAStudyOrOneLine() {
    int refused = 0;
    for (int seed = 0; seed < 2000; seed++) {
      Random random = new Random(seed);
      StringBuilder text = new StringBuilder(STUDY);
      for (int hit = 0; hit <= seed % 5; hit++) {
        char c = ":-[]{}#&*!|>'\"%@`,? \n\t\0\uFEFF\uD800\u0085x0".charAt(random.nextInt(28));
        text.insert(random.nextInt(text.length()), c);
      }
      try {
        assertThat(parse(text.toString()).source()).isEqualTo("s.yaml");
      } catch (BadInput e) {
        refused++;
        assertThat(e.getMessage()).as("seed %d", seed).startsWith("s.yaml").doesNotContain("\n");
      }
    }
    assertThat(refused).isBetween(200, 1900);
  }

  private static YamlNode parse(String text) {
    return YamlNode.parse("s.yaml", text);
  }

  private static YamlNode value(String text) {
    return parse("a: " + text).get("a");
  }

  private static void assertBad(ThrowingCallable call, String complaint) {
    assertThatThrownBy(call)
        .isInstanceOf(BadInput.class)
        .hasMessageContaining(complaint)
        .hasMessageMatching("[^\n]*");
  }
}
