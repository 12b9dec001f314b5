package linkworthy.app;

import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import linkworthy.codec.CodecFamilies;
import linkworthy.codec.CodecFamily;
import linkworthy.decision.Needs;
import linkworthy.input.Key;
import linkworthy.input.KeyGroup;
import linkworthy.input.Kind;
import linkworthy.link.NodeProfile;
import linkworthy.noise.NoiseLibrary;
import linkworthy.noise.NoiseModel;
import linkworthy.noise.NoiseProcess;
import linkworthy.noise.NoiseProcesses;
import linkworthy.study.StudyKeys;

/** The handbook's page of all keys in Markdown, written from the descriptions that check them. */
final class KeysPage {
  private static final String MUST = "must be given";

  private final StringBuilder page = new StringBuilder();

  private KeysPage() {}

  static String text() {
    KeysPage page = new KeysPage();
    page.study();
    page.codecs();
    page.rest();
    return page.page.toString();
  }

  private void study() {
    say(
        """
        # Every key

        This page is printed by `./linkworthy schema keys`, from the descriptions by which the readers check; do not
        edit it. What the words mean: [methods](methods.md). A complete study:
        [choosing a codec](choosing-a-codec.md#a-study-with-everything).

        An unknown key, a wrong type or a value out of range stops the program with one line: where, what was found,
        what is accepted. Where a list is possible, one value may stand alone; under `codecs` and for severities each
        value of a list is an option of its own. Paths are relative to the folder of the study. `study.yaml` in a
        results folder has the study with all defaults written out. `--set` reaches every key by its path, items of
        lists by number from 0: `--set codecs.0.step=4`.

        Editors that know JSON Schema complete and check these files: give them the schema that
        `./linkworthy schema study` prints (`model`, `node` and `needs` likewise), as their own manual says. The
        schemas are also files: `harness/studies/study.schema.json`, `harness/studies/needs.schema.json`,
        `noise-models/library/model.schema.json`, `noise-models/library/nodes/node.schema.json`. A schema knows keys,
        types, ranges and words; rules between keys are for the program, and `assess --dry-run` checks them.

        ## Study
        """);
    table(StudyKeys.study(CodecFamilies.installed()).keys());
    say(
        "\n`replicates` is a number, or a group; then a picture ends once its noise is averaged out:\n");
    table(StudyKeys.earlyStop().keys());
    say("\n## Pictures\n");
    table(StudyKeys.pictures().keys());
    impairments();
  }

  private void impairments() {
    say(
        """

        ## Impairments

        An entry names a noise model and has exactly one severity key. Clean pictures are always run as well.
        """);
    List<? extends Kind> models = StudyKeys.impairments().all();
    KeyGroup own = (KeyGroup) models.get(models.size() - 1);
    table(own.keys().subList(0, 3));
    say(
        "\nParameters:\n\n| key | of | default | what | range |\n| --- | --- | --- | --- | --- |\n");
    models(NoiseModel::parameterKeys);
    say("\nSeverities:\n\n| key | of | what | range |\n| --- | --- | --- | --- |\n");
    models(NoiseModel::axisKeys);
  }

  private interface Keys {
    List<Key> of(NoiseModel model);
  }

  /** A row for each key with the models that have it alike. */
  private void models(Keys keys) {
    Map<String, List<Key>> rows = new LinkedHashMap<>();
    Map<String, List<String>> models = new LinkedHashMap<>();
    for (NoiseModel model : NoiseLibrary.shipped()) {
      for (Key key : keys.of(model)) {
        String row = key.toString();
        rows.computeIfAbsent(row, r -> new ArrayList<>()).add(key);
        models.computeIfAbsent(row, r -> new ArrayList<>()).add(model.id());
      }
    }
    rows.forEach(
        (row, alike) -> {
          Key key = alike.get(0);
          List<String> of = models.getOrDefault(row, List.of());
          boolean isSeverity = key.kind() instanceof Kind.OneOrMore;
          List<String> cells = new ArrayList<>(List.of("`" + key.name() + "`", those(of)));
          if (!isSeverity) {
            cells.add(key.usual());
          }
          cells.add(key.what());
          cells.add(key.kind().words());
          row(cells.toArray(new String[0]));
        });
  }

