package linkworthy.study;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;
import java.util.stream.Collectors;
import linkworthy.codec.CodecFamilies;
import linkworthy.codec.CodecFamily;
import linkworthy.corpus.Picture;
import linkworthy.input.Key;
import linkworthy.input.KeyGroup;
import linkworthy.input.Kind;
import linkworthy.input.Spelling;
import linkworthy.input.YamlNode;
import linkworthy.link.Importance;
import linkworthy.link.Link;
import linkworthy.link.NodeProfile;
import linkworthy.link.Protection;
import linkworthy.noise.NoiseLibrary;
import linkworthy.noise.NoiseModel;
import linkworthy.noise.NoiseProcesses;
import linkworthy.noise.Site;
import linkworthy.quality.QualityMeasure;
import linkworthy.quality.QualityMeasures;

/**
 * Every key of a study: what it means, its unit, default and range. The reader checks by it; the
 * published schema and the handbook's page are written from it. Defaults are those of {@code
 * defaults.yaml}.
 */
public final class StudyKeys {
  private static final int MAX_PURPOSE = 2000;
  private static final int MAX_LABEL = 64;

  static final Kind.Whole SEED = new Kind.Whole(0, Study.MAX_SEED);
  static final Kind.Whole REPLICATES = new Kind.Whole(1, Study.MAX_REPLICATES);
  static final Kind.Whole AT_LEAST = new Kind.Whole(2, Study.MAX_REPLICATES);
  static final Kind.Real HALF_WIDTH =
      Kind.Real.above(0, Double.MAX_VALUE, "a half-width above 0, in dB");
  static final Kind.WordOr LONGEST_SIDE =
      new Kind.WordOr(
          StudyWriter.NONE,
          new Kind.Whole(PictureChoice.MIN_SIDE, Picture.MAX_SIDE),
          "a whole number of samples from "
              + PictureChoice.MIN_SIDE
              + " to "
              + Picture.MAX_SIDE
              + ", or none");
  static final Kind.Words PLANES = Kind.Words.of(PictureChoice.LUMA, PictureChoice.ALL);
  static final Kind.Words CHROMA = Kind.Words.of(PictureChoice.HALVED, PictureChoice.FULL);
  static final Kind.Words POWER =
      new Kind.Words(Arrays.stream(SignalPower.values()).map(SignalPower::id).toList());
  static final Kind.Whole PAYLOAD = new Kind.Whole(Link.MIN_PAYLOAD, Link.MAX_PAYLOAD);
  static final Kind.Whole HEADER = new Kind.Whole(0, Link.MAX_PAYLOAD);
  static final Kind.Words ORDER =
      new Kind.Words(Arrays.stream(Link.Order.values()).map(Link.Order::id).toList());
  static final Kind.Whole REPEAT = new Kind.Whole(1, Protection.MAX_REPEAT);
  static final Kind.Whole RETRANSMIT = new Kind.Whole(0, Protection.MAX_RETRANSMIT);
  static final Kind.Whole ACK = new Kind.Whole(0, Link.MAX_PAYLOAD);
  static final Kind.Whole N = new Kind.Whole(2, 255);
  static final Kind.Whole K = new Kind.Whole(1, 254);
  static final Kind.Whole DEPTH = new Kind.Whole(1, Protection.MAX_DEPTH);
  static final Kind.Words CORRECTS =
      Kind.Words.of(Protection.ErasureCode.ERASURES, Protection.ErasureCode.ERRORS);
  static final Kind.Words CLASSES =
      new Kind.Words(Arrays.stream(Importance.values()).map(Importance::id).toList());
  static final Kind.Real INTERVAL =
      Kind.Real.above(0, Double.MAX_VALUE, "a number of seconds above 0");
  static final Kind.Text LABEL = Kind.Text.line(MAX_LABEL);

  private StudyKeys() {}

  /** The keys of {@code pictures}. */
  public static KeyGroup pictures() {
    Kind words = new Kind.OneOrMore(Kind.Text.any("sets, categories or ids of the manifest"));
    return KeyGroup.of(
        "pictures",
        usual("pictures", "manifest", Kind.Text.any("path of a manifest, or `shipped`"), ""),
        usual("pictures", "select", words, "tested pictures"),
        usual(
            "pictures",
            "train",
            words,
            "pictures from which `basis: shared` learns; none of them may be tested"),
        usual(
            "pictures",
            "longest-side",
            LONGEST_SIDE,
            "larger pictures are reduced by area averaging"),
        usual("pictures", "planes", PLANES, "luma alone, or Y, Cb and Cr of pictures in colour"),
        usual(
            "pictures",
            "chroma",
            CHROMA,
            "with `planes: all` only: 4:2:0 halves Cb and Cr in both directions"),
        usual("pictures", "signal-power", POWER, "what an SNR is relative to"));
  }

