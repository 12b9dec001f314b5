package linkworthy.input;

/**
 * A key of a group.
 *
 * @param name as written in files
 * @param kind what its value may be
 * @param usual what an absent key means, in words; empty if the key must be there
 * @param what it means, with its unit
 */
public record Key(String name, Kind kind, String usual, String what) {
  /** A key that must be there. */
  public static Key required(String name, Kind kind, String what) {
    return new Key(name, kind, "", what);
  }

  /** A key that may be left out. */
  public static Key optional(String name, Kind kind, String usual, String what) {
    return new Key(name, kind, usual, what);
  }

  /** Whether the key must be there. */
  public boolean isRequired() {
    return usual.isEmpty();
  }
}
