package linkworthy.app;

import java.util.ArrayList;
import java.util.List;
import linkworthy.report.ComparisonPage;

/** A table as aligned lines of text: words to the left, numbers to the right. */
final class TextTable {
  private static final String GAP = "  ";

  private TextTable() {}

  /** The heading, the names of the columns, then the rows; no blanks at the ends of lines. */
  static List<String> of(ComparisonPage.Table table) {
    List<List<String>> all = new ArrayList<>();
    all.add(table.columns().stream().map(ComparisonPage.Column::name).toList());
    all.addAll(table.rows());
    int[] widths = new int[table.columns().size()];
    for (List<String> row : all) {
      for (int i = 0; i < widths.length; i++) {
        widths[i] = Math.max(widths[i], length(row.get(i)));
      }
    }
    List<String> lines = new ArrayList<>();
    lines.add(table.heading() + (table.note().isEmpty() ? "" : " (" + table.note() + ")"));
    for (List<String> row : all) {
      StringBuilder line = new StringBuilder();
      for (int i = 0; i < widths.length; i++) {
        String pad = " ".repeat(widths[i] - length(row.get(i)));
        boolean numeric = table.columns().get(i).numeric();
        line.append(GAP).append(numeric ? pad + row.get(i) : row.get(i) + pad);
      }
      lines.add(line.toString().stripTrailing());
    }
    return lines;
  }

  private static int length(String text) {
    return text.codePointCount(0, text.length());
  }
}
