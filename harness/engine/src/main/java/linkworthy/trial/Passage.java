package linkworthy.trial;

import java.util.ArrayList;
import java.util.BitSet;
import java.util.List;
import java.util.function.IntPredicate;
import linkworthy.link.FrameCheck;
import linkworthy.link.Packet;
import linkworthy.noise.Impairment;

/** The way of packets through one realisation of noise; the same for every codec of a unit. */
interface Passage {
  /** Sends a codec's packets. */
  Delivery deliver(List<Packet> packets);

  /**
   * What came of it.
   *
   * @param arrived payloads that reach the decoder, damaged or not, in sending order
   * @param realisedNoiseVariance of this very realisation, grey levels squared
   * @param checkBits bits sent for frame checks
   */
  record Delivery(List<byte[]> arrived, double realisedNoiseVariance, long checkBits) {}

  /** All arrives as it was sent. */
  static Passage clear(double realisedNoiseVariance) {
    return packets ->
        new Delivery(packets.stream().map(Packet::payload).toList(), realisedNoiseVariance, 0);
  }

  /**
   * Packets are lost; the realised noise variance is the picture's variance times the share lost.
   */
  static Passage losing(Impairment.Losses losses, double pictureVariance) {
    return packets -> without(packets, losses::lost, pictureVariance);
  }

  /** All packets of failed nodes are lost; the realised noise variance is as for lost packets. */
  static Passage losingNodes(Impairment.Losses failures, double pictureVariance) {
    return packets -> without(packets, i -> failures.lost(packets.get(i).node()), pictureVariance);
  }

  private static Delivery without(List<Packet> packets, IntPredicate lost, double pictureVariance) {
    List<byte[]> arrived = new ArrayList<>();
    for (int i = 0; i < packets.size(); i++) {
      if (!lost.test(i)) {
        arrived.add(packets.get(i).payload());
      }
    }
    int missing = packets.size() - arrived.size();
    return new Delivery(arrived, pictureVariance * missing / packets.size(), 0);
  }

  /**
   * Bits are flipped, the lowest of each byte being sent first. With a frame check they are those
   * of the whole frame, header and check sequence included, and a frame that fails its check is
   * dropped; without one, payloads arrive as damaged as they are. The realised noise variance is
   * the share of payload bits flipped, times P(P+2)/3 for samples up to P.
   */
  static Passage flipping(Impairment.Errors errors, boolean frameCheck, int headerBytes, int peak) {
    return packets -> {
      List<byte[]> arrived = new ArrayList<>();
      long flippedBits = 0;
      long payloadBits = 0;
      for (int i = 0; i < packets.size(); i++) {
        byte[] payload = packets.get(i).payload();
        int first = frameCheck ? 8 * headerBytes : 0;
        int end = first + 8 * payload.length;
        int sentBits = frameCheck ? end + 8 * FrameCheck.BYTES : end;
        BitSet flipped = errors.flipped(i, sentBits);
        payloadBits += 8L * payload.length;
        flippedBits += flipped.get(first, end).cardinality();
        if (flipped.isEmpty()) {
          arrived.add(payload);
        } else if (!frameCheck) {
          arrived.add(flip(payload.clone(), flipped));
        } else {
          byte[] frame = flip(FrameCheck.frame(headerBytes, payload), flipped);
          if (FrameCheck.passes(frame)) {
            arrived.add(FrameCheck.payload(headerBytes, frame));
          }
        }
      }
      double share = (double) flippedBits / payloadBits;
      long checkBits = frameCheck ? 8L * FrameCheck.BYTES * packets.size() : 0;
      return new Delivery(arrived, share * peak * (peak + 2.0) / 3, checkBits);
    };
  }

  private static byte[] flip(byte[] bytes, BitSet flipped) {
    flipped.stream().forEach(bit -> bytes[bit / 8] ^= (byte) (1 << bit % 8));
    return bytes;
  }
}
