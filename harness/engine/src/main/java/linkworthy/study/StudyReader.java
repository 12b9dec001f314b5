package linkworthy.study;

import java.io.IOException;
import java.io.InputStream;
import java.io.UncheckedIOException;
import java.nio.charset.StandardCharsets;
import java.nio.file.InvalidPathException;
import java.nio.file.Path;
import java.util.ArrayList;
import java.util.Arrays;
import java.util.HashSet;
import java.util.LinkedHashSet;
import java.util.List;
import java.util.Objects;
import java.util.OptionalInt;
import java.util.Set;
import linkworthy.codec.Codec;
import linkworthy.codec.CodecFamilies;
import linkworthy.codec.CodecReader;
import linkworthy.corpus.Picture;
import linkworthy.input.BadInput;
import linkworthy.input.Kind;
import linkworthy.input.YamlNode;
import linkworthy.link.Link;
import linkworthy.link.PartNumber;
import linkworthy.link.Protection;
import linkworthy.noise.Site;
import linkworthy.study.PictureChoice.ManifestFile;
import org.jspecify.annotations.Nullable;

/**
 * Reads study files. Everything that can be checked without opening a picture is checked: unknown
 * keys, types, ranges, severities, labels. What a file leaves out comes from the resource {@code
 * defaults.yaml} beside this class.
 *
 * <p>Paths are relative to the study file's folder. Noise models are opened; the manifest is not
 * (see {@link PictureChoice#open()}), so that a record can be read where its pictures are absent.
 */
public final class StudyReader {
  static final YamlNode DEFAULTS = YamlNode.parse("defaults.yaml", resource("defaults.yaml"));
  private static final String PSNR = "psnr";
  private static final String PROTECT = "protect";

  private StudyReader() {}

  /**
   * @throws BadInput if the file cannot be used; one line with file, line and key
   * @throws linkworthy.input.Unavailable if the file exists and cannot be read
   */
  public static Study read(Path file) {
    return read(file, CodecFamilies.installed());
  }

  /**
   * Reads a file; its codecs are made by these families.
   *
   * @throws BadInput if the file cannot be used; one line with file, line and key
   * @throws linkworthy.input.Unavailable if the file exists and cannot be read
   */
  public static Study read(Path file, CodecReader codecs) {
    return read(YamlNode.read(file), folderOf(file), codecs);
  }

  /**
   * Reads a document that stands, or is taken to stand, in a folder.
   *
   * @throws BadInput if it cannot be used; one line with file, line and key
   */
  public static Study read(YamlNode root, Path baseFolder) {
    return read(root, baseFolder, CodecFamilies.installed());
  }

  /**
   * Reads a document that stands, or is taken to stand, in a folder; its codecs are made by these
   * families.
   *
   * @throws BadInput if it cannot be used; one line with file, line and key
   */
  public static Study read(YamlNode root, Path baseFolder, CodecReader codecs) {
    StudyKeys.study(new Kind.Elsewhere(), new Kind.Elsewhere()).check(root);
    PictureChoice pictures =
        pictures(root.find("pictures").orElse(DEFAULTS.get("pictures")), baseFolder);
    YamlNode replicates = given(root, DEFAULTS, "replicates");
    EarlyStop rule = earlyStop(replicates);
    Link link = link(root.find("link").orElse(DEFAULTS.get("link")), pictures.hasAllPlanes());
    return new Study(
        root.get("name").text(),
        given(root, DEFAULTS, "purpose").text().strip(),
        StudyKeys.SEED.readLong(given(root, DEFAULTS, "seed")),
        pictures,
        impairments(root.get("impairments"), baseFolder),
        codecs(root, link, pictures, codecs),
        link,
        rule == null ? StudyKeys.REPLICATES.read(replicates) : rule.atMost(),
        measures(given(root, DEFAULTS, "measures")),
        NodeReader.read(given(root, DEFAULTS, "node"), DEFAULTS.get("node-interval-s"), baseFolder),
        root.find("raw-hop").map(node -> rawHop(node, baseFolder)).orElse(null),
        rule);
  }

