package linkworthy.cluster;

import java.io.IOException;
import java.net.InetSocketAddress;
import java.net.Socket;
import java.util.List;
import java.util.regex.Matcher;
import java.util.regex.Pattern;
import linkworthy.input.BadInput;
import linkworthy.input.Unavailable;

/**
 * Whether the master of a standalone cluster answers. Spark itself tries for a minute; other
 * masters are left to it.
 */
final class Contact {
  private static final String SCHEME = "spark://";
  private static final Pattern MASTER = Pattern.compile("\\[?([^\\s/\\[\\]]+?)]?:(\\d{1,5})");
  private static final int PATIENCE_MS = 5000;

  private Contact() {}

  static boolean isStandalone(String master) {
    return master.startsWith(SCHEME);
  }

  /**
   * @param master as spark-submit takes it; of several, any that answers is enough
   * @throws BadInput if it is no address
   * @throws Unavailable if nothing listens there within a few seconds
   */
  static void require(String master) {
    if (isStandalone(master)) {
      String complaint = "";
      for (InetSocketAddress address : addresses(master)) {
        complaint = complaint(address);
        if (complaint.isEmpty()) {
          return;
        }
      }
      throw new Unavailable(
          "no Spark master answers at "
              + master
              + ": "
              + complaint
              + "; accepted: the address that the master's log names, spark://HOST:PORT");
    }
  }

  private static List<InetSocketAddress> addresses(String master) {
    return List.of(master.substring(SCHEME.length()).split(",", -1)).stream()
        .map(part -> address(master, part))
        .toList();
  }

  private static InetSocketAddress address(String master, String part) {
    Matcher found = MASTER.matcher(part);
    int port = found.matches() ? Integer.parseInt(found.group(2)) : 0;
    if (port < 1 || port > 65_535) {
      throw new BadInput(
          "the master is '" + master + "'; accepted: spark://HOST:PORT, local[N], yarn, k8s://...");
    }
    return new InetSocketAddress(found.group(1), port);
  }

  private static String complaint(InetSocketAddress address) {
    if (address.isUnresolved()) {
      return "there is no host '" + address.getHostString() + "'";
    }
    try (Socket socket = new Socket()) {
      socket.connect(address, PATIENCE_MS);
      return "";
    } catch (IOException e) {
      return String.valueOf(e.getMessage());
    }
  }
}
