package linkworthy.codec;

import linkworthy.input.Require;

/**
 * What one node does to code one picture, by closed formula. Numbers at the node are taken to be 4
 * bytes long; a picture's samples take as many whole bytes as their depth needs.
 *
 * @param macs multiply-accumulates
 * @param memoryBytes peak working memory, in bytes
 * @param rawBitsSent bits of raw samples that the node passes to helpers, packet overhead included
 * @param rawBitsReceived bits of raw samples that the node gets, packet overhead included
 */
public record Workload(long macs, long memoryBytes, long rawBitsSent, long rawBitsReceived) {
  /** Bytes of a number at the node. */
  static final int NUMBER_BYTES = 4;

  public Workload {
    if (macs < 0 || memoryBytes < 0 || rawBitsSent < 0 || rawBitsReceived < 0) {
      throw new IllegalArgumentException("a workload is negative; accepted: 0 and above");
    }
  }

  /** Work on a picture that the node took itself. */
  static Workload alone(long macs, long memoryBytes) {
    return new Workload(macs, memoryBytes, 0, 0);
  }

  /** This work and that on another plane of the same picture, which waits in memory meanwhile. */
  public Workload andAnother(Workload other, PictureShape plane) {
    return new Workload(
        macs + other.macs,
        Math.max(memoryBytes, other.memoryBytes) + (rawBitsSent > 0 ? 0 : pictureBytes(plane)),
        rawBitsSent + other.rawBitsSent,
        rawBitsReceived + other.rawBitsReceived);
  }

  /** Bytes of a picture's samples as a node stores them. */
  static long pictureBytes(PictureShape shape) {
    Require.inRange(shape.bitDepth(), 1, 16, "bit depth (bits)");
    return (long) shape.size() * ((shape.bitDepth() + 7) / 8);
  }
}
