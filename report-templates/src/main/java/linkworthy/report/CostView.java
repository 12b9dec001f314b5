package linkworthy.report;

import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.function.DoubleBinaryOperator;
import java.util.function.ToDoubleFunction;

/** The costs laid out for the template: every number is already text. */
record CostView(String introduction, List<CodecRow> codecs, List<ShareRow> shares) {
  /** A codec; {@code fit} says in words whether the node has the memory. */
  record CodecRow(
      String codec,
      String macs,
      String ram,
      String fit,
      String energy,
      String worst,
      String airTime,
      String pictures) {}

  /** A node's part in a codec, or what stands for all of its nodes. */
  record ShareRow(
      String codec,
      String node,
      String macs,
      String ram,
      String rawSent,
      String rawReceived,
      String codedSent,
      String received,
      String energy) {}

  static CostView of(Costs costs) {
    return new CostView(
        costs.node(),
        costs.codecs().stream().map(codec -> row(codec, costs.ramKib())).toList(),
        shares(costs.shares()));
  }

  private static CodecRow row(Costs.CodecCost cost, double ramKib) {
    return new CodecRow(
        cost.codec(),
        Numbers.whole(cost.macs()),
        Numbers.significant(cost.ramKib()),
        Double.isNaN(cost.ramKib()) ? "unknown" : cost.ramKib() <= ramKib ? "fits" : "too much",
        Numbers.significant(cost.energyMj()),
        Numbers.significant(cost.worstNodeEnergyMj()),
        Numbers.significant(cost.airTimeMs()),
        Numbers.whole(Math.floor(cost.picturesPerBattery())));
  }

  /** The nodes of each codec, then the largest figure of any of them, then their sums. */
  private static List<ShareRow> shares(List<Costs.NodeShare> shares) {
    Map<String, List<Costs.NodeShare>> byCodec = new LinkedHashMap<>();
    shares.forEach(
        share -> byCodec.computeIfAbsent(share.codec(), codec -> new ArrayList<>()).add(share));
    List<ShareRow> rows = new ArrayList<>();
    byCodec.forEach(
        (codec, nodes) -> {
          nodes.forEach(node -> rows.add(row(node)));
          rows.add(row(together(codec, "worst node", nodes, Math::max)));
          rows.add(row(together(codec, "total", nodes, Double::sum)));
        });
    return rows;
  }

  private static Costs.NodeShare together(
      String codec, String name, List<Costs.NodeShare> nodes, DoubleBinaryOperator of) {
    ToDoubleFunction<ToDoubleFunction<Costs.NodeShare>> all =
        figure -> nodes.stream().mapToDouble(figure).reduce(of).orElse(Double.NaN);
    return new Costs.NodeShare(
        codec,
        name,
        all.applyAsDouble(Costs.NodeShare::macs),
        all.applyAsDouble(Costs.NodeShare::ramKib),
        all.applyAsDouble(Costs.NodeShare::rawSentBits),
        all.applyAsDouble(Costs.NodeShare::rawReceivedBits),
        all.applyAsDouble(Costs.NodeShare::codedSentBits),
        all.applyAsDouble(Costs.NodeShare::receivedBits),
        all.applyAsDouble(Costs.NodeShare::energyMj));
  }

  private static ShareRow row(Costs.NodeShare share) {
    return new ShareRow(
        share.codec(),
        share.node(),
        Numbers.whole(share.macs()),
        Numbers.significant(share.ramKib()),
        Numbers.whole(share.rawSentBits()),
        Numbers.whole(share.rawReceivedBits()),
        Numbers.whole(share.codedSentBits()),
        Numbers.whole(share.receivedBits()),
        Numbers.significant(share.energyMj()));
  }
}
