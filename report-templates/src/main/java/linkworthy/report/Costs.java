package linkworthy.report;

import java.util.List;

/**
 * What coding and sending a picture costs the nodes.
 *
 * @param node the profile, in words
 * @param ramKib memory that a codec may use, in KiB
 * @param codecs a row a codec
 * @param shares a row a node of the codecs that have helper nodes
 */
public record Costs(String node, double ramKib, List<CodecCost> codecs, List<NodeShare> shares) {
  public Costs {
    codecs = List.copyOf(codecs);
    shares = List.copyOf(shares);
  }

  /**
   * One codec, means over clean pictures; NaN where the codec does not say what it asks.
   *
   * @param macs multiply-accumulates of all nodes
   * @param ramKib peak working memory of the node that needs most, in KiB
   * @param energyMj of all nodes, in millijoules
   * @param worstNodeEnergyMj of the node that spends most, in millijoules
   * @param airTimeMs of all bits, in milliseconds
   * @param picturesPerBattery until the first battery is empty
   */
  public record CodecCost(
      String codec,
      double macs,
      double ramKib,
      double energyMj,
      double worstNodeEnergyMj,
      double airTimeMs,
      double picturesPerBattery) {}

  /**
   * One node's part in a codec, means over clean pictures.
   *
   * @param node which, in words
   * @param ramKib peak working memory, in KiB
   * @param rawSentBits raw samples passed on, overhead included
   * @param rawReceivedBits raw samples got, overhead included
   * @param codedSentBits coded packets, overhead included
   * @param receivedBits acknowledgements
   * @param energyMj in millijoules
   */
  public record NodeShare(
      String codec,
      String node,
      double macs,
      double ramKib,
      double rawSentBits,
      double rawReceivedBits,
      double codedSentBits,
      double receivedBits,
      double energyMj) {}
}
