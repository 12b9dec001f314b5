package linkworthy.link;

import java.util.AbstractList;
import java.util.ArrayList;
import java.util.List;
import java.util.SortedMap;
import java.util.TreeMap;
import linkworthy.noise.Impairment;
import org.jspecify.annotations.Nullable;

/**
 * Sends a codec's packets, protected, and hands over the payloads that the far end recovers.
 *
 * <p>One transmission follows the other and transmission t, counted from 0, meets fate t of the
 * air, whatever it carries: a data packet, parity, a copy or a further try. So a burst of losses
 * runs over transmissions in time. Copies of a packet follow each other at once. Retransmission is
 * stop-and-wait: the receiver acknowledges every copy that arrives, an acknowledgement is never
 * lost and takes no place among the transmissions, and while no copy of a packet has arrived all
 * copies are sent again at once, before any other packet.
 *
 * <p>A {@link HammingCode} stands closest to the air: it codes the bits of every transmission,
 * copies and parity included, and sets them right as they arrive. Which transmissions are coded is
 * taken to be known from the link's header, which arrives as it was sent. A frame check of the air
 * comes first and drops what is hit before the code sees it.
 */
public final class Channel {
  private final Link link;
  private final Framing framing;

  /**
   * @param link largest payload and overhead of a packet
   */
  public Channel(Link link, Protection protection) {
    this.link = link;
    this.framing = new Framing(protection);
  }

  /** What becomes of transmissions. */
  @FunctionalInterface
  public interface Air {
    /**
     * The payload of transmission {@code index} as it arrives; null if it does not. The payload
     * given is shared and must not be changed.
     *
     * @param node the node that sends it
     */
    byte @Nullable [] carry(int index, int node, byte[] payload);

    /** Whether every payload arrives as it is; then nobody need write it to see what arrives. */
    default boolean isClear() {
      return false;
    }

    /** Bits of a frame check that are sent with every transmission. */
    default int checkBits() {
      return 0;
    }

    /** Air in which packets arrive whole or not at all. */
    static Air losing(Impairment.Losses losses) {
      return (index, node, payload) -> losses.lost(index) ? null : payload;
    }
  }

  /**
   * What was sent and what came of it.
   *
   * @param payloads the codec's payloads that were recovered: those that arrived, in order, then
   *     those restored from parity
   * @param packetsSent transmissions of data packets, parity packets, copies and further tries
   * @param packetsLost those of them that did not arrive
   * @param payloadBits bits in the payloads of all transmissions, protection headers included
   * @param sentBits payload bits, the link's overhead and frame check for each transmission, and
   *     the receiver's acknowledgements
   * @param byNode the same bits by the node that sends the packets
   */
  public record Outcome(
      List<byte[]> payloads,
      int packetsSent,
      int packetsLost,
      long payloadBits,
      long sentBits,
      SortedMap<Integer, Traffic> byNode) {}

  /**
   * What one node sent and got back.
   *
   * @param sentBits payloads, overhead and frame checks of all its transmissions
   * @param receivedBits acknowledgements
   * @param transmissions packets it sent
   * @param awaited those of them after which it waited for an acknowledgement
   */
  public record Traffic(long sentBits, long receivedBits, long transmissions, long awaited) {
    /** No traffic at all. */
    public static final Traffic NONE = new Traffic(0, 0, 0, 0);

    private Traffic plus(Traffic other) {
      return new Traffic(
          sentBits + other.sentBits,
          receivedBits + other.receivedBits,
          transmissions + other.transmissions,
          awaited + other.awaited);
    }
  }

  /** Sends packets in order. */
  public Outcome send(List<Packet> packets, Air air) {
    if (air.isClear() && framing.isTransparent()) {
      return allArrive(packets, air);
    }
    Sending traffic = new Sending(air);
    framing.send(packets, traffic::send);
    return new Outcome(
        framing.payloads(traffic.arrived),
        traffic.sent,
        traffic.sent - traffic.arrived.size(),
        traffic.payloadBits,
        link.sentBits(traffic.sent, traffic.payloadBits)
            + (long) air.checkBits() * traffic.sent
            + traffic.acknowledgementBits,
        traffic.byNode);
  }

  /** Every packet once, and all of them come; their payloads are written if they are looked at. */
  private Outcome allArrive(List<Packet> packets, Air air) {
    SortedMap<Integer, Traffic> byNode = new TreeMap<>();
    long payloadBits = 0;
    for (Packet packet : packets) {
      long bits = 8L * packet.length();
      payloadBits += bits;
      byNode.merge(
          packet.node(),
          new Traffic(link.sentBits(1, bits) + air.checkBits(), 0, 1, 0),
          Traffic::plus);
    }
    int sent = packets.size();
    List<byte[]> payloads =
        new AbstractList<>() {
          @Override
          public byte[] get(int index) {
            return packets.get(index).payload();
          }

          @Override
          public int size() {
            return sent;
          }
        };
    return new Outcome(
        payloads,
        sent,
        0,
        payloadBits,
        link.sentBits(sent, payloadBits) + (long) air.checkBits() * sent,
        byNode);
  }

  /** Counts as it sends. */
  private final class Sending {
    private final Air air;
    private final List<byte[]> arrived = new ArrayList<>();
    private int sent;
    private long payloadBits;
    private long acknowledgementBits;
    private final SortedMap<Integer, Traffic> byNode = new TreeMap<>();

    Sending(Air air) {
      this.air = air;
    }

    void send(byte[] payload, int node, Protection.@Nullable Rule rule) {
      int tries = rule == null ? 1 : 1 + rule.retransmit();
      int copies = rule == null ? 1 : rule.repeat();
      int before = arrived.size();
      int sentBefore = sent;
      for (int i = 0; i < tries && arrived.size() == before; i++) {
        for (int copy = 0; copy < copies; copy++) {
          transmit(payload, node, rule == null ? null : rule.hamming());
        }
      }
      if (rule != null && rule.retransmit() > 0) {
        long bits = 8L * rule.ackBytes() * (arrived.size() - before);
        acknowledgementBits += bits;
        count(node, new Traffic(0, bits, 0, sent - sentBefore));
      }
    }

    private void transmit(byte[] payload, int node, @Nullable HammingCode code) {
      byte[] onAir = code == null ? payload : code.encode(payload);
      byte[] got = air.carry(sent, node, onAir);
      sent = Math.incrementExact(sent);
      long bits = 8L * onAir.length;
      payloadBits += bits;
      count(node, new Traffic(link.sentBits(1, bits) + air.checkBits(), 0, 1, 0));
      if (got != null) {
        arrived.add(got == onAir ? payload : code == null ? got : code.decode(got));
      }
    }

    private void count(int node, Traffic traffic) {
      byNode.merge(node, traffic, Traffic::plus);
    }
  }
}
