package linkworthy.study;

import java.nio.file.Path;
import java.util.ArrayList;
import java.util.List;
import java.util.Set;
import java.util.SortedSet;
import java.util.TreeSet;
import java.util.function.Function;
import java.util.regex.Pattern;
import linkworthy.input.Require;
import linkworthy.link.Link;
import linkworthy.link.Protection;
import linkworthy.quality.QualityMeasure;
import linkworthy.quality.QualityMeasures;
import org.jspecify.annotations.Nullable;

/**
 * A question put to the harness: which codecs, on which pictures, under which impairments. Made by
 * {@link StudyReader}; written out by {@link StudyWriter}.
 *
 * @param name names the results folder; see {@link #NAME}
 * @param purpose why it is asked, shown first in the report
 * @param seed of every random draw, 0 to {@link #MAX_SEED}
 * @param pictures which pictures
 * @param impairments what hurts them, in study order; the clean severity is always added by the
 *     plan
 * @param codecs the options compared, codecs with their protection, in study order, labels distinct
 * @param link the packets they are sent in
 * @param replicates noise realisations of each picture and severity, 1 to {@link #MAX_REPLICATES};
 *     with {@code earlyStop} its {@code atMost}
 * @param measures ids of quality measures, {@code psnr} among them
 * @param node what coding and sending costs, or null where no costs are asked for
 * @param rawHop what hurts raw samples on their way to helper nodes, at one severity, or null
 * @param earlyStop when fewer replicates are enough, or null where their number is fixed
 */
public record Study(
    String name,
    String purpose,
    long seed,
    PictureChoice pictures,
    List<ImpairmentChoice> impairments,
    List<CodecChoice> codecs,
    Link link,
    int replicates,
    List<String> measures,
    @Nullable NodeChoice node,
    @Nullable ImpairmentChoice rawHop,
    @Nullable EarlyStop earlyStop) {
  /** A name becomes a folder, so it has only letters, digits, dots, dashes and underscores. */
  public static final Pattern NAME = Pattern.compile("[A-Za-z0-9][A-Za-z0-9._-]{0,63}");

  /** The largest seed: every JSON reader keeps whole numbers up to 2^53 - 1 exactly. */
  public static final long MAX_SEED = (1L << 53) - 1;

  public static final int MAX_REPLICATES = 1_000_000;

  /** Columns of what a trial cost its nodes. */
  public static final List<String> COSTS =
      List.of(
          "macs",
          "ram_kib",
          "energy_mj",
          "worst_node_energy_mj",
          "air_time_ms",
          "pictures_per_battery");

  /** Measures that have a column in every record, asked for or not. */
  private static final Set<String> ALWAYS_RECORDED = Set.of("psnr", "ssim");

  /**
   * @throws IllegalArgumentException if the name, seed or replicates are outside their range
   */
  public Study {
    if (!NAME.matcher(name).matches()) {
      throw new IllegalArgumentException(
          "study name is '" + name + "'; accepted: " + NAME.pattern());
    }
    if (seed < 0 || seed > MAX_SEED) {
      throw new IllegalArgumentException("seed is " + seed + "; accepted: 0 to " + MAX_SEED);
    }
    Require.inRange(replicates, 1, MAX_REPLICATES, "replicates");
    if (earlyStop != null && replicates != earlyStop.atMost()) {
      throw new IllegalArgumentException(
          "replicates is " + replicates + "; accepted: at-most, " + earlyStop.atMost());
    }
    impairments = List.copyOf(impairments);
    codecs = List.copyOf(codecs);
    measures = List.copyOf(measures);
  }

  /**
   * Columns of the record behind the fixed ones: those of the further measures, then the costs if
   * there is a node to bear them.
   */
  public List<String> furtherColumns() {
    List<String> columns =
        new ArrayList<>(furtherMeasures().stream().map(QualityMeasure::column).toList());
    if (node != null) {
      columns.addAll(COSTS);
    }
    return columns;
  }

  /** The measures besides psnr and ssim, in study order; each adds a column to the record. */
  public List<QualityMeasure> furtherMeasures() {
    return measures.stream()
        .filter(id -> !ALWAYS_RECORDED.contains(id))
        .map(QualityMeasures::get)
        .toList();
  }

  /**
   * What a reader of the study should know before it runs, a line each: a part of a protection that
   * no impairment gives anything to do, so that it costs bits and gains nothing.
   */
  public List<String> warnings() {
    List<String> warnings = new ArrayList<>();
    boolean flips = impairments.stream().anyMatch(ImpairmentChoice::damagesPackets);
    boolean loses = impairments.stream().anyMatch(ImpairmentChoice::losesPackets);
    for (String part : parts(flips, Protection.Rule::forFlippedBits)) {
      warnings.add(
          part
              + " gains nothing in this study: no impairment flips bits of packets that are then"
              + " used (bit-errors with frame-check: false)");
    }
    for (String part : parts(loses, Protection.Rule::forLostPackets)) {
      warnings.add(
          part
              + " gains nothing in this study: no impairment loses packets (burst-loss, or bit-errors"
              + " with frame-check: true)");
    }
    return warnings;
  }

  /** The parts of a kind, by name; none if they have something to do. */
  private SortedSet<String> parts(boolean busy, Function<Protection.Rule, List<String>> kind) {
    SortedSet<String> parts = new TreeSet<>();
    for (CodecChoice codec : busy ? List.<CodecChoice>of() : codecs) {
      codec.protection().rules().forEach(rule -> parts.addAll(kind.apply(rule)));
    }
    return parts;
  }

  /** The same study with other codecs, as after their training. */
  public Study withCodecs(List<CodecChoice> others) {
    return new Study(
        name,
        purpose,
        seed,
        pictures,
        impairments,
        others,
        link,
        replicates,
        measures,
        node,
        rawHop,
        earlyStop);
  }

  /** The same study whose manifest, if it has one of its own, is looked for in another place. */
  public Study withManifestAt(Path file) {
    return new Study(
        name,
        purpose,
        seed,
        pictures.withManifestAt(file),
        impairments,
        codecs,
        link,
        replicates,
        measures,
        node,
        rawHop,
        earlyStop);
  }
}
