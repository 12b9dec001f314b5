package linkworthy.codec;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.Set;
import linkworthy.input.Key;
import linkworthy.input.KeyGroup;
import linkworthy.input.Kind;
import linkworthy.input.YamlNode;
import linkworthy.link.Link;
import linkworthy.link.PartNumber;

/** Reads transform codecs from a study: {@code transform: pca}, {@code over: rows} and so on. */
public final class TransformCodecFamily implements CodecFamily {
  private static final List<String> ARRANGEMENTS = List.of("rows", "blocks", "tiles");
  private static final int DEFAULT_SIDE = 8;
  private static final double DEFAULT_STEP = 8;
  private static final Kind.Words BASES = Kind.Words.of("own", "shared");
  private static final Kind.Words OVER = new Kind.Words(ARRANGEMENTS);
  private static final Kind.Whole SIDE = new Kind.Whole(2, 64);
  private static final Kind.Whole QUALITY = new Kind.Whole(1, 100);
  private static final Kind.Text TILES =
      new Kind.Text(
          "[0-9]{1,3}x[0-9]{1,3}",
          "columns x rows, from 1x1 up to " + TiledCodec.MOST_TILES + " tiles, as 4x4");
  private static final KeyGroup KEYS = group();

  private static KeyGroup group() {
    List<Key> keys =
        new ArrayList<>(
            List.of(
                Key.required(
                    "transform", new Kind.Words(Basis.all().stream().map(Basis::id).toList()), ""),
                Key.optional(
                    "basis",
                    BASES,
                    "`own`",
                    "pca: sent, or learnt from `pictures.train` and not sent; not over tiles"),
                Key.optional("over", OVER, "`rows` for mean and pca, `blocks` for dct and wht", ""),
                Key.optional(
                    "side",
                    SIDE,
                    Integer.toString(DEFAULT_SIDE),
                    "of a block, in samples; wht: a power of two"),
                Key.optional("grid", TILES, "must be given with tiles", "")));
    keys.addAll(KeepReader.keys());
    keys.add(
        Key.optional(
            "step",
            new Kind.OneOrMore(Quantizer.KIND),
            Quantizer.plain(DEFAULT_STEP),
            "width of a quantiser step"));
    keys.add(
        Key.optional(
            "weights",
            Kind.Words.of(FrequencySteps.ID),
            "none",
            "in place of step, with dct over blocks of side 8"));
    keys.add(
        Key.optional(
            "quality",
            new Kind.OneOrMore(QUALITY),
            "must be given with weights",
            "coarse to fine"));
    keys.add(Codec.LABEL);
    return new KeyGroup("transform", keys, List.of(), "");
  }

  @Override
  public String id() {
    return "transform";
  }

  @Override
  public Optional<KeyGroup> keys() {
    return Optional.of(KEYS);
  }

  @Override
  public String help() {
    return "transform: "
        + String.join(" | ", Basis.all().stream().map(Basis::id).toList())
        + """

          basis: own (sent with each picture) or shared (learnt from the study's pictures.train,
                 installed at both ends, not sent; over rows all pictures need as many rows): pca
          over:  rows | blocks | tiles (rows for mean and pca, blocks for dct and wht unless given)
          grid:  with tiles, how many across and down, as in 4x4; each tile is coded alone over its
                 rows by another node
          side:  side of a block in samples, 2 to 64 (8); wht: a power of two, rows likewise
          keep:  components K; a list means one codec for each. mean takes 0 (means alone) or all
          share: instead of keep, the share of the variance that the components must reach
          bits-per-pixel: instead of keep, as many components as fit into these sent bits; each
                 packet counts once, protection's copies, parity and tries come on top
          noise-floor: instead of keep, the standard deviation of the noise in grey levels, or true
                 if it is unknown: the components above it (pca)
          step:  quantiser step in grey levels, or none for 32-bit floats (8)
          weights: instead of step, luminance: a step for each coefficient of dct blocks of side 8
          quality: with weights, 1 (coarse) to 100
          label: name in tables (derived from the above)
        Sent, and counted: the mean of each variable in B bits; K components, Golomb-Rice coded;
        for pca also the K directions, as many bits again where the picture is small. At the node,
        K d n multiply-accumulates for d variables and n observations; pca also d d n / 2 for the
        covariance and about 9 d d d for its eigenvectors.""";
  }

