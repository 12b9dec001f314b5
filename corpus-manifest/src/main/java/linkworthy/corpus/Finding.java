package linkworthy.corpus;

import java.util.Locale;

/**
 * What is wrong with a listed picture.
 *
 * @param id the entry's id
 * @param kind what kind of problem it is
 * @param message one line
 */
public record Finding(String id, Kind kind, String message) {
  /** Kinds of problems, each with the first that applies in this order. */
  public enum Kind {
    /** There is no such file, or it may not be followed. */
    MISSING,
    /** The file has another SHA-256 than the manifest says. */
    CHECKSUM,
    /** The file is too long, or has other sides, channels or depth than the manifest says. */
    SIZE,
    /** The file is damaged, of an unknown format or cannot be opened. */
    UNREADABLE;

    /** The kind in lower case, for tables. */
    public String label() {
      return name().toLowerCase(Locale.ROOT);
    }
  }
}
