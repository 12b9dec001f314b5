package linkworthy.results;

/**
 * How long one codec took over one work unit: a row of {@code timings.csv}. Times are measured, so
 * they differ from run to run.
 *
 * @param picture id of the picture in its manifest
 * @param impairment label of the impairment, {@code none} for clean
 * @param severity value on the impairment's axis; NaN for clean
 * @param replicate from 0
 * @param codec label of the codec
 * @param encodeMs milliseconds to encode
 * @param decodeMs milliseconds to decode
 */
public record Timing(
    String picture,
    String impairment,
    double severity,
    int replicate,
    String codec,
    double encodeMs,
    double decodeMs) {}
