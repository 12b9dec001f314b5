package linkworthy.decision;

import java.util.Map;
import linkworthy.trial.Trial;

/** Trials of 8-bit pictures, of which only what decisions look at is set. */
final class Trials {
  private Trials() {}

  /** A trial under gaussian noise of this signal-to-noise ratio; NaN for clean. */
  static Trial of(
      String codec, double snrDb, String picture, int replicate, double psnrDb, double bits) {
    return of(codec, "gaussian", "snr-db", snrDb, picture, replicate, psnrDb, bits, false);
  }

  static Trial of(
      String codec,
      String impairment,
      String axis,
      double severity,
      String picture,
      int replicate,
      double psnrDb,
      double bits,
      boolean outage) {
    boolean clean = Double.isNaN(severity);
    return new Trial(
        picture + "/" + codec + "/" + replicate,
        picture,
        clean ? "none" : impairment,
        clean ? "" : "samples",
        clean ? "" : axis,
        severity,
        40,
        40,
        clean ? Double.NaN : axis.equals("snr-db") ? severity : 13,
        codec,
        "dct",
        "blocks8",
        8,
        "8",
        replicate,
        65_025 * StrictMath.pow(10, -psnrDb / 10),
        psnrDb,
        Double.NaN,
        8_000,
        9_000,
        bits,
        4,
        0,
        outage,
        "",
        Map.of("energy_mj", 2 * bits));
  }
}
