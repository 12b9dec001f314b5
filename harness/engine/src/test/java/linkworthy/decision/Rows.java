package linkworthy.decision;

import java.util.ArrayList;
import java.util.List;
import java.util.Map;
import linkworthy.trial.Trial;

/** Trials of which only picture, codec, replicate, PSNR and bits matter. */
final class Rows {
  static final String CODEC = "dct blocks8 K10 step8";

  private final List<Trial> trials = new ArrayList<>();

  /** Adds the replicates of a picture under gaussian noise. */
  Rows add(String codec, String picture, double... psnrDb) {
    for (int replicate = 0; replicate < psnrDb.length; replicate++) {
      trials.add(trial(codec, picture, replicate, psnrDb[replicate], 2));
    }
    return this;
  }

  Rows add(Trial trial) {
    trials.add(trial);
    return this;
  }

  RunFigures run() {
    return RunFigures.of(trials);
  }

  static CellKey key(String codec) {
    return new CellKey("gaussian", "samples", "snr-db", 20, codec);
  }

  static Trial trial(String codec, String picture, int replicate, double psnrDb, double bits) {
    return new Trial(
        "0123",
        picture,
        "gaussian",
        "samples",
        "snr-db",
        20,
        40,
        39,
        20,
        codec,
        "dct",
        "blocks8",
        10,
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
        false,
        "",
        Map.of());
  }
}
