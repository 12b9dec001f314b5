package linkworthy.report;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.stream.Stream;

/**
 * Every figure of a noise, a row for each condition and codec, in six significant digits.
 *
 * @param title the noise, or {@code no noise}
 */
record FigureTable(String title, List<Row> rows) {
  /** Headings of the numbers. */
  static final List<String> NUMBERS =
      List.of(
          "Sent bits per pixel",
          "Mean PSNR, dB",
          "\u00b1 picture, dB",
          "\u00b1 noise, dB",
          "PSNR of mean MSE, dB",
          "5th percentile, dB",
          "SSIM",
          "Outage rate",
          "Behind best, dB",
          "Adjusted p",
          "Trials");

  /**
   * A figure.
   *
   * @param id by which the page finds the row
   * @param at the codec's place in the study
   * @param trial id of its typical trial, or empty
   */
  record Row(
      String id,
      int at,
      String given,
      String codec,
      List<String> numbers,
      String standing,
      String trial) {}

  static List<FigureTable> of(FigureGrid grid) {
    List<FigureTable> tables = new ArrayList<>();
    grid.clean().ifPresent(clean -> tables.add(table(grid, "no noise", List.of(clean))));
    for (FigureGrid.Noise noise : grid.noises()) {
      tables.add(table(grid, noise.title(), noise.conditions()));
    }
    return tables;
  }

  private static FigureTable table(FigureGrid grid, String title, List<Condition> conditions) {
    return new FigureTable(
        title,
        conditions.stream()
            .flatMap(condition -> grid.codecs().stream().map(codec -> row(grid, condition, codec)))
            .flatMap(Optional::stream)
            .toList());
  }

  private static Optional<Row> row(FigureGrid grid, Condition condition, CodecColumn codec) {
    return grid.find(condition, codec)
        .map(
            figure ->
                new Row(
                    grid.id(figure),
                    grid.place(codec),
                    MatrixTable.given(condition),
                    codec.label(),
                    numbers(figure),
                    figure.comparison().standing().id().replace('-', ' '),
                    figure.typicalTrial()));
  }

  private static List<String> numbers(Figure figure) {
    Figure.Quality quality = figure.quality();
    return Stream.of(
            figure.bitsPerPixel(),
            quality.psnrMeanDb(),
            quality.pictureHalfWidthDb(),
            quality.noiseHalfWidthDb(),
            quality.psnrOfMeanMseDb(),
            quality.psnrP05Db(),
            quality.ssimMean(),
            figure.outageRate(),
            figure.comparison().behindBestDb(),
            figure.comparison().adjustedP(),
            (double) figure.evidence().trials())
        .map(Numbers::typed)
        .toList();
  }
}
