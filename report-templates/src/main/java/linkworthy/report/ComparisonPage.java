package linkworthy.report;

import java.util.List;

/**
 * A page that answers one question about runs, a fit or a record: the question, its answer, tables
 * with their plots, and how to have it again. Texts are shown as given, escaped.
 *
 * @param title of the page
 * @param kind of page, a word or two
 * @param question its first line
 * @param answer in a sentence
 * @param remarks to the answer
 * @param tables in order
 * @param definitions what the words of the tables mean
 * @param commands what to type to have the same again, each with what it does as its name
 * @param version of the program
 */
public record ComparisonPage(
    String title,
    String kind,
    String question,
    String answer,
    List<String> remarks,
    List<Table> tables,
    List<Fact> definitions,
    List<Fact> commands,
    String version) {
  public ComparisonPage {
    remarks = List.copyOf(remarks);
    tables = List.copyOf(tables);
    definitions = List.copyOf(definitions);
    commands = List.copyOf(commands);
  }

  /** How the texts of a column are set. */
  public enum Style {
    /** From the left. */
    WORDS(""),
    /** From the left, a few words that should seldom break. */
    NAMES("name"),
    /** From the left, whole sentences. */
    PROSE("prose"),
    /** In one line. */
    SHORT("nb"),
    /** To the right. */
    NUMBERS("n"),
    /** As they are typed. */
    COMMANDS("code");

    private final String css;

    Style(String css) {
      this.css = css;
    }

    /** The class of the column's cells. */
    public String css() {
      return css;
    }
  }

  /** A column of a table. */
  public record Column(String name, Style style) {
    /** Of numbers, or of words. */
    public Column(String name, boolean numeric) {
      this(name, numeric ? Style.NUMBERS : Style.WORDS);
    }

    /** Whether its texts are numbers. */
    public boolean numeric() {
      return style == Style.NUMBERS;
    }
  }

  /**
   * A table of texts; the first column names the rows.
   *
   * @param heading what the table is
   * @param note behind the heading, or empty
   * @param columns at least one
   * @param rows each with a text for every column
   * @param trends its figures as plots, which stand before it
   */
  public record Table(
      String heading,
      String note,
      List<Column> columns,
      List<List<String>> rows,
      List<Trend> trends) {
    /** A table without plots. */
    public Table(String heading, String note, List<Column> columns, List<List<String>> rows) {
      this(heading, note, columns, rows, List.of());
    }

    /**
     * @throws IllegalArgumentException if there is no column, or a row has not a text for each
     */
    public Table {
      trends = List.copyOf(trends);
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
    BURSTS("Packets lost in a row", "how often", "packets lost in a row"),
    /** Noise variance over the mean level, both on linear scales. */
    LEVELS(
        "Noise variance over mean level", "variance, grey levels\u00b2", "mean level, grey levels");

    private final String heading;
    private final String upwards;
    private final String across;

    Kind(String heading, String upwards, String across) {
      this.heading = heading;
      this.upwards = upwards;
      this.across = across;
    }

    /** What all plots of the kind show. */
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
   * @param kind of figures
   * @param heading what the series have in common
   * @param runs labels of the runs, oldest first, or of the lengths, at equal distances; empty
   *     where places are given
   * @param places numbers on the horizontal axis, or empty for equal distances
   * @param series in the order of their first values
   */
  public record Trend(
      Kind kind, String heading, List<String> runs, List<Double> places, List<Series> series) {
    public Trend {
      runs = List.copyOf(runs);
      places = List.copyOf(places);
      series = List.copyOf(series);
    }

    /** At equal distances. */
    public Trend(Kind kind, String heading, List<String> runs, List<Series> series) {
      this(kind, heading, runs, List.of(), series);
    }

    /** Mean PSNR over runs. */
    public Trend(String heading, List<String> runs, List<Series> series) {
      this(Kind.RUNS, heading, runs, series);
    }
  }

  /**
   * A line through points; points alone, each with its interval; or a line alone.
   *
   * @param name of it
   * @param drawn how
   * @param values one for each run, length or level; NaN where there is none
   * @param halfWidths half-widths of the points' intervals; empty if they have none
   */
  public record Series(String name, Drawn drawn, List<Double> values, List<Double> halfWidths) {
    public Series {
      values = List.copyOf(values);
      halfWidths = List.copyOf(halfWidths);
    }

    /** A line through points. */
    public Series(String name, List<Double> values) {
      this(name, Drawn.BOTH, values, List.of());
    }
  }

  /** How a series is drawn. */
  public enum Drawn {
    /** A line through points. */
    BOTH,
    /** Points alone. */
    POINTS,
    /** A line alone. */
    LINE
  }
}
