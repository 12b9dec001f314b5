package linkworthy.report;

import java.util.ArrayList;
import java.util.List;

/**
 * Codecs by noises: the mean PSNR over all severities of a noise, each with equal weight, and how
 * far below the best of its noise it lies.
 */
record HeatMap(List<String> noises, List<Row> rows) {
  private static final double[] STEPS_DB = {0, 0.5, 1, 2, 5};

  /** A codec; {@code at} is its place in the study. */
  record Row(String codec, int at, List<Cell> cells) {}

  /** A mean, its distance from the best and the shade for that. */
  record Cell(String psnr, String behind, String css) {}

  static HeatMap of(FigureGrid grid) {
    List<FigureGrid.Noise> noises = grid.noises();
    double[] best = new double[noises.size()];
    for (int i = 0; i < best.length; i++) {
      FigureGrid.Noise noise = noises.get(i);
      best[i] =
          grid.codecs().stream()
              .mapToDouble(codec -> mean(grid, noise, codec))
              .filter(m -> !Double.isNaN(m))
              .max()
              .orElse(Double.NaN);
    }
    List<Row> rows = new ArrayList<>();
    for (CodecColumn codec : grid.codecs()) {
      List<Cell> cells = new ArrayList<>();
      for (int i = 0; i < best.length; i++) {
        double mean = mean(grid, noises.get(i), codec);
        cells.add(cell(mean, mean == best[i] ? 0 : best[i] - mean));
      }
      rows.add(new Row(codec.label(), rows.size(), cells));
    }
    return new HeatMap(noises.stream().map(FigureGrid.Noise::title).toList(), rows);
  }

  private static double mean(FigureGrid grid, FigureGrid.Noise noise, CodecColumn codec) {
    return noise.conditions().stream()
        .mapToDouble(condition -> grid.psnr(condition, codec))
        .average()
        .orElse(Double.NaN);
  }

  private static Cell cell(double mean, double behind) {
    int shade = 0;
    while (shade < STEPS_DB.length && !(behind <= STEPS_DB[shade])) {
      shade++;
    }
    String distance =
        Double.isNaN(behind) ? "" : behind == 0 ? "best" : "\u2212" + Numbers.db(behind);
    return new Cell(Numbers.db(mean), distance, "h" + shade);
  }
}
