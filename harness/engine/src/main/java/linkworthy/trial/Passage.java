package linkworthy.trial;

import java.util.BitSet;
import linkworthy.link.Channel;
import linkworthy.link.FrameCheck;
import linkworthy.noise.Impairment;
import org.jspecify.annotations.Nullable;

/** The way of packets through one realisation of noise; the same for every codec of a unit. */
interface Passage {
  /** Opens the way for the packets of one codec. */
  Crossing open();

  /** The way of one codec's packets, and what came of it so far. */
  interface Crossing extends Channel.Air {
    /** Noise variance of this very realisation, grey levels squared; 0 if nothing was sent. */
    double realisedNoiseVariance();
  }

  /** All arrives as it was sent. */
  static Passage clear(double realisedNoiseVariance) {
    return () ->
        new Crossing() {
          @Override
          public boolean isClear() {
            return true;
          }

          @Override
          public byte[] carry(int index, int node, byte[] payload) {
            return payload;
          }

          @Override
          public double realisedNoiseVariance() {
            return realisedNoiseVariance;
          }
        };
  }

  /**
   * Packets are lost; the realised noise variance is the picture's variance times the share lost.
   */
  static Passage losing(Impairment.Losses losses, double pictureVariance) {
    return () -> new Losing((index, node) -> losses.lost(index), pictureVariance);
  }

  /** All packets of a failed node are lost; the realised noise variance is as for single losses. */
  static Passage failing(Impairment.Losses failures, double pictureVariance) {
    return () -> new Losing((index, node) -> failures.lost(node), pictureVariance);
  }

  /**
   * Bits are flipped, the lowest of each byte being sent first. With a frame check (of 16 or 32
   * bits; 0 for none) they are those of the whole frame, header and check sequence included, and a
   * frame that fails its check is dropped; without one, payloads arrive as damaged as they are. The
   * realised noise variance is the share of payload bits flipped, times P(P+2)/3 for samples up to
   * P.
   */
  static Passage flipping(Impairment.Errors errors, int checkBits, int headerBytes, int peak) {
    return () -> new Flipping(errors, checkBits, headerBytes, peak);
  }

  /** Which transmissions are lost. */
  interface Fate {
    boolean isLost(int index, int node);
  }

  /** Loses whole packets. */
  final class Losing implements Crossing {
    private final Fate fate;
    private final double pictureVariance;
    private int sent;
    private int lost;

    Losing(Fate fate, double pictureVariance) {
      this.fate = fate;
      this.pictureVariance = pictureVariance;
    }

    @Override
    public byte @Nullable [] carry(int index, int node, byte[] payload) {
      boolean isLost = fate.isLost(index, node);
      sent++;
      lost += isLost ? 1 : 0;
      return isLost ? null : payload;
    }

    @Override
    public double realisedNoiseVariance() {
      return pictureVariance * lost / Math.max(1, sent);
    }
  }

  /** Flips bits. */
  final class Flipping implements Crossing {
    private final Impairment.Errors errors;
    private final @Nullable FrameCheck check;
    private final int headerBytes;
    private final int peak;
    private long payloadBits;
    private long flippedBits;

    Flipping(Impairment.Errors errors, int checkBits, int headerBytes, int peak) {
      this.errors = errors;
      this.check = checkBits == 0 ? null : FrameCheck.of(checkBits);
      this.headerBytes = headerBytes;
      this.peak = peak;
    }

    @Override
    public int checkBits() {
      return check == null ? 0 : 8 * check.bytes();
    }

    @Override
    public byte @Nullable [] carry(int index, int node, byte[] payload) {
      int first = check == null ? 0 : 8 * headerBytes;
      int end = first + 8 * payload.length;
      BitSet flipped = errors.flipped(index, end + checkBits());
      payloadBits += 8L * payload.length;
      flippedBits += flipped.get(first, end).cardinality();
      if (flipped.isEmpty()) {
        return payload;
      }
      if (check == null) {
        return flip(payload.clone(), flipped);
      }
      byte[] frame = flip(check.frame(headerBytes, payload), flipped);
      return check.passes(frame) ? check.payload(headerBytes, frame) : null;
    }

    private static byte[] flip(byte[] bytes, BitSet flipped) {
      flipped.stream().forEach(bit -> bytes[bit / 8] ^= (byte) (1 << bit % 8));
      return bytes;
    }

    @Override
    public double realisedNoiseVariance() {
      double share = (double) flippedBits / Math.max(1, payloadBits);
      return share * peak * (peak + 2.0) / 3;
    }
  }
}
