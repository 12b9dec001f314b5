package linkworthy.report;

import java.util.List;

/**
 * A page that compares runs: a question, its answer, tables and trends. Texts are shown as given,
 * escaped.
 *
 * @param title of the page
 * @param question its first line
 * @param answer in a sentence
 * @param remarks to the answer
 * @param tables in order
 * @param trends figures over runs, drawn as lines
 * @param definitions what the words of the tables mean
 * @param version of the program
 */
public record ComparisonPage(
    String title,
    String question,
    String answer,
    List<String> remarks,
    List<Table> tables,
    List<Trend> trends,
    List<Fact> definitions,
    String version) {
  public ComparisonPage {
    remarks = List.copyOf(remarks);
    tables = List.copyOf(tables);
    trends = List.copyOf(trends);
    definitions = List.copyOf(definitions);
  }

  /** A column of a table; numbers stand to the right. */
  public record Column(String name, boolean numeric) {}

  /**
   * A table of texts; the first column names the rows.
   *
   * @param heading what the table is
   * @param note behind the heading, or empty
   * @param columns at least one
   * @param rows each with a text for every column
   */
  public record Table(String heading, String note, List<Column> columns, List<List<String>> rows) {
    /**
     * @throws IllegalArgumentException if there is no column, or a row has not a text for each
     */
    public Table {
      columns = List.copyOf(columns);
      rows = rows.stream().map(List::copyOf).toList();
      int width = columns.size();
      if (width == 0 || rows.stream().anyMatch(row -> row.size() != width)) {
        throw new IllegalArgumentException(
            "table '" + heading + "' has rows of other lengths than " + width);
      }
    }
  }

  /**
   * Mean PSNR over runs, a line for each series.
   *
   * @param heading what the series have in common
   * @param runs labels of the runs, oldest first
   * @param series in the order of their first values
   */
  public record Trend(String heading, List<String> runs, List<Series> series) {
    public Trend {
      runs = List.copyOf(runs);
      series = List.copyOf(series);
    }
  }

  /**
   * A line.
   *
   * @param name of it
   * @param psnrDb a value for each run, in dB; NaN where there is none
   */
  public record Series(String name, List<Double> psnrDb) {
    public Series {
      psnrDb = List.copyOf(psnrDb);
    }
  }
}