  /** The keys of {@code link}. */
  public static KeyGroup link() {
    return KeyGroup.of(
        "link",
        usual(
            "link",
            "payload-bytes",
            PAYLOAD,
            "largest payload of a packet, bytes; at least 1 more with `planes: all` and with `over:"
                + " tiles`, 7 more with `reed-solomon`, each on top of the others; with `hamming` 7/4 of all that"),
        usual("link", "header-bytes", HEADER, "overhead of each packet, bytes"),
        usual("link", "order", ORDER, "which coefficients share a packet"));
  }

  /** The keys of {@code replicates} where their number is not fixed. */
  public static KeyGroup earlyStop() {
    return KeyGroup.of(
        "replicates",
        Key.required("at-least", AT_LEAST, "fewest replicates, up to at-most"),
        Key.required("at-most", AT_LEAST, "most replicates"),
        Key.required("half-width-db", HALF_WIDTH, "wanted half-width of the noise interval, dB"));
  }

  /** The keys of a group under {@code protect}. */
  public static KeyGroup protection() {
    return KeyGroup.of(
        "protect",
        usual("protection", "repeat", REPEAT, "copies of each packet in all"),
        usual("protection", "reed-solomon", code(), "code across packets"),
        usual(
            "protection",
            "hamming",
            new Kind.WordOr(StudyWriter.NONE, hammingKeys(), "none, or a group with depth"),
            "the code (7,4) on the bits of every transmission, for `bit-errors` without"
                + " `frame-check` (the check drops a hit frame before the code can set it right)"),
        usual(
            "protection",
            "retransmit",
            RETRANSMIT,
            "further tries for a packet that did not arrive"),
        usual(
            "protection",
            "ack-bytes",
            ACK,
            "with `retransmit` only: bytes of an acknowledgement, headers included"),
        usual(
            "protection",
            "only",
            new Kind.OneOrMore(CLASSES),
            "classes of packets; each class in one group at most"));
  }

  private static Kind.WordOr code() {
    return new Kind.WordOr(StudyWriter.NONE, codeKeys(), "none, or a group with n, k and depth");
  }

  /** The keys of {@code reed-solomon}. */
  public static KeyGroup codeKeys() {
    return KeyGroup.of(
        "reed-solomon",
        Key.required("n", N, "symbols of a code word"),
        Key.required("k", K, "data symbols among them, below n"),
        usual("protection", "depth", DEPTH, "distance between the symbols of a word, in packets"),
        usual(
            "protection",
            "corrects",
            CORRECTS,
            "missing packets alone, or damaged ones as well, for `bit-errors` without"
                + " `frame-check`"));
  }

  /** The keys of {@code hamming}. */
  public static KeyGroup hammingKeys() {
    return KeyGroup.of(
        "hamming",
        usual("protection", "depth", DEPTH, "distance between the bits of a word, in bits"));
  }

  static Kind.WordOr protect() {
    return new Kind.WordOr(
        StudyWriter.NONE,
        new Kind.OneOrMore(protection()),
        "none, a group of keys, or a list of such groups for classes of their own");
  }

  /** The keys of {@code node}. */
  public static KeyGroup node() {
    Kind profile =
        new Kind.GroupOr(
            NodeProfile.KEYS,
            Kind.Text.any(
                "the id of a shipped profile ("
                    + NodeProfile.shipped().stream().collect(Collectors.joining("`, `", "`", "`"))
                    + ") or the path of a profile file"));
    return KeyGroup.of(
        "node",
        Key.required("profile", profile, "what computing and sending cost"),
        Key.optional(
            "interval-s",
            INTERVAL,
            StudyReader.DEFAULTS.get("node-interval-s").text(),
            "seconds from one picture to the next"));
  }

  /** What a study may write for an impairment of a model. */
  static KeyGroup impairment(String name, Kind noise, NoiseModel model) {
    return impairment(name, noise, model.actsOn(), model.parameterKeys(), model.axisKeys());
  }

  private static KeyGroup impairment(
      String name, Kind noise, List<Site> sites, List<Key> parameters, List<Key> axes) {
    List<Key> keys = new ArrayList<>();
    keys.add(
        Key.required(
            "noise",
            noise,
            "id of a shipped model, or path of a model file: it has a slash or ends in `.yaml` or"
                + " `.yml`"));
    keys.add(
        Key.optional(
            "acts-on",
            new Kind.Words(sites.stream().map(Site::id).toList()),
            "the model's first",
            "where it hurts, as the model allows"));
    keys.add(Key.optional("label", LABEL, "the model's id", "name in results, not `none`"));
    keys.addAll(parameters);
    keys.addAll(axes);
    return new KeyGroup(name, keys, axes.stream().map(Key::name).toList(), "severity");
  }

  /** What an impairment may be: a shipped model, or a file with any process. */
  public static Kind.Choice impairments() {
    List<KeyGroup> all =
        new ArrayList<>(
            NoiseLibrary.shipped().stream()
                .map(model -> impairment(model.id(), Kind.Words.of(model.id()), model))
                .toList());
    List<String> ids = all.stream().map(KeyGroup::name).toList();
    KeyGroup own = ownModel();
    all.add(own);
    return new Kind.Choice(
        all,
        node -> {
          String text = node.get("noise").text();
          return StudyWriter.isModelPath(text)
              ? own
              : all.get(ids.indexOf(node.get("noise").oneOf(ids)));
        });
  }

