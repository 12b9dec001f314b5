package linkworthy.trial;

import java.util.ArrayList;
import java.util.List;
import linkworthy.codec.Encoding;
import linkworthy.link.Channel;
import linkworthy.study.CodecChoice;
import linkworthy.study.NodeChoice;
import linkworthy.study.Study;

/**
 * Who computes, sends and receives how much: for every codec that has helper nodes, each node's
 * part. Depends on the study and its clean pictures alone.
 */
public final class NodeTable {
  private NodeTable() {}

  /** A row for each such codec and node; empty where the study names no node. */
  public static List<NodeShare> of(Plan plan) {
    NodeChoice node = plan.study().node();
    List<NodeShare> shares = new ArrayList<>();
    if (node != null) {
      for (CodecChoice choice : plan.study().codecs()) {
        if (choice.codec().hasHelpers()) {
          shares.addAll(of(plan, node, choice));
        }
      }
    }
    return shares;
  }

  private static List<NodeShare> of(Plan plan, NodeChoice node, CodecChoice choice) {
    List<List<NodeCosts.Share>> pictures = new ArrayList<>();
    for (int i = 0; i < plan.pictures().size(); i++) {
      pictures.add(shares(plan, node, choice, i));
    }
    List<NodeShare> means = new ArrayList<>();
    for (int n = 0; n < pictures.get(0).size(); n++) {
      means.add(mean(node, choice.label(), n, pictures));
    }
    return means;
  }

  private static List<NodeCosts.Share> shares(
      Plan plan, NodeChoice node, CodecChoice choice, int picture) {
    Study study = plan.study();
    Subject subject = new Subject(plan.planes(plan.pictures().get(picture)), study);
    Encoding encoding = subject.coding().encode(choice.codec(), subject.coded(), subject.memos());
    Channel.Outcome outcome =
        new Channel(study.link(), choice.protection())
            .send(encoding.packets(), Passage.clear(0).open());
    return NodeCosts.of(
            node,
            subject.coding().workloads(choice.codec(), subject.shapes(), encoding.keep()),
            outcome.byNode())
        .shares();
  }

  private static NodeShare mean(
      NodeChoice node, String codec, int number, List<List<NodeCosts.Share>> pictures) {
    double[] sums = new double[7];
    for (List<NodeCosts.Share> picture : pictures) {
      NodeCosts.Share share = picture.get(number);
      double[] values = {
        share.work().macs(),
        share.work().memoryBytes() / 1024.0,
        share.work().rawBitsSent(),
        share.work().rawBitsReceived(),
        share.traffic().sentBits(),
        share.traffic().receivedBits(),
        share.millijoules(node.profile())
      };
      for (int i = 0; i < sums.length; i++) {
        sums[i] += values[i] / pictures.size();
      }
    }
    return new NodeShare(
        codec, number, sums[0], sums[1], sums[2], sums[3], sums[4], sums[5], sums[6]);
  }
}
