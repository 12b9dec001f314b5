package linkworthy.link;

import java.util.ArrayList;
import java.util.Arrays;
import java.util.List;

/**
 * A byte in front of each payload that says which part of a picture it is of: a tile or a plane,
 * counted from 0.
 */
public final class PartNumber {
  /** Length of the number, in bytes. */
  public static final int BYTES = 1;

  /** Parts at most. */
  public static final int MOST = 256;

  private PartNumber() {}

  /**
   * The packet with the number in front.
   *
   * @param node the node that sends it
   */
  public static Packet before(Packet packet, int part, int node) {
    byte[] numbered = new byte[BYTES + packet.length()];
    numbered[0] = (byte) part;
    System.arraycopy(packet.payload(), 0, numbered, BYTES, packet.length());
    return new Packet(numbered, packet.importance(), node);
  }

  /** The payloads of each part, in order of arrival; what has no number below is left out. */
  public static List<List<byte[]>> sort(List<byte[]> arrived, int parts) {
    List<List<byte[]>> byPart = new ArrayList<>();
    for (int part = 0; part < parts; part++) {
      byPart.add(new ArrayList<>());
    }
    for (byte[] payload : arrived) {
      if (payload.length > 0 && (payload[0] & 0xFF) < parts) {
        byPart.get(payload[0] & 0xFF).add(Arrays.copyOfRange(payload, BYTES, payload.length));
      }
    }
    return byPart;
  }
}
