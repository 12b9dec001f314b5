package linkworthy.input;

import static org.assertj.core.api.Assertions.assertThat;
import static org.assertj.core.api.Assertions.assertThatCode;
import static org.assertj.core.api.Assertions.assertThatExceptionOfType;
import static org.assertj.core.api.Assertions.assertThatIllegalArgumentException;

import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import org.junit.jupiter.api.Test;
import org.junit.jupiter.params.ParameterizedTest;
import org.junit.jupiter.params.provider.CsvSource;
import org.junit.jupiter.params.provider.ValueSource;

class KeyGroupTest {
  private static final Kind.Whole COUNT = new Kind.Whole(1, 9);
  private static final Kind.Real SHARE = Kind.Real.above(0, 1, "a share above 0, up to 1");

  private static final KeyGroup INNER = KeyGroup.of("inner", Key.required("n", COUNT, "how many"));

  private static final KeyGroup PLANK =
      KeyGroup.of(
              "plank",
              Key.required("wood", Kind.Words.of("oak", "pine"), "what it is of"),
              Key.optional("count", new Kind.OneOrMore(COUNT), "1", "how many"),
              Key.optional("sides", new Kind.Numbers(2, 4), "4", "planed"),
              Key.optional("dry", new Kind.Flag(), "`false`", ""),
              Key.optional("label", Kind.Text.line(5), "none", "name"),
              Key.optional("cut", new Kind.WordOr("none", INNER, "none, or a group"), "none", ""),
              Key.optional("length-m", Kind.Real.from(0.5, 6, "0.5 to 6 m"), "one of two", ""),
              Key.optional("share", SHARE, "one of two", ""))
          .exactlyOne("size", List.of("length-m", "share"));

  private static YamlNode node(String text) {
    return YamlNode.parse("p.yaml", text);
  }

  @ParameterizedTest
  @ValueSource(
      strings = {
        "{wood: oak, share: 1}",
        "{wood: pine, count: [1, 9], dry: true, label: 'a b', cut: none, length-m: 0.5}",
        "{wood: pine, count: 3, sides: 2.0, cut: {n: 2}, length-m: 6}",
        "{wood: oak, label: 7, share: 1e-9}",
      })
  void acceptsWhatItDescribes(String text) {
    assertThatCode(() -> PLANK.check(node(text))).doesNotThrowAnyException();
  }

  @ParameterizedTest
  @CsvSource(
      delimiter = '|',
      value = {
        "{share: 1}|missing key 'wood'",
        "{wood: oak}|has no size; accepted: one of length-m, share",
        "{wood: oak, share: 1, length-m: 2}|has several: length-m, share; accepted: one of",
        "{wood: ok, share: 1}|'wood' is 'ok'; did you mean 'oak'? accepted: oak, pine",
        "{wod: oak, share: 1}|unknown key 'wod'; did you mean 'wood'?",
        "{wood: oak, share: 0}|'share' is '0'; accepted: a share above 0, up to 1",
        "{wood: oak, share: 1.1}|'share' is '1.1'",
        "{wood: oak, length-m: 0.49}|'length-m' is '0.49'; accepted: 0.5 to 6 m",
        "{wood: oak, share: 1, count: []}|'count' is an empty list",
        "{wood: oak, share: 1, count: [1, 10]}|'count[1]' is '10'; accepted: a whole number from 1 to 9",
        "{wood: oak, share: 1, sides: 3}|'sides' is '3'; accepted: 2 or 4",
        "{wood: oak, share: 1, sides: '4'}|accepted: 2 or 4",
        "{wood: oak, share: 1, dry: 1}|accepted: true or false",
        "{wood: oak, share: 1, label: abcdef}|one line of up to 5 characters",
        "{wood: oak, share: 1, cut: some}|'cut' is 'some'; accepted: none, or a group",
        "{wood: oak, share: 1, cut: [1]}|'cut' is a list; accepted: none, or a group",
        "{wood: oak, share: 1, cut: {n: 0}}|'cut.n' is '0'; accepted: a whole number",
        "{wood: oak, share: 1, cut: }|'cut' is empty; accepted: none, or a group",
      })
  void refusesAnythingElseWithOneLine(String text, String complaint) {
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> PLANK.check(node(text)))
        .withMessageStartingWith("p.yaml, line 1: ")
        .withMessageContaining(complaint);
  }

  @Test
  void aGroupWithoutKeysRefusesKeys() {
    KeyGroup empty = KeyGroup.of("empty");
    assertThatCode(() -> empty.check(node("{}"))).doesNotThrowAnyException();
    assertThatExceptionOfType(BadInput.class)
        .isThrownBy(() -> empty.check(node("{a: 1}")))
        .withMessageEndingWith("has keys; accepted: no keys");
  }

  @Test
  void saysTheSameAsSchema() {
    Map<String, Object> shared = new LinkedHashMap<>();
    assertThat(PLANK.schema(shared)).isEqualTo(Map.of("$ref", "#/$defs/plank"));
    assertThat(shared.keySet()).containsExactly("plank", "inner");
    assertThat(shared.get("inner"))
        .isEqualTo(
            Map.of(
                "type",
                "object",
                "properties",
                Map.of(
                    "n",
                    Map.of(
                        "description",
                        "how many: whole number, 1 to 9",
                        "type",
                        "integer",
                        "minimum",
                        1L,
                        "maximum",
                        9L)),
                "additionalProperties",
                false,
                "required",
                List.of("n")));
    assertThat(new Kind.Numbers(2, 4).schema(shared)).isEqualTo(Map.of("enum", List.of(2, 4)));
    assertThat(SHARE.schema(shared))
        .isEqualTo(Map.of("type", "number", "exclusiveMinimum", 0L, "maximum", 1L));
  }

  @Test
  void knowsItsKeys() {
    assertThat(INNER.with(Key.required("m", COUNT, "")).names()).containsExactly("n", "m");
    assertThat(PLANK.kind("share")).isEqualTo(SHARE);
    assertThatIllegalArgumentException().isThrownBy(() -> PLANK.kind("x"));
  }
}