  private static KeyGroup ownModel() {
    List<Key> parameters = new ArrayList<>();
    List<Key> axes = new ArrayList<>();
    NoiseProcesses.all()
        .values()
        .forEach(
            process -> {
              merge(parameters, NoiseModel.parameterKeys(process));
              merge(axes, NoiseModel.axisKeys(process));
            });
    return impairment(
        "own-model",
        new Kind.Text(
            "[\\s\\S]*/[\\s\\S]*|[\\s\\S]*[.]ya?ml", "a word; see `./linkworthy noise list`"),
        List.of(Site.values()),
        parameters,
        axes);
  }

  /** Adds keys; one that is there already is accepted in either way. */
  private static void merge(List<Key> keys, List<Key> more) {
    for (Key key : more) {
      int at = keys.stream().map(Key::name).toList().indexOf(key.name());
      if (at < 0) {
        keys.add(key);
      } else if (!keys.get(at).kind().equals(key.kind())) {
        throw new IllegalStateException("two kinds of values for the key " + key.name());
      }
    }
  }

  /** What an entry under {@code codecs} may be, by families that describe their keys. */
  public static Kind.Choice codecs(CodecFamilies families) {
    List<KeyGroup> all = new ArrayList<>();
    for (CodecFamily family : families.all()) {
      family.keys().ifPresent(keys -> all.add(keys.with(protectKey())));
    }
    List<String> ids = all.stream().map(KeyGroup::name).toList();
    return new Kind.Choice(
        all,
        node ->
            all.get(
                node.keys().stream()
                    .map(ids::indexOf)
                    .filter(at -> at >= 0)
                    .findFirst()
                    .orElseThrow(() -> unknown(node, ids))));
  }

  private static RuntimeException unknown(YamlNode node, List<String> ids) {
    return node.refuse(
        "names no codec; one key must be the kind of codec; "
            + Spelling.hint(node.keys().stream().findFirst().orElse(""), ids));
  }

  private static Key protectKey() {
    return Key.optional("protect", protect(), "the study's", "how packets are protected");
  }

  /** The keys of a study. */
  public static KeyGroup study(CodecFamilies families) {
    return study(impairments(), codecs(families));
  }

  static KeyGroup study(Kind impairment, Kind codec) {
    Kind measures =
        new Kind.OneOrMore(
            new Kind.Words(QualityMeasures.all().stream().map(QualityMeasure::id).toList()));
    return KeyGroup.of(
        "study",
        Key.required(
            "name",
            new Kind.Text(
                Study.NAME.pattern(),
                "up to 64 letters, digits, dots, dashes and underscores, a letter or digit first"
                    + " (it names a folder)"),
            ""),
        usual(
            "",
            "purpose",
            new Kind.Text(
                "[^\\u0000-\\u0009\\u000b-\\u001f\\u007f-\\u009f]{1," + MAX_PURPOSE + "}",
                "text of up to " + MAX_PURPOSE + " characters, none of them a control character"),
            "why it is asked; the report begins with it"),
        usual("", "seed", SEED, "of every random draw"),
        Key.optional("pictures", pictures(), "all its defaults", "[pictures](#pictures)"),
        Key.required("impairments", new Kind.Items(impairment), "[impairments](#impairments)"),
        Key.required("codecs", new Kind.Items(codec), "[codecs](#codecs)"),
        usual(
            "", "protect", protect(), "[protection](#protect) of codecs that do not say otherwise"),
        Key.optional("link", link(), "all its defaults", "[packets](#link)"),
        usual(
            "",
            "replicates",
            new Kind.GroupOr(earlyStop(), REPLICATES),
            "noise realisations of each picture and severity"),
        usual("", "measures", measures, "quality measures; `psnr` must be among them"),
        usual(
            "",
            "node",
            new Kind.GroupOr(
                node(), Kind.Text.any("the id of a shipped profile or the path of a profile file")),
            "[what coding and sending cost](#node)"),
        Key.optional(
            "raw-hop",
            impairment,
            "none",
            "an impairment with one severity on samples: noise on the way to helper nodes; acts on"
                + " codecs over tiles alone"));
  }

  /** A key with the default that {@code defaults.yaml} gives it. */
  private static Key usual(String group, String name, Kind kind, String what) {
    YamlNode defaults = group.isEmpty() ? StudyReader.DEFAULTS : StudyReader.DEFAULTS.get(group);
    YamlNode value = defaults.get(name);
    String text =
        value.isSequence()
            ? value.items().stream().map(YamlNode::text).collect(Collectors.joining(", ", "[", "]"))
            : value.text();
    return Key.optional(name, kind, "`" + text + "`", what);
  }
}