  /** The folder that paths in a file are relative to. */
  static Path folderOf(Path file) {
    Path absolute = file.toAbsolutePath().normalize();
    return Objects.requireNonNullElse(absolute.getParent(), absolute);
  }

  /** The text of a resource beside this class. */
  static String resource(String name) {
    try (InputStream in = Objects.requireNonNull(StudyReader.class.getResourceAsStream(name))) {
      return new String(in.readAllBytes(), StandardCharsets.UTF_8);
    } catch (IOException e) {
      throw new UncheckedIOException(e);
    }
  }

  private static YamlNode given(YamlNode group, YamlNode defaults, String key) {
    return group.find(key).orElseGet(() -> defaults.get(key));
  }

  private static PictureChoice pictures(YamlNode group, Path baseFolder) {
    YamlNode defaults = DEFAULTS.get("pictures");
    String power = StudyKeys.POWER.read(given(group, defaults, "signal-power"));
    List<String> select = distinct(given(group, defaults, "select"));
    String planes = StudyKeys.PLANES.read(given(group, defaults, "planes"));
    return new PictureChoice(
        manifest(given(group, defaults, "manifest"), baseFolder),
        select,
        train(given(group, defaults, "train"), select),
        longestSide(given(group, defaults, "longest-side")),
        planes,
        chroma(group, planes),
        Arrays.stream(SignalPower.values()).filter(p -> p.id().equals(power)).findFirst().get());
  }

  private static @Nullable ManifestFile manifest(YamlNode node, Path baseFolder) {
    String written = node.text();
    if (written.equals(StudyWriter.SHIPPED)) {
      return null;
    }
    try {
      return new ManifestFile(written, baseFolder.resolve(written).normalize());
    } catch (InvalidPathException e) {
      throw node.bad("the path of a manifest file, or " + StudyWriter.SHIPPED);
    }
  }

  private static String chroma(YamlNode group, String planes) {
    if (planes.equals(PictureChoice.ALL)) {
      return StudyKeys.CHROMA.read(given(group, DEFAULTS.get("pictures"), "chroma"));
    }
    boolean own = group != DEFAULTS.get("pictures");
    group
        .find("chroma")
        .filter(node -> own)
        .ifPresent(
            node -> {
              throw node.refuse("belongs to 'planes: all'; accepted: no chroma with luma alone");
            });
    return "";
  }

  private static List<String> train(YamlNode node, List<String> select) {
    if (isNone(node)) {
      return List.of();
    }
    for (YamlNode item : node.oneOrMore()) {
      if (select.contains(item.text())) {
        throw item.refuse(
            "is '" + item.text() + "', which select tests; accepted: pictures that are not tested");
      }
    }
    return distinct(node);
  }

  private static boolean isNone(YamlNode node) {
    return !node.isMapping() && !node.isSequence() && node.text().equals(StudyWriter.NONE);
  }

  private static OptionalInt longestSide(YamlNode node) {
    return StudyKeys.LONGEST_SIDE.isWord(node)
        ? OptionalInt.empty()
        : OptionalInt.of((int) node.integer(PictureChoice.MIN_SIDE, Picture.MAX_SIDE));
  }

  private static List<ImpairmentChoice> impairments(YamlNode list, Path baseFolder) {
    ImpairmentReader reader = new ImpairmentReader(baseFolder);
    return list.items().stream().map(reader::read).toList();
  }

  private static ImpairmentChoice rawHop(YamlNode entry, Path baseFolder) {
    ImpairmentChoice hop = new ImpairmentReader(baseFolder).read(entry);
    if (hop.site() != Site.SAMPLES || hop.severities().size() != 1) {
      throw entry.refuse(
          "acts on "
              + hop.site().id()
              + " at "
              + hop.severities().size()
              + (hop.severities().size() == 1 ? " severity" : " severities")
              + "; accepted: a model that acts on samples, at one severity");
    }
    return hop;
  }

