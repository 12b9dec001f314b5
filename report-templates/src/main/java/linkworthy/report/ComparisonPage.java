package linkworthy.report;

import java.util.List;

/**
 * A page that compares runs or fits: a question, its answer, tables and trends. Texts are shown as
 * given, escaped.
 *
 * @param title of the page
 * @param question its first line
 * @param answer in a sentence
 * @param remarks to the answer
 * @param tables in order
 * @param trends figures in a row, drawn as lines
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

  /** What a trend shows, and over what. */
  public enum Kind {
    /** Mean PSNR over runs, on a linear scale. */
    RUNS("Mean PSNR over the runs", "mean PSNR, dB", "run, oldest on the left"),
    /**
     * Numbers of bursts of each length, on a logarithmic scale; what is not above 0 is left out.
     */
    BURSTS("Packets lost in a row", "how often", "packets lost in a row");

    private final String heading;
    private final String upwards;
    private final String across;

    Kind(String heading, String upwards, String across) {
      this.heading = heading;
      this.upwards = upwards;
      this.across = across;
    }

    /** Over all plots of the kind. */
    public String heading() {
      return heading;
    }

    /** At the vertical axis. */
    public String upwards() {
      return upwards;
    }

    /** At the horizontal axis. */
    public String across() {
      return across;
    }
  }

  /**
   * Figures in a row, a line for each series.
   *
   * @param kind of figures; all trends of a page are of one
   * @param heading what the series have in common
   * @param runs labels of the runs, oldest first, or of the lengths
   * @param series in the order of their first values
   */
  public record Trend(Kind kind, String heading, List<String> runs, List<Series> series) {
    public Trend {
      runs = List.copyOf(runs);
      series = List.copyOf(series);
    }

    /** Mean PSNR over runs. */
    public Trend(String heading, List<String> runs, List<Series> series) {
      this(Kind.RUNS, heading, runs, series);
    }
  }

  /**
   * A line.
   *
   * @param name of it
   * @param values one for each run or length; NaN where there is none
   */
  public record Series(String name, List<Double> values) {
    public Series {
      values = List.copyOf(values);
    }
  }
}
