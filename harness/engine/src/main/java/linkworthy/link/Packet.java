package linkworthy.link;

import java.util.function.Supplier;
import org.jspecify.annotations.Nullable;

/**
 * A packet as a codec makes it: the payload and what the link needs to know of it. The payload is
 * shared, never copied, and must not be changed. It may be written only when somebody first asks
 * for it; its length is known before.
 */
public final class Packet {
  private final int length;
  private final Importance importance;
  private final int node;
  private final Supplier<byte[]> writer;
  private volatile byte @Nullable [] payload;

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
    this(payload.length, () -> payload, importance, node);
  }

  /**
   * A packet whose payload is written when first asked for.
   *
   * @param length of the payload, in bytes
   * @param writer gives the same payload of that length every time
   */
  Packet(int length, Supplier<byte[]> writer, Importance importance, int node) {
    this.length = length;
    this.writer = writer;
    this.importance = importance;
    this.node = node;
  }

  /** The payload itself, the same array every time; not to be changed. */
  public byte[] payload() {
    byte[] known = payload;
    return known == null ? write() : known;
  }

  private synchronized byte[] write() {
    byte[] known = payload;
    if (known == null) {
      known = writer.get();
      if (known.length != length) {
        throw new IllegalStateException(
            "a packet of " + length + " bytes was written with " + known.length);
      }
      payload = known;
    }
    return known;
  }

  /** Length of the payload, in bytes. */
  public int length() {
    return length;
  }

  public Importance importance() {
    return importance;
  }

  /** The node that sends it: 0 the camera, from 1 its helpers. */
  public int node() {
    return node;
  }
}
