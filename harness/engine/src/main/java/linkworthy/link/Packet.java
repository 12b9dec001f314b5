package linkworthy.link;

/**
 * A packet as a codec makes it: the payload and what the link needs to know of it. The payload is
 * shared, never copied, and must not be changed.
 */
public final class Packet {
  private final byte[] payload;
  private final Importance importance;

  /**
   * @param payload without the link's header
   * @param importance of the most important thing in it
   */
  public Packet(byte[] payload, Importance importance) {
    this.payload = payload;
    this.importance = importance;
  }

  /** The payload itself; not to be changed. */
  public byte[] payload() {
    return payload;
  }

  /** Length of the payload, in bytes. */
  public int length() {
    return payload.length;
  }

  public Importance importance() {
    return importance;
  }
}
