package linkworthy.statistics;

import java.util.Arrays;
import java.util.BitSet;
import linkworthy.trial.Trial;
import org.jspecify.annotations.Nullable;

/**
 * The PSNR of every trial of a cell, by picture and replicate: 8 bytes for each trial and 8 for
 * each picture, which are at most half as much again while the table grows. Takes the trials of
 * each picture together, its replicates in ascending order; where these are not 0, 1, 2 and so on,
 * 4 bytes more are kept for each trial.
 */
public final class PsnrTable {
  private static final int SMALL = 16;

  private final Numbering pictures;
  private final BitSet seen = new BitSet();
  private double[] psnrDb = new double[1];
  private int[] numbers = new int[1];
  private int[] starts = new int[2];
  private int @Nullable [] replicates;
  private int count;
  private int trials;

  /**
   * @param pictures of all cells of a run together
   */
  public PsnrTable(Numbering pictures) {
    this.pictures = pictures;
  }

  /**
   * Takes one more trial.
   *
   * @return whether it is the first of its picture
   * @throws IllegalArgumentException if its picture came before and another since, or its replicate
   *     is not above the last one
   */
  public boolean add(Trial trial) {
    int number = pictures.add(trial.picture());
    boolean begins = count == 0 || numbers[count - 1] != number;
    int last = begins ? -1 : replicate(trials - 1, count - 1);
    if (begins && seen.get(number)) {
      throw new IllegalArgumentException(
          "trial "
              + trial.trial()
              + " is of picture '"
              + trial.picture()
              + "', after another picture of its cell; accepted: the trials of each picture"
              + " together, each replicate once");
    }
    if (trial.replicate() <= last) {
      throw new IllegalArgumentException(
          "trial "
              + trial.trial()
              + " is replicate "
              + trial.replicate()
              + " of its cell and picture, after replicate "
              + last
              + "; accepted: each replicate once, in ascending order");
    }
    if (begins) {
      begin(number);
    }
    note(trial.replicate(), trial.psnrDb());
    return begins;
  }

  private void begin(int number) {
    seen.set(number);
    if (count == numbers.length) {
      numbers = Arrays.copyOf(numbers, grown(count));
      starts = Arrays.copyOf(starts, numbers.length + 1);
    }
    numbers[count] = number;
    starts[count] = trials;
    count++;
  }

  private void note(int replicate, double value) {
    if (trials == psnrDb.length) {
      psnrDb = Arrays.copyOf(psnrDb, grown(trials));
      replicates = replicates == null ? null : Arrays.copyOf(replicates, psnrDb.length);
    }
    if (replicates == null && replicate != trials - starts[count - 1]) {
      int[] listed = new int[psnrDb.length];
      for (int i = 0; i < count; i++) {
        for (int t = starts[i]; t < (i + 1 < count ? starts[i + 1] : trials); t++) {
          listed[t] = t - starts[i];
        }
      }
      replicates = listed;
    }
    if (replicates != null) {
      replicates[trials] = replicate;
    }
    psnrDb[trials] = value;
    trials++;
    starts[count] = trials;
  }

  private static int grown(int size) {
    return size < SMALL ? 2 * size : Math.addExact(size, size / 2);
  }

  /** Number of pictures. */
  public int pictures() {
    return count;
  }

  /** Id of the picture at a place, in the order in which they came. */
  public String picture(int place) {
    return pictures.name(numbers[place]);
  }

  /** Number of trials of all pictures. */
  public int trials() {
    return trials;
  }

  /** Number of trials of the picture at a place. */
  public int trials(int place) {
    return starts[place + 1] - starts[place];
  }

  /** The values of all trials, in dB. */
  double[] toArray() {
    return Arrays.copyOf(psnrDb, trials);
  }

  /** The moments of the picture at a place. */
  public Moments of(int place) {
    Moments moments = new Moments();
    for (int t = starts[place]; t < starts[place + 1]; t++) {
      moments.add(psnrDb[t]);
    }
    return moments;
  }

  /** Where another table has the picture at each place of this one; -1 where it does not. */
  public int[] placesIn(PsnrTable other) {
    int[] byNumber = new int[other.seen.length()];
    Arrays.fill(byNumber, -1);
    for (int i = 0; i < other.count; i++) {
      byNumber[other.numbers[i]] = i;
    }
    int[] places = new int[count];
    for (int i = 0; i < count; i++) {
      int number =
          other.pictures == pictures ? numbers[i] : other.pictures.find(pictures.name(numbers[i]));
      places[i] = number >= 0 && number < byNumber.length ? byNumber[number] : -1;
    }
    return places;
  }

  /**
   * The PSNR of the picture at a place minus those of a picture of another table, for each
   * replicate that both have; 0 where they are equal, infinite ones included.
   */
  public Moments minus(int place, PsnrTable other, int otherPlace) {
    Moments differences = new Moments();
    int j = other.starts[otherPlace];
    int end = other.starts[otherPlace + 1];
    for (int i = starts[place]; i < starts[place + 1]; i++) {
      int replicate = replicate(i, place);
      while (j < end && other.replicate(j, otherPlace) < replicate) {
        j++;
      }
      if (j < end && other.replicate(j, otherPlace) == replicate) {
        differences.add(difference(psnrDb[i], other.psnrDb[j]));
      }
    }
    return differences;
  }

  private int replicate(int trial, int place) {
    return replicates != null ? replicates[trial] : trial - starts[place];
  }

  /** {@code a - b}, and 0 where both are the same infinity. */
  public static double difference(double a, double b) {
    return a == b ? 0 : a - b;
  }
}
