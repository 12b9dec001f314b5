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
import linkworthy.input.YamlNode;
import linkworthy.link.Link;
import linkworthy.quality.QualityMeasure;
import linkworthy.quality.QualityMeasures;
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
  private static final YamlNode DEFAULTS =
      YamlNode.parse("defaults.yaml", resource("defaults.yaml"));
  private static final int MAX_PURPOSE = 2000;
  private static final String PSNR = "psnr";

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
    root.onlyKeys(
        ordered(
            "name",
            "purpose",
            "seed",
            "pictures",
            "impairments",
            "codecs",
            "link",
            "replicates",
            "measures"));
    Link link = link(root.find("link").orElse(DEFAULTS.get("link")));
    return new Study(
        name(root.get("name")),
        purpose(given(root, DEFAULTS, "purpose")),
        given(root, DEFAULTS, "seed").integer(0, Study.MAX_SEED),
        pictures(root.find("pictures").orElse(DEFAULTS.get("pictures")), baseFolder),
        impairments(root.get("impairments"), baseFolder),
        codecs(root.get("codecs"), link, codecs),
        link,
        replicates(given(root, DEFAULTS, "replicates")),
        measures(given(root, DEFAULTS, "measures")));
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

  private static String name(YamlNode node) {
    String name = node.text();
    if (!Study.NAME.matcher(name).matches()) {
      throw node.bad(
          "up to 64 letters, digits, dots, dashes and underscores, a letter or digit first (it"
              + " names a folder)");
    }
    return name;
  }

  private static String purpose(YamlNode node) {
    String purpose = node.text().strip();
    if (purpose.length() > MAX_PURPOSE) {
      throw node.bad("text of up to " + MAX_PURPOSE + " characters");
    }
    return purpose;
  }

  private static PictureChoice pictures(YamlNode group, Path baseFolder) {
    group.onlyKeys(ordered("manifest", "select", "longest-side", "planes", "signal-power"));
    YamlNode defaults = DEFAULTS.get("pictures");
    String power =
        given(group, defaults, "signal-power")
            .oneOf(Arrays.stream(SignalPower.values()).map(SignalPower::id).toList());
    return new PictureChoice(
        manifest(given(group, defaults, "manifest"), baseFolder),
        distinct(given(group, defaults, "select")),
        longestSide(given(group, defaults, "longest-side")),
        given(group, defaults, "planes").oneOf(List.of(PictureChoice.LUMA)),
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

  private static OptionalInt longestSide(YamlNode node) {
    if (!node.isMapping() && !node.isSequence() && node.text().equals(StudyWriter.NONE)) {
      return OptionalInt.empty();
    }
    try {
      return OptionalInt.of((int) node.integer(PictureChoice.MIN_SIDE, Picture.MAX_SIDE));
    } catch (BadInput e) {
      throw node.bad(
          "a whole number of samples from "
              + PictureChoice.MIN_SIDE
              + " to "
              + Picture.MAX_SIDE
              + ", or none");
    }
  }

  private static List<ImpairmentChoice> impairments(YamlNode list, Path baseFolder) {
    ImpairmentReader reader = new ImpairmentReader(baseFolder);
    return list.items().stream().map(reader::read).toList();
  }

  private static List<Codec> codecs(YamlNode list, Link link, CodecReader reader) {
    List<Codec> all = new ArrayList<>();
    Set<String> labels = new HashSet<>();
    for (YamlNode entry : list.items()) {
      for (Codec codec : reader.read(entry, link)) {
        if (!labels.add(codec.label())) {
          throw entry.refuse(
              "gives the codec '"
                  + codec.label()
                  + "' a second time; remove it, or add label: to tell the two apart");
        }
        all.add(codec);
      }
    }
    return all;
  }

  private static Link link(YamlNode group) {
    group.onlyKeys(ordered("payload-bytes", "header-bytes", "order"));
    YamlNode defaults = DEFAULTS.get("link");
    List<Link.Order> orders = List.of(Link.Order.values());
    List<String> words = orders.stream().map(Link.Order::id).toList();
    return new Link(
        (int) given(group, defaults, "payload-bytes").integer(Link.MIN_PAYLOAD, Link.MAX_PAYLOAD),
        (int) given(group, defaults, "header-bytes").integer(0, Link.MAX_PAYLOAD),
        orders.get(words.indexOf(given(group, defaults, "order").oneOf(words))));
  }

  private static int replicates(YamlNode node) {
    if (node.isMapping()) {
      throw node.refuse(
          "asks to stop at a half-width, which this version does not do; accepted: a whole number"
              + " from 1 to "
              + Study.MAX_REPLICATES);
    }
    return (int) node.integer(1, Study.MAX_REPLICATES);
  }

  private static List<String> measures(YamlNode list) {
    List<String> ids = distinct(list);
    for (YamlNode item : list.oneOrMore()) {
      try {
        QualityMeasure unused = QualityMeasures.get(item.text());
      } catch (BadInput e) {
        throw item.refuse("cannot be used: " + e.getMessage());
      }
    }
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

  private static Set<String> ordered(String... keys) {
    return new LinkedHashSet<>(Arrays.asList(keys));
  }
}