  @Override
  public List<Codec> read(YamlNode entry, Link link) {
    KEYS.check(entry);
    Basis basis = basis(entry);
    Optional<TiledCodec.Grid> grid = grid(entry, basis);
    Arrangement arrangement = grid.isPresent() ? new Arrangement.Rows() : arrangement(entry, basis);
    List<Keep> keeps = KeepReader.read(entry, basis);
    List<? extends Quantization> quantizations = quantizations(entry, basis, arrangement);
    String label = entry.find("label").map(node -> node.line(Codec.MAX_LABEL)).orElse("");
    if (!label.isEmpty() && keeps.size() * quantizations.size() > 1) {
      throw entry
          .get("label")
          .refuse("names several codecs; accepted: one keep and one step with a label");
    }
    if (grid.isPresent() && link.payloadBytes() < Link.MIN_PAYLOAD + PartNumber.BYTES) {
      throw entry.refuse(
          "numbers its tiles in each packet, and of payload-bytes only "
              + link.payloadBytes()
              + " are left for it; accepted: at least "
              + (Link.MIN_PAYLOAD + PartNumber.BYTES)
              + ", so a larger payload-bytes or no tiles");
    }
    List<Codec> codecs = new ArrayList<>();
    for (Keep keep : keeps) {
      for (Quantization quantization : quantizations) {
        codecs.add(
            grid.isPresent()
                ? new TiledCodec(
                    grid.get(),
                    new TransformCodec(
                        "", arrangement, basis, keep, quantization, link.less(PartNumber.BYTES)),
                    link,
                    label)
                : new TransformCodec(label, arrangement, basis, keep, quantization, link));
      }
    }
    return codecs;
  }

  private static Basis basis(YamlNode entry) {
    String id = entry.get("transform").text();
    var basis = entry.find("basis");
    if (basis.isPresent()) {
      if (!id.equals(PcaBasis.ID)) {
        throw basis.get().refuse("does not go with 'transform: " + id + "'; accepted with pca");
      }
      if (BASES.read(basis.get()).equals("shared")) {
        return new SharedPcaBasis(null);
      }
    }
    return Basis.all().stream().filter(b -> b.id().equals(id)).findFirst().orElseThrow();
  }

  private static Optional<TiledCodec.Grid> grid(YamlNode entry, Basis basis) {
    boolean tiles = entry.find("over").map(node -> OVER.read(node).equals("tiles")).orElse(false);
    if (!tiles) {
      entry
          .find("grid")
          .ifPresent(
              node -> {
                throw node.refuse("belongs to 'over: tiles'; accepted: no grid otherwise");
              });
      return Optional.empty();
    }
    if (basis instanceof SharedPcaBasis) {
      throw entry.get("basis").refuse("is shared; accepted over tiles: own");
    }
    entry
        .find("side")
        .ifPresent(
            node -> {
              throw node.refuse("belongs to 'over: blocks'; accepted: no side over tiles");
            });
    YamlNode node = entry.get("grid");
    List<String> sides = List.of(TILES.read(node).split("x", 2));
    try {
      return Optional.of(
          new TiledCodec.Grid(Integer.parseInt(sides.get(0)), Integer.parseInt(sides.get(1))));
    } catch (IllegalArgumentException e) {
      throw node.bad(TILES.accepted());
    }
  }

  private static Arrangement arrangement(YamlNode entry, Basis basis) {
    boolean blocks =
        entry
            .find("over")
            .map(node -> OVER.read(node).equals("blocks"))
            .orElse(Set.of("dct", "wht").contains(basis.id()));
    if (blocks) {
      return new Arrangement.Blocks(
          entry.find("side").map(node -> side(node, basis)).orElse(DEFAULT_SIDE));
    }
    entry
        .find("side")
        .ifPresent(
            node -> {
              throw node.refuse("belongs to 'over: blocks'; accepted: no side over rows");
            });
    return new Arrangement.Rows();
  }

  private static int side(YamlNode node, Basis basis) {
    int side = SIDE.read(node);
    if (basis instanceof WalshBasis && !WalshBasis.isPowerOfTwo(side)) {
      throw node.bad("2, 4, 8, 16, 32 or 64 with 'transform: wht'");
    }
    return side;
  }

  private static List<? extends Quantization> quantizations(
      YamlNode entry, Basis basis, Arrangement arrangement) {
    if (entry.find("weights").isPresent()) {
      return frequencySteps(entry, basis, arrangement);
    }
    entry
        .find("quality")
        .ifPresent(
            node -> {
              throw node.refuse("stands without 'weights'; accepted: both or neither");
            });
    return entry
        .find("step")
        .map(node -> node.oneOrMore().stream().map(Quantizer::read).toList())
        .orElse(List.of(new Quantizer(DEFAULT_STEP)));
  }

  private static List<FrequencySteps> frequencySteps(
      YamlNode entry, Basis basis, Arrangement arrangement) {
    YamlNode weights = entry.get("weights");
    if (!basis.id().equals("dct")
        || !arrangement.equals(new Arrangement.Blocks(FrequencySteps.SIDE))) {
      throw weights.refuse("is for blocks of 8 x 8; accepted with 'transform: dct', side 8");
    }
    if (entry.find("step").isPresent()) {
      throw entry.get("step").refuse("stands beside 'weights'; accepted: one of the two");
    }
    return entry.get("quality").oneOrMore().stream()
        .map(node -> new FrequencySteps(QUALITY.read(node)))
        .toList();
  }
}
