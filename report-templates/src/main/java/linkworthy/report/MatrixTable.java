package linkworthy.report;

import java.util.ArrayList;
import java.util.List;
import java.util.Optional;
import java.util.function.Function;

/**
 * A table of conditions (rows) by codecs (columns), laid out for the template.
 *
 * @param part {@code part 1 of 2} where the codecs do not fit one table, or empty
 */
record MatrixTable(String part, List<Head> families, List<Column> columns, List<Row> rows) {
  /** More columns than this are shared out evenly among several tables. */
  static final int MOST_COLUMNS = 14;

  /** A heading over the columns of one family. */
  record Head(String name, String common, int span) {}

  /** A codec; {@code first} of its family's columns in this table. */
  record Column(CodecFamily family, CodecFamily.Member member, boolean first, String rate) {}

  /** A condition: how it was given, and what that means on the common axis. */
  record Row(String given, String meaning, List<Cell> cells) {}

  /** A figure: its main number, a smaller line, its style, its mark and the mark in words. */
  record Cell(String main, String sub, String css, String mark, String spoken) {}

  /** Mean PSNR with both intervals. */
  static List<MatrixTable> psnr(
      FigureGrid grid, List<CodecFamily> families, List<Condition> conditions) {
    return of(grid, families, conditions, MatrixTable::psnrCell);
  }

  /** Outage rates with their intervals. */
  static List<MatrixTable> outages(
      FigureGrid grid, List<CodecFamily> families, List<Condition> conditions) {
    return of(
        grid,
        families,
        conditions,
        figure -> new Cell(Numbers.percent(figure.outageRate()), outageRange(figure), "", "", ""));
  }

  /** Short, as it stands in every column. */
  private static String outageRange(Figure figure) {
    Figure.Evidence evidence = figure.evidence();
    return Double.isNaN(evidence.outageLow())
        ? ""
        : Numbers.percent(evidence.outageLow()).replace(" %", "\u2013")
            + Numbers.percent(evidence.outageHigh()).replace(" %", "");
  }

  private static List<MatrixTable> of(
      FigureGrid grid,
      List<CodecFamily> families,
      List<Condition> conditions,
      Function<Figure, Cell> cell) {
    List<Column> all = new ArrayList<>();
    for (CodecFamily family : families) {
      for (CodecFamily.Member member : family.members()) {
        all.add(new Column(family, member, false, rate(grid, member.codec(), conditions)));
      }
    }
    int parts = Math.max(1, (all.size() + MOST_COLUMNS - 1) / MOST_COLUMNS);
    List<MatrixTable> tables = new ArrayList<>();
    for (int part = 0; part < parts; part++) {
      List<Column> columns =
          marked(all.subList(all.size() * part / parts, all.size() * (part + 1) / parts));
      tables.add(
          new MatrixTable(
              parts == 1 ? "" : "part " + (part + 1) + " of " + parts,
              heads(columns),
              columns,
              conditions.stream().map(c -> row(grid, c, columns, cell)).toList()));
    }
    return tables;
  }

  private static List<Column> marked(List<Column> columns) {
    List<Column> marked = new ArrayList<>();
    for (int i = 0; i < columns.size(); i++) {
      Column column = columns.get(i);
      boolean first = i == 0 || columns.get(i - 1).family().index() != column.family().index();
      marked.add(new Column(column.family(), column.member(), first, column.rate()));
    }
    return marked;
  }

  private static List<Head> heads(List<Column> columns) {
    List<Head> heads = new ArrayList<>();
    for (Column column : columns) {
      int span = column.first() ? 1 : heads.remove(heads.size() - 1).span() + 1;
      heads.add(new Head(column.family().name(), column.family().common(), span));
    }
    return heads;
  }

  /** Sent bits per pixel over the conditions: one number, or the least and the most. */
  private static String rate(FigureGrid grid, CodecColumn codec, List<Condition> conditions) {
    double[] bits =
        conditions.stream()
            .mapToDouble(c -> grid.bits(c, codec))
            .filter(b -> !Double.isNaN(b))
            .sorted()
            .toArray();
    if (bits.length == 0) {
      return Numbers.significant(Double.NaN);
    }
    String least = Numbers.narrowBits(bits[0]);
    String most = Numbers.narrowBits(bits[bits.length - 1]);
    return least.equals(most) ? most : least + "\u2013" + most;
  }

  private static Row row(
      FigureGrid grid, Condition condition, List<Column> columns, Function<Figure, Cell> cell) {
    List<Cell> cells = new ArrayList<>();
    for (Column column : columns) {
      Optional<Figure> figure = grid.find(condition, column.member().codec());
      Cell bare =
          figure.map(cell).orElse(new Cell(Numbers.db(Double.NaN), "not measured", "", "", ""));
      String css = (bare.css() + (column.first() ? " first" : "")).strip();
      cells.add(new Cell(bare.main(), bare.sub(), css, bare.mark(), bare.spoken()));
    }
    return new Row(given(condition), meaning(condition), cells);
  }

  /** How the severity was given, as in {@code SNR 20 dB}. */
  static String given(Condition condition) {
    if (condition.isClean()) {
      return "clean";
    }
    return switch (condition.axis()) {
      case "snr-db" -> "SNR " + Numbers.typed(condition.severity()) + " dB";
      case "eb-n0-db" -> "Eb/N0 " + Numbers.typed(condition.severity()) + " dB";
      default ->
          (condition.axis().replace('-', ' ') + " " + Numbers.typed(condition.severity())).strip();
    };
  }

  private static String meaning(Condition condition) {
    String variance = "var. " + Numbers.significant(condition.equivalentNoiseVariance());
    return condition.isClean() || condition.axis().equals("snr-db")
        ? variance
        : Numbers.typed(Math.rint(condition.snrDb() * 10) / 10) + " dB, " + variance;
  }

  private static Cell psnrCell(Figure figure) {
    Figure.Quality quality = figure.quality();
    String intervals =
        "\u00b1"
            + Numbers.db(quality.pictureHalfWidthDb())
            + " ("
            + Numbers.db(quality.noiseHalfWidthDb())
            + ")";
    Standing standing = figure.comparison().standing();
    return new Cell(
        Numbers.db(quality.psnrMeanDb()),
        intervals,
        standing.id(),
        standing.mark(),
        standing.spoken());
  }
}
