package linkworthy.link;

/**
 * A packet as a codec makes it: the payload and what the link needs to know of it. The payload is
 * shared, never copied, and must not be changed.
 */
public final class Packet {
  private final byte[] payload;
  private final Importance importance;
  private final int node;

  /**
   * A packet sent by the camera node.
   *
   * @param payload without the link's header
   * @param importance of the most important thing in it
   */
  public Packet(byte[] payload, Importance importance) {
    this(payload, importance, 0);
  }

  /**
   * @param payload without the link's header
   * @param importance of the most important thing in it
   * @param node the node that sends it: 0 the camera, from 1 its helpers
   */
  public Packet(byte[] payload, Importance importance, int node) {
    this.payload = payload;
    this.importance = importance;
    this.node = node;
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

  /** The node that sends it: 0 the camera, from 1 its helpers. */
  public int node() {
    return node;
  }
}
