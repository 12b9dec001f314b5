package linkworthy.results;

import static linkworthy.results.CsvTable.evidence;
import static linkworthy.results.CsvTable.number;
import static linkworthy.results.CsvTable.whole;
import static linkworthy.results.CsvTable.words;

import java.nio.file.Path;
import java.util.HashSet;
import java.util.List;
import java.util.Set;
import linkworthy.input.BadInput;
import linkworthy.statistics.Cell;
import linkworthy.statistics.Standing;

/**
 * {@code cells.csv}: a row a cell. Behind the fixed columns, each measure of the study besides psnr
 * and ssim has the column of its mean. Half-widths and p values are {@code n/a} where the evidence
 * is too thin for one; other fields that do not apply are empty. Lines end in LF alone; otherwise
 * RFC 4180.
 */
public final class CellsCsv {
  /** Name of the file in a results folder. */
  public static final String FILE = "cells.csv";

  private static final String MEAN = "_mean";

  static final CsvTable<Cell> TABLE =
      new CsvTable<>(
          List.of(
              words("impairment", Cell::impairment),
              words("acts_on", Cell::actsOn),
              words("axis", Cell::axis),
              number("severity", Cell::severity),
              number("equivalent_noise_variance", Cell::equivalentNoiseVariance),
              number("snr_db", Cell::snrDb),
              words("codec", Cell::codec),
              words("transform", Cell::transform),
              words("over", Cell::over),
              words("keep", cell -> TrialsCsv.keep(cell.keep())),
              words("step", Cell::step),
              whole("pictures", Cell::pictures),
              whole("trials", Cell::trials),
              number("psnr_mean_db", Cell::psnrMeanDb),
              evidence("psnr_noise_half_width_db", Cell::psnrNoiseHalfWidthDb),
              evidence("psnr_picture_half_width_db", Cell::psnrPictureHalfWidthDb),
              number("psnr_of_mean_mse_db", Cell::psnrOfMeanMseDb),
              number("psnr_p05_db", Cell::psnrP05Db),
              number("ssim_mean", Cell::ssimMean),
              number("bits_per_pixel_mean", Cell::bitsPerPixelMean),
              number("outage_rate", Cell::outageRate),
              number("realised_noise_variance_mean", Cell::realisedNoiseVarianceMean),
              number("behind_best_db", Cell::behindBestDb),
              evidence("behind_best_p_adjusted", Cell::behindBestPAdjusted),
              words("standing", cell -> cell.standing().toString()),
              whole("failures", Cell::failures)),
          new CsvTable.Further<>(Cell::furtherMeans, MEAN),
          CellsCsv::cell);

  private CellsCsv() {}

  /** The fixed columns, in order. */
  public static List<String> columns() {
    return TABLE.names();
  }

  /** The header line, then a line for each cell. */
  public static String text(List<Cell> cells) {
    return TABLE.text(cells);
  }

  /**
   * Reads a file.
   *
   * @throws linkworthy.input.BadInput if it is missing, cut off, or no table of cells
   * @throws linkworthy.input.Unavailable if it cannot be read
   */
  public static List<Cell> read(Path file) {
    List<Cell> cells = TABLE.read(file);
    Set<List<Object>> seen = new HashSet<>();
    for (Cell cell : cells) {
      if (!seen.add(
          List.of(cell.impairment(), cell.actsOn(), cell.axis(), cell.severity(), cell.codec()))) {
        throw new BadInput(
            file
                + " has two rows of '"
                + cell.codec()
                + "' under "
                + (cell.impairment() + " " + cell.axis()).strip()
                + (Double.isNaN(cell.severity()) ? "" : " " + cell.severity())
                + "; accepted: one row a cell");
      }
    }
    return cells;
  }

  private static Cell cell(CsvRow row) {
    return new Cell(
        row.words("impairment"),
        row.words("acts_on"),
        row.words("axis"),
        row.number("severity"),
        row.number("equivalent_noise_variance"),
        row.number("snr_db"),
        row.words("codec"),
        row.words("transform"),
        row.words("over"),
        row.keep("keep"),
        row.words("step"),
        row.count("pictures"),
        row.whole("trials", 0, CsvRow.MAX_WHOLE),
        row.number("psnr_mean_db"),
        row.number("psnr_noise_half_width_db"),
        row.number("psnr_picture_half_width_db"),
        row.number("psnr_of_mean_mse_db"),
        row.number("psnr_p05_db"),
        row.number("ssim_mean"),
        row.number("bits_per_pixel_mean"),
        row.number("outage_rate"),
        row.number("realised_noise_variance_mean"),
        row.number("behind_best_db"),
        row.number("behind_best_p_adjusted"),
        row.oneOf("standing", List.of(Standing.values())),
        row.whole("failures", 0, CsvRow.MAX_WHOLE),
        row.further(TABLE.names().size(), MEAN));
  }
}
