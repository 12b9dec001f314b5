package linkworthy.decision;

import java.util.ArrayList;
import java.util.HashSet;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import java.util.Set;
import java.util.TreeMap;
import java.util.function.ToDoubleFunction;
import linkworthy.statistics.MeanDifference;
import linkworthy.statistics.Moments;
import linkworthy.trial.Trial;

/** The figures of one cell in one run, by picture and replicate. */
final class CellFigures {
  private final Map<String, Map<Integer, Figures>> pictures = new LinkedHashMap<>();

  /** Every figure of a trial that a change might move; equal figures are equal bit for bit. */
  private record Figures(
      double psnrDb,
      double bitsPerPixel,
      double mse,
      double ssim,
      double realisedNoiseVariance,
      double equivalentNoiseVariance,
      long payloadBits,
      long packets,
      String words,
      Map<String, Double> further) {
    static Figures of(Trial trial) {
      return new Figures(
          trial.psnrDb(),
          trial.bitsPerPixel(),
          trial.mse(),
          trial.ssim(),
          trial.realisedNoiseVariance(),
          trial.equivalentNoiseVariance(),
          trial.payloadBits(),
          ((long) trial.packetsSent() << Integer.SIZE) | trial.packetsLost(),
          (trial.failure() + " " + trial.outage() + " " + trial.keep() + " " + trial.step())
              .intern(),
          trial.further());
    }
  }

  /**
   * @throws IllegalArgumentException if the picture has that replicate already
   */
  void add(Trial trial) {
    Map<Integer, Figures> replicates =
        pictures.computeIfAbsent(trial.picture(), id -> new TreeMap<>());
    if (replicates.put(trial.replicate(), Figures.of(trial)) != null) {
      throw new IllegalArgumentException(
          "picture '"
              + trial.picture()
              + "' has replicate "
              + trial.replicate()
              + " of a cell twice; accepted: once");
    }
  }

  double meanDb() {
    return Moments.of(meansDb()).mean();
  }

  double meanBits() {
    return Moments.of(
            pictures.values().stream().mapToDouble(p -> mean(p, Figures::bitsPerPixel)).toArray())
        .mean();
  }

  private double[] meansDb() {
    return pictures.values().stream().mapToDouble(p -> mean(p, Figures::psnrDb)).toArray();
  }

  private static double mean(Map<Integer, Figures> picture, ToDoubleFunction<Figures> figure) {
    return moments(picture, figure).mean();
  }

  private static Moments moments(Map<Integer, Figures> picture, ToDoubleFunction<Figures> figure) {
    return Moments.of(picture.values().stream().mapToDouble(figure).toArray());
  }

  boolean equalTo(CellFigures other) {
    return pictures.equals(other.pictures);
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
    List<String> common = new ArrayList<>(pictures.keySet());
    common.retainAll(other.pictures.keySet());
    common.retainAll(new HashSet<>(unchanged));
    boolean onlyOne = common.size() == 1 && pictures.size() == 1 && other.pictures.size() == 1;
    if (common.size() < 2 && !onlyOne) {
      return new Compared(
          CellDrift.Test.PICTURES,
          MeanDifference.welch(Moments.of(meansDb()), Moments.of(other.meansDb())));
    }
    Moments overPictures = new Moments();
    for (String picture : common) {
      Map<Integer, Figures> mine = figures(picture);
      Map<Integer, Figures> theirs = other.figures(picture);
      Moments overReplicates = paired(mine, theirs);
      if (onlyOne) {
        return sameNoise
            ? new Compared(
                CellDrift.Test.SAME_NOISE_OF_ONE_PICTURE, MeanDifference.paired(overReplicates))
            : new Compared(
                CellDrift.Test.REPLICATES,
                MeanDifference.welch(
                    moments(mine, Figures::psnrDb), moments(theirs, Figures::psnrDb)));
      }
      overPictures.add(
          sameNoise
              ? overReplicates.mean()
              : difference(mean(mine, Figures::psnrDb), mean(theirs, Figures::psnrDb)));
    }
    return new Compared(
        sameNoise ? CellDrift.Test.SAME_NOISE : CellDrift.Test.SAME_PICTURES,
        MeanDifference.paired(overPictures));
  }

  private Map<Integer, Figures> figures(String picture) {
    return pictures.getOrDefault(picture, Map.of());
  }

  private static Moments paired(Map<Integer, Figures> mine, Map<Integer, Figures> theirs) {
    Moments differences = new Moments();
    mine.forEach(
        (replicate, figures) -> {
          Figures old = theirs.get(replicate);
          if (old != null) {
            differences.add(difference(figures.psnrDb(), old.psnrDb()));
          }
        });
    return differences;
  }

  /** {@code a - b}, and 0 where both are the same infinity. */
  private static double difference(double a, double b) {
    return a == b ? 0 : a - b;
  }
}
