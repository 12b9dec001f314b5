package linkworthy.noise.fit;

/**
 * Bursts and gaps as RFC 3611 (RTP Control Protocol Extended Reports, section 4.7.2) tells them
 * apart with the threshold Gmin 16: a burst begins and ends with a loss and holds no 16 or more
 * packets delivered in a row; a loss that stands alone so belongs to the gap. A description of the
 * trace, not an estimate.
 *
 * @param bursts number of bursts
 * @param burstPackets packets inside bursts
 * @param burstLosses packets lost inside bursts
 * @param gapPackets packets outside bursts
 * @param gapLosses packets lost outside bursts
 */
public record BurstGap(
    int bursts, int burstPackets, int burstLosses, int gapPackets, int gapLosses) {
  /** So many packets delivered in a row end a burst. */
  public static final int GMIN = 16;

  /** The bursts and gaps of a trace. */
  public static BurstGap of(LossTrace trace) {
    int bursts = 0;
    int packets = 0;
    int losses = 0;
    int first = -1;
    int last = -1;
    int count = 0;
    for (int i = 0; i <= trace.packets(); i++) {
      boolean end = i == trace.packets();
      if (!end && !trace.lost(i)) {
        continue;
      }
      if (count > 0 && (end || i - last - 1 >= GMIN)) {
        if (count > 1) {
          bursts++;
          packets += last - first + 1;
          losses += count;
        }
        count = 0;
      }
      first = count == 0 ? i : first;
      last = i;
      count++;
    }
    return new BurstGap(
        bursts, packets, losses, trace.packets() - packets, trace.losses() - losses);
  }

  /** Share of packets lost inside bursts, 0 to 1; NaN without bursts. */
  public double burstDensity() {
    return (double) burstLosses / burstPackets;
  }

  /** Share of packets lost outside bursts, 0 to 1; NaN without gaps. */
  public double gapDensity() {
    return (double) gapLosses / gapPackets;
  }
}