  /** Models in words; all radios together are not listed one by one. */
  private static String those(List<String> ids) {
    if (ids.size() == NoiseLibrary.shipped().size() - 1) {
      return "all but `trace`";
    }
    List<String> radios =
        NoiseLibrary.shipped().stream()
            .map(NoiseModel::id)
            .filter(id -> id.startsWith("radio-"))
            .toList();
    List<String> others = ids.stream().filter(id -> !radios.contains(id)).toList();
    return !ids.containsAll(radios)
        ? Kind.code(ids)
        : (others.isEmpty() ? "" : Kind.code(others) + ", ") + "all radios";
  }

  private void codecs() {
    say(
        """

        ## Codecs

        An entry has the key of one family, and may have `protect`.
        """);
    for (CodecFamily family : CodecFamilies.installed().all()) {
      family
          .keys()
          .ifPresent(
              keys -> {
                say("\n### " + family.id() + "\n");
                table(keys.keys());
              });
      if (family.id().equals("command")) {
        say(
            "\nRuns only with `--allow-commands`; [confined](methods.md#plugins-and-programs) where the machine can. Keys of the group `command`:\n");
        KeyGroup keys = family.keys().orElseThrow();
        table(((KeyGroup) keys.kind(family.id())).keys());
      }
    }
    say("\nFamilies of plugins explain their keys in `./linkworthy codecs --plugins DIR`.\n");
  }

  private void rest() {
    say(
        """

        ## Protect

        `none`, a group, or a list of groups for classes of their own. A group has `repeat`, `reed-solomon`,
        `hamming`, `retransmit` or several of them.
        """);
    table(StudyKeys.protection().keys());
    say("\nKeys of the group `reed-solomon`:\n");
    table(StudyKeys.codeKeys().keys());
    say("\nKeys of the group `hamming`:\n");
    table(StudyKeys.hammingKeys().keys());
    say("\n## Link\n");
    table(StudyKeys.link().keys());
    say(
        "\n## Node\n\n`none`, the id of a shipped profile, the path of a profile file, or a group:\n");
    table(StudyKeys.node().keys());
    say("\nKeys of a profile, in the group or in a file:\n");
    table(NodeProfile.KEYS.keys());
    say("\nKeys of the group `sent-nj-per-bit`:\n");
    table(NodeProfile.Radio.KEYS.keys());
    say("\n## Noise model files\n");
    NoiseProcess first = NoiseProcesses.find("gaussian");
    table(NoiseModel.group(first).keys().stream().map(KeysPage::ofAnyProcess).toList());
    say(
        "\nFurther keys of a process:\n\n| key | of | default | what | range |\n| --- | --- | --- | --- | --- |\n");
    for (NoiseProcess process : NoiseProcesses.all().values()) {
      for (Key key : process.keys()) {
        if (process.settingKeys().contains(key.name())) {
          row(
              "`" + key.name() + "`",
              "`" + process.id() + "`",
              key.usual(),
              key.what(),
              key.kind().words());
        }
      }
    }
    say("\n## Needs\n\nA file for `./linkworthy shortlist RESULTS --need FILE`:\n");
    table(Needs.KEYS.keys());
    say("\nKeys of a need, which has exactly one level:\n");
    table(((KeyGroup) ((Kind.Items) Needs.KEYS.kind("needs")).item()).keys());
  }

  /** The key of a model file in words that hold for every process. */
  private static Key ofAnyProcess(Key key) {
    String words =
        switch (key.name()) {
          case "process" -> Kind.code(List.copyOf(NoiseProcesses.all().keySet()));
          case "acts-on" -> "`samples`, `packets`, `bits`, as the process allows; or a list";
          case "severity" -> "severity keys of the process; or a list";
          default -> "";
        };
    return words.isEmpty()
        ? key
        : new Key(key.name(), Kind.Text.any(words), key.usual(), key.what());
  }

  private void table(List<Key> keys) {
    say("\n| key | default | what | range |\n| --- | --- | --- | --- |\n");
    for (Key key : keys) {
      row(
          "`" + key.name() + "`",
          key.isRequired() ? MUST : key.usual(),
          key.what(),
          key.kind().words());
    }
  }

  private void row(String... cells) {
    page.append('|');
    for (String cell : cells) {
      page.append(cell.isEmpty() ? "" : " ").append(cell.replace("|", "\\|")).append(" |");
    }
    page.append('\n');
  }

  private void say(String text) {
    page.append(text);
  }
}