  private static List<CodecChoice> codecs(
      YamlNode root, Link link, PictureChoice pictures, CodecReader reader) {
    ProtectionReader protections = new ProtectionReader(DEFAULTS.get("protection"), link);
    Protection usual = protections.read(given(root, DEFAULTS, PROTECT));
    List<CodecChoice> all = new ArrayList<>();
    Set<String> labels = new HashSet<>();
    Link free = pictures.hasAllPlanes() ? link.less(PartNumber.BYTES) : link;
    for (YamlNode entry : root.get("codecs").items()) {
      Protection protection = entry.find(PROTECT).map(protections::read).orElse(usual);
      int overhead = protection.overheadBytes(link.payloadBytes());
      int left = free.payloadBytes() - overhead;
      if (left < Link.MIN_PAYLOAD) {
        throw entry.refuse(
            "has only "
                + left
                + " bytes of payload-bytes left beside protection and the number of the plane;"
                + " accepted: at least "
                + Link.MIN_PAYLOAD
                + ", so payload-bytes of at least "
                + protection.leastPayload(
                    Link.MIN_PAYLOAD + link.payloadBytes() - free.payloadBytes()));
      }
      boolean named = entry.find("label").isPresent();
      for (Codec codec : reader.read(entry.without(PROTECT), free.less(overhead))) {
        CodecChoice choice =
            named
                ? new CodecChoice(codec.label(), codec, protection)
                : CodecChoice.of(codec, protection);
        if (!labels.add(choice.label())) {
          throw entry.refuse(
              "gives the codec '"
                  + choice.label()
                  + "' a second time; remove it, or add label: to tell the two apart");
        }
        if (pictures.hasAllPlanes() && entry.find("bits-per-pixel").isPresent()) {
          throw entry.refuse(
              "aims at bits-per-pixel, which several planes share; accepted with 'planes: luma'");
        }
        if (codec.needsTraining() && pictures.train().isEmpty()) {
          throw entry.refuse(
              "learns from other pictures, and there are none; add pictures.train: with sets,"
                  + " categories or ids");
        }
        all.add(choice);
      }
    }
    return all;
  }

  private static Link link(YamlNode group, boolean allPlanes) {
    YamlNode defaults = DEFAULTS.get("link");
    int plane = allPlanes ? 1 : 0;
    return new Link(
        (int)
            given(group, defaults, "payload-bytes")
                .integer(Link.MIN_PAYLOAD + plane, Link.MAX_PAYLOAD),
        (int) given(group, defaults, "header-bytes").integer(0, Link.MAX_PAYLOAD - plane),
        List.of(Link.Order.values())
            .get(
                StudyKeys.ORDER
                    .accepted()
                    .indexOf(StudyKeys.ORDER.read(given(group, defaults, "order")))));
  }

  /** The rule by which replicates end early; null if the node is a number of replicates. */
  private static @Nullable EarlyStop earlyStop(YamlNode node) {
    if (!node.isMapping()) {
      return null;
    }
    int most = StudyKeys.AT_LEAST.read(node.get("at-most"));
    int least = (int) node.get("at-least").integer(2, most);
    return new EarlyStop(least, most, StudyKeys.HALF_WIDTH.read(node.get("half-width-db")));
  }

  private static List<String> measures(YamlNode list) {
    List<String> ids = distinct(list);
    if (!ids.contains(PSNR)) {
      throw list.refuse("lacks psnr; accepted: a list with psnr in it");
    }
    return ids;
  }

  private static List<String> distinct(YamlNode list) {
    Set<String> words = new LinkedHashSet<>();
    for (YamlNode item : list.oneOrMore()) {
      if (!words.add(item.text())) {
        throw item.refuse("is '" + item.text() + "' a second time; accepted: each word once");
      }
    }
    return List.copyOf(words);
  }
}
