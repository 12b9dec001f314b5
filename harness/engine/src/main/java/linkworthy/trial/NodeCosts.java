package linkworthy.trial;

import java.util.ArrayList;
import java.util.Iterator;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import linkworthy.codec.Workload;
import linkworthy.link.Channel;
import linkworthy.link.NodeProfile;
import linkworthy.study.NodeChoice;
import linkworthy.study.Study;

/**
 * What one picture costs the nodes that code and send it.
 *
 * @param node the profile of each node
 * @param shares of each node, the camera first; empty where the codec does not say what it asks
 */
record NodeCosts(NodeChoice node, List<Share> shares) {
  /**
   * One node's part.
   *
   * @param work computing and passing raw samples on
   * @param traffic coded packets and acknowledgements
   */
  record Share(Workload work, Channel.Traffic traffic) {
    long sentBits() {
      return work.rawBitsSent() + traffic.sentBits();
    }

    long receivedBits() {
      return work.rawBitsReceived() + traffic.receivedBits();
    }

    double millijoules(NodeProfile profile) {
      return profile.millijoules(work.macs(), sentBits(), receivedBits());
    }
  }

  static NodeCosts of(NodeChoice node, List<Workload> work, Map<Integer, Channel.Traffic> traffic) {
    List<Share> shares = new ArrayList<>();
    for (int i = 0; i < work.size(); i++) {
      shares.add(new Share(work.get(i), traffic.getOrDefault(i, Channel.Traffic.NONE)));
    }
    return new NodeCosts(node, shares);
  }

  /** Values of {@link Study#COSTS}; NaN where the codec does not say what it asks. */
  Map<String, Double> figures() {
    double macs = shares.isEmpty() ? Double.NaN : 0;
    double memory = macs;
    double energy = macs;
    double worst = macs;
    long bits = 0;
    long transmissions = 0;
    long awaited = 0;
    for (Share share : shares) {
      macs += share.work().macs();
      memory = Math.max(memory, (double) share.work().memoryBytes());
      energy += share.millijoules(node.profile());
      worst = Math.max(worst, share.millijoules(node.profile()));
      bits += share.sentBits() + share.traffic().receivedBits();
      transmissions += share.traffic().transmissions();
      awaited += share.traffic().awaited();
    }
    double[] values = {
      macs,
      memory / 1024,
      energy,
      worst,
      shares.isEmpty() ? Double.NaN : node.profile().airTimeMs(bits, transmissions, awaited),
      node.profile().picturesPerBattery(worst, node.intervalSeconds())
    };
    Map<String, Double> figures = new LinkedHashMap<>();
    Iterator<String> columns = Study.COSTS.iterator();
    for (double value : values) {
      figures.put(columns.next(), value);
    }
    return figures;
  }
}
