package linkworthy.codec;

import java.util.ArrayList;
import java.util.List;
import java.util.Set;
import linkworthy.input.YamlNode;
import linkworthy.link.Link;

/** Reads transform codecs from a study: {@code transform: pca}, {@code over: rows} and so on. */
public final class TransformCodecFamily implements CodecFamily {
  private static final Set<String> KEYS =
      new java.util.LinkedHashSet<>(
          List.of("transform", "over", "side", "keep", "share", "step", "label"));
  private static final int DEFAULT_SIDE = 8;
  private static final int MAX_LABEL = 64;
  private static final double DEFAULT_STEP = 8;

  @Override
  public String id() {
    return "transform";
  }

  @Override
  public String help() {
    return "transform: "
        + String.join(" | ", Basis.all().stream().map(Basis::id).toList())
        + """

          over:  rows | blocks (rows for mean and pca, blocks for dct unless given)
          side:  side of a block in samples, 2 to 64 (8)
          keep:  components K; a list means one codec for each. mean takes 0 (means alone) or all
          share: instead of keep, the share of the variance that the components must reach
          step:  quantiser step in grey levels, or none for 32-bit floats (8)
          label: name in tables (derived from the above)
        Sent, and counted: the mean of each variable in B bits; K components, Golomb-Rice coded;
        for pca also the K directions, as many bits again where the picture is small. At the node,
        K d n multiply-accumulates for d variables and n observations; pca also d d n / 2 for the
        covariance and about 9 d d d for its eigenvectors.""";
  }

  @Override
  public List<Codec> read(YamlNode entry, Link link) {
    entry.onlyKeys(KEYS);
    Basis basis = basis(entry.get("transform"));
    Arrangement arrangement = arrangement(entry, basis);
    List<Keep> keeps = keeps(entry, basis);
    List<Quantizer> quantizers = quantizers(entry);
    String label = entry.find("label").map(node -> node.line(MAX_LABEL)).orElse("");
    if (!label.isEmpty() && keeps.size() * quantizers.size() > 1) {
      throw entry
          .get("label")
          .refuse("names several codecs; accepted: one keep and one step with a label");
    }
    List<Codec> codecs = new ArrayList<>();
    for (Keep keep : keeps) {
      for (Quantizer quantizer : quantizers) {
        codecs.add(new TransformCodec(label, arrangement, basis, keep, quantizer, link));
      }
    }
    return codecs;
  }

  private static Basis basis(YamlNode node) {
    String id = node.oneOf(Basis.all().stream().map(Basis::id).toList());
    return Basis.all().stream().filter(b -> b.id().equals(id)).findFirst().orElseThrow();
  }

  private static Arrangement arrangement(YamlNode entry, Basis basis) {
    boolean blocks =
        entry
            .find("over")
            .map(node -> node.oneOf(List.of("rows", "blocks")).equals("blocks"))
            .orElse(basis.id().equals("dct"));
    if (blocks) {
      return new Arrangement.Blocks(
          entry.find("side").map(node -> (int) node.integer(2, 64)).orElse(DEFAULT_SIDE));
    }
    entry
        .find("side")
        .ifPresent(
            node -> {
              throw node.refuse("belongs to 'over: blocks'; accepted: no side over rows");
            });
    return new Arrangement.Rows();
  }

  private static List<Keep> keeps(YamlNode entry, Basis basis) {
    var keep = entry.find("keep");
    var share = entry.find("share");
    if (keep.isPresent() && share.isPresent()) {
      throw share.get().refuse("stands beside 'keep'; accepted: one of the two");
    }
    if (basis.isIdentity()) {
      if (share.isPresent()) {
        throw share
            .get()
            .refuse("does not go with 'transform: mean'; accepted: keep: 0, or nothing");
      }
      return keep.map(node -> meansOnly(node)).orElse(List.of(new Keep.All()));
    }
    if (share.isPresent()) {
      return share.get().oneOrMore().stream().<Keep>map(TransformCodecFamily::share).toList();
    }
    if (keep.isEmpty()) {
      throw entry.refuse("has neither 'keep' nor 'share'; accepted: one of the two");
    }
    return keep.get().oneOrMore().stream()
        .<Keep>map(node -> new Keep.First((int) node.integer(0, 1 << 20)))
        .toList();
  }

  private static List<Keep> meansOnly(YamlNode node) {
    if (node.oneOrMore().size() == 1 && node.oneOrMore().get(0).integer(0, 1 << 20) == 0) {
      return List.of(new Keep.First(0));
    }
    throw node.bad("0 (the means alone), or no 'keep' for all, with 'transform: mean'");
  }

  private static Keep share(YamlNode node) {
    String accepted = "a share above 0, up to 1";
    double share = node.number(accepted);
    if (!(share > 0 && share <= 1)) {
      throw node.bad(accepted);
    }
    return new Keep.Share(share);
  }

  private static List<Quantizer> quantizers(YamlNode entry) {
    return entry
        .find("step")
        .map(node -> node.oneOrMore().stream().map(TransformCodecFamily::quantizer).toList())
        .orElse(List.of(new Quantizer(DEFAULT_STEP)));
  }

  private static Quantizer quantizer(YamlNode node) {
    String accepted = "a step in grey levels from 0.001 to 65536, or none";
    if (!node.isMapping() && !node.isSequence() && node.text().equals("none")) {
      return Quantizer.NONE;
    }
    double step = node.number(accepted);
    if (!(step >= 0.001 && step <= 65_536)) {
      throw node.bad(accepted);
    }
    return new Quantizer(step);
  }
}
