package linkworthy.statistics;

import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Map;
import linkworthy.trial.Trial;

/**
 * Gathers trials into cells. A cell is one codec under one severity (impairment, place, axis and
 * value), over all pictures; the codecs under one severity are a row.
 *
 * <p>Trials are taken one at a time, in the canonical order; 8 to 12 bytes are kept for each, up to
 * 32 for each picture of a cell, and about 2000 for each cell. Replicates are nested in pictures:
 * <b>every mean is the mean over pictures of the means over replicates</b>, so that each picture
 * counts the same however many replicates it has. In a cell of P pictures, with R_p replicates of
 * picture p, mean m_p and standard deviation s_p of their PSNR:
 *
 * <ul>
 *   <li>mean PSNR: {@code M = (1/P) sum m_p}; infinite if any trial's is.
 *   <li>noise interval, for these pictures under other noise: {@code M} and a half-width by {@link
 *       StudentT#halfWidthOfGroups}; NaN if a picture has one replicate only or a value is
 *       infinite. Zero if the replicates of each picture are all equal.
 *   <li>picture interval, for other pictures like these: Student t over the m_p with P - 1 degrees
 *       of freedom; NaN for one picture or if a value is infinite.
 *   <li>PSNR of the mean error: {@code 10 log10} of one over the mean of {@code 10^(-PSNR/10)},
 *       which is the squared error over the squared peak; an identical picture counts as error 0.
 *   <li>5th percentile: {@link Percentile} over all trials alike.
 *   <li>SSIM and every further measure: the mean, without an interval.
 * </ul>
 *
 * <p>The codec of a row with the highest mean PSNR is its best. Each other codec is compared with
 * it by paired differences on the same noise: for each picture the mean difference over the
 * replicates that both have, then {@link StudentT#pairedP} over pictures (P - 1 degrees of
 * freedom), or over replicates if there is one picture only; p values are adjusted by {@link Holm}
 * over the row. The difference of two infinite PSNRs is 0; one infinite PSNR alone leaves the
 * comparison untested. The best is picked by the same data, which the p values do not allow for:
 * near ties, {@code below} is said a little too easily.
 */
public final class Cells {
  private static final double ALPHA = 0.05;

  private final Numbering pictures = new Numbering();
  private final Map<Row, Map<String, CellTally>> rows = new LinkedHashMap<>();

  private record Row(String impairment, String actsOn, String axis, double severity) {}

  /**
   * The cells of these trials.
   *
   * @throws IllegalArgumentException as {@link #add} does
   */
  public static List<Cell> of(Iterable<Trial> trials) {
    Cells cells = new Cells();
    trials.forEach(cells::add);
    return cells.toList();
  }

  /**
   * Takes one more trial.
   *
   * @throws IllegalArgumentException if its PSNR is NaN, or if the trials of its cell and picture
   *     do not come together and with their replicates in ascending order, each once
   */
  public void add(Trial trial) {
    if (Double.isNaN(trial.psnrDb())) {
      throw new IllegalArgumentException(
          "trial " + trial.trial() + " has PSNR NaN; accepted: a number or infinity");
    }
    Row row = new Row(trial.impairment(), trial.actsOn(), trial.axis(), trial.severity());
    rows.computeIfAbsent(row, r -> new LinkedHashMap<>())
        .computeIfAbsent(trial.codec(), codec -> new CellTally(trial, pictures))
        .add(trial);
  }

  /**
   * The cells of all trials so far: rows in the order of their first trials, and so the codecs of
   * each row. More trials may follow.
   */
  public List<Cell> toList() {
    List<Cell> cells = new ArrayList<>();
    for (Map<String, CellTally> row : rows.values()) {
      cells.addAll(compared(List.copyOf(row.values())));
    }
    return List.copyOf(cells);
  }

  private static List<Cell> compared(List<CellTally> row) {
    double[] means = row.stream().mapToDouble(tally -> tally.psnrOfPictures().mean()).toArray();
    int best = 0;
    for (int i = 1; i < means.length; i++) {
      best = means[i] > means[best] ? i : best;
    }
    double[] p = new double[means.length];
    for (int i = 0; i < p.length; i++) {
      p[i] = i == best ? Double.NaN : StudentT.pairedP(row.get(best).minus(row.get(i)));
    }
    double[] adjusted = Holm.adjust(p);
    List<Cell> cells = new ArrayList<>();
    for (int i = 0; i < means.length; i++) {
      double behind = PsnrTable.difference(means[best], means[i]);
      cells.add(row.get(i).cell(behind, adjusted[i], standing(i == best, adjusted[i])));
    }
    return cells;
  }

  private static Standing standing(boolean best, double adjustedP) {
    if (best) {
      return Standing.BEST;
    }
    if (Double.isNaN(adjustedP)) {
      return Standing.UNTESTED;
    }
    return adjustedP < ALPHA ? Standing.BELOW : Standing.NOT_DISTINGUISHABLE;
  }
}
