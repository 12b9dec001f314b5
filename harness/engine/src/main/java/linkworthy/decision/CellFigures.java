package linkworthy.decision;

import java.nio.ByteBuffer;
import java.nio.charset.StandardCharsets;
import java.security.MessageDigest;
import java.security.NoSuchAlgorithmException;
import java.util.Arrays;
import java.util.Set;
import java.util.TreeMap;
import linkworthy.statistics.MeanDifference;
import linkworthy.statistics.Moments;
import linkworthy.statistics.Numbering;
import linkworthy.statistics.PsnrTable;
import linkworthy.trial.Trial;

/**
 * The figures of one cell in one run: the PSNR of every trial, and of each picture the first eight
 * bytes of a SHA-256 over all figures that a change might move. Two pictures with other figures
 * have the same eight bytes with a chance of 2^-64.
 */
final class CellFigures {
  private static final int NUMBERS = 9;

  private final PsnrTable psnrDb;
  private final Moments bits = new Moments();
  private Moments bitsOfPicture = new Moments();
  private MessageDigest digest = sha256();
  private long[] hashes = new long[1];

  /**
   * @param pictures of all cells of the run
   */
  CellFigures(Numbering pictures) {
    psnrDb = new PsnrTable(pictures);
  }

  /**
   * @throws IllegalArgumentException if the trials of a picture do not come together and with their
   *     replicates in ascending order, each once
   */
  void add(Trial trial) {
    if (psnrDb.add(trial) && psnrDb.pictures() > 1) {
      bits.add(bitsOfPicture.mean());
      bitsOfPicture = new Moments();
      hashes = withHash(psnrDb.pictures() - 2, digest.digest());
    }
    bitsOfPicture.add(trial.bitsPerPixel());
    hash(trial);
  }

  private long[] withHash(int place, byte[] digested) {
    long[] longer =
        place < hashes.length ? hashes : Arrays.copyOf(hashes, hashes.length + place / 2 + 1);
    longer[place] = ByteBuffer.wrap(digested).getLong();
    return longer;
  }

  private void hash(Trial trial) {
    digest.update(
        ByteBuffer.allocate(NUMBERS * Long.BYTES)
            .putLong(trial.replicate())
            .putDouble(trial.psnrDb())
            .putDouble(trial.bitsPerPixel())
            .putDouble(trial.mse())
            .putDouble(trial.ssim())
            .putDouble(trial.realisedNoiseVariance())
            .putDouble(trial.equivalentNoiseVariance())
            .putLong(trial.payloadBits())
            .putLong(((long) trial.packetsSent() << Integer.SIZE) | trial.packetsLost())
            .flip());
    String words =
        String.join(
            "\n",
            trial.failure(),
            Boolean.toString(trial.outage()),
            Integer.toString(trial.keep()),
            trial.step(),
            new TreeMap<>(trial.further()).toString(),
            "");
    digest.update(words.getBytes(StandardCharsets.UTF_8));
  }

  private static MessageDigest sha256() {
    try {
      return MessageDigest.getInstance("SHA-256");
    } catch (NoSuchAlgorithmException e) {
      throw new IllegalStateException("every Java runtime has SHA-256", e);
    }
  }

  /** To be called once, after the last trial. */
  void end() {
    if (psnrDb.pictures() > 0) {
      bits.add(bitsOfPicture.mean());
      hashes = withHash(psnrDb.pictures() - 1, digest.digest());
    }
  }

  double meanDb() {
    return meansDb().mean();
  }

  double meanBits() {
    return bits.mean();
  }

  private Moments meansDb() {
    Moments means = new Moments();
    for (int i = 0; i < psnrDb.pictures(); i++) {
      means.add(psnrDb.of(i).mean());
    }
    return means;
  }

  boolean equalTo(CellFigures other) {
    int[] places = psnrDb.placesIn(other.psnrDb);
    boolean equal = places.length == other.psnrDb.pictures();
    for (int i = 0; equal && i < places.length; i++) {
      equal = places[i] >= 0 && hashes[i] == other.hashes[places[i]];
    }
    return equal;
  }

  /** A comparison and how it was made. */
  record Compared(CellDrift.Test test, MeanDifference difference) {}

  /**
   * This cell minus that of another run.
   *
   * @param unchanged ids of the pictures that are the same in both runs
   * @param sameNoise whether equal replicates of these are hurt by the same noise
   */
  Compared minus(CellFigures other, Set<String> unchanged, boolean sameNoise) {
    int[] places = psnrDb.placesIn(other.psnrDb);
    int common = 0;
    for (int i = 0; i < places.length; i++) {
      places[i] = unchanged.contains(psnrDb.picture(i)) ? places[i] : -1;
      common += places[i] >= 0 ? 1 : 0;
    }
    if (common == 1 && places.length == 1 && other.psnrDb.pictures() == 1) {
      return sameNoise
          ? new Compared(
              CellDrift.Test.SAME_NOISE_OF_ONE_PICTURE,
              MeanDifference.paired(psnrDb.minus(0, other.psnrDb, 0)))
          : new Compared(
              CellDrift.Test.REPLICATES, MeanDifference.welch(psnrDb.of(0), other.psnrDb.of(0)));
    }
    if (common < 2) {
      return new Compared(
          CellDrift.Test.PICTURES, MeanDifference.welch(meansDb(), other.meansDb()));
    }
    Moments overPictures = new Moments();
    for (int i = 0; i < places.length; i++) {
      if (places[i] >= 0) {
        overPictures.add(
            sameNoise
                ? psnrDb.minus(i, other.psnrDb, places[i]).mean()
                : PsnrTable.difference(psnrDb.of(i).mean(), other.psnrDb.of(places[i]).mean()));
      }
    }
    return new Compared(
        sameNoise ? CellDrift.Test.SAME_NOISE : CellDrift.Test.SAME_PICTURES,
        MeanDifference.paired(overPictures));
  }
}
