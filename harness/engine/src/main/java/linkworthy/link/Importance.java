package linkworthy.link;

import java.util.Locale;

/** How much hangs on a packet, most first; protection may differ by it. */
public enum Importance {
  /** The picture's header and means: without them nothing has its place. */
  HEADER,
  /** A basis that travels with the picture: without a direction its component is lost. */
  BASIS,
  /** The first quarter of the components, at least one. */
  FIRST,
  /** All other components. */
  REST;

  /** The word used in studies. */
  public String id() {
    return name().toLowerCase(Locale.ROOT);
  }
}
