package linkworthy.app;

import java.util.ArrayList;
import java.util.LinkedHashMap;
import java.util.List;
import java.util.Locale;
import java.util.Map;
import linkworthy.input.Decimal;
import linkworthy.statistics.Cell;
import linkworthy.statistics.Standing;

/**
 * The summary on the console: for each impairment a table of mean PSNR, a row a codec, a column a
 * severity. {@code *} marks the best of a column, {@code =} those not distinguishable from it.
 */
final class SummaryTable {
  private SummaryTable() {}

  static List<String> of(List<Cell> cells) {
    Map<String, List<Cell>> byImpairment = new LinkedHashMap<>();
    for (Cell cell : cells) {
      String title =
          cell.axis().isEmpty()
              ? "clean"
              : cell.impairment() + " on " + cell.actsOn() + ", by " + cell.axis();
      byImpairment.computeIfAbsent(title, t -> new ArrayList<>()).add(cell);
    }
    List<String> lines = new ArrayList<>();
    byImpairment.forEach((title, rows) -> addTable(lines, title, rows));
    lines.add("mean PSNR in dB; * best of the column, = not distinguishable from it");
    return lines;
  }

  private static void addTable(List<String> lines, String title, List<Cell> cells) {
    List<Double> severities = cells.stream().map(Cell::severity).distinct().toList();
    Map<String, List<Cell>> byCodec = new LinkedHashMap<>();
    int widest = title.length();
    for (Cell cell : cells) {
      byCodec.computeIfAbsent(cell.codec(), c -> new ArrayList<>()).add(cell);
      widest = Math.max(widest, cell.codec().length());
    }
    String label = "%-" + widest + "s  %9s";
    StringBuilder head = new StringBuilder(String.format(Locale.ROOT, label, title, "bits/px"));
    for (double severity : severities) {
      head.append(
          String.format(Locale.ROOT, "  %8s", Double.isNaN(severity) ? "" : shortly(severity)));
    }
    lines.add(head.toString().stripTrailing());
    byCodec.forEach(
        (codec, row) -> {
          double bits = row.stream().mapToDouble(Cell::bitsPerPixelMean).average().orElse(0);
          StringBuilder line =
              new StringBuilder(
                  String.format(
                      Locale.ROOT, label, codec, String.format(Locale.ROOT, "%.3f", bits)));
          for (double severity : severities) {
            line.append("  ");
            row.stream()
                .filter(cell -> Double.compare(cell.severity(), severity) == 0)
                .forEach(cell -> line.append(figure(cell)));
          }
          lines.add(line.toString().stripTrailing());
        });
    lines.add("");
  }

  private static String figure(Cell cell) {
    String mark =
        cell.standing() == Standing.BEST
            ? "*"
            : cell.standing() == Standing.NOT_DISTINGUISHABLE ? "=" : " ";
    String value =
        Double.isInfinite(cell.psnrMeanDb())
            ? "inf"
            : String.format(Locale.ROOT, "%.2f", cell.psnrMeanDb());
    return String.format(Locale.ROOT, "%7s%s", value, mark);
  }

  private static String shortly(double severity) {
    return severity == Math.rint(severity) && Math.abs(severity) < 1e9
        ? Long.toString((long) severity)
        : Decimal.shortest(severity);
  }
}
