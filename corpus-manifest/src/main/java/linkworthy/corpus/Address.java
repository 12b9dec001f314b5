package linkworthy.corpus;

import java.net.URI;
import java.net.URISyntaxException;
import java.util.Locale;
import java.util.Optional;
import java.util.Set;

/** Which addresses pictures may be fetched from. */
final class Address {
  static final String ACCEPTED = "an address that begins with https:// and names a host";

  private static final int LONGEST = 2000;
  private static final Set<String> THIS_MACHINE = Set.of("localhost", "127.0.0.1", "[::1]");

  private Address() {}

  /** The address if it may be fetched: https, or http on this machine; no user, no fragment. */
  static Optional<URI> of(String text) {
    try {
      return text.length() > LONGEST ? Optional.empty() : of(new URI(text));
    } catch (URISyntaxException e) {
      return Optional.empty();
    }
  }

  /** As {@link #of(String)}. */
  static Optional<URI> of(URI address) {
    String host = address.getHost();
    String scheme = String.valueOf(address.getScheme()).toLowerCase(Locale.ROOT);
    boolean allowed =
        host != null
            && address.getUserInfo() == null
            && address.getFragment() == null
            && (scheme.equals("https") || (scheme.equals("http") && THIS_MACHINE.contains(host)));
    return allowed ? Optional.of(address) : Optional.empty();
  }
}
