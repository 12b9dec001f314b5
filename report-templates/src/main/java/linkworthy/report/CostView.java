package linkworthy.report;

import java.util.List;

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

  /** A node's part in a codec. */
  record ShareRow(
      String codec,
      String node,
      String macs,
      String rawSent,
      String rawReceived,
      String codedSent,
      String energy) {}

  static CostView of(Costs costs) {
    return new CostView(
        costs.node(),
        costs.codecs().stream().map(codec -> row(codec, costs.ramKib())).toList(),
        costs.shares().stream().map(CostView::row).toList());
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

  private static ShareRow row(Costs.NodeShare share) {
    return new ShareRow(
        share.codec(),
        share.node(),
        Numbers.whole(share.macs()),
        Numbers.whole(share.rawSentBits()),
        Numbers.whole(share.rawReceivedBits()),
        Numbers.whole(share.codedSentBits()),
        Numbers.significant(share.energyMj()));
  }
}
