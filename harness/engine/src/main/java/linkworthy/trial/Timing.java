package linkworthy.trial;

/**
 * How long a trial's coding took; not reproducible, so kept apart from the trial. Work shared
 * between codecs is booked on the first that asks for it.
 *
 * @param severity on the impairment's axis; NaN for clean
 * @param encodeMs milliseconds
 * @param decodeMs milliseconds
 */
public record Timing(
    String picture,
    String impairment,
    double severity,
    int replicate,
    String codec,
    double encodeMs,
    double decodeMs) {
  /** The times of a codec in a unit. */
  public static Timing of(WorkUnit unit, String codec, double encodeMs, double decodeMs) {
    return new Timing(
        unit.entry().id(),
        unit.impairment(),
        unit.severity(),
        unit.replicate(),
        codec,
        encodeMs,
        decodeMs);
  }
}
