package linkworthy.decision;

import linkworthy.statistics.Cell;
import linkworthy.trial.Trial;

/**
 * What makes two cells of different runs the same.
 *
 * @param impairment name of the noise model, {@code none} for clean
 * @param actsOn {@code samples}, {@code packets}, {@code bits}, or empty for clean
 * @param axis key the severity was given by, or empty for clean
 * @param severity value on that axis; NaN for clean
 * @param codec label of the codec
 */
public record CellKey(
    String impairment, String actsOn, String axis, double severity, String codec) {
  static CellKey of(Trial trial) {
    return new CellKey(
        trial.impairment(), trial.actsOn(), trial.axis(), trial.severity(), trial.codec());
  }

  static CellKey of(Cell cell) {
    return new CellKey(
        cell.impairment(), cell.actsOn(), cell.axis(), cell.severity(), cell.codec());
  }

  /** Whether nothing hurts the picture, so that there is no noise to differ. */
  public boolean isClean() {
    return axis.isEmpty();
  }
}
