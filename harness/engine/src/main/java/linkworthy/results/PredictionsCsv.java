package linkworthy.results;

import static linkworthy.results.CsvTable.number;
import static linkworthy.results.CsvTable.words;

import java.nio.file.Path;
import java.util.List;
import linkworthy.trial.Prediction;

/**
 * {@code predictions.csv}: a row for each codec under each severity of a noise for which there is a
 * formula; only there where a codec is predicted under some noise.
 */
public final class PredictionsCsv {
  /** Name of the file in a results folder. */
  public static final String FILE = "predictions.csv";

  private static final CsvTable<Prediction> TABLE =
      new CsvTable<>(
          List.of(
              words("impairment", Prediction::impairment),
              words("acts_on", Prediction::actsOn),
              words("axis", Prediction::axis),
              number("severity", Prediction::severity),
              words("codec", Prediction::codec),
              number("psnr_of_mean_mse_predicted_db", Prediction::psnrOfMeanMseDb),
              words("not_predicted", Prediction::refusal)),
          PredictionsCsv::prediction);

  private PredictionsCsv() {}

  /** The columns, in order. */
  public static List<String> columns() {
    return TABLE.names();
  }

  /** The header line, then a line for each row. */
  public static String text(List<Prediction> predictions) {
    return TABLE.text(predictions);
  }

  /**
   * @throws linkworthy.input.BadInput if the file is missing, cut off, or no table of predictions
   * @throws linkworthy.input.Unavailable if it cannot be read
   */
  public static List<Prediction> read(Path file) {
    return TABLE.read(file);
  }

  private static Prediction prediction(CsvRow row) {
    return new Prediction(
        row.words("impairment"),
        row.words("acts_on"),
        row.words("axis"),
        row.number("severity"),
        row.words("codec"),
        row.number("psnr_of_mean_mse_predicted_db"),
        row.words("not_predicted"));
  }
}
